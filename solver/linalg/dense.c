/* dense.c - eigenvalues of dense symmetric matrices: cyclic Jacobi for small ones, LAPACK for the rest.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "linalg/dense.h"

#include <assert.h>
#include <math.h>
#include <stdbool.h>
#include <string.h>

/* LAPACK, symmetric eigenproblem by divide and conquer. */
void dsyevd_(const char *job, const char *part, const int *n, double *a, const int *lda, double *w, double *work,
             const int *lwork, int *iwork, const int *liwork, int *info);

enum { MAX_SMALL = 24, SWEEPS = 60 };

/* Turns rows p and q of m [n][n] by the angle (c, s). */
static void turn_rows(int n, double *m, int p, int q, double c, double s)
{
    for (int k = 0; k < n; k++) {
        const double x = m[p * n + k], y = m[q * n + k];
        m[p * n + k] = c * x - s * y;
        m[q * n + k] = s * x + c * y;
    }
}

static void turn_columns(int n, double *m, int p, int q, double c, double s)
{
    for (int k = 0; k < n; k++) {
        const double x = m[k * n + p], y = m[k * n + q];
        m[k * n + p] = c * x - s * y;
        m[k * n + q] = s * x + c * y;
    }
}

/* One pass over all pairs; false when nothing was left to turn. */
static bool sweep(int n, double *a, double *vectors)
{
    bool turned = false;
    for (int p = 0; p < n; p++)
        for (int q = p + 1; q < n; q++) {
            const double off = a[p * n + q], dp = a[p * n + p], dq = a[q * n + q];
            if (fabs(off) <= 1e-17 * sqrt(fabs(dp * dq)) || fabs(off) < 1e-300) continue;
            const double theta = (dq - dp) / (2 * off);
            const double t = (theta < 0 ? -1 : 1) / (fabs(theta) + hypot(theta, 1));
            const double c = 1 / hypot(t, 1), s = t * c;
            turn_rows(n, a, p, q, c, s);
            turn_columns(n, a, p, q, c, s);
            a[p * n + q] = a[q * n + p] = 0;
            turn_rows(n, vectors, p, q, c, s);
            turned = true;
        }
    return turned;
}

static void sort_ascending(int n, double *values, double *vectors)
{
    for (int i = 0; i < n; i++) {
        int least = i;
        for (int k = i + 1; k < n; k++)
            if (values[k] < values[least]) least = k;
        if (least == i) continue;
        const double w = values[i];
        values[i] = values[least], values[least] = w;
        for (int k = 0; k < n; k++) {
            const double x = vectors[i * n + k];
            vectors[i * n + k] = vectors[least * n + k], vectors[least * n + k] = x;
        }
    }
}

void symmetric_eigen(int n, double *a, double *values, double *vectors)
{
    memset(vectors, 0, (size_t)(n * n) * sizeof *vectors);
    for (int i = 0; i < n; i++) vectors[i * n + i] = 1;
    for (int pass = 0; pass < SWEEPS && sweep(n, a, vectors); pass++) {}
    for (int i = 0; i < n; i++) values[i] = a[i * n + i];
    sort_ascending(n, values, vectors);
}

int symmetric_negative(int n, const double *a, double tolerance)
{
    assert(n <= MAX_SMALL);
    double copy[MAX_SMALL * MAX_SMALL], vectors[MAX_SMALL * MAX_SMALL], values[MAX_SMALL];
    memcpy(copy, a, (size_t)(n * n) * sizeof *copy);
    symmetric_eigen(n, copy, values, vectors);
    double largest = 0;
    for (int i = 0; i < n; i++) largest = fmax(largest, fabs(values[i]));
    int negative = 0;
    for (int i = 0; i < n; i++) negative += values[i] < -tolerance * largest;
    return negative;
}

EfStatus symmetric_eigen_large(EfContext *cx, int n, double *a, double *values)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    const int lwork = 1 + 6 * n + 2 * n * n, liwork = 3 + 5 * n;
    double *work;
    int *iwork, info = 0;
    ALLOC(cx, tmp, work, lwork);
    ALLOC(cx, tmp, iwork, liwork);
    dsyevd_("V", "U", &n, a, &n, values, work, &lwork, iwork, &liwork, &info);
    arena_rewind(&cx->tmp, mark);
    return info == 0 ? EF_OK : fail(cx, EF_E_TALLY, "The small eigenproblem of %d unknowns did not converge.", n);
}
