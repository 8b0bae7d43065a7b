/* runs.c - what is to be solved: cases, their reversed twins, combinations.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "mesh/parts.h"

/* One part of a run: a case with its factor. */
typedef struct Part {
    const EfCase *c;
    double factor;
} Part;

static EfStatus loads_new(EfContext *cx, const Mesh *mesh, int narm, Loads *l)
{
    ALLOC(cx, keep, l->joint, 6 * mesh->nj);
    ALLOC(cx, keep, l->tube, mesh->nt);
    ALLOC(cx, keep, l->arm, narm);
    return EF_OK;
}

/* Inertia loads put one force on the arm of every equipment; a free body's balance one more. */
static int count_arms(const Mesh *mesh, int npart, const Part *part)
{
    int n = 1;
    for (int p = 0; p < npart; p++)
        for (int i = 0; i < part[p].c->nload; i++) n += part[p].c->load[i].kind == EF_LOAD_INERTIA;
    return n * mesh->nequipment;
}

static EfStatus run_build(EfContext *cx, const Mesh *mesh, int npart, const Part *part, Run *run)
{
    const int narm = count_arms(mesh, npart, part);
    TRY(loads_new(cx, mesh, narm, &run->steady));
    TRY(loads_new(cx, mesh, narm, &run->growing));
    const double sign = run->reversed ? -1 : 1;
    for (int p = 0; p < npart; p++) {
        const double factor = part[p].factor * run->ultimate_factor;
        for (int i = 0; i < part[p].c->nload; i++) run->has_steady |= part[p].c->load[i].steady;
        TRY(load_case(cx, mesh, part[p].c, true, factor, &run->steady));
        TRY(load_case(cx, mesh, part[p].c, false, sign * factor, &run->growing));
    }
    return mesh->free_body ? balance_by_inertia(cx, mesh, run) : EF_OK;
}

/* The run, and its reversed twin when it goes both ways. */
static EfStatus add_runs(EfContext *cx, const Mesh *mesh, int npart, const Part *part, const Run *model, bool both_ways,
                         int *n, Run *runs)
{
    for (int reversed = 0; reversed <= both_ways; reversed++) {
        Run *r = &runs[(*n)++];
        *r = *model;
        r->reversed = reversed;
        if (reversed) r->name = keep_format(cx, "%s reversed", model->name);
        if (!r->name) return cx->status;
        TRY(run_build(cx, mesh, npart, part, r));
    }
    return EF_OK;
}

static EfRequired required_of(const EfFrame *f, const EfRequired *own)
{
    EfRequired r = f->required;
    if (!isnan(own->critical_factor)) r.critical_factor = own->critical_factor;
    if (!isnan(own->collapse_factor)) r.collapse_factor = own->collapse_factor;
    if (!isnan(own->margin)) r.margin = own->margin;
    if (!isnan(own->guys_taut_to)) r.guys_taut_to = own->guys_taut_to;
    return r;
}

static EfStatus unknown_case(EfContext *cx, const EfFrame *f, const char *name)
{
    const char **known;
    const int n = f->ncase + f->ncombination;
    ALLOC(cx, tmp, known, n);
    for (int i = 0; i < n; i++) known[i] = i < f->ncase ? f->cases[i].name : f->combination[i - f->ncase].name;
    const char *near = nearest_word(name, (size_t)n, known);
    return fail(cx, EF_E_INPUT, "There is no case %s.%s%s%s", name, near ? " Did you mean " : "", near ? near : "", near ? "?" : "");
}

/* All runs, or those of the case or combination named `only`. */
static EfStatus all_runs(EfContext *cx, const Mesh *mesh, const char *only, int *nrun, Run *runs)
{
    const EfFrame *f = mesh->frame;
    for (int i = 0; i < f->ncase; i++) {
        const EfCase *c = &f->cases[i];
        if (only && strcmp(only, c->name) != 0) continue;
        const Run model = {.name = c->name, .index = i, .level = c->level, .ultimate_factor = c->ultimate_factor,
                           .required = required_of(f, &c->required)};
        TRY(add_runs(cx, mesh, 1, &(Part){c, 1}, &model, c->both_ways, nrun, runs));
    }
    for (int i = 0; i < f->ncombination; i++) {
        const EfCombination *c = &f->combination[i];
        if (only && strcmp(only, c->name) != 0) continue;
        const Run model = {.name = c->name, .index = f->ncase + i, .combination = true, .level = c->level,
                           .ultimate_factor = c->ultimate_factor, .required = required_of(f, &c->required)};
        Part *part;
        ALLOC(cx, tmp, part, c->npart);
        for (int p = 0; p < c->npart; p++) part[p] = (Part){&f->cases[c->part[p]], c->factor[p]};
        TRY(add_runs(cx, mesh, c->npart, part, &model, c->both_ways, nrun, runs));
    }
    return EF_OK;
}

EfStatus mesh_runs(EfContext *cx, const Mesh *mesh, const char *only_case, int *nrun, Run **runs)
{
    const EfFrame *f = mesh->frame;
    *nrun = 0;
    ALLOC(cx, keep, *runs, 2 * (f->ncase + f->ncombination));
    const ArenaMark mark = arena_mark(&cx->tmp);
    TRY(all_runs(cx, mesh, only_case, nrun, *runs));
    if (only_case && *nrun == 0) return unknown_case(cx, f, only_case);
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}
