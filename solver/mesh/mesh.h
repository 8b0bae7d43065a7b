/* mesh.h - the frame in numbers for the solver: tubes with lengths and axes, held directions,
 * masses, and the loads of every run (a case, a combination, a reversed case).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef MESH_MESH_H
#define MESH_MESH_H

#include "core/core.h"
#include "element/tube.h"
#include "endfix/frame.h"
#include "endfix/run.h"
#include "linalg/factor.h"

/* Equipment or a spread load: motion of a point from its carriers' motion.
 * One carrier: a rigid arm. Several: the least-squares rigid motion of the carriers' translations. */
typedef struct Carrier {
    int ncarrier;
    const int *joint;
    double point[3];       /* where it hangs, global, m */
    double centre[3];      /* mean position of the carriers */
    double (*arm)[3];      /* [ncarrier] carrier minus centre, m */
    double spread[3][3];   /* inverse of sum [ |r|^2 I - r r' ], r from the centre; several carriers only */
} Carrier;

typedef struct Mesh {
    const EfFrame *frame;
    int nj, nt;
    MeshTube *tube;      /* [nt] */
    unsigned *held;      /* [nj] mask of held directions, in the joint's axes */
    double (*spring)[6]; /* [nj] support springs, in the joint's axes */
    double (*movement)[6]; /* [nj] prescribed movement of held directions; NULL when none */
    double (**axes)[3];  /* [nj] NULL, or the 3x3 rows of a skew support's axes */
    bool free_body;      /* nothing holds the frame: balanced by inertia */
    int nequipment;
    Carrier *equipment;  /* [nequipment], in the order of the frame */
    double mass, tubes_mass, guys_mass, equipment_mass, centre_of_mass[3];
    double inertia[3][3]; /* about the centre of mass, kg m2 */
    BlockPattern pattern; /* joints that share a tube or equipment */
} Mesh;

/* A dead force at the end of an arm: it turns with its carriers and so has a second-order stiffness. */
typedef struct ArmLoad {
    const Carrier *carrier;
    double force[3];
} ArmLoad;

/* One load vector. */
typedef struct Loads {
    double *joint;  /* [nj][6] N, N m, global; equipment and spread loads already on their joints */
    TubeLoad *tube; /* [nt] */
    int narm;
    ArmLoad *arm;
    double total[6]; /* force and moment about the origin of all of it, N, N m */
} Loads;

/* One thing to solve: a case or combination, forwards or reversed, at the level of the strength check. */
typedef struct Run {
    const char *name;      /* "<case>" or "<case> reversed" */
    int index;             /* over cases, then combinations */
    bool reversed, combination;
    EfLevel level;
    double ultimate_factor;
    EfRequired required;
    bool has_steady;
    Loads steady, growing; /* both times the ultimate factor; movement and pretension are not */
    /* free bodies: inertia that balances steady + growing (in `growing`), else zero */
    double n_at_cg[3], angular_acceleration[3];
    double inertia_total[6];
} Run;

/* Builds the mesh. Fails with E_INPUT naming the tube or joint (no length left between offsets,
 * collinear carriers, a tube that spins freely about its axis at both ends is NOT a fault here). */
EfStatus mesh_build(EfContext *cx, const EfFrame *frame, Mesh *mesh);

/* All runs of the frame in the order: cases (each followed by its reversed twin), then combinations.
 * only_case NULL: all; unknown name: E_INPUT with the nearest known one. */
EfStatus mesh_runs(EfContext *cx, const Mesh *mesh, const char *only_case, int *nrun, Run **runs);

/* Spreads a force and moment acting at the carrier's point over its joints: adds to joint [nj][6]. */
void carrier_spread(const Carrier *c, const double force[3], const double moment[3], double *joint);

/* Rows of the carrier's rotation: theta = sum over its joints H_k u_k (several: u_k translations;
 * one: its own rotation). H is [3][6] for the k-th carrier. */
void carrier_rotation_row(const Carrier *c, int k, double H[3][6]);

#endif
