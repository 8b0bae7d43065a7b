/* values.h - values between structs and HDF5: types, text of fixed length, words.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef STORE_VALUES_H
#define STORE_VALUES_H

#include "store/hdf.h"

/* n values as the file takes them: `type` (the caller closes it) and bytes, in place or in the tmp arena. */
EfStatus values_encode(Store *s, const char *path, const Row *row, size_t n, const void *values, hid_t *type, const void **bytes);

/* Whether a type in a file can be read as the row says. */
bool values_fit(hid_t type, ValueType wanted);

/* The type in memory to read into; the caller closes it. */
hid_t values_read_type(hid_t in_file, ValueType wanted);

/* Bytes read as values_read_type to values; text goes into the keep arena, whole numbers are checked. */
EfStatus values_decode(Store *s, const char *path, const Row *row, size_t n, const void *bytes, size_t each, void *values);

#endif
