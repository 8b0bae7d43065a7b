/* rules.c - column rules.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "check/check.h"

double column_yield(const EfMaterial *m)
{
    double y = m->yield_compression;
    if (isnan(y)) y = m->yield;
    return !isnan(m->welded_yield) && !(m->welded_yield > y) ? m->welded_yield : y;
}

static double euler(const EfMaterial *m, const EfSection *s, double elastic)
{
    (void)m, (void)s;
    return elastic;
}

static const char *euler_caution(const EfMaterial *m, const EfSection *s, double elastic)
{
    const double y = column_yield(m);
    return elastic > y * s->A / 2 ? "above half of the yield stress: Euler's formula overstates the strength" : NULL;
}

/* Parabola from the yield load down to where Euler's curve takes over at half of it (Johnson 1893; the general form of
 * the short columns in the aircraft tables: Fc = Fy - Fy^2 (L'/i)^2 / (4 pi^2 E)). Without a yield: Euler alone. */
static double euler_johnson(const EfMaterial *m, const EfSection *s, double elastic)
{
    const double squash = column_yield(m) * s->A;
    if (!(elastic > squash / 2)) return elastic;
    return squash * (1 - squash / (4 * elastic));
}

static const char *johnson_caution(const EfMaterial *m, const EfSection *s, double elastic)
{
    (void)elastic;
    if (isnan(column_yield(m))) return "no yield given: Euler's formula alone";
    /* D/t 50: local buckling need not be checked up to it in the aircraft steel tables (Bruhn, column formulas). */
    if (s->round && s->wall > 0 && s->depth_y > 50 * s->wall) return "D/t over 50: local buckling is not checked";
    return NULL;
}

static const ColumnRule rules[] = {
    {"euler-johnson", "Euler, Johnson's parabola above half of the yield", "Johnson 1893; Euler 1744", euler_johnson, johnson_caution},
    {"euler", "Euler alone", "Euler 1744", euler, euler_caution},
};

const ColumnRule *column_rule(size_t i) { return i < sizeof rules / sizeof *rules ? &rules[i] : NULL; }

const ColumnRule *column_rule_named(const char *name)
{
    for (size_t i = 0; column_rule(i); i++)
        if (strcmp(rules[i].name, name) == 0) return &rules[i];
    return NULL;
}

const ColumnRule *column_rule_of(const EfMaterial *m)
{
    const ColumnRule *own = m->column_rule ? column_rule_named(m->column_rule) : NULL;
    return own ? own : &rules[0];
}
