/* exact.h - engine 2: joints only, exact members, counted by Wittrick and Williams (1971). Axial forces alone.
 *
 * A tube whose axial force varies is a condensed hierarchic tube with that force and no moments.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_EXACT_H
#define ANALYSIS_EXACT_H

#include "analysis/pencil.h"

typedef struct Exact {
    const Assembly *a;
    const Stress *steady, *growing; /* steady may be NULL */
    unsigned *held;     /* [nj] */
    TubeForces *axial0, *axial1; /* [nt] their axial parts; axial0 NULL without steady loads */
    bool *varies;       /* [nt] */
    TubeForm *form;     /* [nt] of tubes that vary */
    double reach;       /* of those forms */
    int rigid_negative; /* free bodies: negative eigenvalues of R' K_g R */
    int nground;        /* and rotations that no load feels, grounded */
    double ground[3][3];
    double *S;          /* [nvalue] */
    Factor *factor;
    double lambda;
    int count;          /* critical factors between 0 and lambda */
} Exact;

/* Arrays live in cx->tmp, the factor on the heap: exact_free. */
EfStatus exact_build(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, Exact *e);
void exact_free(Exact *e);

/* Matrix and count at lambda; lambda is moved a little where it meets a root. */
EfStatus exact_at(EfContext *cx, Exact *e, double lambda);

/* Lowest factor to 1e-10, sought near `guess` (> 0): *factor, NaN when none lies below 1e3 x guess. */
EfStatus exact_lowest(EfContext *cx, Exact *e, double guess, double *factor);

/* A tube's matrix at a factor, local joint coordinates; its count of clamped states, -1: too near one. */
int exact_tube(const Exact *e, int tube, double lambda, double S[END12][END12]);

/* First-order axial forces of the growing loads, mid-tube, by this engine's own matrix: added to N [nt]. */
EfStatus exact_axial(EfContext *cx, const Assembly *a, const State *state, double *N);

#endif
