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

enum { PANEL = 32 }; /* columns eliminated at a time inside a front */

struct Factor {
    const Analysis *analysis;
    double *L;      /* panels: column-major [rows][own], L scaled so that D = +-1 */
    double *sign;   /* [6 nj] D in the new order */
    double *front, *stack, *scaled;
    int negative, smallest_row;
    double growth, smallest;
};

/* ---- one front --------------------------------------------------------------------------------------------------- */

/* Size of own part and of the whole front in scalars. */
static int own_size(const Analysis *a, int s) { return BLOCK * (a->super[s + 1] - a->super[s]); }
static int front_size(const Analysis *a, int s) { return BLOCK * (a->first[s + 1] - a->first[s]); }

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

/* C -= A D A' (lower part of C, [m][m]) for the w columns of A. scaled: room for A D. */
static void take_update(int m, int w, const double *A, int ld, const double *sign, double *C, int ldc, double *scaled)
{
    bool definite = true;
    for (int k = 0; k < w; k++) definite &= sign[k] > 0;
    if (definite) {
        cblas_dsyrk(CblasColMajor, CblasLower, CblasNoTrans, m, w, -1, A, ld, 1, C, ldc);
        return;
    }
    for (int k = 0; k < w; k++)
        for (int i = 0; i < m; i++) scaled[(size_t)k * (size_t)m + (size_t)i] = sign[k] * A[(size_t)k * (size_t)ld + (size_t)i];
    enum { WIDE = 96 };
    for (int j = 0; j < m; j += WIDE) {
        const int n = m - j < WIDE ? m - j : WIDE;
        cblas_dgemm(CblasColMajor, CblasNoTrans, CblasTrans, m - j, n, w, -1, A + j, ld, scaled + j, m, 1,
                    C + (size_t)j * (size_t)ldc + j, ldc);
    }
}

/* Eliminates the first `own` of n unknowns of F; the rest is left updated. */
static bool eliminate_front(int own, int n, double *F, double *diagonal, double *sign, Factor *f, int first_row)
{
    for (int k = 0; k < own; k++) diagonal[k] = F[(size_t)k * (size_t)n + (size_t)k];
    for (int k = 0; k < own; k += PANEL) {
        const int w = own - k < PANEL ? own - k : PANEL, m = n - k - w;
        double *block = F + (size_t)k * (size_t)n + k, *below = block + w;
        if (!factor_block(w, n, block, diagonal + k, sign + k, f, first_row + k)) return false;
        if (m == 0) continue;
        /* below = L D block', so L = below block'^-1 D */
        cblas_dtrsm(CblasColMajor, CblasRight, CblasLower, CblasTrans, CblasNonUnit, m, w, 1, block, n, below, n);
        for (int c = 0; c < w; c++)
            for (int i = 0; sign[k + c] < 0 && i < m; i++) below[(size_t)c * (size_t)n + (size_t)i] *= -1;
        take_update(m, w, below, n, sign + k, block + (size_t)w * (size_t)n + w, n, f->scaled);
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
        for (int i = k + 1; i < n; i++) largest = fmax(largest, fabs(column[i]));
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
    f->scaled = core_malloc(cx, n * (PANEL + 1), sizeof *f->scaled);
    if (f->L && f->sign && f->front && f->stack && f->scaled) {
        *factor = f;
        return EF_OK;
    }
    factor_free(f);
    return cx->status;
}

void factor_free(Factor *f)
{
    if (!f) return;
    free(f->L), free(f->sign), free(f->front), free(f->stack), free(f->scaled);
    free(f);
}

/* The children's updates lie on top of the stack, the last child uppermost; children come before their parent, so
 * the scan down from s meets exactly them, each followed by its own descendants. */
static double *take_children(const Analysis *a, int s, double *top, int n, double *F)
{
    int left = a->nchild[s];
    for (int c = s - 1; left > 0; c--) {
        if (a->parent[c] != s) continue;
        const size_t m = (size_t)(front_size(a, c) - own_size(a, c));
        top -= m * m;
        add_update(a, c, top, n, F);
        left--;
    }
    return top;
}

EfStatus factor_numeric(EfContext *cx, Factor *f, const double *value)
{
    (void)cx;
    const Analysis *a = f->analysis;
    double *top = f->stack, *diagonal = f->scaled + (size_t)PANEL * (size_t)a->largest_front;
    f->negative = 0, f->growth = 0, f->smallest = INFINITY, f->smallest_row = 0;
    for (int s = 0; s < a->nsuper; s++) {
        const int own = own_size(a, s), n = front_size(a, s), m = n - own;
        memset(f->front, 0, (size_t)n * (size_t)n * sizeof *f->front);
        add_matrix(a, s, n, value, f->front);
        top = take_children(a, s, top, n, f->front);
        const int first = BLOCK * a->super[s];
        if (!eliminate_front(own, n, f->front, diagonal, f->sign + first, f, first)) return EF_E_TALLY;
        keep_panel(f, s, own, n, f->front);
        for (int j = 0; j < m; j++, top += m)
            memcpy(top, f->front + (size_t)(own + j) * (size_t)n + own, (size_t)m * sizeof *top);
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

/* ---- solving ----------------------------------------------------------------------------------------------------------- */

/* Rows below the own joints of supernode s, between y [6 nj][n] in the new order and the packed w. */
static void gather_below(const Analysis *a, int s, const double *y, double *w, int n)
{
    const int own = a->super[s + 1] - a->super[s];
    for (int k = a->first[s] + own; k < a->first[s + 1]; k++, w += BLOCK * n)
        memcpy(w, y + (size_t)(BLOCK * a->row[k]) * (size_t)n, (size_t)(BLOCK * n) * sizeof *w);
}

static void add_below(const Analysis *a, int s, const double *w, double *y, int n)
{
    const int own = a->super[s + 1] - a->super[s];
    for (int k = a->first[s] + own; k < a->first[s + 1]; k++, w += BLOCK * n) {
        double *to = y + (size_t)(BLOCK * a->row[k]) * (size_t)n;
        for (int i = 0; i < BLOCK * n; i++) to[i] += w[i];
    }
}

/* y is row-major [6 nj][n], that is, column-major n x 6 nj: L y = b becomes y' L' = b'. */
static void solve_permuted(const Factor *f, double *y, int n, double *w)
{
    const Analysis *a = f->analysis;
    for (int s = 0; s < a->nsuper; s++) {
        const int own = own_size(a, s), rows = front_size(a, s), m = rows - own;
        const double *L = f->L + a->panel[s];
        double *x = y + (size_t)(BLOCK * a->super[s]) * (size_t)n;
        cblas_dtrsm(CblasColMajor, CblasRight, CblasLower, CblasTrans, CblasNonUnit, n, own, 1, L, rows, x, n);
        if (m == 0) continue;
        cblas_dgemm(CblasColMajor, CblasNoTrans, CblasTrans, n, m, own, -1, x, n, L + own, rows, 0, w, n);
        add_below(a, s, w, y, n);
    }
    for (int i = 0; i < BLOCK * a->nj; i++)
        for (int c = 0; f->sign[i] < 0 && c < n; c++) y[i * n + c] *= -1;
    for (int s = a->nsuper - 1; s >= 0; s--) {
        const int own = own_size(a, s), rows = front_size(a, s), m = rows - own;
        const double *L = f->L + a->panel[s];
        double *x = y + (size_t)(BLOCK * a->super[s]) * (size_t)n;
        if (m > 0) {
            gather_below(a, s, y, w, n);
            cblas_dgemm(CblasColMajor, CblasNoTrans, CblasNoTrans, n, own, m, -1, w, n, L + own, rows, 1, x, n);
        }
        cblas_dtrsm(CblasColMajor, CblasRight, CblasLower, CblasNoTrans, CblasNonUnit, n, own, 1, L, rows, x, n);
    }
}

EfStatus factor_solve(EfContext *cx, const Factor *f, double *x, int n)
{
    const Analysis *a = f->analysis;
    const ArenaMark mark = arena_mark(&cx->tmp);
    const size_t block = (size_t)(BLOCK * n);
    double *y, *w;
    ALLOC(cx, tmp, y, block * (size_t)a->nj);
    ALLOC(cx, tmp, w, (size_t)a->largest_front * (size_t)n);
    for (int j = 0; j < a->nj; j++) memcpy(y + block * (size_t)j, x + block * (size_t)a->old_of[j], block * sizeof *y);
    solve_permuted(f, y, n, w);
    for (int j = 0; j < a->nj; j++) memcpy(x + block * (size_t)a->old_of[j], y + block * (size_t)j, block * sizeof *y);
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

/* ---- selected inverse ------------------------------------------------------------------------------------------------------ */

/* Z of a front (full, column-major, n x n) from that of its parent: with Y = L21 L11^-1,
 *   Z21 = -Z22 Y,   Z11 = (L11 D L11')^-1 - Y' Z21. */
static void invert_front(const Factor *f, int s, const double *parent, double *Z, double *Y)
{
    const Analysis *a = f->analysis;
    const int own = own_size(a, s), n = front_size(a, s), m = n - own, o = own / BLOCK;
    const double *L = f->L + a->panel[s], *sign = f->sign + BLOCK * a->super[s];
    const int *place = a->place + a->first[s] + o, np = a->parent[s] < 0 ? 0 : front_size(a, a->parent[s]);
    double *Z22 = Z + (size_t)own * (size_t)n + own;
    for (int j = 0; j < m; j++) {
        const double *from = parent + (size_t)(BLOCK * place[j / BLOCK] + j % BLOCK) * (size_t)np;
        for (int i = 0; i < m; i++) Z22[(size_t)j * (size_t)n + (size_t)i] = from[BLOCK * place[i / BLOCK] + i % BLOCK];
    }
    for (int j = 0; j < own; j++) /* Z11 := D, then L11'^-1 D L11^-1 */
        for (int i = 0; i < own; i++) Z[(size_t)j * (size_t)n + (size_t)i] = i == j ? sign[i] : 0;
    cblas_dtrsm(CblasColMajor, CblasLeft, CblasLower, CblasTrans, CblasNonUnit, own, own, 1, L, n, Z, n);
    cblas_dtrsm(CblasColMajor, CblasRight, CblasLower, CblasNoTrans, CblasNonUnit, own, own, 1, L, n, Z, n);
    if (m == 0) return;
    for (int j = 0; j < own; j++) memcpy(Y + (size_t)j * (size_t)m, L + (size_t)j * (size_t)n + own, (size_t)m * sizeof *Y);
    cblas_dtrsm(CblasColMajor, CblasRight, CblasLower, CblasNoTrans, CblasNonUnit, m, own, 1, L, n, Y, m);
    cblas_dgemm(CblasColMajor, CblasNoTrans, CblasNoTrans, m, own, m, -1, Z22, n, Y, m, 0, Z + own, n);
    cblas_dgemm(CblasColMajor, CblasTrans, CblasNoTrans, own, own, m, -1, Y, m, Z + own, n, 1, Z, n);
    for (int j = 0; j < own; j++)
        for (int i = own; i < n; i++) Z[(size_t)i * (size_t)n + (size_t)j] = Z[(size_t)j * (size_t)n + (size_t)i];
}

static void take_blocks(const Analysis *a, int s, const double *Z, double *inverse)
{
    const size_t n = (size_t)front_size(a, s);
    for (int e = a->entry_start[s]; e < a->entry_start[s + 1]; e++) {
        const Entry *x = &a->entry[e];
        double *B = inverse + BLOCK2 * x->block;
        const double *from = Z + (size_t)(BLOCK * x->column) * n + BLOCK * x->row;
        for (int c = 0; c < BLOCK; c++)
            for (int r = 0; r < BLOCK; r++) *(x->transposed ? &B[BLOCK * c + r] : &B[BLOCK * r + c]) = from[(size_t)c * n + (size_t)r];
    }
}

/* Parents before children; a front is kept until its last child has read it. */
static EfStatus invert_all(EfContext *cx, const Factor *f, double **Z, int *left, double *Y, double *inverse)
{
    const Analysis *a = f->analysis;
    for (int s = a->nsuper - 1; s >= 0; s--) {
        const size_t n = (size_t)front_size(a, s);
        Z[s] = core_malloc(cx, n * n, sizeof *Z[s]);
        if (!Z[s]) return cx->status;
        const int p = a->parent[s];
        invert_front(f, s, p < 0 ? NULL : Z[p], Z[s], Y);
        take_blocks(a, s, Z[s], inverse);
        left[s] = a->nchild[s];
        if (left[s] == 0) free(Z[s]), Z[s] = NULL;
        if (p >= 0 && --left[p] == 0) free(Z[p]), Z[p] = NULL;
    }
    return EF_OK;
}

EfStatus factor_selected_inverse(EfContext *cx, const Factor *f, double *inverse)
{
    const Analysis *a = f->analysis;
    const ArenaMark mark = arena_mark(&cx->tmp);
    double **Z, *Y;
    int *left;
    ALLOC(cx, tmp, Z, a->nsuper);
    ALLOC(cx, tmp, left, a->nsuper);
    ALLOC(cx, tmp, Y, (size_t)a->largest_front * (size_t)a->largest_front);
    const EfStatus st = invert_all(cx, f, Z, left, Y, inverse);
    for (int s = 0; s < a->nsuper; s++) free(Z[s]);
    arena_rewind(&cx->tmp, mark);
    return st;
}
