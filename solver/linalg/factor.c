/* factor.c - numeric factor by supernodal fronts (Duff and Reid 1983, the multifrontal method): every supernode
 * gathers its columns and its children's updates in a dense front, eliminates its own unknowns and hands the rest up.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "linalg/factor.h"

#include <cblas.h>
#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "linalg/analyse.h"

/* Columns of a front eliminated at a time: the narrow panels update the rest of their wide panel, these the rest
 * of the front. */
enum { NARROW = 24, WIDE = 192, TILE = 96 };

/* ---- one front --------------------------------------------------------------------------------------------------- */

/* Adds the blocks of the matrix to the lower part of the front F (column-major, n rows). */
static void add_matrix(const Analysis *a, int s, int n, const double *value, double *F)
{
    for (int e = a->entry_start[s]; e < a->entry_start[s + 1]; e++) {
        const Entry *x = &a->entry[e];
        const double *B = value + BLOCK2 * x->block;
        double *to = F + (size_t)(BLOCK * x->column) * (size_t)n + BLOCK * x->row;
        for (int c = 0; c < BLOCK; c++)
            for (int r = 0; r < BLOCK; r++) to[c * n + r] += x->transposed ? B[BLOCK * c + r] : B[BLOCK * r + c];
    }
}

/* Adds the update U of child c (lower part, column-major) to the front of its parent. */
static void add_update(const Analysis *a, int c, const double *U, int n, double *F)
{
    const int own = a->super[c + 1] - a->super[c], m = front_size(a, c) - own_size(a, c);
    const int *place = a->place + a->first[c] + own;
    for (int j = 0; j < m; j++) {
        double *column = F + (size_t)(BLOCK * place[j / BLOCK] + j % BLOCK) * (size_t)n;
        const double *u = U + (size_t)j * (size_t)m;
        for (int i = j / BLOCK * BLOCK; i < m; i += BLOCK) { /* the diagonal block's upper part is harmless */
            double *to = column + BLOCK * place[i / BLOCK];
            for (int k = 0; k < BLOCK; k++) to[k] += u[i + k];
        }
    }
}

/* Unpivoted factor of the n x n diagonal block: columns scaled by sqrt|d|. false: a pivot is zero or not a number. */
static bool factor_block(int n, int ld, double *F, const double *diagonal, double *sign, Factor *f, int first_row)
{
    for (int k = 0; k < n; k++) {
        double *column = F + (size_t)k * (size_t)ld;
        const double d = column[k];
        if (!(fabs(d) > DBL_MIN) || !isfinite(d)) return false;
        const double ratio = fabs(d) / fmax(fabs(diagonal[k]), DBL_MIN);
        if (ratio < f->smallest) f->smallest = ratio, f->smallest_row = first_row + k;
        sign[k] = d < 0 ? -1 : 1;
        f->negative += d < 0;
        const double root = sqrt(fabs(d)), scale = sign[k] / root;
        column[k] = root;
        for (int i = k + 1; i < n; i++) column[i] *= scale;
        for (int j = k + 1; j < n; j++) {
            const double w = sign[k] * column[j];
            double *to = F + (size_t)j * (size_t)ld;
            for (int i = j; i < n; i++) to[i] -= column[i] * w;
        }
    }
    return true;
}

/* C -= A D A', the lower part of its first `columns` columns of m, for the w columns of A. scaled: room for A D. */
static void take_update(int m, int columns, int w, const double *A, int ld, const double *sign, double *C, double *scaled)
{
    bool definite = true;
    for (int k = 0; k < w; k++) definite &= sign[k] > 0;
    if (definite && columns == m) {
        cblas_dsyrk(CblasColMajor, CblasLower, CblasNoTrans, m, w, -1, A, ld, 1, C, ld);
        return;
    }
    for (int k = 0; k < w && !definite; k++)
        for (int i = 0; i < columns; i++)
            scaled[(size_t)k * (size_t)columns + (size_t)i] = sign[k] * A[(size_t)k * (size_t)ld + (size_t)i];
    const double *AD = definite ? A : scaled;
    for (int j = 0; j < columns; j += TILE) {
        const int n = columns - j < TILE ? columns - j : TILE;
        cblas_dgemm(CblasColMajor, CblasNoTrans, CblasTrans, m - j, n, w, -1, A + j, ld, AD + j, definite ? ld : columns, 1,
                    C + (size_t)j * (size_t)ld + j, ld);
    }
}

/* Eliminates the first w of n unknowns of F; updates the next `columns` of the rest. */
static bool eliminate_panel(int w, int n, int columns, int ld, double *F, const double *diagonal, double *sign, Factor *f,
                            int first_row)
{
    const int m = n - w;
    double *below = F + w;
    if (!factor_block(w, ld, F, diagonal, sign, f, first_row)) return false;
    if (m == 0) return true;
    /* below = L D block', so L = below block'^-1 D */
    cblas_dtrsm(CblasColMajor, CblasRight, CblasLower, CblasTrans, CblasNonUnit, m, w, 1, F, ld, below, ld);
    for (int c = 0; c < w; c++)
        for (int i = 0; sign[c] < 0 && i < m; i++) below[(size_t)c * (size_t)ld + (size_t)i] *= -1;
    if (columns > 0) take_update(m, columns, w, below, ld, sign, below + (size_t)w * (size_t)ld, f->scaled);
    return true;
}

/* Eliminates the first `own` of n unknowns of F; the rest is left updated. */
static bool eliminate_front(int own, int n, double *F, const double *diagonal, double *sign, Factor *f, int first_row)
{
    for (int wide = 0; wide < own; wide += WIDE) {
        const int end = own - wide < WIDE ? own : wide + WIDE;
        for (int k = wide; k < end; k += NARROW) {
            const int w = end - k < NARROW ? end - k : NARROW;
            double *corner = F + (size_t)k * (size_t)(n + 1);
            if (!eliminate_panel(w, n - k, end - k - w, n, corner, diagonal + k, sign + k, f, first_row + k)) return false;
        }
        const double *done = F + (size_t)wide * (size_t)n + end;
        double *rest = F + (size_t)end * (size_t)(n + 1);
        if (end < n) take_update(n - end, n - end, end - wide, done, n, sign + wide, rest, f->scaled);
    }
    return true;
}

/* Keeps the panel of the front, and the largest entry below a unit diagonal. */
static void keep_panel(Factor *f, int s, int own, int n, const double *F)
{
    double *L = f->L + f->analysis->panel[s];
    memcpy(L, F, (size_t)own * (size_t)n * sizeof *L);
    for (int k = 0; k < own; k++) {
        double *column = L + (size_t)k * (size_t)n;
        double largest = 0;
        for (int i = 0; i < k; i++) column[i] = 0;
        for (int i = k + 1; i < n; i++) largest = fabs(column[i]) > largest ? fabs(column[i]) : largest;
        if (largest > f->growth * column[k]) f->growth = largest / column[k];
    }
}

/* ---- the whole matrix ----------------------------------------------------------------------------------------------- */

EfStatus factor_new(EfContext *cx, const Analysis *a, Factor **factor)
{
    openblas_set_num_threads(1); /* the same bits on every machine, and no threads inside a library call */
    Factor *f = core_malloc(cx, 1, sizeof *f);
    if (!f) return cx->status;
    const size_t n = (size_t)a->largest_front;
    *f = (Factor){.analysis = a};
    f->L = core_malloc(cx, a->panel[a->nsuper], sizeof *f->L);
    f->sign = core_malloc(cx, (size_t)(BLOCK * a->nj), sizeof *f->sign);
    f->front = core_malloc(cx, n * n, sizeof *f->front);
    f->stack = core_malloc(cx, a->stack_size, sizeof *f->stack);
    f->x = core_malloc(cx, (size_t)(BLOCK * a->nj + a->largest_front) * RHS, sizeof *f->x);
    f->scaled = core_malloc(cx, n * (WIDE + 1), sizeof *f->scaled);
    if (f->L && f->sign && f->front && f->stack && f->scaled && f->x) {
        *factor = f;
        return EF_OK;
    }
    factor_free(f);
    return cx->status;
}

void factor_free(Factor *f)
{
    if (!f) return;
    free(f->L), free(f->sign), free(f->front), free(f->stack), free(f->scaled), free(f->x);
    free(f);
}

/* The children's updates lie on top of the stack, the last child uppermost. */
static double *take_children(const Analysis *a, int s, double *top, int n, double *F)
{
    for (int c = a->last_child[s]; c >= 0; c = a->sibling[c]) {
        top -= update_size(a, c);
        add_update(a, c, top, n, F);
    }
    return top;
}

/* Puts the lower part of the update on the stack. */
static double *push_update(int own, int n, const double *F, double *top)
{
    const int m = n - own;
    for (int j = 0; j < m; j++, top += m) {
        const int i = j / BLOCK * BLOCK;
        memcpy(top + i, F + (size_t)(own + j) * (size_t)n + own + i, (size_t)(m - i) * sizeof *top);
    }
    return top;
}

EfStatus factor_numeric(EfContext *cx, Factor *f, const double *value)
{
    (void)cx;
    const Analysis *a = f->analysis;
    double *top = f->stack, *diagonal = f->scaled + (size_t)WIDE * (size_t)a->largest_front;
    f->negative = 0, f->growth = 0, f->smallest = INFINITY, f->smallest_row = 0;
    for (int s = 0; s < a->nsuper; s++) {
        const int own = own_size(a, s), n = front_size(a, s);
        memset(f->front, 0, (size_t)n * (size_t)n * sizeof *f->front);
        add_matrix(a, s, n, value, f->front);
        for (int k = 0; k < own; k++) diagonal[k] = f->front[(size_t)k * (size_t)(n + 1)];
        top = take_children(a, s, top, n, f->front);
        const int first = BLOCK * a->super[s];
        if (!eliminate_front(own, n, f->front, diagonal, f->sign + first, f, first)) return EF_E_TALLY;
        keep_panel(f, s, own, n, f->front);
        top = push_update(own, n, f->front, top);
    }
    return isfinite(f->growth) ? EF_OK : EF_E_TALLY;
}

int factor_negative(const Factor *f) { return f->negative; }

double factor_growth(const Factor *f) { return f->growth; }

double factor_smallest_pivot(const Factor *f, int *row)
{
    if (row) *row = BLOCK * f->analysis->old_of[f->smallest_row / BLOCK] + f->smallest_row % BLOCK;
    return f->smallest;
}
