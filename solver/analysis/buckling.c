/* buckling.c - all critical factors that a case shows.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "analysis/buckling.h"

#include <math.h>

/* Lowest factor of one kind of growth, NaN when there is none. */
static EfStatus lowest_factor(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, double *factor)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    Search s;
    const EfStatus st = search_factors(cx, a, steady, growing, 1, &s);
    *factor = st == EF_OK && s.modes.n > 0 ? s.modes.factor[0] : NAN;
    search_free(&s);
    arena_rewind(&cx->tmp, mark);
    return st;
}

static EfStatus fill_factors(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing,
                             const EfResults *results, int want, EfCritical *critical)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    Search s;
    EfStatus st = search_factors(cx, a, steady, growing, want, &s);
    if (st == EF_OK) st = shapes_fill(cx, results, &s, want, critical);
    search_free(&s);
    arena_rewind(&cx->tmp, mark);
    return st;
}

/* Does the frame stand under its steady loads before anything grows? */
static EfStatus steady_stands(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, bool *stands)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    Pencil p;
    bool buckled;
    int negative = 0;
    EfStatus st = pencil_build(cx, a, steady, growing, 0, &buckled, &p);
    if (st == EF_OK && !buckled) st = pencil_base_negative(cx, &p, &negative);
    *stands = !buckled && negative == 0;
    pencil_free(&p);
    arena_rewind(&cx->tmp, mark);
    return st;
}

EfStatus buckling_case(EfContext *cx, const Assembly *a, const State *state, const EfResults *results, int want,
                       bool both_signs, EfCaseResult *r)
{
    Stress steady, growing, reversed, all;
    const bool has_steady = state->steady.x != NULL;
    r->all_grow_factor = r->steady_factor = NAN;
    TRY(stress_of(cx, a, state, 1, 0, &steady));
    TRY(stress_of(cx, a, state, 0, 1, &growing));
    if (has_steady) {
        bool stands;
        TRY(stress_of(cx, a, state, 1, 1, &all));
        TRY(lowest_factor(cx, a, NULL, &all, &r->all_grow_factor));
        TRY(lowest_factor(cx, a, NULL, &steady, &r->steady_factor));
        TRY(steady_stands(cx, a, &steady, &growing, &stands));
        if (!stands) r->critical.outcome = EF_STEADY_BUCKLES;
        if (!stands) return EF_OK;
    }
    TRY(fill_factors(cx, a, has_steady ? &steady : NULL, &growing, results, want, &r->critical));
    if (!both_signs) return EF_OK;
    TRY(stress_of(cx, a, state, 0, -1, &reversed));
    r->has_negative = true;
    return fill_factors(cx, a, has_steady ? &steady : NULL, &reversed, results, want, &r->negative);
}
