/* fixity.h - what checks take from the engines: every tube's own critical compression, neighbours loaded as they are.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_FIXITY_H
#define ANALYSIS_FIXITY_H

#include "analysis/exact.h"
#include "endfix/results.h"

/* Own critical compression of tubes as a function of the factor r on the growing loads
 * (the neighbours carry steady + r growing; the tube alone is pushed on until the frame gives way). */
typedef struct OwnCurve {
    const Mesh *mesh;
    double cap;      /* largest r that may be asked: 0.999 x the lowest factor of both engines; INFINITY: none */
    double *P0, *P1; /* [nt] compression by steady and by growing loads, N (largest along the tube) */
    double *euler;   /* [nt] pinned-end Euler load on the joint-to-joint length, least plane, N */
    struct OwnEngine *engine;
} OwnCurve;

/* full: with moments and torque, on engine 1's matrix; else exact members. Arrays in cx->tmp; own_curve_free. */
EfStatus own_curve_new(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, double cap, bool full,
                       OwnCurve *curve);
void own_curve_free(OwnCurve *curve);

/* Own critical compression of every tube with wanted[t] at factor r: critical [nt] N; NaN: no value. Tubes not wanted
 * are left alone. One factorisation, one selected inverse and a small matrix per tube (Haynsworth inertia). */
EfStatus own_critical_at(EfContext *cx, OwnCurve *curve, double r, const bool *wanted, double *critical);

/* Fills `fixity` but for reserve, safe c and "frame governs", which need a column rule. */
EfStatus fixity_fill(EfContext *cx, OwnCurve *curve, const EfCaseResult *result, EfFixity *fixity);

/* No values, for a frame that does not stand under its steady loads: every tube carries the note. */
EfStatus fixity_blank(EfContext *cx, const Mesh *mesh, const char *note, EfFixity *fixity);

#endif
