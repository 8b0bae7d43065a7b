/* statics.h - first-order displacements and tube forces of every run, from one factorisation.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_STATICS_H
#define ANALYSIS_STATICS_H

#include "analysis/assemble.h"
#include "endfix/results.h"

/* The linear answer to one set of loads. */
typedef struct Answer {
    double *x;          /* [nj][6] displacements in the joints' axes */
    TubeForces *forces; /* [nt] */
} Answer;

/* One run: steady and growing parts apart; steady.x is NULL without steady loads. */
typedef struct State {
    const Run *run;
    Answer steady, growing;
} State;

/* Solves all runs. states [nrun], owned by cx->keep. E_MECHANISM in words by joint and direction; moments on idle
 * rotations count as mechanisms. */
EfStatus statics_solve(EfContext *cx, const Assembly *a, int nrun, const Run *run, State **states);

/* Fills displacements, reactions, tube forces, moments and the balance of a case. */
EfStatus statics_report(EfContext *cx, const Assembly *a, const State *state, EfCaseResult *result);

/* Rejects a frame that moves without straining, in words (mechanism.c). Factorises the elastic matrix into `factor`
 * with the base of a free body held. */
EfStatus mechanism_check(EfContext *cx, const Assembly *a, const unsigned *held, Factor *factor);

#endif
