/* carrier.c - how a point hangs on joints: a rigid arm on one, or the least-squares rigid motion of several.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "linalg/dense.h"
#include "mesh/parts.h"

/* Inverse of sum(|r|^2 I - r r'); along a line of joints the rotation about it is left out. */
static void spread_matrix(Carrier *c, double line[3])
{
    double M[9] = {0}, values[3], vectors[9];
    for (int k = 0; k < c->ncarrier; k++) {
        const double *r = c->arm[k];
        for (int i = 0; i < 3; i++)
            for (int j = 0; j < 3; j++) M[3 * i + j] += (i == j ? dot(r, r) : 0) - r[i] * r[j];
    }
    symmetric_eigen(3, M, values, vectors);
    for (int e = 0; e < 3; e++) {
        if (!(values[e] > 1e-9 * values[2])) {
            memcpy(line, vectors + 3 * e, 3 * sizeof *line);
            continue;
        }
        for (int i = 0; i < 3; i++)
            for (int j = 0; j < 3; j++) c->spread[i][j] += vectors[3 * e + i] * vectors[3 * e + j] / values[e];
    }
}

EfStatus carrier_build(EfContext *cx, const EfFrame *frame, int n, const int *joint, const double point[3], Carrier *c,
                       double line[3])
{
    *c = (Carrier){.ncarrier = n, .joint = joint};
    memset(line, 0, 3 * sizeof *line);
    memcpy(c->point, point, sizeof c->point);
    ALLOC(cx, keep, c->arm, n);
    for (int k = 0; k < n; k++)
        for (int i = 0; i < 3; i++) c->centre[i] += frame->joint[joint[k]].x[i] / n;
    for (int k = 0; k < n; k++)
        for (int i = 0; i < 3; i++) c->arm[k][i] = frame->joint[joint[k]].x[i] - c->centre[i];
    if (n > 1) spread_matrix(c, line);
    return EF_OK;
}

/* Virtual work: f.u0 + m.theta with u0 the mean translation and theta = spread sum r x u. */
void carrier_spread(const Carrier *c, const double force[3], const double moment[3], double *joint)
{
    double arm[3], m[3], turn[3];
    for (int i = 0; i < 3; i++) arm[i] = c->point[i] - c->centre[i];
    cross(arm, force, m);
    for (int i = 0; i < 3; i++) m[i] += moment[i];
    if (c->ncarrier == 1) {
        double *f = joint + 6 * c->joint[0];
        for (int i = 0; i < 3; i++) f[i] += force[i], f[3 + i] += m[i];
        return;
    }
    for (int i = 0; i < 3; i++) turn[i] = dot(c->spread[i], m);
    for (int k = 0; k < c->ncarrier; k++) {
        double part[3], *f = joint + 6 * c->joint[k];
        cross(turn, c->arm[k], part);
        for (int i = 0; i < 3; i++) f[i] += force[i] / c->ncarrier + part[i];
    }
}

void carrier_rotation_row(const Carrier *c, int k, double H[3][6])
{
    memset(H, 0, 18 * sizeof H[0][0]);
    if (c->ncarrier == 1) {
        for (int i = 0; i < 3; i++) H[i][3 + i] = 1;
        return;
    }
    const double *r = c->arm[k], X[3][3] = {{0, -r[2], r[1]}, {r[2], 0, -r[0]}, {-r[1], r[0], 0}};
    for (int i = 0; i < 3; i++)
        for (int j = 0; j < 3; j++)
            for (int l = 0; l < 3; l++) H[i][j] += c->spread[i][l] * X[l][j];
}
