/* balance.c - a free body: its loads are balanced by the inertia of its masses in rigid acceleration.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "linalg/dense.h"
#include "mesh/parts.h"

/* x := A^-1 b for the inertia tensor; directions without inertia (a line of masses) get none. */
static void solve_inertia(double A[3][3], const double b[3], double x[3])
{
    double M[9], values[3], vectors[9];
    memcpy(M, A, sizeof M);
    symmetric_eigen(3, M, values, vectors);
    memset(x, 0, 3 * sizeof *x);
    for (int e = 0; e < 3; e++) {
        if (!(values[e] > 1e-12 * values[2])) continue;
        const double part = dot(vectors + 3 * e, b) / values[e];
        for (int i = 0; i < 3; i++) x[i] += part * vectors[3 * e + i];
    }
}

/* Acceleration at a point. */
static void acceleration(const Mesh *mesh, const double a[3], const double alpha[3], const double at[3], double out[3])
{
    double r[3];
    for (int i = 0; i < 3; i++) r[i] = at[i] - mesh->centre_of_mass[i];
    cross(alpha, r, out);
    for (int i = 0; i < 3; i++) out[i] += a[i];
}

/* Moment that the loads on joints could have: their sizes times the distances from the centre of mass. */
static double load_size(const Mesh *mesh, const Loads *l)
{
    double sum = 0;
    for (int j = 0; j < mesh->nj; j++) {
        const double *f = l->joint + 6 * j, *x = mesh->frame->joint[j].x, *c = mesh->centre_of_mass;
        const double r[3] = {x[0] - c[0], x[1] - c[1], x[2] - c[2]};
        sum += sqrt(dot(f, f) * dot(r, r)) + sqrt(dot(f + 3, f + 3));
    }
    return sum;
}

EfStatus balance_by_inertia(EfContext *cx, const Mesh *mesh, Run *run)
{
    if (run->has_steady)
        return fail(cx, EF_E_INPUT, "Case %s has steady loads, but nothing holds the frame, so they cannot stay while the others "
                                    "grow. Make them grow too, or add supports.", run->name);
    if (!(mesh->mass > 0))
        return fail(cx, EF_E_INPUT, "Nothing holds the frame and nothing in it has mass, so its loads cannot be balanced. Add "
                                    "supports or masses.");
    Loads *l = &run->growing;
    double a[3], turn[3], at_centre[3], before[6];
    memcpy(before, l->total, sizeof before);
    cross(mesh->centre_of_mass, l->total, at_centre);
    for (int i = 0; i < 3; i++) {
        a[i] = l->total[i] / mesh->mass;
        at_centre[i] = l->total[3 + i] - at_centre[i];
        run->n_at_cg[i] = a[i] / STANDARD_GRAVITY;
    }
    double inertia[3][3];
    memcpy(inertia, mesh->inertia, sizeof inertia);
    solve_inertia(inertia, at_centre, turn);
    memcpy(run->angular_acceleration, turn, sizeof turn);
    for (int t = 0; t < mesh->nt; t++) {
        double end[2][3], q[2][3];
        tube_ends(mesh, t, end);
        for (int e = 0; e < 2; e++) {
            acceleration(mesh, a, turn, end[e], q[e]);
            for (int i = 0; i < 3; i++) q[e][i] *= -mesh->tube[t].mass_per_length;
        }
        load_along(mesh, t, q[0], q[1], l);
    }
    for (int e = 0; e < mesh->nequipment; e++) {
        double f[3];
        acceleration(mesh, a, turn, mesh->equipment[e].point, f);
        for (int i = 0; i < 3; i++) f[i] *= -mesh->frame->equipment[e].mass;
        load_equipment(mesh, e, f, l);
    }
    for (int i = 0; i < 6; i++) run->inertia_total[i] = l->total[i] - before[i];
    double left = 0;
    for (int i = 3; i < 6; i++) left = fmax(left, fabs(l->total[i]));
    if (left > 1e-6 * load_size(mesh, l))
        return fail(cx, EF_E_INPUT, "Case %s turns the free frame about an axis along which it has no inertia. Add supports.", run->name);
    return EF_OK;
}
