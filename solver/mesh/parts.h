/* parts.h - inside mesh: pieces shared by its files.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef MESH_PARTS_H
#define MESH_PARTS_H

#include "mesh/mesh.h"

static const double STANDARD_GRAVITY = 9.80665; /* m/s2, CGPM 1901 */

void cross(const double a[3], const double b[3], double out[3]);
double dot(const double a[3], const double b[3]);

/* Builds a carrier; `line` gets the unit direction in which collinear joints carry no moment, or zero. */
EfStatus carrier_build(EfContext *cx, const EfFrame *frame, int n, const int *joint, const double point[3], Carrier *c,
                       double line[3]);

/* Masses, centre and inertia about it. */
void mesh_masses(Mesh *mesh);

/* Equipment's force, as joint loads and as a force on an arm. l->arm has room. */
void load_equipment(const Mesh *mesh, int e, const double force[3], Loads *l);

/* Adds a line load along a tube, global axes, at its two ends, and its resultant to the total. */
void load_along(const Mesh *mesh, int tube, const double from[3], const double to[3], Loads *l);

void add_resultant(const double force[3], const double moment[3], const double at[3], double total[6]);

/* Adds factor x the loads of a case (steady or growing ones) to l. */
EfStatus load_case(EfContext *cx, const Mesh *mesh, const EfCase *c, bool steady, double factor, Loads *l);

/* Adds the inertia that balances run->growing, and what it does to the body. */
EfStatus balance_by_inertia(EfContext *cx, const Mesh *mesh, Run *run);

/* The ends of the tube itself (joint plus offset), global. */
void tube_ends(const Mesh *mesh, int tube, double end[2][3]);

#endif
