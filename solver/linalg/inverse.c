/* inverse.c - the blocks of the inverse inside the pattern, from the top of the tree down (Takahashi, Fagan and Chin
 * 1973; Erisman and Tinney 1975): the same fronts and the same stack as the factor, the other way round.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <cblas.h>
#include <string.h>

#include "linalg/analyse.h"

/* LAPACK: inverse of a triangle, and the product of one with its transpose. */
void dtrtri_(const char *part, const char *diag, const int *n, double *a, const int *lda, int *info);
void dlauum_(const char *part, const int *n, double *a, const int *lda, int *info);

enum { TILE = 96 };

/* Room for one front at a time; all column-major, of symmetric ones the lower part. */
typedef struct Room {
    double *Z;     /* the inverse inside the front */
    double *Y;     /* L21 L11^-1 */
    double *X;     /* D L11^-1 */
    double *stack; /* parts of it that children wait for */
} Room;

/* C += alpha A' B, of which only the lower part is wanted; A is lower triangular (`triangle`) or full. */
static void lower_product(int n, int k, double alpha, const double *A, int lda, const double *B, int ldb, bool triangle,
                          double beta, double *C, int ldc)
{
    for (int j = 0; j < n; j += TILE) {
        const int w = n - j < TILE ? n - j : TILE, skip = triangle ? j : 0;
        cblas_dgemm(CblasColMajor, CblasTrans, CblasNoTrans, n - j, w, k - skip, alpha, A + (size_t)j * (size_t)lda + skip, lda,
                    B + (size_t)j * (size_t)ldb + skip, ldb, beta, C + (size_t)j * (size_t)ldc + j, ldc);
    }
}

/* Z11 := (L11 D L11')^-1. */
static void invert_own(int own, int n, const double *L, const double *sign, double *Z, double *X)
{
    int info;
    bool definite = true;
    for (int k = 0; k < own; k++) definite &= sign[k] > 0;
    double *T = definite ? Z : X; /* L11^-1 */
    const int ld = definite ? n : own;
    for (int j = 0; j < own; j++) memcpy(T + (size_t)j * (size_t)ld, L + (size_t)j * (size_t)n, (size_t)own * sizeof *T);
    dtrtri_("L", "N", &own, T, &ld, &info);
    if (definite) {
        dlauum_("L", &own, Z, &n, &info);
        return;
    }
    double *DT = X + (size_t)own * (size_t)own;
    for (int j = 0; j < own; j++)
        for (int i = 0; i < own; i++) DT[(size_t)j * (size_t)own + (size_t)i] = sign[i] * T[(size_t)j * (size_t)own + (size_t)i];
    lower_product(own, own, 1, T, own, DT, own, true, 0, Z, n);
}

/* Fills Z22 of the front from the stack, and with Y = L21 L11^-1
 *   Z21 = -Z22 Y,   Z11 = (L11 D L11')^-1 - Y' Z21. */
static void invert_front(const Factor *f, int s, Room *r)
{
    const Analysis *a = f->analysis;
    const int own = own_size(a, s), n = front_size(a, s), m = n - own;
    const double *L = f->L + a->panel[s];
    double *Z21 = r->Z + own, *Z22 = Z21 + (size_t)own * (size_t)n;
    invert_own(own, n, L, f->sign + BLOCK * a->super[s], r->Z, r->X);
    if (m == 0) return;
    r->stack -= update_size(a, s);
    for (int j = 0; j < m; j++) {
        const int i = j / BLOCK * BLOCK;
        memcpy(Z22 + (size_t)j * (size_t)n + i, r->stack + (size_t)j * (size_t)m + i, (size_t)(m - i) * sizeof *Z22);
    }
    for (int j = 0; j < own; j++) memcpy(r->Y + (size_t)j * (size_t)m, L + (size_t)j * (size_t)n + own, (size_t)m * sizeof *r->Y);
    cblas_dtrsm(CblasColMajor, CblasRight, CblasLower, CblasNoTrans, CblasNonUnit, m, own, 1, L, n, r->Y, m);
    cblas_dsymm(CblasColMajor, CblasLeft, CblasLower, m, own, -1, Z22, n, r->Y, m, 0, Z21, n);
    lower_product(own, m, -1, r->Y, m, Z21, n, false, 1, r->Z, n);
}

/* The part of Z that the front of child c shares with this one, of n rows. */
static void hand_down(const Analysis *a, int c, const double *Z, int n, double *to)
{
    const int m = front_size(a, c) - own_size(a, c), *place = a->place + a->first[c] + own_size(a, c) / BLOCK;
    for (int j = 0; j < m; j++) {
        const double *column = Z + (size_t)(BLOCK * place[j / BLOCK] + j % BLOCK) * (size_t)n;
        for (int i = j / BLOCK * BLOCK; i < m; i += BLOCK) {
            const double *from = column + BLOCK * place[i / BLOCK];
            for (int k = 0; k < BLOCK; k++) to[(size_t)j * (size_t)m + (size_t)(i + k)] = from[k];
        }
    }
}

/* For all children; the last one, whose turn comes next, uppermost. */
static void hand_to_children(const Analysis *a, int s, Room *r)
{
    size_t size = 0;
    for (int c = a->last_child[s]; c >= 0; c = a->sibling[c]) size += update_size(a, c);
    double *to = r->stack += size;
    for (int c = a->last_child[s]; c >= 0; c = a->sibling[c]) hand_down(a, c, r->Z, front_size(a, s), to -= update_size(a, c));
}

static void take_blocks(const Analysis *a, int s, const double *Z, double *inverse)
{
    const int n = front_size(a, s);
    for (int e = a->entry_start[s]; e < a->entry_start[s + 1]; e++) {
        const Entry *x = &a->entry[e];
        double *B = inverse + BLOCK2 * x->block;
        const double *from = Z + (size_t)(BLOCK * x->column) * (size_t)n + BLOCK * x->row;
        for (int c = 0; c < BLOCK; c++)
            for (int i = 0; i < BLOCK; i++) {
                const bool upper = x->row == x->column && i < c;
                *(x->transposed ? &B[BLOCK * c + i] : &B[BLOCK * i + c]) = upper ? from[i * n + c] : from[c * n + i];
            }
    }
}

EfStatus factor_selected_inverse(EfContext *cx, const Factor *f, double *inverse)
{
    const Analysis *a = f->analysis;
    const ArenaMark mark = arena_mark(&cx->tmp);
    size_t panel = 0, own2 = 0;
    for (int s = 0; s < a->nsuper; s++) {
        const size_t own = (size_t)own_size(a, s), size = own * (size_t)(front_size(a, s) - own_size(a, s));
        if (size > panel) panel = size;
        if (own * own > own2) own2 = own * own;
    }
    Room r = {.Z = f->front, .stack = f->stack};
    ALLOC(cx, tmp, r.Y, panel);
    ALLOC(cx, tmp, r.X, 2 * own2);
    for (int s = a->nsuper - 1; s >= 0; s--) {
        invert_front(f, s, &r);
        take_blocks(a, s, r.Z, inverse);
        hand_to_children(a, s, &r);
    }
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}
