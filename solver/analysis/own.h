/* own.h - inside analysis: one tube against the flexibility that the rest of the frame gives its ends.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_OWN_H
#define ANALYSIS_OWN_H

#include "analysis/fixity.h"

/* Which matrix changes when the tube alone is pushed by delta more. */
typedef enum OwnKernel {
    OWN_PLANES, /* plain exact tube: six bending coordinates, diagonal */
    OWN_EXACT,  /* exact tube with arms, springs or releases: its twelve joint coordinates */
    OWN_FORM    /* hierarchic tube: varying force, or moments and torque too */
} OwnKernel;

/* A tube in the frame at factor r. */
typedef struct Restrained {
    OwnKernel kernel;
    const MeshTube *tube;
    double N;            /* axial force at r, OWN_PLANES and OWN_EXACT */
    double end[END12];   /* arm forces at r */
    TubeForm form;       /* OWN_FORM: base at r, growing a unit compression */
    int n, kept;         /* coordinates; those in which the frame gives way at all */
    double stiff[END12]; /* [kept] inverse eigenvalues of the flexibility */
    double Q[END12 * END12]; /* [kept][n] eigenvectors */
    double scale[END12]; /* coordinates are divided by it */
    double S0[END12 * END12]; /* [n][n] the tube's matrix at r (diagonal terms only for OWN_PLANES) */
    int count0;
    double hold_chord;   /* extra stiffness against chord rotation, 0: none */
    int negative;        /* of the flexibility */
} Restrained;

/* F: flexibility of the frame at the tube's joints, local coordinates [12][12]. */
void restrained_set(Restrained *x, const double F[END12][END12]);

/* Critical states reached when the tube is pushed by delta more than at r. */
int restrained_count(const Restrained *x, double delta);

/* The delta at which state number `which` (1, 2) is reached, by bisection to 1e-13 between 0 and `hi`. */
double restrained_root(const Restrained *x, int which, double hi);

/* Direction in which the tube bows at delta: unit vector, local y and z. */
void restrained_direction(const Restrained *x, double delta, double yz[2]);

/* Rotational stiffness of the rest at both ends, N m/rad: k [end][2][2] about local y and z, chord held, far end
 * free. Only for OWN_PLANES; else NaN. */
void restrained_ends(const Restrained *x, const double F[END12][END12], double k[2][2][2]);

#endif
