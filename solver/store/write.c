/* write.c - structs to datasets, row by row.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <limits.h>
#include <stdio.h>
#include <string.h>

#include "store/store.h"

/* A value of every struct, gathered into one array. */
static EfStatus write_in(Store *s, const char *path, const Row *row, const Items *items)
{
    const Shape shape = row_shape(s, row, items);
    const size_t each = shape_size(&shape, items->counter != 0) * value_size(row->type);
    char *flat;
    ALLOC(s->cx, tmp, flat, (size_t)items->n * each);
    for (int i = 0; i < items->n; i++) memcpy(flat + (size_t)i * each, items->base + (size_t)i * items->stride + row->offset, each);
    return hdf_put(s, path, row, &shape, flat);
}

/* An array of the one struct; missing where there should be values is a fault of the program, not of the user. */
static EfStatus write_at(Store *s, const char *path, const Row *row, const Items *items)
{
    const Shape shape = row_shape(s, row, items);
    const char *values = item_pointer(items, 0, row->offset);
    if (!values && shape_size(&shape, 0) > 0) return fail(s->cx, EF_E_IO, "%s: the results lack %s", s->name, path);
    if (row->kind == ROW_AT) return hdf_put(s, path, row, &shape, values);
    Shape piece = {.rank = shape.rank - 1};
    memcpy(piece.at, shape.at + 1, (size_t)piece.rank * sizeof *piece.at);
    memcpy(piece.counter, shape.counter + 1, (size_t)piece.rank * sizeof *piece.counter);
    for (int i = 0; i < (int)shape.at[0]; i++) {
        char name[16], full[PATH_SIZE];
        snprintf(name, sizeof name, "%d", i + 1);
        TRY(hdf_path(s, path, name, full));
        TRY(hdf_put(s, full, row, &piece, values + (size_t)i * shape_size(&piece, 0) * value_size(row->type)));
    }
    return EF_OK;
}

/* The arrays of all structs one after the other, of values or structs of `each` bytes. */
static EfStatus flatten(Store *s, const char *path, const Row *row, const Items *items, size_t each, char **flat, int *n)
{
    long long total = 0;
    for (int i = 0; i < items->n; i++) total += item_int(items, i, row->count);
    if (total > INT_MAX) return fail(s->cx, EF_E_IO, "%s: %s has too many entries", s->name, path);
    *n = (int)total;
    ALLOC(s->cx, tmp, *flat, (size_t)total * each);
    char *at = *flat;
    for (int i = 0; i < items->n; i++) {
        const size_t bytes = (size_t)item_int(items, i, row->count) * each;
        if (bytes > 0) memcpy(at, item_pointer(items, i, row->offset), bytes);
        at += bytes;
    }
    return EF_OK;
}

static EfStatus write_ragged(Store *s, const char *path, const Row *row, const Items *items)
{
    char *flat = NULL;
    int n = 0;
    const size_t each = row->table ? row->table->size : value_size(row->type);
    TRY(flatten(s, path, row, items, each, &flat, &n));
    if (!row->table) return hdf_put(s, path, row, &(Shape){.rank = 1, .at = {(hsize_t)n}}, flat);
    const Items all = {.base = flat, .stride = each, .n = n, .counter = row->dim[0]};
    return write_table(s, path, row->table, &all);
}

static EfStatus write_list(Store *s, const char *path, const Row *row, const Items *items)
{
    const Items list = {.base = item_pointer(items, 0, row->offset), .n = s->n[-row->dim[0]], .counter = row->dim[0],
                        .stride = row->table->size};
    if (!list.base && list.n > 0) return fail(s->cx, EF_E_IO, "%s: the results lack %s", s->name, path);
    if (row->kind == ROW_LIST) return write_table(s, path, row->table, &list);
    for (int i = 0; i < list.n; i++) {
        char full[PATH_SIZE];
        const Items one = {.base = list.base + (size_t)i * list.stride, .n = 1};
        const char *name = item_pointer(&one, 0, row->count);
        TRY(check_group_name(s, name));
        TRY(hdf_path(s, path, name, full));
        TRY(write_table(s, full, row->table, &one));
    }
    return EF_OK;
}

static EfStatus write_row(Store *s, const char *prefix, const Row *row, const Items *items)
{
    char path[PATH_SIZE];
    if (row->kind == ROW_COUNT) {
        s->n[-row->dim[0]] = item_int(items, 0, row->offset);
        return EF_OK;
    }
    TRY(hdf_path(s, prefix, row->path, path));
    switch (row->kind) {
    case ROW_IN: return write_in(s, path, row, items);
    case ROW_AT: case ROW_PIECES: return write_at(s, path, row, items);
    case ROW_RAGGED: case ROW_RAGGED_LIST: return write_ragged(s, path, row, items);
    case ROW_LIST: case ROW_NAMED: return write_list(s, path, row, items);
    case ROW_GROUP: return write_table(s, path, row->table, &(Items){.base = items->base + row->offset, .n = 1});
    case ROW_COUNT: break;
    }
    return EF_OK;
}

EfStatus write_table(Store *s, const char *prefix, const Table *table, const Items *items)
{
    const ArenaMark mark = arena_mark(&s->cx->tmp);
    for (int i = 0; i < table->nrow; i++) TRY(write_row(s, prefix, &table->row[i], items));
    arena_rewind(&s->cx->tmp, mark);
    return EF_OK;
}
