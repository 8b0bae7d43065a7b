/* solve.c - right-hand sides through the factor, RHS of them at a time.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <cblas.h>
#include <string.h>

#include "linalg/analyse.h"

/* x [6 nj][n] in the new order, and room for the rows below: one row is n numbers next to each other. */

/* Rows below the own joints of supernode s, packed in w. */
static void gather_below(const Analysis *a, int s, const double *x, double *w, int n)
{
    const int own = a->super[s + 1] - a->super[s];
    for (int k = a->first[s] + own; k < a->first[s + 1]; k++, w += BLOCK * n)
        memcpy(w, x + (size_t)(BLOCK * a->row[k]) * (size_t)n, (size_t)(BLOCK * n) * sizeof *w);
}

static void add_below(const Analysis *a, int s, const double *w, double *x, int n)
{
    const int own = a->super[s + 1] - a->super[s];
    for (int k = a->first[s] + own; k < a->first[s + 1]; k++, w += BLOCK * n) {
        double *to = x + (size_t)(BLOCK * a->row[k]) * (size_t)n;
        for (int i = 0; i < BLOCK * n; i++) to[i] += w[i];
    }
}

/* L x = b for the own rows, w = - (rows below) x. For the BLAS x is column-major n x 6 nj: x' L' = b'. */
static void forward(int own, int rows, const double *L, double *x, double *w, int n)
{
    cblas_dtrsm(CblasColMajor, CblasRight, CblasLower, CblasTrans, CblasNonUnit, n, own, 1, L, rows, x, n);
    if (rows > own)
        cblas_dgemm(CblasColMajor, CblasNoTrans, CblasTrans, n, rows - own, own, -1, x, n, L + own, rows, 0, w, n);
}

static void backward(int own, int rows, const double *L, double *x, const double *w, int n)
{
    if (rows > own)
        cblas_dgemm(CblasColMajor, CblasNoTrans, CblasNoTrans, n, own, rows - own, -1, w, n, L + own, rows, 1, x, n);
    cblas_dtrsm(CblasColMajor, CblasRight, CblasLower, CblasNoTrans, CblasNonUnit, n, own, 1, L, rows, x, n);
}

static void solve_permuted(const Factor *f, double *x, int n)
{
    const Analysis *a = f->analysis;
    double *w = x + (size_t)(BLOCK * a->nj) * (size_t)n;
    for (int s = 0; s < a->nsuper; s++) {
        const int own = own_size(a, s), rows = front_size(a, s);
        double *mine = x + (size_t)(BLOCK * a->super[s]) * (size_t)n;
        forward(own, rows, f->L + a->panel[s], mine, w, n);
        for (int i = 0; i < own; i++) /* D */
            for (int c = 0; c < n; c++) mine[i * n + c] *= f->sign[BLOCK * a->super[s] + i];
        add_below(a, s, w, x, n);
    }
    for (int s = a->nsuper - 1; s >= 0; s--) {
        gather_below(a, s, x, w, n);
        backward(own_size(a, s), front_size(a, s), f->L + a->panel[s], x + (size_t)(BLOCK * a->super[s]) * (size_t)n, w, n);
    }
}

/* n columns from the first one of x, [6 nj][stride], to y [6 nj][n] in the new order, or back. */
static void reorder(const Analysis *a, double *x, int stride, double *y, int n, bool back)
{
    for (int j = 0; j < a->nj; j++)
        for (int i = 0; i < BLOCK; i++, y += n) {
            double *at = x + (size_t)(BLOCK * a->old_of[j] + i) * (size_t)stride;
            memcpy(back ? at : y, back ? y : at, (size_t)n * sizeof *y);
        }
}

EfStatus factor_solve(EfContext *cx, const Factor *f, double *x, int n)
{
    (void)cx;
    for (int c = 0; c < n; c += RHS) {
        const int w = n - c < RHS ? n - c : RHS;
        reorder(f->analysis, x + c, n, f->x, w, false);
        solve_permuted(f, f->x, w);
        reorder(f->analysis, x + c, n, f->x, w, true);
    }
    return EF_OK;
}
