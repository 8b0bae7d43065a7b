/* raw.h - the functions of a tube's displacement as short Legendre series, and its matrices in them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ELEMENT_RAW_H
#define ELEMENT_RAW_H

#include "element/element.h"

/* a[0] P_k[0] + a[1] P_k[1] */
typedef struct Series {
    int n, k[2];
    double a[2];
} Series;

/* One unknown of a bending plane: slope of the axis, rotation of the section, its derivative along x. */
typedef struct PlaneFunction {
    Series slope, rotation, curvature;
} PlaneFunction;

/* One unknown of twist: angle and its derivative along x. */
typedef struct TwistFunction {
    Series angle, rate;
} TwistFunction;

enum { MAX_PLANE = 3 + 2 * (MAX_BUBBLES + 1), MAX_TWIST = 2 + MAX_BUBBLES };

/* Unknowns in the order plane of v, plane of w (each: 3 of the ends, then interior), twist (2 of the ends),
 * strain. */
typedef struct RawTube {
    const MeshTube *tube;
    int nplane, ntwist;
    PlaneFunction plane[2][MAX_PLANE];
    TwistFunction twist[MAX_TWIST];
    int n;            /* 12 + interior unknowns, free ends not counted */
    int nfree;        /* tube-end coordinates that a release or spring makes interior */
    int free_end[END12];
} RawTube;

void raw_layout(const MeshTube *t, TubeBasis basis, RawTube *raw);

/* Matrices [n][n], n = raw->n + raw->nfree: the 12 ARM-end coordinates (tube ends where nothing is released),
 * the interior unknowns, then the freed tube ends. Both are added to what is there. */
void raw_stiffness(const RawTube *raw, double *K);
void raw_geometric(const RawTube *raw, const TubeForces *f, double *G);

/* Without bubbles the raw matrix has at most this many rows: 12 ends, shear unknowns, freed ends. */
enum { MAX_STATIC = END12 + 4 + END12 };

/* Static condensation of a tube without bubbles: K [12][12] at the arm ends, T [n][n] (its first 12 columns:
 * raw unknowns from arm ends). false: the tube is loose. */
bool raw_condense(const RawTube *raw, double K[END12][END12], double *T);

/* Value of the series' integral from -1 to xi. */
double series_integral(const Series *s, double xi);

#endif
