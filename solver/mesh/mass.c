/* mass.c - masses, centre of mass and inertia: tubes as lines, guys as lines, equipment as points.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "mesh/parts.h"

/* Adds a line of mass m from a to b (a == b: a point): first moments, and second moments sum m x x'. */
static void add_line(double m, const double a[3], const double b[3], double first[3], double second[3][3])
{
    for (int i = 0; i < 3; i++) {
        first[i] += m * (a[i] + b[i]) / 2;
        for (int j = 0; j < 3; j++)
            second[i][j] += m * (2 * a[i] * a[j] + 2 * b[i] * b[j] + a[i] * b[j] + b[i] * a[j]) / 6;
    }
}

void mesh_masses(Mesh *mesh)
{
    const EfFrame *f = mesh->frame;
    double first[3] = {0}, S[3][3] = {{0}};
    for (int t = 0; t < mesh->nt; t++) {
        double end[2][3];
        const double m = mesh->tube[t].mass_per_length * mesh->tube[t].L;
        tube_ends(mesh, t, end);
        add_line(m, end[0], end[1], first, S);
        mesh->tubes_mass += m;
    }
    for (int g = 0; g < f->nguy; g++) {
        const double *a = f->joint[f->guy[g].end[0]].x, *b = f->joint[f->guy[g].end[1]].x;
        const double d[3] = {b[0] - a[0], b[1] - a[1], b[2] - a[2]}, m = f->guy[g].mass_per_length * sqrt(dot(d, d));
        add_line(m, a, b, first, S);
        mesh->guys_mass += m;
    }
    for (int e = 0; e < f->nequipment; e++) {
        add_line(f->equipment[e].mass, f->equipment[e].at, f->equipment[e].at, first, S);
        mesh->equipment_mass += f->equipment[e].mass;
    }
    mesh->mass = mesh->tubes_mass + mesh->guys_mass + mesh->equipment_mass;
    if (!(mesh->mass > 0)) return;
    double *c = mesh->centre_of_mass;
    for (int i = 0; i < 3; i++) c[i] = first[i] / mesh->mass;
    double trace = 0;
    for (int i = 0; i < 3; i++) {
        for (int j = 0; j < 3; j++) S[i][j] -= mesh->mass * c[i] * c[j];
        trace += S[i][i];
    }
    for (int i = 0; i < 3; i++)
        for (int j = 0; j < 3; j++) mesh->inertia[i][j] = (i == j ? trace : 0) - S[i][j];
}
