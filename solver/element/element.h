/* element.h - one tube as a finite element, twice: hierarchic (engine 1) and exact (engine 2).
 *
 * Both speak in nine generalised coordinates of the tube's ends,
 *   a0 a1 a2  slope of v: its mean, half the difference of the end rotations, the rest
 *             (v' = a0 P0 + a1 P1 + a2 P2 + bubbles)
 *   b0 b1 b2  the same for the slope of w
 *   t0 t1     twist: mean and half difference
 *   e         axial strain
 * in which the elastic matrix and the exact matrix are diagonal. P_k are Legendre polynomials of
 * xi = 2x/L - 1. Local axes; axial force N positive in tension; section moments act on the face that looks
 * along +x. Rotations are rotation vectors, so every joint moment is semi-tangential.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ELEMENT_ELEMENT_H
#define ELEMENT_ELEMENT_H

#include "core/core.h"
#include "element/tube.h"

enum {
    END12 = 12,       /* u v w rx ry rz at both ends, local */
    MAX_BUBBLES = 16, /* per bending plane, and in torsion */
    MAX_INTERIOR = 4 * (MAX_BUBBLES + 1) + MAX_BUBBLES + END12,
    MAX_RAW = END12 + MAX_INTERIOR
};

/* Section forces along a tube as polynomials of xi (coefficients of 1, xi, xi^2, xi^3), N and N m. */
typedef struct TubeForces {
    double N[3];
    double My[4], Mz[4];
    double Mx;
    double end[END12]; /* forces of the arm on the tube's ends, local */
} TubeForces;

/* Number of bubbles: in each bending plane; in torsion. */
typedef struct TubeBasis {
    int bending, torsion;
} TubeBasis;

/* A tube ready for the eigenproblem (K + lambda G) x = 0. x = 12 joint coordinates in LOCAL axes, then
 * m interior ones in which the base stiffness is the identity and is not coupled to the joints. */
typedef struct TubeForm {
    int m;        /* interior unknowns */
    int nraw;     /* 12 tube-end coordinates + raw interior unknowns */
    TubeBasis basis;
    double K[END12][END12]; /* joint part of the base stiffness (elastic + steady) */
    double *G;      /* [12 + m][12 + m] geometric stiffness of the growing forces, symmetric, full */
    double *steady; /* [12 + m][12 + m] that of the steady forces, or NULL */
    double *raw;    /* [nraw][12 + m] raw unknowns from x; NULL: the same */
} TubeForm;

/* Energies of a tube in a shape, N m: elastic, and geometric ones by growing and steady forces (x'Gx/2). */
typedef struct TubeEnergy {
    double elastic, growing, steady;
} TubeEnergy;

/* Elastic stiffness in joint coordinates, interior condensed: K [12][12], local.
 * false: the tube's own releases leave it loose (it can move by itself). */
bool tube_stiffness(const MeshTube *t, double K[END12][END12]);

/* Equivalent forces on the joints of loads along the tube: f [12], local. */
bool tube_load(const MeshTube *t, const TubeLoad *q, double f[END12]);

/* Section forces from the joint displacements d [12], local, and the loads along the tube. */
bool tube_forces(const MeshTube *t, const TubeLoad *q, const double d[END12], TubeForces *out);

/* Values at xi. */
double tube_axial(const TubeForces *f, double xi);
double tube_axial_min(const TubeForces *f); /* most compressed along the tube */
void tube_moments(const TubeForces *f, double xi, double moment[2]); /* My, Mz */

/* The wave number squared of the tube, (pi n)^2-like: |N| L^2/EI + (M L)^2/(EI GJ) + (T L/EI)^2 with the
 * forces steady + factor x growing. steady may be NULL. `twist`: the part that couples bending and torsion. */
double tube_waves(const MeshTube *t, const TubeForces *steady, const TubeForces *growing, double factor,
                  double *twist);

/* Bubbles that bound the relative error of the tube's condensed matrix by `tolerance`.
 * error (may be NULL): the bound reached. */
TubeBasis tube_basis(double waves, double twist, double tolerance, double *error);

/* Builds the form. steady may be NULL. Arrays from cx->tmp. E_MECHANISM without a message: the tube is loose;
 * E_TALLY without a message: the steady forces alone buckle it between its ends. */
EfStatus tube_form(EfContext *cx, const MeshTube *t, const TubeForces *steady, const TubeForces *growing,
                   TubeBasis basis, TubeForm *form);

TubeEnergy tube_energy(const TubeForm *form, const double *x);

/* Displacement of the tube's axis, local axes, at station s in [0, 1]. */
void tube_line(const MeshTube *t, const TubeForm *form, const double *x, double s, double u[3]);

/* Condensed matrix at a factor, S = K + f G_jj - f^2 G_ji B^-1 G_ij with B = I + f G_ii = L D L'.
 * L [m][m] row-major keeps the unit lower factor, D on its diagonal.
 * Returns the number of negative pivots, or -1 when a pivot is too near zero to be counted. */
int tube_condense(const TubeForm *form, double factor, double *L, double S[END12][END12]);

/* x := B^-1 x with the factor of tube_condense; x is [m][RHS] row-major. */
void tube_interior_solve(int m, const double *L, double *x);

/* ---- exact member (engine 2): axial force constant along the tube ---------------------------------- */

/* Bending factors of one plane at w = P L^2/EI, shear number Phi = 12 EI/(G As L^2) (0: none):
 * EI/L f[k] is the stiffness on a0, a1, a2. Returns the count of clamped-clamped critical states below,
 * or -1 at P >= G As. Theory: stability functions with Engesser shear, split into symmetric parts. */
int exact_plane(double w, double Phi, double f[3]);

/* Shear number of a plane (0: v, 1: w) of a tube; 0 for a slender one. */
double exact_shear_number(const MeshTube *t, int plane);

/* d f / d w of the same. */
void exact_plane_slope(double w, double Phi, double df[3]);

/* Exact matrix in joint coordinates with offsets, releases and springs condensed: S [12][12] local.
 * end: forces of the arms on the tube's ends for the second-order term of offsets.
 * Returns the count of critical states with both joints clamped, or -1: shift the load a little. */
int exact_matrix(const MeshTube *t, double N, const double end[END12], double S[END12][END12]);

/* ---- shared pieces ------------------------------------------------------------------------------------ */

/* Tube-end coordinates (0..11) that a release or a spring parts from the arm; returns their number.
 * A tube released in twist at both ends spins idly: its second end is taken as held, so that it has a matrix. */
int tube_freed_ends(const MeshTube *t, int freed[END12]);

/* Stiffness of the spring between arm and tube end in coordinate i; 0 for a release. */
double tube_end_spring(const MeshTube *t, int i);

/* Row k of g = A e, the generalised coordinates from the tube-end displacements: A [9][12]. */
void tube_coordinates(double L, double A[9][END12]);

/* K := O' K O for the arms of a tube with offsets, where e = O j; K is [n][n], its first 12 are ends. */
void tube_arms(const MeshTube *t, int n, double *K);

/* Adds the second-order stiffness of the arms under tube-end forces to the rotations of G [n][n]. */
void tube_arm_stiffness(const MeshTube *t, const double end[END12], int n, double *G);

/* e = O j. */
void tube_arm_ends(const MeshTube *t, const double j[END12], double e[END12]);

#endif
