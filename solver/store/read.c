/* read.c - datasets to structs, row by row. The first dataset with an extent that is not yet known says how long it
 * is, all others must agree.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <limits.h>
#include <stdio.h>
#include <string.h>

#include "store/store.h"

static void set_pointer(const Items *items, int i, size_t offset, const void *p)
{
    memcpy(items->base + (size_t)i * items->stride + offset, &p, sizeof p);
}

static EfStatus read_in(Store *s, const char *path, const Row *row, const Items *items)
{
    const ArenaMark mark = arena_mark(&s->cx->tmp);
    const Shape shape = row_shape(s, row, items);
    const size_t each = shape_size(&shape, items->counter != 0) * value_size(row->type);
    char *flat;
    ALLOC(s->cx, tmp, flat, (size_t)items->n * each);
    TRY(hdf_get(s, path, row, &shape, flat));
    for (int i = 0; i < items->n; i++) memcpy(items->base + (size_t)i * items->stride + row->offset, flat + (size_t)i * each, each);
    arena_rewind(&s->cx->tmp, mark);
    return EF_OK;
}

/* Extents of a dataset of the one struct; counters not known before are now. */
static EfStatus settle(Store *s, const char *path, const Row *row, const Items *items, Shape *shape)
{
    Shape is;
    TRY(hdf_shape(s, path, row, &is));
    for (int i = 0; i < ROW_DIMS && i < is.rank; i++)
        if (row->dim[i] < 0 && s->n[-row->dim[i]] < 0) s->n[-row->dim[i]] = (int)is.at[i];
    *shape = row_shape(s, row, items);
    return memcmp(is.at, shape->at, sizeof is.at) == 0 && is.rank == shape->rank ? EF_OK
         : fail(s->cx, EF_E_IO, "%s: damaged: %s has the wrong extents", s->name, path);
}

static EfStatus read_at(Store *s, const char *path, const Row *row, const Items *items)
{
    Shape shape;
    TRY(settle(s, path, row, items, &shape));
    char *values;
    ALLOC(s->cx, keep, values, shape_size(&shape, 0) * value_size(row->type));
    set_pointer(items, 0, row->offset, values);
    return hdf_get(s, path, row, &shape, values);
}

/* The first extent must be known; memory is taken when each piece is known to be there. */
static EfStatus read_pieces(Store *s, const char *path, const Row *row, const Items *items)
{
    char *values = NULL;
    Row one = *row;
    Shape shape = {0};
    const int n = s->n[-row->dim[0]];
    memcpy(one.dim, row->dim + 1, sizeof one.dim - sizeof *one.dim);
    for (int pass = 0; pass < 2; pass++) {
        if (n > 0 && shape_size(&shape, 0) > s->file_size * MOST_PACKED / (size_t)n)
            return fail(s->cx, EF_E_IO, "%s: damaged: %s is too large", s->name, path);
        if (pass == 1) ALLOC(s->cx, keep, values, (size_t)n * shape_size(&shape, 0) * value_size(row->type));
        for (int i = 0; i < n; i++) {
            char name[16], full[PATH_SIZE];
            snprintf(name, sizeof name, "%d", i + 1);
            TRY(hdf_path(s, path, name, full));
            if (pass == 0) TRY(settle(s, full, &one, items, &shape));
            else TRY(hdf_get(s, full, &one, &shape, values + (size_t)i * shape_size(&shape, 0) * value_size(row->type)));
        }
    }
    set_pointer(items, 0, row->offset, values);
    return EF_OK;
}

/* Entries of all structs together, by the counts read before (none is negative). */
static EfStatus count_all(Store *s, const char *path, const Row *row, const Items *items, int *n)
{
    long long total = 0;
    for (int i = 0; i < items->n; i++) total += item_int(items, i, row->count);
    *n = total > INT_MAX ? 0 : (int)total;
    return total > INT_MAX ? fail(s->cx, EF_E_IO, "%s: damaged: %s has too many entries", s->name, path) : EF_OK;
}

/* How many structs a list in the file has: the length of its first dataset. */
static EfStatus list_length(Store *s, const char *path, const Table *table, int *n)
{
    char first[PATH_SIZE];
    Shape shape;
    TRY(hdf_path(s, path, table->row[0].path, first));
    TRY(hdf_shape(s, first, &table->row[0], &shape));
    if (shape.rank < 1) return fail(s->cx, EF_E_IO, "%s: damaged: %s has the wrong extents", s->name, first);
    *n = (int)shape.at[0];
    return EF_OK;
}

static EfStatus read_structs(Store *s, const char *path, const Row *row, int n, char **base)
{
    int length;
    TRY(list_length(s, path, row->table, &length));
    if (n >= 0 && length != n) return fail(s->cx, EF_E_IO, "%s: damaged: %s has the wrong length", s->name, path);
    s->n[-row->dim[0]] = length;
    ALLOC(s->cx, keep, *base, (size_t)length * row->table->size);
    const Items list = {.base = *base, .stride = row->table->size, .n = length, .counter = row->dim[0]};
    return read_table(s, path, row->table, &list);
}

static EfStatus read_ragged(Store *s, const char *path, const Row *row, const Items *items)
{
    int n;
    char *all;
    const size_t each = row->table ? row->table->size : value_size(row->type);
    TRY(count_all(s, path, row, items, &n));
    if (row->table) TRY(read_structs(s, path, row, n, &all));
    else {
        Shape shape;
        TRY(hdf_shape(s, path, row, &shape)); /* as long as the file can hold, before memory is taken */
        if (shape.rank != 1 || shape.at[0] != (hsize_t)n)
            return fail(s->cx, EF_E_IO, "%s: damaged: %s has the wrong extents", s->name, path);
        ALLOC(s->cx, keep, all, (size_t)n * each);
        TRY(hdf_get(s, path, row, &shape, all));
    }
    for (int i = 0; i < items->n; i++) {
        set_pointer(items, i, row->offset, all);
        all += (size_t)item_int(items, i, row->count) * each;
    }
    return EF_OK;
}

static EfStatus read_list(Store *s, const char *path, const Row *row, const Items *items)
{
    char *base;
    TRY(read_structs(s, path, row, -1, &base));
    set_pointer(items, 0, row->offset, base);
    return EF_OK;
}

/* The structs and their names are there already. */
static EfStatus read_named(Store *s, const char *path, const Row *row, const Items *items)
{
    char *base = item_pointer(items, 0, row->offset);
    for (int i = 0; i < s->n[-row->dim[0]]; i++) {
        char full[PATH_SIZE];
        const Items one = {.base = base + (size_t)i * row->table->size, .n = 1};
        const char *name = item_pointer(&one, 0, row->count);
        TRY(check_group_name(s, name));
        TRY(hdf_path(s, path, name, full));
        TRY(read_table(s, full, row->table, &one));
    }
    return EF_OK;
}

static EfStatus read_row(Store *s, const char *prefix, const Row *row, const Items *items)
{
    char path[PATH_SIZE];
    if (row->kind == ROW_COUNT) return EF_OK;
    TRY(hdf_path(s, prefix, row->path, path));
    switch (row->kind) {
    case ROW_IN: return read_in(s, path, row, items);
    case ROW_AT: return read_at(s, path, row, items);
    case ROW_PIECES: return read_pieces(s, path, row, items);
    case ROW_RAGGED: case ROW_RAGGED_LIST: return read_ragged(s, path, row, items);
    case ROW_LIST: return read_list(s, path, row, items);
    case ROW_NAMED: return read_named(s, path, row, items);
    case ROW_GROUP: return read_table(s, path, row->table, &(Items){.base = items->base + row->offset, .n = 1});
    case ROW_COUNT: break;
    }
    return EF_OK;
}

EfStatus read_table(Store *s, const char *prefix, const Table *table, const Items *items)
{
    for (int i = 0; i < table->nrow; i++)
        if (table->row[i].kind == ROW_COUNT) s->n[-table->row[i].dim[0]] = -1;
    for (int i = 0; i < table->nrow; i++) TRY(read_row(s, prefix, &table->row[i], items));
    for (int i = 0; i < table->nrow; i++) {
        const Row *row = &table->row[i];
        if (row->kind == ROW_COUNT) memcpy(items->base + row->offset, &s->n[-row->dim[0]], sizeof(int));
    }
    return EF_OK;
}
