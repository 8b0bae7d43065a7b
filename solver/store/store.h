/* store.h - results to and from an HDF5 file in memory, and the seal that tells a whole file from a damaged one.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef STORE_STORE_H
#define STORE_STORE_H

#include "endfix/results.h"
#include "store/hdf.h"

enum { STORE_LAYOUT = 1 }; /* changes when an old program could not read the file */

/* Behind the HDF5 file stand 8 letters and a check sum of all before it; HDF5 does not look behind its end. A damaged
 * file is so found before HDF5 sees it. */
enum { SEAL_SIZE = 16 };

/* The whole file in the tmp arena. `name` stands for it in messages. */
EfStatus store_pack(EfContext *cx, const char *name, const EfResults *results, unsigned char **bytes, size_t *n);
/* Results out of a whole file. */
EfStatus store_unpack(EfContext *cx, const char *name, const unsigned char *bytes, size_t n, EfResults **results);

/* Writes the seal of the n bytes behind them. */
void store_seal(unsigned char *bytes, size_t n);

/* A struct or a list of structs, as the tables see it. */
typedef struct Items {
    char *base;
    size_t stride;
    int n;
    int counter; /* of the list; 0: one struct, whose values have no leading extent */
} Items;

EfStatus write_table(Store *s, const char *prefix, const Table *table, const Items *items);
EfStatus read_table(Store *s, const char *prefix, const Table *table, const Items *items);

/* Names and section values of every tube, the lines for general viewers: written, never read back. */
EfStatus write_views(Store *s, const EfResults *results);

/* The pointer that stands at an offset of the i-th struct. */
char *item_pointer(const Items *items, int i, size_t offset);
int item_int(const Items *items, int i, size_t offset);

/* Extents of a row as far as the counters are known: those of the items, then its own. */
Shape row_shape(const Store *s, const Row *row, const Items *items);

/* A name that can be a group: not empty, no slash, not "." or "..". */
EfStatus check_group_name(Store *s, const char *name);

#endif
