/* check.h - from fixity to margins: column rules, checks of a tube, reserve and safe c, the hand ledger.
 * A new column rule is one function and one row in rules.c; a new check one function and one row in margins.c.
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
    /* A caution outside its validity for this elastic load, or NULL. */
    const char *(*caution)(const EfMaterial *material, const EfSection *section, double elastic);
} ColumnRule;

const ColumnRule *column_rule(size_t i);                  /* NULL past the end */
const ColumnRule *column_rule_named(const char *name);    /* NULL if unknown */
const ColumnRule *column_rule_of(const EfMaterial *material); /* its own, or the default: Euler with Johnson */

/* Yield in compression of a column: that beside a weld where it is known. NaN: no yield known. */
double column_yield(const EfMaterial *material);

/* Own critical compression as a function of the factor, for all tubes at once. */
typedef EfStatus OwnFunction(EfContext *cx, void *from, double r, const bool *wanted, double *critical);

/* Reserve of one tube at a time (decisions: the factor at which its own check is reached). */
typedef struct ReserveTask {
    int nt;
    const double *P0, *P1;
    double cap;             /* largest r */
    const bool *wanted;     /* compressed tubes */
    double (*strength)(const void *of, int tube, double elastic); /* by the tube's rule */
    const void *of;
    OwnFunction *own;
    void *from;
    bool exact;             /* refine every crossing to 1e-9; else chords on a shared grid, on the safe side */
} ReserveTask;

/* reserve, critical [nt]: the root of strength(N_cr(r)) = P0 + r P1 and N_cr there; NaN: none below the cap.
 * at_cap [nt]: N_cr at 0.9 of the lowest factor (the cap over 0.999); NaN too where own c has no value on the way. */
EfStatus reserve_solve(EfContext *cx, const ReserveTask *task, double *reserve, double *critical, double *at_cap);

/* Fills fixity's reserve, safe_c, safe_at (and the note "frame governs") of every compressed tube. */
EfStatus check_reserves(EfContext *cx, OwnCurve *curve, EfCaseResult *result);

/* Fills result->margin (a row for every check that applies to a tube, and the frame's row, tube -1), at the credited c. */
EfStatus check_margins(EfContext *cx, const Mesh *mesh, const OwnCurve *curve, EfCaseResult *result);

/* Fills result->ledger: hand sheet lines of this run, and guess_c for every compressed tube when > 0. */
EfStatus check_ledger(EfContext *cx, const Mesh *mesh, const OwnCurve *curve, double guess_c, EfCaseResult *result);

/* Verdict of frame over hand, with the percentage rounded against the user; text owned by cx->keep. */
EfStatus ledger_verdict(EfContext *cx, double hand, double frame, EfLedgerRow *row);

/* exit_status, cautions, not_checked, defaults_used, sources, draft reasons over all cases. */
EfStatus check_conclude(EfContext *cx, const Mesh *mesh, double guess_c, EfResults *results);

#endif
