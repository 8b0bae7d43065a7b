/* put.c - datasets, attributes, groups and links into a file in memory.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <hdf5_hl.h>
#include <string.h>

#include "store/values.h"

/* Datasets of a page or more are packed in pieces of at most this many values. */
enum { PACK_FROM = 1 << 14, PIECE_VALUES = 6 << 14, PACK_LEVEL = 1 };

static EfStatus bad_put(Store *s, const char *path)
{
    return fail(s->cx, EF_E_IO, "%s: HDF5 cannot write %s", s->name, path);
}

/* Makes the groups above the last part of a path that are not there yet, one by one and without times. */
static EfStatus make_groups(Store *s, const char *path)
{
    char part[PATH_SIZE];
    const hid_t make = H5Pcreate(H5P_GROUP_CREATE);
    bool ok = make >= 0 && H5Pset_obj_track_times(make, false) >= 0;
    for (const char *slash = strchr(path, '/'); ok && slash; slash = strchr(slash + 1, '/')) {
        const size_t length = (size_t)(slash - path);
        memcpy(part, path, length);
        part[length] = 0;
        const htri_t there = H5Lexists(s->file, part, H5P_DEFAULT);
        if (there > 0) continue;
        const hid_t group = there < 0 ? -1 : H5Gcreate2(s->file, part, H5P_DEFAULT, make, H5P_DEFAULT);
        ok = group >= 0 && H5Gclose(group) >= 0;
    }
    if (make >= 0) H5Pclose(make);
    return ok ? EF_OK : bad_put(s, path);
}

/* Pieces of at most PIECE_VALUES: leading extents go one by one, the first that fits is split evenly. */
static void piece_of(const Shape *shape, hsize_t piece[MAX_RANK])
{
    bool split = false;
    for (int i = 0; i < shape->rank; i++) {
        const hsize_t behind = shape_size(shape, i + 1), most = behind > PIECE_VALUES ? 1 : PIECE_VALUES / behind;
        const hsize_t pieces = (shape->at[i] + most - 1) / most;
        piece[i] = split ? shape->at[i] : (shape->at[i] + pieces - 1) / pieces;
        split = split || most > 1;
    }
}

static hid_t dataset_list(const Shape *shape, size_t each)
{
    const hid_t list = H5Pcreate(H5P_DATASET_CREATE);
    if (list < 0) return -1;
    bool ok = H5Pset_obj_track_times(list, false) >= 0 && H5Pset_fill_time(list, H5D_FILL_TIME_NEVER) >= 0;
    const size_t n = shape_size(shape, 0);
    if (ok && shape->rank > 0 && n >= PACK_FROM / each && n > 0) {
        hsize_t piece[MAX_RANK];
        piece_of(shape, piece);
        ok = H5Pset_chunk(list, shape->rank, piece) >= 0 && H5Pset_shuffle(list) >= 0 && H5Pset_deflate(list, PACK_LEVEL) >= 0;
    }
    if (ok) return list;
    H5Pclose(list);
    return -1;
}

static hid_t space_of(const Shape *shape)
{
    return shape->rank == 0 ? H5Screate(H5S_SCALAR) : H5Screate_simple(shape->rank, shape->at, NULL);
}

/* A new dataset with its values, open; -1 on failure. */
static hid_t new_dataset(Store *s, const char *path, hid_t type, const Shape *shape, const void *values)
{
    const hid_t space = space_of(shape), list = dataset_list(shape, H5Tget_size(type));
    hid_t d = -1;
    if (space >= 0 && list >= 0) d = H5Dcreate2(s->file, path, type, space, H5P_DEFAULT, list, H5P_DEFAULT);
    if (d >= 0 && shape_size(shape, 0) > 0 && H5Dwrite(d, type, H5S_ALL, H5S_ALL, H5P_DEFAULT, values) < 0) {
        H5Dclose(d);
        d = -1;
    }
    if (space >= 0) H5Sclose(space);
    if (list >= 0) H5Pclose(list);
    return d;
}

static bool new_attribute(hid_t object, const char *name, hid_t type, const Shape *shape, const void *values)
{
    const hid_t space = space_of(shape);
    const hid_t a = space < 0 ? -1 : H5Acreate2(object, name, type, space, H5P_DEFAULT, H5P_DEFAULT);
    const bool ok = a >= 0 && H5Awrite(a, type, values) >= 0;
    if (a >= 0) H5Aclose(a);
    if (space >= 0) H5Sclose(space);
    return ok;
}

static bool text_attribute(Store *s, hid_t object, const char *name, const char *text)
{
    static const Row row = {.type = T_TEXT};
    static const Shape one = {0};
    hid_t type;
    const void *bytes;
    if (values_encode(s, name, &row, 1, &text, &type, &bytes) != EF_OK) return false;
    const bool ok = new_attribute(object, name, type, &one, bytes);
    H5Tclose(type);
    return ok;
}

/* What an extent runs over; NULL: nothing worth a label. */
static const char *label_of(int counter)
{
    return counter == NJ ? "joint" : counter == NT ? "tube" : counter == NM ? "shape" : counter == NP ? "point" : NULL;
}

/* Units, explanation, and what the extents run over. Datasets of the frame are tied to the names of joints and tubes;
 * those of the cases are not, for HDF5 writes the list of all ties anew at each one. */
static bool describe(Store *s, hid_t d, const char *path, const Row *row, const Shape *shape)
{
    if (!text_attribute(s, d, "units", row->unit) || !text_attribute(s, d, "about", row->help)) return false;
    const bool tie = strncmp(path, "frame/", 6) == 0;
    for (int i = 0; i < shape->rank; i++) {
        if (shape->counter[i] == 0) continue;
        const char *label = label_of(shape->counter[i]);
        const hid_t scale = s->scale[-shape->counter[i]];
        if (label && H5DSset_label(d, (unsigned)i, label) < 0) return false;
        if (tie && scale > 0 && H5DSattach_scale(d, scale, (unsigned)i) < 0) return false;
    }
    return true;
}

/* The names of joints and tubes label the extents of all that follows. */
static bool is_scale(const char *path, int *counter)
{
    *counter = strcmp(path, "frame/joints/name") == 0 ? NJ : strcmp(path, "frame/tubes/name") == 0 ? NT : 0;
    return *counter != 0;
}

static EfStatus put_dataset(Store *s, const char *path, const Row *row, hid_t type, const Shape *shape, const void *bytes)
{
    int counter;
    const hid_t d = new_dataset(s, path, type, shape, bytes);
    bool ok = d >= 0 && describe(s, d, path, row, shape);
    if (ok && is_scale(path, &counter)) {
        ok = H5DSset_scale(d, row->help) >= 0;
        s->scale[-counter] = d; /* stays open; closed with the file */
    } else if (d >= 0) ok = H5Dclose(d) >= 0 && ok;
    return ok ? EF_OK : bad_put(s, path);
}

EfStatus hdf_put_attribute(Store *s, const char *group, const char *name, hid_t type, const Shape *shape, const void *values)
{
    const hid_t object = H5Oopen(s->file, group, H5P_DEFAULT);
    bool ok = object >= 0 && new_attribute(object, name, type, shape, values);
    if (object >= 0) ok = H5Oclose(object) >= 0 && ok;
    return ok ? EF_OK : bad_put(s, name);
}

EfStatus hdf_put(Store *s, const char *path, const Row *row, const Shape *shape, const void *values)
{
    const ArenaMark mark = arena_mark(&s->cx->tmp);
    hid_t type;
    const void *bytes;
    TRY(make_groups(s, path));
    TRY(values_encode(s, path, row, shape_size(shape, 0), values, &type, &bytes));
    char group[PATH_SIZE];
    const char *at = hdf_attribute(path, group);
    const EfStatus st = at ? hdf_put_attribute(s, group, at + 1, type, shape, bytes)
                           : put_dataset(s, path, row, type, shape, bytes);
    H5Tclose(type);
    arena_rewind(&s->cx->tmp, mark);
    return st;
}

EfStatus hdf_put_plain(Store *s, const char *path, hid_t type, const Shape *shape, const void *values)
{
    TRY(make_groups(s, path));
    const hid_t d = new_dataset(s, path, type, shape, values);
    return d >= 0 && H5Dclose(d) >= 0 ? EF_OK : bad_put(s, path);
}

EfStatus hdf_link(Store *s, const char *path, const char *target)
{
    TRY(make_groups(s, path));
    return H5Lcreate_soft(target, s->file, path, H5P_DEFAULT, H5P_DEFAULT) >= 0 ? EF_OK : bad_put(s, path);
}
