/* mechanism.c - finds motions that strain nothing and tells them by joint and direction.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "analysis/statics.h"
#include "linalg/dense.h"

/* Pivot over diagonal below which the matrix is looked at more closely: sound frames show 1e-3 and more. */
static const double SUSPECT = 1e-5;
/* Strain energy of a unit motion over that of the same motion with every joint clamped: a mechanism below it. */
static const double NO_STRAIN = 1e-12;

/* Largest diagonal entry among the translations (0) or rotations (1) of a joint. */
static double stiffest(const BlockPattern *p, const double *K, int j, int part)
{
    double largest = 0;
    for (int s = 3 * part; s < 3 * part + 3; s++) largest = fmax(largest, K[BLOCK2 * p->start[j] + 7 * s]);
    return largest;
}

/* The least diagonal entry over the stiffest of its kind in the joint. */
static double least_diagonal(const BlockPattern *p, const double *K)
{
    double least = 1;
    for (int j = 0; j < p->nj; j++)
        for (int s = 0; s < BLOCK; s++) least = fmin(least, K[BLOCK2 * p->start[j] + 7 * s] / stiffest(p, K, j, s / 3));
    return least;
}

/* The matrix scaled by the stiffest direction of every joint: scale [6 nj]. */
static void scale_matrix(const BlockPattern *p, double *K, double *scale)
{
    for (int j = 0; j < p->nj; j++)
        for (int s = 0; s < BLOCK; s++) {
            const double d = stiffest(p, K, j, s / 3);
            scale[6 * j + s] = d > 0 ? 1 / sqrt(d) : 1;
        }
    for (int j = 0; j < p->nj; j++)
        for (int b = p->start[j]; b < p->start[j + 1]; b++)
            for (int s = 0; s < BLOCK; s++)
                for (int t = 0; t < BLOCK; t++)
                    K[BLOCK2 * b + 6 * s + t] *= scale[6 * p->row[b] + s] * scale[6 * j + t];
}

/* Makes the columns of x [rows][RHS] orthonormal; a column that vanishes stays zero. */
static void orthonormalise(int rows, double *x)
{
    for (int c = 0; c < RHS; c++) {
        for (int twice = 0; twice < 2; twice++)
            for (int k = 0; k < c; k++) {
                double dot = 0;
                for (int i = 0; i < rows; i++) dot += x[i * RHS + c] * x[i * RHS + k];
                for (int i = 0; i < rows; i++) x[i * RHS + c] -= dot * x[i * RHS + k];
            }
        double norm = 0;
        for (int i = 0; i < rows; i++) norm += x[i * RHS + c] * x[i * RHS + c];
        norm = norm > 0 ? 1 / sqrt(norm) : 0;
        for (int i = 0; i < rows; i++) x[i * RHS + c] *= norm;
    }
}

/* Inverse iteration on K + shift I: the softest motions of the scaled matrix. Returns how many of them strain
 * nothing; they stand in the first columns of x [rows][RHS]. */
static EfStatus softest(EfContext *cx, const BlockPattern *p, const double *K, const double *shifted, Factor *factor,
                        double *x, int *nsoft)
{
    const int rows = 6 * p->nj;
    double *y, T[RHS * RHS], values[RHS], vectors[RHS * RHS];
    ALLOC(cx, tmp, y, rows * RHS);
    TRY(factor_numeric(cx, factor, shifted));
    for (int i = 0; i < rows * RHS; i++) x[i] = sin(1.0 + 12.9898 * i) + 0.5 * cos(78.233 * i); /* no symmetry */
    for (int pass = 0; pass < 4; pass++) {
        orthonormalise(rows, x);
        TRY(factor_solve(cx, factor, x, RHS));
    }
    orthonormalise(rows, x);
    block_multiply(p, K, x, y, RHS);
    memset(T, 0, sizeof T);
    for (int i = 0; i < rows; i++)
        for (int k = 0; k < RHS; k++)
            for (int l = 0; l < RHS; l++) T[k * RHS + l] += x[i * RHS + k] * y[i * RHS + l];
    for (int k = 0; k < RHS; k++) { /* columns that vanished must not count */
        double norm = 0;
        for (int i = 0; i < rows; i++) norm += fabs(x[i * RHS + k]);
        if (norm == 0) T[k * RHS + k] = 1;
    }
    symmetric_eigen(RHS, T, values, vectors);
    *nsoft = 0;
    while (*nsoft < RHS && values[*nsoft] < NO_STRAIN) (*nsoft)++;
    for (int i = 0; i < rows; i++) {
        double row[RHS] = {0};
        for (int k = 0; k < RHS; k++)
            for (int l = 0; l < RHS; l++) row[k] += vectors[k * RHS + l] * x[i * RHS + l];
        memcpy(x + i * RHS, row, sizeof row);
    }
    return EF_OK;
}

/* ---- words ----------------------------------------------------------------------------------------------------- */

/* Names of joints that take at least half of the largest motion, the largest first; returns how many. */
static int taking_part(const Assembly *a, const double *size, double largest, char *text, size_t room)
{
    int n = 0, named = 0;
    size_t used = 0;
    text[0] = 0;
    for (int j = 0; j < a->nj; j++) {
        if (size[j] < 0.5 * largest) continue;
        n++;
        if (named >= 4 || used >= room) continue;
        const int w = snprintf(text + used, room - used, "%s%s", named++ ? ", " : "", a->mesh->frame->joint[j].name);
        used += w > 0 ? (size_t)w : 0;
    }
    return n;
}

static int tubes_at(const Mesh *mesh, int j)
{
    int n = 0;
    for (int t = 0; t < mesh->nt; t++) n += mesh->tube[t].end[0] == j || mesh->tube[t].end[1] == j;
    return n;
}

/* The motion of one joint in words; `motion` is its largest part, translation or rotation. */
static EfStatus tell(EfContext *cx, const Assembly *a, const double *global, int nsoft)
{
    const EfFrame *frame = a->mesh->frame;
    double *size, move = 0, turn = 0, extent = 0;
    ALLOC(cx, tmp, size, a->nj);
    for (int t = 0; t < a->nt; t++) extent = fmax(extent, a->mesh->tube[t].joint_length);
    for (int i = 0; i < 6 * a->nj; i++) *(i / 3 % 2 ? &turn : &move) = fmax(i / 3 % 2 ? turn : move, fabs(global[i]));
    const bool turns = turn * extent > 1e3 * move;
    int j = 0;
    for (int k = 0; k < a->nj; k++) {
        const double *v = global + 6 * k + (turns ? 3 : 0);
        size[k] = sqrt(v[0] * v[0] + v[1] * v[1] + v[2] * v[2]);
        if (size[k] > size[j] * (1 + 1e-6)) j = k;
    }
    const double *v = global + 6 * j + (turns ? 3 : 0), d = size[j] > 0 ? size[j] : 1;
    char names[256], more[64] = "";
    const int n = taking_part(a, size, size[j], names, sizeof names);
    if (n > 4) snprintf(more, sizeof more, " and %d more", n - 4);
    const int reach = tubes_at(a->mesh, j);
    if (n == 1)
        return fail(cx, EF_E_MECHANISM,
                    "Joint %s can %s (%.2f, %.2f, %.2f) without straining anything: %d tube%s reach%s it. Add a tube out of "
                    "their line or plane, release less, or hold the joint.%s",
                    frame->joint[j].name, turns ? "spin about" : "move along", v[0] / d, v[1] / d, v[2] / d, reach,
                    reach == 1 ? "" : "s", reach == 1 ? "es" : "", nsoft > 1 ? " There are more such motions." : "");
    return fail(cx, EF_E_MECHANISM,
                "Joints %s%s can %s together without straining anything, joint %s %s (%.2f, %.2f, %.2f). Hold the frame "
                "there or brace it.%s",
                names, more, turns ? "spin" : "move", frame->joint[j].name, turns ? "about" : "along", v[0] / d, v[1] / d,
                v[2] / d, nsoft > 1 ? " There are more such motions." : "");
}

static EfStatus look_closer(EfContext *cx, const Assembly *a, double *K, Factor *factor)
{
    const BlockPattern *p = &a->mesh->pattern;
    double *scale, *shifted, *x, *global;
    int nsoft = 0;
    ALLOC(cx, tmp, scale, 6 * a->nj);
    ALLOC(cx, tmp, shifted, a->nvalue);
    ALLOC(cx, tmp, x, 6 * a->nj * RHS);
    ALLOC(cx, tmp, global, 6 * a->nj);
    scale_matrix(p, K, scale);
    memcpy(shifted, K, (size_t)a->nvalue * sizeof *K);
    for (int j = 0; j < a->nj; j++)
        for (int s = 0; s < BLOCK; s++) shifted[BLOCK2 * p->start[j] + 7 * s] += 1e-8;
    TRY(softest(cx, p, K, shifted, factor, x, &nsoft));
    if (nsoft == 0) return EF_OK;
    for (int i = 0; i < 6 * a->nj; i++) global[i] = x[i * RHS] * scale[i];
    assembly_to_global(a, global, global);
    return tell(cx, a, global, nsoft);
}

/* Does a factor exist, without recording a failure of the pivots? */
static bool factor_fails(EfContext *cx, Factor *factor, const double *K, EfStatus *status)
{
    *status = factor_numeric(cx, factor, K);
    return *status == EF_E_TALLY;
}

EfStatus mechanism_check(EfContext *cx, const Assembly *a, const unsigned *held, Factor *factor)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    double *K;
    EfStatus st;
    ALLOC(cx, tmp, K, a->nvalue);
    memcpy(K, a->elastic, (size_t)a->nvalue * sizeof *K);
    assembly_hold(a, held, K);
    if (!factor_fails(cx, factor, K, &st)) {
        TRY(st);
        if (factor_negative(factor) == 0 && factor_smallest_pivot(factor, NULL) > SUSPECT &&
            least_diagonal(&a->mesh->pattern, K) > SUSPECT) {
            arena_rewind(&cx->tmp, mark);
            return EF_OK;
        }
    }
    TRY(look_closer(cx, a, K, factor));
    memcpy(K, a->elastic, (size_t)a->nvalue * sizeof *K);
    assembly_hold(a, held, K);
    st = factor_numeric(cx, factor, K);
    arena_rewind(&cx->tmp, mark);
    if (st == EF_E_TALLY)
        return fail(cx, EF_E_MECHANISM, "The stiffness matrix is singular, but no single motion explains it. Look for tubes "
                                        "or springs far softer than the rest.");
    return st;
}
