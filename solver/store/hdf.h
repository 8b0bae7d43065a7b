/* hdf.h - HDF5 as this program needs it: a file in memory, datasets and attributes described by a row.
 * Every error becomes E_IO with one line; HDF5 itself prints nothing.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef STORE_HDF_H
#define STORE_HDF_H

#include <hdf5.h>

#include "core/core.h"
#include "store/schema.h"

enum {
    MAX_RANK = ROW_DIMS + 1,
    PATH_SIZE = 256,
    MOST_PACKED = 1100 /* no packing makes more than this many bytes of one */
};

typedef struct Store {
    EfContext *cx;
    const char *name; /* of the file, for messages */
    char key[40];     /* what HDF5 knows it by: no file can be called so */
    hid_t file;
    size_t file_size;
    int n[COUNTERS];        /* n[-NJ] and so on; -1 not yet known */
    hid_t scale[COUNTERS];  /* datasets of names that label an extent; 0 none */
    H5E_auto2_t old_print;  /* the caller's error printing, given back at the end */
    void *old_print_data;
} Store;

/* Extents of a dataset; `counter` says which counter each of them is (0: none). */
typedef struct Shape {
    int rank;
    hsize_t at[MAX_RANK];
    int counter[MAX_RANK];
} Shape;

/* Product of the extents from number `from` on; SIZE_MAX when it does not fit. */
size_t shape_size(const Shape *shape, int from);

/* A new file in memory. Follow with hdf_close, also after a failure. */
EfStatus hdf_create(EfContext *cx, const char *name, Store *s);
/* The n bytes of a file, opened for reading; they must outlive the store. */
EfStatus hdf_open(EfContext *cx, const char *name, const void *bytes, size_t n, Store *s);
/* The bytes of the file in the tmp arena, with room for `more` behind them. */
EfStatus hdf_image(Store *s, size_t more, unsigned char **bytes, size_t *n);
void hdf_close(Store *s);

/* prefix/path, or only one of them when the other is "". */
EfStatus hdf_path(Store *s, const char *prefix, const char *path, char out[PATH_SIZE]);

/* The "@x" a path of an attribute ends in; NULL: a dataset. `group` becomes the path of what it belongs to. */
const char *hdf_attribute(const char *path, char group[PATH_SIZE]);

/* Bytes of a value in memory. */
size_t value_size(ValueType type);

/* Writes values (as they lie in the structs) to a new dataset or attribute; makes the groups above it. */
EfStatus hdf_put(Store *s, const char *path, const Row *row, const Shape *shape, const void *values);
/* A soft link at `path` to `target`. */
EfStatus hdf_link(Store *s, const char *path, const char *target);
/* A dataset without units, for other programs; `type` as stored and in memory. */
EfStatus hdf_put_plain(Store *s, const char *path, hid_t type, const Shape *shape, const void *values);
/* An attribute of a group made before. */
EfStatus hdf_put_attribute(Store *s, const char *group, const char *name, hid_t type, const Shape *shape, const void *values);

/* Extents as the file has them. Their product is no larger than the file can hold. */
EfStatus hdf_shape(Store *s, const char *path, const Row *row, Shape *shape);
/* Reads values of just this shape; text is put into the keep arena. */
EfStatus hdf_get(Store *s, const char *path, const Row *row, const Shape *shape, void *values);

#endif
