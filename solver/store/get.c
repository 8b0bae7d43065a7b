/* get.c - datasets and attributes out of a file, with every size checked before memory is taken for it.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <limits.h>
#include <string.h>

#include "store/values.h"

/* A dataset or attribute, open. */
typedef struct Thing {
    hid_t id, type, space;
    bool attribute;
} Thing;

static void thing_close(Thing *t)
{
    if (t->space >= 0) H5Sclose(t->space);
    if (t->type >= 0) H5Tclose(t->type);
    if (t->id >= 0 && t->attribute) H5Aclose(t->id);
    if (t->id >= 0 && !t->attribute) H5Dclose(t->id);
}

static EfStatus thing_open(Store *s, const char *path, const Row *row, Thing *t)
{
    char group[PATH_SIZE];
    const char *at = hdf_attribute(path, group);
    *t = (Thing){.id = -1, .type = -1, .space = -1, .attribute = at != NULL};
    t->id = at ? H5Aopen_by_name(s->file, group, at + 1, H5P_DEFAULT, H5P_DEFAULT) : H5Dopen2(s->file, path, H5P_DEFAULT);
    if (t->id < 0) return fail(s->cx, EF_E_IO, "%s: %s is missing: written by another version, or damaged", s->name, path);
    t->type = at ? H5Aget_type(t->id) : H5Dget_type(t->id);
    t->space = at ? H5Aget_space(t->id) : H5Dget_space(t->id);
    if (t->type >= 0 && t->space >= 0 && values_fit(t->type, row->type)) return EF_OK;
    return fail(s->cx, EF_E_IO, "%s: damaged: %s has the wrong type", s->name, path);
}

/* Extents that fit an int, and no more bytes than the stored ones can unpack to. */
static EfStatus thing_shape(Store *s, const char *path, const Thing *t, Shape *shape)
{
    *shape = (Shape){0};
    const int rank = H5Sget_simple_extent_ndims(t->space);
    if (rank < 0 || rank > MAX_RANK) return fail(s->cx, EF_E_IO, "%s: damaged: %s has the wrong extents", s->name, path);
    shape->rank = H5Sget_simple_extent_dims(t->space, shape->at, NULL);
    bool ok = shape->rank == rank && H5Sget_simple_extent_type(t->space) != H5S_NULL;
    for (int i = 0; i < rank; i++) ok = ok && shape->at[i] <= INT_MAX;
    const hsize_t stored = t->attribute ? H5Aget_storage_size(t->id) : H5Dget_storage_size(t->id);
    const size_t n = shape_size(shape, 0), each = H5Tget_size(t->type);
    ok = ok && each > 0 && stored <= s->file_size && n <= (size_t)stored * MOST_PACKED / each;
    return ok ? EF_OK : fail(s->cx, EF_E_IO, "%s: damaged: %s has the wrong extents", s->name, path);
}

EfStatus hdf_shape(Store *s, const char *path, const Row *row, Shape *shape)
{
    Thing t;
    EfStatus st = thing_open(s, path, row, &t);
    if (st == EF_OK) st = thing_shape(s, path, &t, shape);
    thing_close(&t);
    return st;
}

static EfStatus thing_read(Store *s, const char *path, const Row *row, const Thing *t, const Shape *shape, void *values)
{
    const size_t n = shape_size(shape, 0);
    const hid_t type = values_read_type(t->type, row->type);
    const size_t each = type < 0 ? 0 : H5Tget_size(type);
    unsigned char *bytes = each == 0 ? NULL : arena_take(s->cx, &s->cx->tmp, n, each);
    herr_t got = 0;
    if (bytes && n > 0) got = t->attribute ? H5Aread(t->id, type, bytes) : H5Dread(t->id, type, H5S_ALL, H5S_ALL, H5P_DEFAULT, bytes);
    if (type >= 0) H5Tclose(type);
    if (!bytes && s->cx->status != EF_OK) return s->cx->status;
    if (!bytes || got < 0) return fail(s->cx, EF_E_IO, "%s: damaged: %s cannot be read", s->name, path);
    return values_decode(s, path, row, n, bytes, each, values);
}

EfStatus hdf_get(Store *s, const char *path, const Row *row, const Shape *want, void *values)
{
    const ArenaMark mark = arena_mark(&s->cx->tmp);
    Thing t;
    Shape is;
    EfStatus st = thing_open(s, path, row, &t);
    if (st == EF_OK) st = thing_shape(s, path, &t, &is);
    if (st == EF_OK && (is.rank != want->rank || memcmp(is.at, want->at, sizeof is.at) != 0))
        st = fail(s->cx, EF_E_IO, "%s: damaged: %s has the wrong extents", s->name, path);
    if (st == EF_OK) st = thing_read(s, path, row, &t, want, values);
    thing_close(&t);
    arena_rewind(&s->cx->tmp, mark);
    return st;
}
