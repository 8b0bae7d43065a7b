/* table.c - rows, units and filters of tables.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "postproc/table.h"

#include <fnmatch.h>
#include <math.h>
#include <string.h>

/* The international inch and pound are exact (1959); standard gravity 9.80665 m/s2 (CGPM 1901). */
static const double POUND = 0.45359237, INCH = 0.0254, GRAVITY = 9.80665;

static const struct {
    const char *si, *inch;
} labels[QUANTITIES] = {
    [Q_TEXT] = {"", ""}, [Q_COUNT] = {"", ""}, [Q_NUMBER] = {"", ""}, [Q_LENGTH] = {"mm", "in"}, [Q_FORCE] = {"kN", "lbf"},
    [Q_MASS] = {"kg", "lb"}, [Q_MOMENT] = {"N m", "lbf in"}, [Q_ACCELERATION] = {"rad/s2", "rad/s2"},
};

const char *unit_label(UnitSystem units, Quantity q) { return units == UNITS_SI ? labels[q].si : labels[q].inch; }

double unit_shown(UnitSystem units, Quantity q, double si)
{
    if (units == UNITS_SI) return q == Q_LENGTH ? si * 1e3 : q == Q_FORCE ? si * 1e-3 : si;
    switch (q) {
    case Q_LENGTH: return si / INCH;
    case Q_FORCE: return si / (POUND * GRAVITY);
    case Q_MASS: return si / POUND;
    case Q_MOMENT: return si / (POUND * GRAVITY * INCH);
    default: return si;
    }
}

void table_start(Table *t, const char *title, int ncolumn, const Column *columns)
{
    *t = (Table){.title = title, .ncolumn = ncolumn};
    memcpy(t->column, columns, (size_t)ncolumn * sizeof *columns);
}

EfStatus table_row(EfContext *cx, Table *t, const Cell *cells)
{
    if (t->nrow == t->room) {
        Cell *more;
        const int room = t->room ? 2 * t->room : 16;
        ALLOC(cx, keep, more, room * t->ncolumn);
        if (t->nrow) memcpy(more, t->cell, (size_t)(t->nrow * t->ncolumn) * sizeof *more);
        t->cell = more;
        t->room = room;
    }
    memcpy(t->cell + t->nrow++ * t->ncolumn, cells, (size_t)t->ncolumn * sizeof *cells);
    return EF_OK;
}

Cell text_cell(const char *text) { return (Cell){.text = text ? text : "", .number = NAN}; }
Cell number_cell(double number) { return (Cell){.number = number}; }

bool wanted_case(const Filter *f, const EfCaseResult *c)
{
    return !f->case_name || strcmp(f->case_name, c->name) == 0;
}

bool wanted_tube(const Filter *f, const char *name) { return !f->tube || fnmatch(f->tube, name, 0) == 0; }
