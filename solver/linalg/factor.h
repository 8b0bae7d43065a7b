/* factor.h - symmetric matrices of 6x6 joint blocks, and their signed supernodal factor
 * A = L D L', D = +-1, without pivoting: the number of negative entries of D is the number
 * of negative eigenvalues (Sylvester). One analysis serves any number of factors.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef LINALG_FACTOR_H
#define LINALG_FACTOR_H

#include "core/core.h"

enum { BLOCK = 6, BLOCK2 = 36, RHS = 8 };

/* Symmetric matrix of nj x nj blocks of 6x6; the lower part is kept, column by column.
 * Column j holds blocks start[j] .. start[j+1]-1; the first is the diagonal block; rows ascend.
 * A block is row-major: value[36 b + 6 i + k] = A(6 row + i, 6 column + k); diagonal blocks are
 * kept full and symmetric. */
typedef struct BlockPattern {
    int nj;
    int *start; /* [nj + 1] */
    int *row;   /* [start[nj]] */
} BlockPattern;

/* Pattern from pairs of joints that share a tube (or a spread load). Pairs may repeat, i == j is
 * allowed; order does not matter. Owned by cx->keep. */
EfStatus pattern_from_pairs(EfContext *cx, int nj, int npair, const int (*pair)[2], BlockPattern *p);

/* Index of block (i, j), i >= j, or -1 when outside the pattern. O(log). */
int pattern_block(const BlockPattern *p, int i, int j);

/* y = A x for `n` vectors; x, y are [6 nj][n] row-major, not overlapping. */
void block_multiply(const BlockPattern *p, const double *value, const double *x, double *y, int n);

/* Ordering and symbolic factorisation; read-only after factor_analyse. Heap; free with analysis_free. */
typedef struct Analysis Analysis;
EfStatus factor_analyse(EfContext *cx, const BlockPattern *p, Analysis **analysis);
void analysis_free(Analysis *analysis);

/* Numeric factor; heap; factor_free accepts NULL. The analysis must outlive it. */
typedef struct Factor Factor;
EfStatus factor_new(EfContext *cx, const Analysis *analysis, Factor **factor);
void factor_free(Factor *factor);

/* Factorises. Never fails for an indefinite matrix; a pivot that is exactly zero or not finite gives
 * E_TALLY without a message: the caller knows whether to move on. May be called again with other values of the same pattern. */
EfStatus factor_numeric(EfContext *cx, Factor *factor, const double *value);

int factor_negative(const Factor *factor);  /* negative eigenvalues */
double factor_growth(const Factor *factor); /* largest |l| / sqrt|d| seen: trust up to 1e7 */
/* Smallest |pivot| / |diagonal entry| and the scalar row (6 joint + direction) where it was met. */
double factor_smallest_pivot(const Factor *factor, int *row);

/* x := A^-1 x for n vectors, x is [6 nj][n] row-major; RHS vectors cost little more than one. Works in room of the
 * factor, as the selected inverse does: one call at a time for a factor. */
EfStatus factor_solve(EfContext *cx, const Factor *factor, double *x, int n);

/* Selected inverse (Takahashi, Fagan and Chin 1973): the blocks of A^-1 inside the pattern,
 * same layout as the matrix values. inverse is [36 start[nj]]. */
EfStatus factor_selected_inverse(EfContext *cx, const Factor *factor, double *inverse);

#endif
