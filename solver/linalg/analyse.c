/* analyse.c - ordering of the joint graph and supernodes by CHOLMOD (Chen, Davis, Hager and Rajamanickam 2008), and
 * what the numeric factor needs of them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "linalg/analyse.h"

#include <cholmod.h>
#include <stdlib.h>
#include <string.h>

/* Nested dissection pays from this many joints on. */
enum { DISSECT_FROM = 400 };

static void set_up(cholmod_common *c, int nj)
{
    cholmod_start(c);
    c->print = 0;
    c->supernodal = CHOLMOD_SUPERNODAL;
    c->postorder = 1;
    c->method[0].ordering = CHOLMOD_AMD;
    c->method[1].ordering = CHOLMOD_METIS;
    c->nmethods = nj > DISSECT_FROM ? 2 : 1;
    /* In joints: the default limits are meant for scalars. */
    c->nrelax[0] = 2, c->nrelax[1] = 4, c->nrelax[2] = 8;
    c->zrelax[0] = 0.5, c->zrelax[1] = 0.2, c->zrelax[2] = 0.05;
}

/* A fresh array filled from ints of CHOLMOD. */
static int *copy_ints(EfContext *cx, const void *from, size_t n)
{
    int *to = core_malloc(cx, n, sizeof *to);
    return to ? memcpy(to, from, n * sizeof *to) : NULL;
}

static EfStatus take_symbolic(EfContext *cx, const cholmod_factor *L, Analysis *s)
{
    s->nsuper = (int)L->nsuper;
    s->old_of = copy_ints(cx, L->Perm, L->n);
    s->super = copy_ints(cx, L->super, L->nsuper + 1);
    s->first = copy_ints(cx, L->pi, L->nsuper + 1);
    s->row = s->first ? copy_ints(cx, L->s, (size_t)s->first[s->nsuper]) : NULL;
    return s->old_of && s->super && s->first && s->row ? EF_OK : EF_E_MEMORY;
}

static EfStatus order(EfContext *cx, const BlockPattern *p, Analysis *s)
{
    cholmod_common c;
    set_up(&c, p->nj);
    cholmod_sparse A = {.nrow = (size_t)p->nj, .ncol = (size_t)p->nj, .nzmax = (size_t)p->start[p->nj], .p = p->start,
                        .i = p->row, .stype = -1, .itype = CHOLMOD_INT, .xtype = CHOLMOD_PATTERN, .sorted = 1, .packed = 1};
    cholmod_factor *L = cholmod_analyze(&A, &c);
    EfStatus st = EF_E_MEMORY;
    if (L && c.status >= CHOLMOD_OK && L->is_super) st = take_symbolic(cx, L, s);
    else fail(cx, EF_E_MEMORY, "Out of memory while ordering %d joints.", p->nj);
    cholmod_free_factor(&L, &c);
    cholmod_finish(&c);
    return st;
}

/* Place of joint r in the front of supernode s; it is there. */
static int place_in(const Analysis *a, int s, int r)
{
    int lo = a->first[s], hi = a->first[s + 1] - 1;
    while (lo < hi) {
        const int middle = (lo + hi) / 2;
        if (a->row[middle] < r) lo = middle + 1;
        else hi = middle;
    }
    return lo - a->first[s];
}

/* Parents, places of rows in them, and panels. */
static void relate(Analysis *a, const int *super_of)
{
    for (int s = 0; s < a->nsuper; s++) {
        const int own = a->super[s + 1] - a->super[s], rows = a->first[s + 1] - a->first[s];
        a->parent[s] = rows > own ? super_of[a->row[a->first[s] + own]] : -1;
        if (rows > own) a->sibling[s] = a->last_child[a->parent[s]], a->last_child[a->parent[s]] = s;
        for (int k = own; k < rows; k++) a->place[a->first[s] + k] = place_in(a, a->parent[s], a->row[a->first[s] + k]);
        a->panel[s + 1] = a->panel[s] + (size_t)(BLOCK * own) * (size_t)(BLOCK * rows);
        if (BLOCK * rows > a->largest_front) a->largest_front = BLOCK * rows;
    }
}

/* The most that waits on the stack of updates: children leave it when their parent's update comes. */
static void measure_stack(Analysis *a, size_t *of_children)
{
    size_t now = 0;
    for (int s = 0; s < a->nsuper; s++) {
        const size_t update = update_size(a, s);
        now += update - of_children[s];
        if (a->parent[s] >= 0) of_children[a->parent[s]] += update;
        if (now > a->stack_size) a->stack_size = now;
    }
}

/* Where every block of the matrix goes. new_of: place of a joint in the new order. */
static void list_entries(Analysis *a, const BlockPattern *p, const int *super_of, const int *new_of)
{
    for (int pass = 0; pass < 2; pass++) { /* count, then fill; entry_start is shifted by one in between */
        for (int j = 0; j < p->nj; j++)
            for (int b = p->start[j]; b < p->start[j + 1]; b++) {
                const int row = new_of[p->row[b]], column = new_of[j], lo = row < column ? row : column;
                const int s = super_of[lo];
                if (pass == 0) {
                    a->entry_start[s + 1]++;
                    continue;
                }
                a->entry[a->entry_start[s]++] = (Entry){.block = b, .row = place_in(a, s, row + column - lo),
                                                        .column = lo - a->super[s], .transposed = row < column};
            }
        if (pass == 0)
            for (int s = 0; s < a->nsuper; s++) a->entry_start[s + 1] += a->entry_start[s];
    }
    for (int s = a->nsuper; s > 0; s--) a->entry_start[s] = a->entry_start[s - 1];
    a->entry_start[0] = 0;
}

static EfStatus complete(EfContext *cx, const BlockPattern *p, Analysis *a)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    int *super_of, *new_of;
    size_t *of_children;
    ALLOC(cx, tmp, super_of, p->nj);
    ALLOC(cx, tmp, new_of, p->nj);
    ALLOC(cx, tmp, of_children, a->nsuper);
    for (int s = 0; s < a->nsuper; s++)
        for (int j = a->super[s]; j < a->super[s + 1]; j++) super_of[j] = s;
    for (int j = 0; j < p->nj; j++) new_of[a->old_of[j]] = j;
    relate(a, super_of);
    measure_stack(a, of_children);
    list_entries(a, p, super_of, new_of);
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

static EfStatus make_room(EfContext *cx, const BlockPattern *p, Analysis *a)
{
    const size_t ns = (size_t)a->nsuper;
    a->place = core_malloc(cx, (size_t)a->first[ns], sizeof *a->place);
    a->parent = core_malloc(cx, ns, sizeof *a->parent);
    a->last_child = core_malloc(cx, ns, sizeof *a->last_child);
    a->sibling = core_malloc(cx, ns, sizeof *a->sibling);
    a->entry_start = core_malloc(cx, ns + 1, sizeof *a->entry_start);
    a->entry = core_malloc(cx, (size_t)p->start[p->nj], sizeof *a->entry);
    a->panel = core_malloc(cx, ns + 1, sizeof *a->panel);
    if (!a->place || !a->parent || !a->last_child || !a->sibling || !a->entry_start || !a->entry || !a->panel) return EF_E_MEMORY;
    for (size_t s = 0; s < ns; s++) a->last_child[s] = a->sibling[s] = -1;
    memset(a->entry_start, 0, (ns + 1) * sizeof *a->entry_start);
    a->panel[0] = 0;
    return EF_OK;
}

EfStatus factor_analyse(EfContext *cx, const BlockPattern *p, Analysis **analysis)
{
    Analysis *a = core_malloc(cx, 1, sizeof *a);
    if (!a) return cx->status;
    *a = (Analysis){.nj = p->nj};
    EfStatus st = order(cx, p, a);
    if (st == EF_OK) st = make_room(cx, p, a);
    if (st == EF_OK) st = complete(cx, p, a);
    if (st == EF_OK) *analysis = a;
    else analysis_free(a);
    return st;
}

void analysis_free(Analysis *a)
{
    if (!a) return;
    free(a->old_of), free(a->super), free(a->first), free(a->row), free(a->place), free(a->parent);
    free(a->last_child), free(a->sibling), free(a->entry_start), free(a->entry), free(a->panel);
    free(a);
}
