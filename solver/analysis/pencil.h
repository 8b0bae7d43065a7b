/* pencil.h - engine 1: the linear eigenproblem (K + lambda G) x = 0 of hierarchic tubes.
 *
 * x = joint unknowns [6 nj] in the joints' axes, then the interior unknowns of every tube. K is the base stiffness
 * (elastic + steady loads), G the geometric stiffness of the growing loads. Interior unknowns are eliminated tube by
 * tube for every shift, so only the joint matrix is factorised; the problem that is solved, counted and exported is
 * always this one.
 *
 * A free body has its base joint's translations grounded (no force arises there) and keeps its three rigid rotations
 * R with K R = 0: (R' G R) signs are taken off the count, and shapes obey R' G x = 0 by themselves.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_PENCIL_H
#define ANALYSIS_PENCIL_H

#include "analysis/statics.h"

/* Section forces and forces on arms, as a sum of a state's steady and growing parts. */
typedef struct Stress {
    TubeForces *forces; /* [nt] */
    const Loads *arms[2];
    double factor[2];
} Stress;

/* steady_factor x steady + growing_factor x growing. Arrays in cx->keep. */
EfStatus stress_of(EfContext *cx, const Assembly *a, const State *state, double steady_factor, double growing_factor,
                   Stress *stress);

typedef struct Pencil {
    const Assembly *a;
    const Stress *steady, *growing; /* steady may be NULL */
    double reach;       /* largest factor for which the interior functions were chosen */
    double mesh_error;  /* bound on the relative error of a tube's matrix at that factor */
    TubeForm *form;     /* [nt] */
    int *interior;      /* [nt] place of the tube's interior unknowns in x */
    int n;              /* unknowns */
    unsigned *held;     /* [nj] */
    double *K;          /* [nvalue] joint part of the base stiffness, held rows still full */
    double *arms;       /* [nvalue] second-order stiffness of growing forces on arms; NULL: none */
    int rigid_negative; /* negative eigenvalues of R' G R */
    /* of the last shift */
    double sigma;
    int count;          /* critical factors between 0 and sigma */
    int *L_place;       /* [nt] */
    double *L, *S;      /* factors of the tubes' interiors; joint matrix */
    Factor *factor;
} Pencil;

/* Builds the problem; its arrays live in cx->tmp, the factor on the heap: call pencil_free, then rewind. A steady
 * load that buckles a tube by itself gives EF_OK with *buckled set. */
EfStatus pencil_build(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, double reach,
                      bool *buckled, Pencil *p);
void pencil_free(Pencil *p);

/* Factorises K + sigma G and counts. sigma is moved by up to 3e-4 of itself where it meets a root. */
EfStatus pencil_shift(EfContext *cx, Pencil *p, double sigma);

/* The number of negative eigenvalues of the base stiffness (0 for a frame that its steady loads do not buckle). */
EfStatus pencil_base_negative(EfContext *cx, Pencil *p, int *negative);

/* x := (K + sigma G)^-1 x; y := K x; y := G x. x, y [n][RHS]. */
EfStatus pencil_solve(EfContext *cx, const Pencil *p, double *x);
void pencil_stiffness(const Pencil *p, const double *x, double *y);
void pencil_geometric(const Pencil *p, const double *x, double *y);

/* A tube's own x [12 + m], local, from column c of x [n][width]. */
void pencil_tube(const Pencil *p, int tube, const double *x, int width, int c, double *own);

#endif
