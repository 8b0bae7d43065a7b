/* names.c - names to indices, with patterns and the nearest known name in faults.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <stdlib.h>
#include <string.h>

#include "frame/reader.h"

bool names_new(Reader *rd, Names *names, const char *what, int n)
{
    *names = (Names){.what = what};
    names->name = arena_take(rd->cx, &rd->cx->tmp, (size_t)n, sizeof *names->name);
    names->sorted = arena_take(rd->cx, &rd->cx->tmp, (size_t)n, sizeof *names->sorted);
    return names->name && names->sorted;
}

/* Heap sort by name: no context pointer needed, no recursion, the same on every machine. */
static void sift(const Names *names, int root, int n)
{
    int *s = names->sorted;
    for (int child; (child = 2 * root + 1) < n; root = child) {
        if (child + 1 < n && strcmp(names->name[s[child]], names->name[s[child + 1]]) < 0) child++;
        if (strcmp(names->name[s[root]], names->name[s[child]]) >= 0) return;
        const int x = s[root];
        s[root] = s[child], s[child] = x;
    }
}

void names_sort(Names *names)
{
    int *s = names->sorted;
    for (int i = 0; i < names->n; i++) s[i] = i;
    for (int i = names->n / 2 - 1; i >= 0; i--) sift(names, i, names->n);
    for (int i = names->n - 1; i > 0; i--) {
        const int x = s[0];
        s[0] = s[i], s[i] = x;
        sift(names, 0, i);
    }
}

int names_find(const Names *names, const char *name)
{
    int lo = 0, hi = names->n - 1;
    while (lo <= hi) {
        const int middle = (lo + hi) / 2, c = strcmp(name, names->name[names->sorted[middle]]);
        if (c == 0) return names->sorted[middle];
        if (c < 0) hi = middle - 1;
        else lo = middle + 1;
    }
    return -1;
}

static void unknown(Reader *rd, const Names *names, const char *name, EfMark mark)
{
    const char *near = nearest_word(name, (size_t)names->n, names->name);
    if (near) FAULT(rd, mark, "There is no %s `%s`. Did you mean `%s`?", names->what, name, near);
    else FAULT(rd, mark, "There is no %s `%s`.", names->what, name);
}

int names_need(Reader *rd, const Names *names, const Node *n)
{
    if (!names->what) return -1; /* their section was not read: that fault stands already */
    const char *name = scalar_text(rd, n, names->what);
    if (!name) return -1;
    const int i = names_find(names, name);
    if (i < 0) unknown(rd, names, name, n->mark);
    return i;
}

/* * any run of characters, ? any one; iterative, so no pattern is slow. */
static bool matches(const char *pattern, const char *name)
{
    const char *star = NULL, *from = NULL;
    while (*name) {
        if (*pattern == '*') star = pattern++, from = name;
        else if (*pattern == '?' || *pattern == *name) pattern++, name++;
        else if (star) pattern = star + 1, name = ++from;
        else return false;
    }
    while (*pattern == '*') pattern++;
    return *pattern == 0;
}

/* Marks the indices of one name or pattern. */
static bool take(Reader *rd, const Names *names, const Node *n, bool *taken)
{
    const char *text = scalar_text(rd, n, names->what);
    if (!text) return false;
    const int exact = names_find(names, text);
    if (exact >= 0) taken[exact] = true;
    if (exact >= 0) return true;
    if (!strpbrk(text, "*?")) {
        unknown(rd, names, text, n->mark);
        return false;
    }
    bool any = false;
    for (int i = 0; i < names->n; i++)
        if (matches(text, names->name[i])) any = taken[i] = true;
    if (!any) FAULT(rd, n->mark, "No %s matches `%s`.", names->what, text);
    return any;
}

bool names_list(Reader *rd, const Names *names, const Node *n, int *count, const int **index)
{
    bool good = true;
    *count = 0;
    if (!names->what) return false;
    bool *taken = arena_take(rd->cx, &rd->cx->tmp, (size_t)names->n, sizeof *taken);
    if (!taken) return false;
    if (n->kind == NODE_MAP || (n->kind == NODE_LIST && n->count == 0)) {
        FAULT(rd, n->mark, "Name a %s here, or a list of them.", names->what);
        return false;
    }
    if (n->kind == NODE_SCALAR) good = take(rd, names, n, taken);
    for (const Node *c = n->first; c; c = c->next) good &= take(rd, names, c, taken);
    int total = 0;
    for (int i = 0; i < names->n; i++) total += taken[i];
    int *list = arena_take(rd->cx, &rd->cx->keep, (size_t)total, sizeof *list);
    if (!list) return false;
    for (int i = 0; i < names->n; i++)
        if (taken[i]) list[(*count)++] = i;
    *index = list;
    return good;
}
