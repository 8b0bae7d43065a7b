/* fixity.h - real end fixity: parts of tubes in shapes, frame c, and own c at any load.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_FIXITY_H
#define ANALYSIS_FIXITY_H

#include "endfix/results.h"
#include "mesh/mesh.h"

/* Own critical compression of tubes as a function of the factor r on the growing loads
 * (the neighbours carry steady + r growing; the tube alone is pushed on until the frame gives way). */
typedef struct OwnCurve {
    const Mesh *mesh;
    double cap;            /* largest r that may be asked: 0.999 x the lowest factor of both engines; INFINITY: none */
    const double *P0, *P1; /* [nt] compression by steady and by growing loads, N (largest along the tube) */
    const double *euler;   /* [nt] pinned-end Euler load on the joint-to-joint length, least plane, N */
    struct OwnEngine *engine;
} OwnCurve;

/* N_cr of every tube with wanted[t] at factor r: critical [nt] N; negative: must be pulled; NaN: no value.
 * Tubes not wanted are left alone. One factorisation and a 6x6 per tube. */
EfStatus own_critical_at(EfContext *cx, OwnCurve *curve, double r, const bool *wanted, double *critical);

#endif
