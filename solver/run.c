/* run.c - the whole job: frame to results.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "endfix/run.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/buckling.h"
#include "analysis/export.h"
#include "analysis/fixity.h"
#include "check/check.h"

enum { DEFAULT_COUNT = 6, STATIONS = 9, FEW_STATIONS = 3, MANY_TUBES = 2000 };

/* ---- what all cases share ------------------------------------------------------------------------------------------- */

static EfStatus line_points(EfContext *cx, const Mesh *mesh, EfResults *r)
{
    const int stations = mesh->nt > MANY_TUBES ? FEW_STATIONS : STATIONS;
    r->npoint = mesh->nt * stations;
    ALLOC(cx, keep, r->point_position, 3 * r->npoint);
    ALLOC(cx, keep, r->point_tube, r->npoint);
    ALLOC(cx, keep, r->point_station, r->npoint);
    for (int i = 0; i < r->npoint; i++) {
        const int t = i / stations;
        const EfTube *tube = &mesh->frame->tube[t];
        const double s = (double)(i % stations) / (stations - 1);
        r->point_tube[i] = t;
        r->point_station[i] = s;
        for (int k = 0; k < 3; k++) {
            const double from = mesh->frame->joint[tube->end[0]].x[k] + tube->offset[0][k];
            const double to = mesh->frame->joint[tube->end[1]].x[k] + tube->offset[1][k];
            r->point_position[3 * i + k] = from + s * (to - from);
        }
    }
    return EF_OK;
}

static EfStatus fill_frame(EfContext *cx, const Mesh *mesh, EfResults *r)
{
    ALLOC(cx, keep, r->length, mesh->nt);
    ALLOC(cx, keep, r->clear_length, mesh->nt);
    ALLOC(cx, keep, r->tube_mass, mesh->nt);
    for (int t = 0; t < mesh->nt; t++) {
        r->length[t] = mesh->tube[t].joint_length;
        r->clear_length[t] = mesh->tube[t].L;
        r->tube_mass[t] = mesh->tube[t].mass_per_length * mesh->tube[t].L;
    }
    r->mass = mesh->mass, r->tubes_mass = mesh->tubes_mass;
    r->guys_mass = mesh->guys_mass, r->equipment_mass = mesh->equipment_mass;
    memcpy(r->centre_of_mass, mesh->centre_of_mass, sizeof r->centre_of_mass);
    return line_points(cx, mesh, r);
}

/* ---- a case -------------------------------------------------------------------------------------------------------------- */

/* The second engine: axial forces by its own matrix, its lowest factor, and its count just below it. */
static EfStatus witness(EfContext *cx, const Assembly *a, const State *state, const Stress *steady, const Stress *growing,
                        EfCaseResult *r)
{
    EfWitness *w = &r->witness;
    *w = (EfWitness){.factor = NAN, .difference = NAN};
    double *N, largest = 0, apart = 0;
    ALLOC(cx, tmp, N, a->nt);
    TRY(exact_axial(cx, a, state, N));
    for (int t = 0; t < a->nt; t++) {
        largest = fmax(largest, fabs(r->axial_growing[t]));
        apart = fmax(apart, fabs(N[t] - r->axial_growing[t]));
    }
    w->axial_difference = largest > 0 ? apart / largest : 0;
    if (r->critical.nmode == 0) return EF_OK;
    Exact e;
    EfStatus st = exact_build(cx, a, steady, growing, &e);
    if (st == EF_OK) st = exact_lowest(cx, &e, r->critical.factor[0], &w->factor);
    if (st == EF_OK && !isnan(w->factor)) {
        st = exact_at(cx, &e, 0.999999 * w->factor);
        w->counted = e.count;
        w->difference = r->critical.factor[0] / w->factor - 1;
    }
    exact_free(&e);
    return st;
}

/* Own c, reserves, margins and ledger. */
static EfStatus fixity_and_checks(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, double guess_c,
                                  EfCaseResult *r)
{
    const bool found = r->critical.nmode > 0, differ = fabs(r->witness.difference) > 0.01 || (found && isnan(r->witness.factor));
    /* The rigid rotations of a free body feel the loads themselves, of which axial forces are only a part. */
    const bool full = differ || a->base >= 0;
    double cap = INFINITY;
    if (found) cap = 0.999 * fmin(r->critical.factor[0], isnan(r->witness.factor) ? INFINITY : r->witness.factor);
    OwnCurve curve;
    EfStatus st = own_curve_new(cx, a, steady, growing, cap, full, &curve);
    if (r->critical.outcome == EF_STEADY_BUCKLES) st = st == EF_OK ? fixity_blank(cx, a->mesh, "steady loads buckle", &r->fixity) : st;
    else {
        if (st == EF_OK) st = fixity_fill(cx, &curve, r, &r->fixity);
        if (st == EF_OK) st = check_reserves(cx, &curve, r);
    }
    if (st == EF_OK) st = check_margins(cx, a->mesh, &curve, r);
    if (st == EF_OK) st = check_ledger(cx, a->mesh, &curve, guess_c, r);
    own_curve_free(&curve);
    return st;
}

static EfStatus run_case(EfContext *cx, const Assembly *a, const State *state, const EfOptions *o, const EfResults *results,
                         EfCaseResult *r)
{
    Stress steady, growing;
    TRY(statics_report(cx, a, state, r));
    TRY(buckling_case(cx, a, state, results, o->count, o->both_signs, r));
    TRY(stress_of(cx, a, state, 1, 0, &steady));
    TRY(stress_of(cx, a, state, 0, 1, &growing));
    const Stress *base = state->steady.x ? &steady : NULL;
    if (o->export_matrices) TRY(export_matrices(cx, a, base, &growing, r, o->export_matrices));
    TRY(witness(cx, a, state, base, &growing, r));
    return fixity_and_checks(cx, a, base, &growing, o->guess_c, r);
}

static EfStatus run_cases(EfContext *cx, const Assembly *a, int nrun, const Run *run, const EfOptions *o, EfResults *results)
{
    State *states;
    progress(cx, "tube loads", 0);
    TRY(statics_solve(cx, a, nrun, run, &states));
    results->ncase = nrun;
    ALLOC(cx, keep, results->cases, nrun);
    for (int i = 0; i < nrun; i++) {
        if (!keep_going()) return fail(cx, EF_E_TALLY, "Stopped on request.");
        progress(cx, run[i].name, (double)i / nrun);
        const ArenaMark mark = arena_mark(&cx->tmp);
        TRY(run_case(cx, a, &states[i], o, results, &results->cases[i]));
        arena_rewind(&cx->tmp, mark);
    }
    return EF_OK;
}

EfStatus ef_run(EfContext *cx, const EfFrame *frame, const EfOptions *options, EfResults **out)
{
    EfOptions o = options ? *options : (EfOptions){0};
    if (o.count <= 0) o.count = DEFAULT_COUNT;
    cx->progress = o.progress;
    cx->progress_user = o.progress_user;
    Mesh *mesh;
    Run *run;
    Assembly a;
    EfResults *r;
    int nrun;
    ALLOC(cx, keep, mesh, 1);
    ALLOC(cx, keep, r, 1);
    *r = (EfResults){.program = "endfix", .version = EF_VERSION, .frame = frame};
    TRY(mesh_build(cx, frame, mesh));
    TRY(mesh_runs(cx, mesh, o.only_case, &nrun, &run));
    TRY(fill_frame(cx, mesh, r));
    EfStatus st = assembly_new(cx, mesh, &a);
    if (st == EF_OK) st = run_cases(cx, &a, nrun, run, &o, r);
    if (st == EF_OK) st = check_conclude(cx, mesh, o.guess_c, r);
    assembly_free(&a);
    if (st == EF_OK) *out = r;
    return st == EF_OK || cx->status == EF_OK ? st : cx->status;
}
