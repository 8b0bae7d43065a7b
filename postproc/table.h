/* table.h - tables with units and notes, and their writers. Built from results only.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef POSTPROC_TABLE_H
#define POSTPROC_TABLE_H

#include <stdio.h>

#include "core/core.h"
#include "endfix/results.h"

/* What a column holds; its unit follows from the unit system. */
typedef enum Quantity { Q_TEXT, Q_COUNT, Q_NUMBER, Q_LENGTH, Q_FORCE, Q_MASS, Q_MOMENT, Q_ACCELERATION, QUANTITIES } Quantity;

typedef struct Column {
    const char *heading;
    Quantity quantity;
} Column;

/* Text, or a number in SI; NaN is shown blank. */
typedef struct Cell {
    const char *text;
    double number;
} Cell;

enum { MAX_COLUMNS = 16 };

typedef struct Table {
    const char *title;
    int ncolumn, nrow, room;
    Column column[MAX_COLUMNS];
    Cell *cell; /* [nrow][ncolumn] */
} Table;

/* What is written: head lines, tables, notes, foot lines. */
typedef struct Document {
    int nhead, ntable, nfoot;
    const char *head[4], *foot[4];
    Table table[4];
    const EfNotes *notes;
} Document;

/* Which rows are wanted: NULL: all. `tube` is a pattern with * and ?. */
typedef struct Filter {
    const char *case_name, *tube;
} Filter;

typedef enum UnitSystem { UNITS_SI, UNITS_INCH } UnitSystem;

/* "mm", "kN", ... ; "" for plain numbers. */
const char *unit_label(UnitSystem units, Quantity q);
double unit_shown(UnitSystem units, Quantity q, double si);

/* ---- making ---------------------------------------------------------------------------------------------------------- */

/* A table with `ncolumn` columns and no rows. */
void table_start(Table *t, const char *title, int ncolumn, const Column *columns);
/* A new row of ncolumn cells; NULL: out of memory. */
EfStatus table_row(EfContext *cx, Table *t, const Cell *cells);
Cell text_cell(const char *text);
Cell number_cell(double number);

/* Tables by name: "weights", "loads", ... ; NULL past the end and for unknown names. */
typedef struct TableKind {
    const char *name, *help;
    EfStatus (*build)(EfContext *cx, const EfResults *r, const Filter *filter, Table *t);
} TableKind;

const TableKind *table_kind(size_t i);
const TableKind *table_named(const char *name);
bool wanted_case(const Filter *filter, const EfCaseResult *c);
bool wanted_tube(const Filter *filter, const char *name);

/* The one-screen answer of `check`. */
EfStatus check_screen(EfContext *cx, const EfResults *r, const Filter *filter, Document *d);

/* ---- writing ---------------------------------------------------------------------------------------------------------- */

typedef struct Writer {
    const char *name;
    void (*write)(FILE *out, const Document *d, UnitSystem units);
} Writer;

const Writer *writer(size_t i); /* NULL past the end */
const Writer *writer_named(const char *name);

#endif
