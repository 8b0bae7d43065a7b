/* check.h - from fixity to margins: column rules, checks of a tube, reserve and safe c, the hand ledger.
 * A new column rule is one function and one row in rules.c; a new check one function and one row in checks.c.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef CHECK_CHECK_H
#define CHECK_CHECK_H

#include "analysis/fixity.h"
#include "endfix/results.h"
#include "mesh/mesh.h"

/* A column rule turns an elastic critical load (with its real fixity) into a nominal strength. */
typedef struct ColumnRule {
    const char *name, *title, *source;
    /* elastic: critical load N > 0; returns nominal strength, N. */
    double (*strength)(const EfMaterial *material, const EfSection *section, double elastic);
    /* A caution outside its validity for this slenderness (L'/i) and wall, or NULL. */
    const char *(*caution)(const EfMaterial *material, const EfSection *section, double slenderness);
} ColumnRule;

const ColumnRule *column_rule(size_t i);                  /* NULL past the end */
const ColumnRule *column_rule_named(const char *name);    /* NULL if unknown */
const ColumnRule *column_rule_of(const EfMaterial *material); /* its own, or the default: Euler with Johnson */

/* Fills fixity->reserve, safe_c, safe_at (and the note "frame governs") of every compressed tube:
 * reserve r solves strength(N_cr(r)) = P0 + r P1 by the tube's rule. */
EfStatus check_reserves(EfContext *cx, OwnCurve *curve, EfCaseResult *result);

/* Fills result->margin (one row a compressed or tension tube that carries load, and the frame's row, tube -1),
 * at the credited c. */
EfStatus check_margins(EfContext *cx, const Mesh *mesh, EfCaseResult *result);

/* Fills result->ledger: hand sheet lines of this run, and guess_c for every compressed tube when > 0. */
EfStatus check_ledger(EfContext *cx, const Mesh *mesh, double guess_c, EfCaseResult *result);

/* exit_status, cautions, not_checked, defaults_used, sources, draft reasons over all cases. */
EfStatus check_conclude(EfContext *cx, const Mesh *mesh, EfResults *results);

#endif
