/* load.c - loads along a tube: equivalent joint forces, and the section forces they leave.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "element/raw.h"

/* Line loads in local axes as qa + qb xi, N/m. */
typedef struct LocalLoad {
    double a[3], b[3];
} LocalLoad;

static LocalLoad local_load(const MeshTube *t, const TubeLoad *q)
{
    LocalLoad l = {{0}, {0}};
    for (int i = 0; i < 3; i++)
        for (int k = 0; k < 3; k++) {
            l.a[i] += t->R[i][k] * (q->from[k] + q->to[k]) / 2;
            l.b[i] += t->R[i][k] * (q->to[k] - q->from[k]) / 2;
        }
    return l;
}

/* int slope(x) R(x) dx with R the load beyond x: work of the load on the part of the displacement that the
 * slope makes. R = L/2 (qa (1 - xi) + qb (1 - xi^2)/2) in Legendre terms. */
static double slope_work(const MeshTube *t, double qa, double qb, const Series *slope)
{
    const double R[3] = {t->L / 2 * (qa + qb / 3), -t->L / 2 * qa, -t->L / 2 * qb / 3};
    double sum = 0;
    for (int i = 0; i < slope->n; i++)
        if (slope->k[i] < 3) sum += slope->a[i] * R[slope->k[i]] * 2 / (2 * slope->k[i] + 1);
    return sum * t->L / 2;
}

/* Work vector of loads on the raw unknowns, as raw_stiffness orders them: f [n]. */
static void raw_load(const RawTube *raw, const TubeLoad *q, double *f)
{
    const MeshTube *t = raw->tube;
    const LocalLoad l = local_load(t, q);
    double A[9][END12], e[END12] = {0};
    tube_coordinates(t->L, A);
    e[0] = t->L / 2 * (l.a[0] - l.b[0] / 3) + q->warm_force;
    e[6] = t->L / 2 * (l.a[0] + l.b[0] / 3) - q->warm_force;
    for (int p = 0; p < 2; p++) {
        e[1 + p] += t->L * l.a[1 + p];
        for (int i = 0; i < raw->nplane; i++) {
            const double w = slope_work(t, l.a[1 + p], l.b[1 + p], &raw->plane[p][i].slope);
            if (i >= 3) f[END12 + p * (raw->nplane - 3) + i - 3] += w;
            for (int k = 0; k < END12 && i < 3; k++) e[k] += A[3 * p + i][k] * w;
        }
    }
    for (int k = 0; k < raw->nfree; k++) {
        f[raw->n + k] += e[raw->free_end[k]];
        e[raw->free_end[k]] = 0;
    }
    for (int k = 0; k < END12; k++) f[k] += e[k];
}

/* Condensed stiffness and loads at the arm ends. */
static bool arm_end_system(const MeshTube *t, const TubeLoad *q, double K[END12][END12], double f[END12])
{
    RawTube raw;
    raw_layout(t, (TubeBasis){0, 0}, &raw);
    double T[MAX_STATIC * MAX_STATIC], all[MAX_STATIC] = {0};
    if (!raw_condense(&raw, K, T)) return false;
    raw_load(&raw, q, all);
    const int n = raw.n + raw.nfree;
    for (int j = 0; j < END12; j++) {
        f[j] = 0;
        for (int i = 0; i < n; i++) f[j] += T[i * n + j] * all[i];
    }
    return true;
}

bool tube_load(const MeshTube *t, const TubeLoad *q, double f[END12])
{
    double K[END12][END12];
    if (!arm_end_system(t, q, K, f)) return false;
    if (!t->has_offset) return true;
    for (int e = 0; e < 2; e++) { /* moments of the arms */
        const double *r = t->offset[e], *p = f + 6 * e;
        f[6 * e + 3] += r[1] * p[2] - r[2] * p[1];
        f[6 * e + 4] += r[2] * p[0] - r[0] * p[2];
        f[6 * e + 5] += r[0] * p[1] - r[1] * p[0];
    }
    return true;
}

/* c0 + c1 xi + c2 xi^2: minus end force minus the load from end 1 to xi. */
static void force_polynomial(double end, double qa, double qb, double L, double c[3])
{
    c[0] = -end - L / 2 * (qa - qb / 2);
    c[1] = -L / 2 * qa;
    c[2] = -L / 4 * qb;
}

/* m := start + sign L/2 int from -1 to xi of c. */
static void moment_polynomial(double start, double sign, double L, const double c[3], double m[4])
{
    const double s = sign * L / 2;
    m[0] = start + s * (c[0] - c[1] / 2 + c[2] / 3);
    m[1] = s * c[0];
    m[2] = s * c[1] / 2;
    m[3] = s * c[2] / 3;
}

bool tube_forces(const MeshTube *t, const TubeLoad *q, const double d[END12], TubeForces *out)
{
    double K[END12][END12], f[END12], e[END12], Fy[3], Fz[3];
    if (!arm_end_system(t, q, K, f)) return false;
    tube_arm_ends(t, d, e);
    for (int i = 0; i < END12; i++) {
        out->end[i] = -f[i];
        for (int j = 0; j < END12; j++) out->end[i] += K[i][j] * e[j];
    }
    const LocalLoad l = local_load(t, q);
    const double *F = out->end;
    force_polynomial(F[0], l.a[0], l.b[0], t->L, out->N);
    force_polynomial(F[1], l.a[1], l.b[1], t->L, Fy);
    force_polynomial(F[2], l.a[2], l.b[2], t->L, Fz);
    moment_polynomial(-F[4], 1, t->L, Fz, out->My);
    moment_polynomial(-F[5], -1, t->L, Fy, out->Mz);
    out->Mx = -F[3];
    return true;
}

double tube_axial(const TubeForces *f, double xi) { return f->N[0] + xi * (f->N[1] + xi * f->N[2]); }

double tube_axial_min(const TubeForces *f)
{
    double least = fmin(tube_axial(f, -1), tube_axial(f, 1));
    if (f->N[2] > 0) { /* a minimum inside */
        const double xi = -f->N[1] / (2 * f->N[2]);
        if (fabs(xi) < 1) least = fmin(least, tube_axial(f, xi));
    }
    return least;
}

void tube_moments(const TubeForces *f, double xi, double moment[2])
{
    moment[0] = f->My[0] + xi * (f->My[1] + xi * (f->My[2] + xi * f->My[3]));
    moment[1] = f->Mz[0] + xi * (f->Mz[1] + xi * (f->Mz[2] + xi * f->Mz[3]));
}
