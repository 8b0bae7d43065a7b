/* analyse.h - inside linalg: the symbolic factor on the graph of joints, and what the numeric factor keeps.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef LINALG_ANALYSE_H
#define LINALG_ANALYSE_H

#include "linalg/factor.h"

/* A block of the matrix and its place in the front of a supernode (in joints). */
typedef struct Entry {
    int block, row, column;
    bool transposed; /* the front holds its transpose */
} Entry;

/* Supernode s holds the joints super[s] .. super[s+1]-1 of the new order; its front has the rows
 * row[first[s]] .. row[first[s+1]-1], ascending, its own joints first. */
struct Analysis {
    int nj, nsuper;
    int *old_of;       /* [nj] joint at each place of the new order */
    int *super;        /* [nsuper + 1] */
    int *first, *row;  /* [nsuper + 1], [first[nsuper]] */
    int *place;        /* [first[nsuper]] of a row below the own joints: its place in the parent's front */
    int *parent;       /* [nsuper] or -1 */
    int *last_child;   /* [nsuper] or -1 */
    int *sibling;      /* [nsuper] the child of the same parent before it, or -1 */
    int *entry_start;  /* [nsuper + 1] */
    Entry *entry;
    size_t *panel;     /* [nsuper + 1] start of the supernode's columns in the factor */
    size_t stack_size; /* doubles for updates waiting for their parents */
    int largest_front; /* scalar rows */
};

struct Factor {
    const Analysis *analysis;
    double *L;      /* panels: column-major [rows][own], L scaled so that D = +-1 */
    double *sign;   /* [6 nj] D in the new order */
    double *front;  /* [largest_front][largest_front] */
    double *stack;  /* updates on their way to the parent */
    double *scaled; /* a panel of the front times D, and the diagonal as it was */
    double *x;      /* [6 nj + largest_front][RHS] right-hand sides */
    int negative, smallest_row;
    double growth, smallest;
};

/* Size of own part and of the whole front of supernode s in scalars. */
static inline int own_size(const Analysis *a, int s) { return BLOCK * (a->super[s + 1] - a->super[s]); }
static inline int front_size(const Analysis *a, int s) { return BLOCK * (a->first[s + 1] - a->first[s]); }
/* Doubles of the square below the own part. */
static inline size_t update_size(const Analysis *a, int s)
{
    const size_t m = (size_t)(front_size(a, s) - own_size(a, s));
    return m * m;
}

#endif
