/* tube.h - a tube and its loads as the engines see them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ELEMENT_TUBE_H
#define ELEMENT_TUBE_H

#include "endfix/frame.h"

/* A tube as the engines see it. Local axes: rows of R are x y z in global components. */
typedef struct MeshTube {
    int end[2];          /* joints */
    double L;            /* clear length: between the tube's own ends, m */
    double joint_length; /* joint to joint, m */
    double R[3][3];
    double offset[2][3]; /* tube end minus joint, LOCAL axes, m */
    bool has_offset;
    double E, G;
    EfSection section;
    double mass_per_length; /* kg/m */
    double expansion;       /* 1/K */
    bool shear;             /* shear flexible */
    unsigned release[2];    /* local masks, as EfTube */
    double spring[2][EF_DIRECTIONS];
    bool has_joint_parts;   /* any release or finite spring */
} MeshTube;

/* Loads along one tube, global axes, N/m at its from and to ends (linear between), and the axial
 * force its warming would give if it were held (N, compression negative). */
typedef struct TubeLoad {
    double from[3], to[3];
    double warm_force;
} TubeLoad;

#endif
