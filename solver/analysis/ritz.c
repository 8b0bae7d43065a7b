/* ritz.c - shapes from the Lanczos process made as good as the matrices allow.
 *
 * The buckling transformation leaves rounding in stiff directions (theta = 1) untouched; (K + sigma G)^-1 G damps it
 * to nothing. One such step, then the best combinations (Rayleigh-Ritz).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "analysis/krylov.h"
#include "linalg/dense.h"

/* Up to RHS modes from `first` on as a block, and back. */
static void pack(const Modes *m, int n, int first, double *x)
{
    memset(x, 0, (size_t)(n * RHS) * sizeof *x);
    for (int c = 0; c < RHS && first + c < m->n; c++)
        for (int i = 0; i < n; i++) x[i * RHS + c] = m->x[(size_t)(first + c) * (size_t)n + (size_t)i];
}

static void unpack(const double *x, int n, int first, int total, double *to)
{
    for (int c = 0; c < RHS && first + c < total; c++)
        for (int i = 0; i < n; i++) to[(size_t)(first + c) * (size_t)n + (size_t)i] = x[i * RHS + c];
}

/* What: 0 the polishing step into x itself; 1, 2: K x and G x into y. */
static EfStatus apply(EfContext *cx, const Pencil *p, Modes *m, int what, double *y)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    double *a, *b;
    ALLOC(cx, tmp, a, p->n * RHS);
    ALLOC(cx, tmp, b, p->n * RHS);
    for (int q = 0; q < m->n; q += RHS) {
        pack(m, p->n, q, a);
        if (what == 1) pencil_stiffness(p, a, b);
        else pencil_geometric(p, a, b);
        if (what == 0) TRY(pencil_solve(cx, p, b));
        unpack(b, p->n, q, m->n, y);
    }
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

static double product(int n, const double *a, const double *b)
{
    double sum = 0;
    for (int i = 0; i < n; i++) sum += a[i] * b[i];
    return sum;
}

/* x := x C for the m vectors x [m][n]; C [m][m]: new vector k = sum C[k][l] x_l. */
static EfStatus combine(EfContext *cx, int m, int n, const double *C, double *x)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    double *column;
    ALLOC(cx, tmp, column, m);
    for (int i = 0; i < n; i++) {
        for (int k = 0; k < m; k++) column[k] = x[(size_t)k * (size_t)n + (size_t)i];
        for (int k = 0; k < m; k++) x[(size_t)k * (size_t)n + (size_t)i] = product(m, C + k * m, column);
    }
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

/* Rayleigh-Ritz: -G x = (1/lambda) K x in the span. Kx, Gx are turned with x. */
static EfStatus rayleigh_ritz(EfContext *cx, int n, Modes *m, double *Kx, double *Gx)
{
    const int k = m->n;
    double *A, *w, *B, *C;
    ALLOC(cx, tmp, A, k * k);
    ALLOC(cx, tmp, B, k * k);
    ALLOC(cx, tmp, C, k * k);
    ALLOC(cx, tmp, w, k);
    for (int i = 0; i < k; i++)
        for (int j = 0; j < k; j++) A[i * k + j] = product(n, m->x + (size_t)i * (size_t)n, Kx + (size_t)j * (size_t)n);
    TRY(symmetric_eigen_large(cx, k, A, w)); /* rows of A: whitening */
    for (int i = 0; i < k; i++)
        for (int j = 0; j < k; j++) A[i * k + j] /= sqrt(w[i]);
    for (int i = 0; i < k; i++)
        for (int j = 0; j < k; j++) B[i * k + j] = -product(n, m->x + (size_t)i * (size_t)n, Gx + (size_t)j * (size_t)n);
    for (int i = 0; i < k; i++) /* C = A B A' */
        for (int j = 0; j < k; j++) {
            C[i * k + j] = 0;
            for (int l = 0; l < k; l++) C[i * k + j] += A[i * k + l] * product(k, B + l * k, A + j * k);
        }
    TRY(symmetric_eigen_large(cx, k, C, w));
    for (int q = 0; q < k; q++) { /* the largest 1/lambda is the lowest factor */
        const int e = k - 1 - q;
        m->factor[q] = 1 / w[e];
        for (int j = 0; j < k; j++) {
            B[q * k + j] = 0;
            for (int l = 0; l < k; l++) B[q * k + j] += C[e * k + l] * A[l * k + j];
        }
    }
    TRY(combine(cx, k, n, B, m->x));
    TRY(combine(cx, k, n, B, Kx));
    return combine(cx, k, n, B, Gx);
}

EfStatus ritz_polish(EfContext *cx, const Pencil *p, Modes *m)
{
    if (m->n == 0) return EF_OK;
    ALLOC(cx, tmp, m->residual, m->n);
    const ArenaMark mark = arena_mark(&cx->tmp);
    const size_t n = (size_t)p->n;
    double *Kx, *Gx;
    ALLOC(cx, tmp, Kx, (size_t)m->n * n);
    ALLOC(cx, tmp, Gx, (size_t)m->n * n);
    TRY(apply(cx, p, m, 0, m->x));
    for (int k = 0; k < m->n; k++) { /* of one size again */
        double *x = m->x + (size_t)k * n, s = 1 / sqrt(product(p->n, x, x));
        for (size_t i = 0; i < n; i++) x[i] *= s;
    }
    TRY(apply(cx, p, m, 1, Kx));
    TRY(apply(cx, p, m, 2, Gx));
    TRY(rayleigh_ritz(cx, p->n, m, Kx, Gx));
    for (int k = 0; k < m->n; k++) {
        double r = 0, s = 0;
        for (size_t i = 0; i < n; i++) {
            const double a = Kx[(size_t)k * n + i], d = a + m->factor[k] * Gx[(size_t)k * n + i];
            r += d * d, s += a * a;
        }
        m->residual[k] = sqrt(r / s);
    }
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}
