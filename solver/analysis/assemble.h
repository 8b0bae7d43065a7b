/* assemble.h - from tubes to the joint matrix: axes of the joints' unknowns, held directions, places of the blocks.
 *
 * Unknowns: six a joint, translations then rotation vector, in the joint's own axes (global, or a skew support's).
 * Rotation axes are turned further where a joint has a rotation that no tube resists ("idle"), so that it can be
 * held without touching anything else.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_ASSEMBLE_H
#define ANALYSIS_ASSEMBLE_H

#include "element/element.h"
#include "mesh/mesh.h"

typedef struct Assembly {
    const Mesh *mesh;
    int nj, nt;
    double (*axes)[2][3][3];    /* [nj] rows: translation axes, rotation axes, global components */
    double (*turn)[2][2][3][3]; /* [nt][end][translation, rotation]: local components from the joint's */
    int (*place)[3];            /* [nt] blocks (from, from), (to, to) and the one that couples them */
    unsigned *held;             /* [nj] directions held by supports or idle */
    unsigned *idle;             /* [nj] those of them that are idle rotations */
    int base;                   /* free body: the joint that is held instead of supports; else -1 */
    double *elastic;            /* [36 blocks] elastic stiffness with support springs, held rows still full */
    int nvalue;                 /* 36 blocks */
    Analysis *analysis;         /* ordering of the joint graph */
} Assembly;

/* Builds everything above; arrays in cx->keep. assembly_free frees the ordering. E_MECHANISM names a tube that is
 * loose by its own releases. */
EfStatus assembly_new(EfContext *cx, const Mesh *mesh, Assembly *a);
void assembly_free(Assembly *a);

/* value += the tube's 12x12 local matrix. */
void assembly_add_tube(const Assembly *a, int tube, double S[END12][END12], double *value);

/* value += factor x second-order stiffness of forces on arms (equipment). */
void assembly_add_arms(const Assembly *a, const Loads *loads, double factor, double *value);

/* value += springs of the supports. */
void assembly_add_springs(const Assembly *a, double *value);

/* Rigid rotations of a free body about its base joint, in the joints' axes: r [nj][6][width], three columns.
 * Held directions are zero. */
EfStatus assembly_rigid_rotations(EfContext *cx, const Assembly *a, const unsigned *held, int width, double *r);

/* Grounds the rigid rotation about the global axis at the base joint: value += a stiffness of the joint's own size. */
void assembly_ground_rotation(const Assembly *a, const double axis[3], double *value);

/* Makes rows and columns of held directions those of the identity (times the scale of the joint). */
void assembly_hold(const Assembly *a, const unsigned *held, double *value);

/* The held masks with the base joint of a free body held in `mask` too. Array in cx->keep. */
EfStatus assembly_held_with_base(EfContext *cx, const Assembly *a, unsigned mask, unsigned **held);

/* Zeroes held directions of x [nj][6][n]. */
void assembly_clear_held(const Assembly *a, const unsigned *held, double *x, int n);

/* Local end displacements d [12][n] of a tube from joint unknowns x [nj][6][n]; and the transpose, added. */
void assembly_gather(const Assembly *a, int tube, const double *x, double *d, int n);
void assembly_scatter(const Assembly *a, int tube, const double *d, double *x, int n);

/* Between global components and the joints' own axes; v [nj][6]; may be the same array. */
void assembly_to_axes(const Assembly *a, const double *global, double *own);
void assembly_to_global(const Assembly *a, const double *own, double *global);

#endif
