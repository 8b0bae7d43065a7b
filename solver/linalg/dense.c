/* dense.c - eigenvalues of dense symmetric matrices: cyclic Jacobi for small ones, LAPACK for the rest.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "linalg/dense.h"

#include <math.h>
#include <stdbool.h>
#include <string.h>

/* LAPACK, symmetric eigenproblem by divide and conquer. */
void dsyevd_(const char *job, const char *part, const int *n, double *a, const int *lda, double *w, double *work,
             const int *lwork, int *iwork, const int *liwork, int *info);

enum { SWEEPS = 60 };

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

static void swap_both(int n, int m, double *a, int p, int q)
{
    if (p == q) return;
    for (int k = 0; k < m; k++) {
        const double x = a[p * n + k];
        a[p * n + k] = a[q * n + k], a[q * n + k] = x;
    }
    for (int k = 0; k < m; k++) {
        const double x = a[k * n + p];
        a[k * n + p] = a[k * n + q], a[k * n + q] = x;
    }
}

/* Eliminates the last one or two rows of the leading m; n is the row length. */
static void eliminate_one(int n, int m, double *a)
{
    const double *row = a + (m - 1) * n, d = row[m - 1];
    for (int i = 0; i < m - 1; i++)
        for (int j = 0; j < m - 1; j++) a[i * n + j] -= a[i * n + m - 1] * row[j] / d;
}

static void eliminate_two(int n, int m, double *a)
{
    const double *r = a + (m - 2) * n, *s = a + (m - 1) * n;
    const double A = r[m - 2], B = r[m - 1], C = s[m - 1], det = A * C - B * B;
    for (int i = 0; i < m - 2; i++) {
        const double x = a[i * n + m - 2], y = a[i * n + m - 1];
        const double p = (C * x - B * y) / det, q = (A * y - B * x) / det;
        for (int j = 0; j < m - 2; j++) a[i * n + j] -= p * r[j] + q * s[j];
    }
}

int symmetric_count(int n, double *a)
{
    static const double alpha = 0.6403882032022076; /* (1 + sqrt 17)/8 bounds the growth */
    int negative = 0;
    for (int m = n; m > 0;) {
        int d = 0, p = 0, q = 0;
        double off = 0;
        for (int i = 0; i < m; i++) {
            if (fabs(a[i * n + i]) > fabs(a[d * n + d])) d = i;
            for (int j = 0; j < i; j++)
                if (fabs(a[i * n + j]) > off) off = fabs(a[i * n + j]), p = j, q = i;
        }
        if (!(fabs(a[d * n + d]) < alpha * off)) { /* a NaN too: a last row has no partner */
            if (a[d * n + d] == 0) return negative;
            negative += a[d * n + d] < 0;
            swap_both(n, m, a, d, m - 1);
            eliminate_one(n, m--, a);
            continue;
        }
        negative++; /* a 2x2 pivot with a large off-diagonal has one of each sign */
        swap_both(n, m, a, q, m - 1);
        swap_both(n, m, a, p == m - 1 ? q : p, m - 2);
        eliminate_two(n, m, a);
        m -= 2;
    }
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
