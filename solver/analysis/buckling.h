/* buckling.h - critical factors of a case with their tally, shapes and who drives them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_BUCKLING_H
#define ANALYSIS_BUCKLING_H

#include "analysis/krylov.h"

/* Result of a search; the pencil is open (pencil_free) unless outcome is EF_STEADY_BUCKLES or nothing was built. */
typedef struct Search {
    EfOutcome outcome;
    Pencil pencil;
    Modes modes;
} Search;

/* The lowest `want` positive factors of base + lambda growing, all up to the last shift. steady may be NULL.
 * Arrays in cx->tmp. */
EfStatus search_factors(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, int want,
                        Search *s);
void search_free(Search *s);

/* Turns shapes of equal factors inside their space so that each is driven by as few tubes as possible (families.c). */
EfStatus separate_families(EfContext *cx, const Search *s, int n);

/* Fills everything of `critical` from a search: at most `want` factors, more where the last is a multiple one.
 * line data at the points of `results`. */
EfStatus shapes_fill(EfContext *cx, const EfResults *results, const Search *s, int want, EfCritical *critical);

/* Kind of failure in words, owned by cx->keep (kinds.c). */
EfStatus kind_of_shape(EfContext *cx, const Mesh *mesh, const EfCritical *c, int mode, const char **kind);

/* critical, negative, all-grow and steady factors of a case. */
EfStatus buckling_case(EfContext *cx, const Assembly *a, const State *state, const EfResults *results, int want,
                       bool both_signs, EfCaseResult *result);

#endif
