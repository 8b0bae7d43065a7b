/* pattern.c - matrices of 6x6 joint blocks: their pattern and products.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <string.h>

#include "linalg/factor.h"

/* Sorts the rows of a column (short lists) and drops repetitions; returns what is left. */
static int sort_unique(int n, int *row)
{
    for (int i = 1; i < n; i++) {
        const int r = row[i];
        int k = i;
        for (; k > 0 && row[k - 1] > r; k--) row[k] = row[k - 1];
        row[k] = r;
    }
    int kept = n > 0;
    for (int i = 1; i < n; i++)
        if (row[i] != row[kept - 1]) row[kept++] = row[i];
    return kept;
}

EfStatus pattern_from_pairs(EfContext *cx, int nj, int npair, const int (*pair)[2], BlockPattern *p)
{
    int *end;
    *p = (BlockPattern){.nj = nj};
    ALLOC(cx, keep, p->start, nj + 1);
    ALLOC(cx, keep, p->row, nj + npair);
    const ArenaMark mark = arena_mark(&cx->tmp);
    ALLOC(cx, tmp, end, nj + 1);
    for (int j = 0; j < nj; j++) p->start[j + 1] = 1;
    for (int i = 0; i < npair; i++) p->start[1 + (pair[i][0] < pair[i][1] ? pair[i][0] : pair[i][1])]++;
    for (int j = 0; j < nj; j++) p->start[j + 1] += p->start[j];
    for (int j = 0; j < nj; j++) {
        end[j] = p->start[j];
        p->row[end[j]++] = j;
    }
    for (int i = 0; i < npair; i++) {
        const int lo = pair[i][0] < pair[i][1] ? pair[i][0] : pair[i][1], hi = pair[i][0] + pair[i][1] - lo;
        p->row[end[lo]++] = hi;
    }
    int kept = 0;
    for (int j = 0; j < nj; j++) { /* packed in place */
        const int first = p->start[j], n = sort_unique(end[j] - first, p->row + first);
        p->start[j] = kept;
        memmove(p->row + kept, p->row + first, (size_t)n * sizeof *p->row);
        kept += n;
    }
    p->start[nj] = kept;
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

int pattern_block(const BlockPattern *p, int i, int j)
{
    int lo = p->start[j], hi = p->start[j + 1] - 1;
    while (lo <= hi) {
        const int middle = (lo + hi) / 2;
        if (p->row[middle] == i) return middle;
        if (p->row[middle] < i) lo = middle + 1;
        else hi = middle - 1;
    }
    return -1;
}

/* y += B x and, for a block off the diagonal, z += B' w, all [6][n]. */
static void block_times(const double *B, const double *x, double *y, int n)
{
    for (int i = 0; i < BLOCK; i++)
        for (int k = 0; k < BLOCK; k++) {
            const double b = B[BLOCK * i + k];
            for (int c = 0; c < n; c++) y[i * n + c] += b * x[k * n + c];
        }
}

static void transposed_times(const double *B, const double *x, double *y, int n)
{
    for (int i = 0; i < BLOCK; i++)
        for (int k = 0; k < BLOCK; k++) {
            const double b = B[BLOCK * i + k];
            for (int c = 0; c < n; c++) y[k * n + c] += b * x[i * n + c];
        }
}

void block_multiply(const BlockPattern *p, const double *value, const double *x, double *y, int n)
{
    memset(y, 0, (size_t)(6 * p->nj) * (size_t)n * sizeof *y);
    for (int j = 0; j < p->nj; j++)
        for (int b = p->start[j]; b < p->start[j + 1]; b++) {
            const int i = p->row[b];
            block_times(value + BLOCK2 * b, x + BLOCK * j * n, y + BLOCK * i * n, n);
            if (i != j) transposed_times(value + BLOCK2 * b, x + BLOCK * i * n, y + BLOCK * j * n, n);
        }
}
