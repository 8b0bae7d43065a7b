/* kinds.c - the kind of failure of a shape in words: who drives it, and whether joints move.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "analysis/buckling.h"
#include "linalg/dense.h"

static const double DRIVERS = 0.8; /* the tubes that give this much of the lost energy drive the shape */
static const double SWAYS = 0.35;  /* joints move this much of the largest movement: not tubes between still joints */
static const double STRAIGHT = 0.98; /* cosine between tubes in one line */

/* The fewest tubes that give DRIVERS of the energy, largest first; returns how many (at most nt). */
static int find_drivers(const double *lost, int nt, int *driver, bool *taken)
{
    double sum = 0;
    int n = 0;
    memset(taken, 0, (size_t)nt * sizeof *taken);
    while (sum < DRIVERS && n < nt) {
        int best = -1;
        for (int t = 0; t < nt; t++)
            if (!taken[t] && (best < 0 || lost[t] > lost[best] * (1 + 1e-9))) best = t;
        if (best < 0 || lost[best] <= 0) break;
        taken[best] = true;
        driver[n++] = best;
        sum += lost[best];
    }
    return n;
}

static double cosine(const MeshTube *a, const MeshTube *b)
{
    return fabs(a->R[0][0] * b->R[0][0] + a->R[0][1] * b->R[0][1] + a->R[0][2] * b->R[0][2]);
}

static bool share_joint(const MeshTube *a, const MeshTube *b)
{
    return a->end[0] == b->end[0] || a->end[0] == b->end[1] || a->end[1] == b->end[0] || a->end[1] == b->end[1];
}

/* All in one line, each meeting another. */
static bool is_chain(const Mesh *mesh, int n, const int *driver)
{
    for (int i = 0; i < n; i++) {
        bool meets = false;
        for (int k = 0; k < n; k++) {
            if (k == i) continue;
            const MeshTube *a = &mesh->tube[driver[i]], *b = &mesh->tube[driver[k]];
            if (cosine(a, b) < STRAIGHT) return false;
            meets |= share_joint(a, b);
        }
        if (!meets) return false;
    }
    return n > 1;
}

/* Do the drivers' axes lie in planes with one normal? */
static bool is_flat(const Mesh *mesh, int n, const int *driver)
{
    double M[9] = {0}, values[3], vectors[9];
    for (int i = 0; i < n; i++) {
        const double *d = mesh->tube[driver[i]].R[0];
        for (int k = 0; k < 3; k++)
            for (int l = 0; l < 3; l++) M[3 * k + l] += d[k] * d[l];
    }
    symmetric_eigen(3, M, values, vectors);
    return values[0] < 0.02 * values[2] && values[1] > 0.02 * values[2];
}

/* Share of the joints' movement (squares) that a rigid rotation about their moving centre explains, and how many of
 * the joints move by half of the largest. */
static double turning_share(const Mesh *mesh, const double *shape, int *moving)
{
    double centre[3] = {0}, weight = 0, L[3] = {0}, I[9] = {0}, all = 0, explained = 0, values[3], vectors[9], largest = 0;
    const EfJoint *joint = mesh->frame->joint;
    *moving = 0;
    for (int j = 0; j < mesh->nj; j++) {
        const double *u = shape + 6 * j, w = u[0] * u[0] + u[1] * u[1] + u[2] * u[2];
        for (int i = 0; i < 3; i++) centre[i] += w * joint[j].x[i];
        weight += w;
        largest = fmax(largest, w);
    }
    if (!(weight > 0)) return 0;
    for (int j = 0; j < mesh->nj; j++) {
        const double *u = shape + 6 * j, w = u[0] * u[0] + u[1] * u[1] + u[2] * u[2];
        double r[3];
        all += w;
        if (w < 0.04 * largest) continue; /* what stands still has no say in the axis */
        for (int i = 0; i < 3; i++) r[i] = joint[j].x[i] - centre[i] / weight;
        L[0] += r[1] * u[2] - r[2] * u[1];
        L[1] += r[2] * u[0] - r[0] * u[2];
        L[2] += r[0] * u[1] - r[1] * u[0];
        for (int i = 0; i < 3; i++)
            for (int k = 0; k < 3; k++) I[3 * i + k] += (i == k ? r[0] * r[0] + r[1] * r[1] + r[2] * r[2] : 0) - r[i] * r[k];
        *moving += w > 0.25 * largest;
    }
    symmetric_eigen(3, I, values, vectors);
    for (int e = 0; e < 3; e++) {
        const double p = vectors[3 * e] * L[0] + vectors[3 * e + 1] * L[1] + vectors[3 * e + 2] * L[2];
        if (values[e] > 1e-9 * values[2]) explained += p * p / values[e];
    }
    return explained / all;
}

static const char *sway_words(EfContext *cx, const Mesh *mesh, const double *shape)
{
    int moving, carrying = 0;
    const double turning = turning_share(mesh, shape, &moving);
    for (int j = 0; j < mesh->nj; j++) carrying += (mesh->held[j] & 7) != 7;
    if (turning > 0.8 && moving > 2) return "twist";
    if (2 * moving >= carrying && moving > 2) return "whole frame";
    return keep_format(cx, "bay sway, %d joint%s", moving, moving == 1 ? "" : "s");
}

EfStatus kind_of_shape(EfContext *cx, const Mesh *mesh, const EfCritical *c, int mode, const char **kind)
{
    const int nt = mesh->nt;
    const double *lost = c->lost + (size_t)mode * (size_t)nt, *shape = c->shape + (size_t)mode * (size_t)mesh->nj * 6;
    const ArenaMark mark = arena_mark(&cx->tmp);
    int *driver;
    bool *taken;
    double move = 0;
    ALLOC(cx, tmp, driver, nt);
    ALLOC(cx, tmp, taken, nt);
    const int n = find_drivers(lost, nt, driver, taken);
    for (int j = 0; j < mesh->nj; j++)
        for (int i = 0; i < 3; i++) move = fmax(move, fabs(shape[6 * j + i]));
    if (move > SWAYS && !(n == 1 && nt == 1)) *kind = sway_words(cx, mesh, shape);
    else if (n == 0) *kind = "bending and torque alone";
    else if (n == 1) *kind = keep_format(cx, "one tube, %s", mesh->frame->tube[driver[0]].name);
    else if (is_chain(mesh, n, driver)) *kind = keep_format(cx, "chain of %d tubes from %s", n, mesh->frame->tube[driver[0]].name);
    else if (is_flat(mesh, n, driver)) *kind = keep_format(cx, "panel of %d tubes, most %s", n, mesh->frame->tube[driver[0]].name);
    else *kind = keep_format(cx, "%d tubes, most %s", n, mesh->frame->tube[driver[0]].name);
    arena_rewind(&cx->tmp, mark);
    return *kind ? EF_OK : cx->status;
}
