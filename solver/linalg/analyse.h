/* analyse.h - inside linalg: the symbolic factor on the graph of joints.
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
    int *nchild;       /* [nsuper] */
    int *entry_start;  /* [nsuper + 1] */
    Entry *entry;
    size_t *panel;     /* [nsuper + 1] start of the supernode's columns in the factor */
    size_t stack_size; /* doubles for updates waiting for their parents */
    int largest_front; /* scalar rows */
};

#endif
