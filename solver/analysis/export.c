/* export.c - Matrix Market files (Boisvert, Pozo and Remington 1996) of an eigenproblem.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "analysis/export.h"

#include <errno.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

/* Number of an unknown among the free ones, from 1; 0 when held. */
typedef struct Numbering {
    int *of;
    int n;
} Numbering;

static EfStatus number_unknowns(EfContext *cx, const Pencil *p, Numbering *k)
{
    ALLOC(cx, tmp, k->of, p->n);
    for (int i = 0; i < p->n; i++) {
        const bool held = i < 6 * p->a->nj && (p->held[i / 6] >> (i % 6) & 1);
        k->of[i] = held ? 0 : ++k->n;
    }
    return EF_OK;
}

/* An entry of the lower part, once. */
static void entry(FILE *f, const Numbering *k, int i, int j, double v, long *count)
{
    const int a = k->of[i], b = k->of[j];
    if (a == 0 || b == 0 || v == 0) return;
    (*count)++;
    if (f) fprintf(f, "%d %d %.17g\n", a > b ? a : b, a > b ? b : a, v);
}

static void joint_entries(FILE *f, const Numbering *k, const Pencil *p, const double *value, long *count)
{
    const BlockPattern *b = &p->a->mesh->pattern;
    for (int j = 0; j < b->nj; j++)
        for (int e = b->start[j]; e < b->start[j + 1]; e++)
            for (int s = 0; s < BLOCK; s++)
                for (int t = 0; t < (b->row[e] == j ? s + 1 : BLOCK); t++)
                    entry(f, k, BLOCK * b->row[e] + s, BLOCK * j + t, value[BLOCK2 * e + BLOCK * s + t], count);
}

static void stiffness_entries(FILE *f, const Numbering *k, const Pencil *p, const double *joint, long *count)
{
    joint_entries(f, k, p, joint, count);
    for (int i = 6 * p->a->nj; i < p->n; i++) entry(f, k, i, i, 1, count);
}

/* Interior unknowns of a tube against its joints (turned into the joints' axes) and themselves. */
static void interior_entries(FILE *f, const Numbering *k, const Pencil *p, int tube, double *row, long *count)
{
    const TubeForm *form = &p->form[tube];
    const int n = END12 + form->m, *end = p->a->mesh->tube[tube].end;
    for (int i = 0; i < form->m; i++) {
        const double *g = form->G + (END12 + i) * n;
        for (int c = 0; c <= i; c++) entry(f, k, p->interior[tube] + i, p->interior[tube] + c, g[END12 + c], count);
        memset(row, 0, (size_t)(6 * p->a->nj) * sizeof *row);
        assembly_scatter(p->a, tube, g, row, 1);
        for (int e = 0; e < 2; e++)
            for (int s = 0; s < 6; s++) entry(f, k, p->interior[tube] + i, 6 * end[e] + s, row[6 * end[e] + s], count);
    }
}

static void geometric_entries(FILE *f, const Numbering *k, const Pencil *p, const double *joint, double *row, long *count)
{
    joint_entries(f, k, p, joint, count);
    for (int t = 0; t < p->a->nt; t++) interior_entries(f, k, p, t, row, count);
}

static FILE *open_file(EfContext *cx, const char *folder, const char *name, const char *what, EfStatus *status)
{
    char path[1024];
    const int n = snprintf(path, sizeof path, "%s/%s.%s.mtx", folder, name, what);
    FILE *f = n > 0 && (size_t)n < sizeof path ? fopen(path, "w") : NULL;
    if (!f) *status = fail(cx, EF_E_IO, "Cannot write %s/%s.%s.mtx: %s.", folder, name, what, strerror(errno));
    return f;
}

static EfStatus close_file(EfContext *cx, FILE *f, const char *folder)
{
    const bool bad = ferror(f) != 0;
    return fclose(f) != 0 || bad ? fail(cx, EF_E_IO, "Cannot write the matrices to %s: %s.", folder, strerror(errno)) : EF_OK;
}

static EfStatus write_symmetric(EfContext *cx, const Pencil *p, const Numbering *k, bool stiffness, const double *joint,
                                const char *folder, const char *name)
{
    EfStatus st = EF_OK;
    double *row;
    long count = 0, again = 0;
    ALLOC(cx, tmp, row, 6 * p->a->nj);
    FILE *f = open_file(cx, folder, name, stiffness ? "K" : "G", &st);
    if (!f) return st;
    if (stiffness) stiffness_entries(NULL, k, p, joint, &count);
    else geometric_entries(NULL, k, p, joint, row, &count);
    fprintf(f, "%%%%MatrixMarket matrix coordinate real symmetric\n%d %d %ld\n", k->n, k->n, count);
    if (stiffness) stiffness_entries(f, k, p, joint, &again);
    else geometric_entries(f, k, p, joint, row, &again);
    return close_file(cx, f, folder);
}

/* Rows G R of the rigid rotations, dense. */
static EfStatus write_rows(EfContext *cx, const Pencil *p, const Numbering *k, const char *folder, const char *name)
{
    EfStatus st = EF_OK;
    double *r, *g;
    ALLOC(cx, tmp, r, p->n * RHS);
    ALLOC(cx, tmp, g, p->n * RHS);
    TRY(assembly_rigid_rotations(cx, p->a, p->held, RHS, r));
    pencil_geometric(p, r, g);
    FILE *f = open_file(cx, folder, name, "C", &st);
    if (!f) return st;
    fprintf(f, "%%%%MatrixMarket matrix array real general\n%d 3\n", k->n);
    for (int c = 0; c < 3; c++)
        for (int i = 0; i < p->n; i++)
            if (k->of[i]) fprintf(f, "%.17g\n", g[i * RHS + c]);
    return close_file(cx, f, folder);
}

static EfStatus write_pencil(EfContext *cx, const Pencil *p, const char *folder, const char *name)
{
    const Assembly *a = p->a;
    Numbering k = {0};
    double *joint;
    TRY(number_unknowns(cx, p, &k));
    TRY(write_symmetric(cx, p, &k, true, p->K, folder, name));
    ALLOC(cx, tmp, joint, a->nvalue);
    if (p->arms) memcpy(joint, p->arms, (size_t)a->nvalue * sizeof *joint);
    for (int t = 0; t < a->nt; t++) {
        double S[END12][END12];
        const int n = END12 + p->form[t].m;
        for (int i = 0; i < END12; i++) memcpy(S[i], p->form[t].G + i * n, sizeof S[i]);
        assembly_add_tube(a, t, S, joint);
    }
    TRY(write_symmetric(cx, p, &k, false, joint, folder, name));
    return a->base >= 0 ? write_rows(cx, p, &k, folder, name) : EF_OK;
}

EfStatus export_matrices(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, const EfCaseResult *r,
                         const char *folder)
{
    if (r->critical.outcome == EF_STEADY_BUCKLES) return EF_OK;
    const ArenaMark mark = arena_mark(&cx->tmp);
    Pencil p;
    bool buckled;
    EfStatus st = pencil_build(cx, a, steady, growing, r->critical.counted_at, &buckled, &p);
    if (st == EF_OK && !buckled) st = write_pencil(cx, &p, folder, r->name);
    pencil_free(&p);
    arena_rewind(&cx->tmp, mark);
    return st;
}
