/* schema.h - what stands in a results file: one row a dataset or attribute, used to write and to read it.
 * A new field of the frame or the results is one row in schema_frame.c or schema_results.c.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef STORE_SCHEMA_H
#define STORE_SCHEMA_H

#include <stddef.h>

/* Extents: positive numbers are fixed, these are counted. 0 ends a list of extents. */
enum {
    NJ = -1, NT = -2, NP = -3, NM = -4, NMATERIAL = -5, NSIZE = -6, NGUY = -7, NSUPPORT = -8, NEQUIPMENT = -9, NCASE = -10,
    NCOMBINATION = -11, NHAND = -12, NRESULT = -13, NREACTION = -14, NMARGIN = -15, NLEDGER = -16, NCAUTION = -17,
    NDEFAULT = -18, NNOT_CHECKED = -19, NSOURCE = -20, NDRAFT = -21, NLOAD = -22,
    NRUN = -23, /* cases and combinations; only a limit of indices */
    COUNTERS = 24
};

typedef enum RowKind {
    ROW_COUNT,       /* int: the counter dim[0] */
    ROW_IN,          /* value or array of fixed extents inside the struct */
    ROW_AT,          /* pointer to an array of dim */
    ROW_PIECES,      /* the same, one dataset (named 1, 2, ..) for each of the first extent */
    ROW_RAGGED,      /* pointer to as many values as the int at `count` says; all one after the other in the file */
    ROW_LIST,        /* pointer to dim[0] structs of `table`: a dataset for each field */
    ROW_RAGGED_LIST, /* pointer to as many structs as the int at `count` says, likewise */
    ROW_GROUP,       /* a struct of `table` inside the struct */
    ROW_NAMED        /* pointer to dim[0] structs of `table`: a group for each, called by the name at `count` */
} RowKind;

/* double, int or unsigned, bool, text, text or NULL (stored as ""), char[65], and int stored as one of `words`. */
typedef enum ValueType { T_DOUBLE, T_INT, T_BOOL, T_TEXT, T_NAME, T_HASH, T_WORD } ValueType;

enum { ROW_DIMS = 4, HASH_SIZE = 65 };

typedef struct Table Table;
typedef struct Row {
    const char *path; /* under the group of the table; a last part "@x" is the attribute x */
    RowKind kind;
    ValueType type;
    int dim[ROW_DIMS];
    size_t offset, count;
    const char *unit, *help;
    int least, below;         /* ints: least <= value < below; below 0: no limit, < 0: that counter */
    const char *const *words; /* T_WORD: the word of each value, then NULL */
    const Table *table;
} Row;

struct Table {
    size_t size; /* of the struct */
    int nrow;
    const Row *row;
};

extern const Table frame_table;   /* of EfFrame */
extern const Table results_table; /* of EfResults */

extern const char *const level_words[];

#define ROWS(S, rows) {sizeof(S), (int)(sizeof(rows) / sizeof *(rows)), (rows)}
#define COUNT(S, field, counter) {.kind = ROW_COUNT, .type = T_INT, .offset = offsetof(S, field), .dim = {counter}}
/* The last arguments: help, then further members as initialisers. */
#define IN(path_, S, field, type_, unit_, ...) \
    {.path = path_, .kind = ROW_IN, .type = type_, .offset = offsetof(S, field), .unit = unit_, .help = __VA_ARGS__}
#define AT(path_, S, field, type_, unit_, ...) \
    {.path = path_, .kind = ROW_AT, .type = type_, .offset = offsetof(S, field), .unit = unit_, .help = __VA_ARGS__}
#define RAGGED(path_, S, field, counted, type_, ...) \
    {.path = path_, .kind = ROW_RAGGED, .type = type_, .offset = offsetof(S, field), .count = offsetof(S, counted), \
     .unit = "1", .help = __VA_ARGS__}
#define LIST(path_, S, field, counter, table_) \
    {.path = path_, .kind = ROW_LIST, .offset = offsetof(S, field), .dim = {counter}, .table = &(table_)}
#define GROUP(path_, S, field, table_) {.path = path_, .kind = ROW_GROUP, .offset = offsetof(S, field), .table = &(table_)}

#endif
