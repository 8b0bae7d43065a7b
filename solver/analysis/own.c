/* own.c - the count of a frame in which one tube is pushed further.
 *
 * With Q and 1/stiff the eigenvectors and eigenvalues of the flexibility F at the tube's coordinates, and D the change
 * of the tube's matrix, the frame's negative eigenvalues change by n-(1/F + Q D Q') - n-(1/F) (Haynsworth 1968), and
 * by the change of the tube's own clamped count (Wittrick and Williams 1971).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "analysis/own.h"

#include <math.h>
#include <string.h>

#include "linalg/dense.h"

enum { MANY = 1000 }; /* count beyond any critical state */

/* ---- the tube's matrix ------------------------------------------------------------------------------------------ */

static double plane_stiffness(const MeshTube *t, int plane)
{
    return t->E * (plane == 0 ? t->section.Iz : t->section.Iy);
}

/* Diagonal terms of the six bending coordinates; -1: too near a pole. */
static int planes_at(const Restrained *x, double delta, double *d)
{
    int count = 0;
    for (int p = 0; p < 2; p++) {
        const MeshTube *t = x->tube;
        const double EI = plane_stiffness(t, p);
        const int c = exact_plane((delta - x->N) * t->L * t->L / EI, exact_shear_number(t, p), d + 3 * p);
        if (c < 0) return MANY; /* beyond the shear limit */
        count += c;
        for (int k = 0; k < 3; k++) d[3 * p + k] *= EI / t->L;
        if (!isfinite(d[3 * p + 1]) || !isfinite(d[3 * p + 2])) return -1;
    }
    return count;
}

/* The tube's matrix in its coordinates (diagonal in d for OWN_PLANES), pushed by delta; its count, -1 near a pole. */
static int tube_at(const Restrained *x, double delta, double *S)
{
    double M[END12][END12], L[MAX_INTERIOR * MAX_INTERIOR], end[END12];
    int count;
    if (x->kernel == OWN_PLANES) return planes_at(x, delta, S);
    if (x->kernel == OWN_FORM) count = tube_condense(&x->form, delta, L, M);
    else {
        memcpy(end, x->end, sizeof end);
        end[0] += delta, end[6] -= delta;
        count = exact_matrix(x->tube, x->N - delta, end, M);
    }
    for (int i = 0; i < END12; i++)
        for (int j = 0; j < END12; j++) S[i * END12 + j] = M[i][j] * x->scale[i] * x->scale[j];
    return count;
}

/* ---- setting up ---------------------------------------------------------------------------------------------------- */

/* g [6] = A6 d with A6 the bending rows of the coordinates: F6 = A6 F A6'. */
static void bending_flexibility(const MeshTube *t, const double F[END12][END12], double *G)
{
    double A[9][END12], w[6][END12];
    tube_coordinates(t->L, A);
    for (int i = 0; i < 6; i++)
        for (int j = 0; j < END12; j++) {
            w[i][j] = 0;
            for (int k = 0; k < END12; k++) w[i][j] += A[i][k] * F[k][j];
        }
    for (int i = 0; i < 6; i++)
        for (int j = 0; j < 6; j++) {
            G[6 * i + j] = 0;
            for (int k = 0; k < END12; k++) G[6 * i + j] += w[i][k] * A[j][k];
        }
}

void restrained_set(Restrained *x, const double F[END12][END12])
{
    double G[END12 * END12], values[END12], vectors[END12 * END12];
    const int n = x->n = x->kernel == OWN_PLANES ? 6 : END12;
    for (int i = 0; i < n; i++) x->scale[i] = n == END12 && i % 6 < 3 ? x->tube->L : 1;
    if (n == 6) bending_flexibility(x->tube, F, G);
    for (int i = 0; n == END12 && i < n; i++)
        for (int j = 0; j < n; j++) G[i * n + j] = F[i][j] / (x->scale[i] * x->scale[j]);
    symmetric_eigen(n, G, values, vectors);
    const double largest = fmax(fabs(values[0]), fabs(values[n - 1]));
    x->kept = x->negative = 0;
    for (int e = 0; e < n; e++) {
        if (!(fabs(values[e]) > 1e-13 * largest)) continue; /* held there */
        x->stiff[x->kept] = 1 / values[e];
        x->negative += values[e] < 0;
        memcpy(x->Q + x->kept++ * n, vectors + e * n, (size_t)n * sizeof *vectors);
    }
    x->count0 = tube_at(x, 0, x->S0);
}

/* ---- count and root ------------------------------------------------------------------------------------------------- */

/* The change D of the tube's matrix; its count, -1 near a pole. */
static int change(const Restrained *x, double delta, double *D)
{
    const int n = x->n;
    if (x->kernel != OWN_PLANES) {
        const int count = tube_at(x, delta, D);
        for (int i = 0; i < n * n; i++) D[i] -= x->S0[i];
        return count;
    }
    double d[6];
    const int count = planes_at(x, delta, d);
    memset(D, 0, 36 * sizeof *D);
    for (int i = 0; i < 6; i++) D[7 * i] = d[i] - x->S0[i] + (i % 3 == 0 ? x->hold_chord : 0);
    return count;
}

/* W [kept][kept] = 1/F + Q D Q'. */
static void matrix_at(const Restrained *x, const double *D, double *W)
{
    const int n = x->n, m = x->kept;
    for (int i = 0; i < m; i++) {
        double w[END12];
        for (int j = 0; j < n; j++) {
            w[j] = 0;
            for (int k = 0; k < n; k++) w[j] += x->Q[i * n + k] * D[k * n + j];
        }
        for (int k = 0; k < m; k++) {
            double sum = i == k ? x->stiff[i] : 0;
            for (int j = 0; j < n; j++) sum += w[j] * x->Q[k * n + j];
            W[i * m + k] = sum;
        }
    }
}

int restrained_count(const Restrained *x, double delta)
{
    double D[END12 * END12], W[END12 * END12];
    static const double move[] = {0, 1e-13, 1e-12, 1e-10};
    for (size_t i = 0; i < sizeof move / sizeof *move; i++) {
        const int count = change(x, delta * (1 + move[i]), D);
        if (count >= MANY) return MANY;
        if (count < 0) continue;
        matrix_at(x, D, W);
        return symmetric_count(x->kept, W) - x->negative + count - x->count0;
    }
    return MANY;
}

double restrained_root(const Restrained *x, int which, double hi)
{
    double lo = 0;
    for (int widen = 0; restrained_count(x, hi) < which; widen++) {
        if (widen == 40) return NAN;
        lo = hi;
        hi *= 1.5;
    }
    const double floor = 1e-13 * hi;
    for (int pass = 0; pass < 80 && hi - lo > fmax(floor, 1e-14 * hi); pass++) {
        const double middle = (lo + hi) / 2;
        if (restrained_count(x, middle) >= which) hi = middle;
        else lo = middle;
    }
    return (lo + hi) / 2;
}

/* ---- what else it tells ------------------------------------------------------------------------------------------------ */

/* Coordinates of the critical state; false when the ends stand still in it. */
static bool critical_vector(const Restrained *x, double delta, double q[9])
{
    double D[END12 * END12], W[END12 * END12], values[END12], vectors[END12 * END12], d[END12] = {0};
    const int n = x->n, m = x->kept;
    if (m == 0 || change(x, delta, D) < 0) return false;
    matrix_at(x, D, W);
    symmetric_eigen(m, W, values, vectors);
    int e = 0;
    double largest = 0;
    for (int i = 0; i < m; i++) {
        if (fabs(values[i]) < fabs(values[e])) e = i;
        largest = fmax(largest, fabs(values[i]));
    }
    if (fabs(values[e]) > 1e-6 * largest) return false;
    for (int k = 0; k < m; k++)
        for (int i = 0; i < n; i++) d[i] += vectors[e * m + k] * x->Q[k * n + i] * x->scale[i];
    if (n == 6) {
        memcpy(q, d, 6 * sizeof *q);
        return true;
    }
    double A[9][END12], ends[END12];
    tube_arm_ends(x->tube, d, ends);
    tube_coordinates(x->tube->L, A);
    for (int k = 0; k < 9; k++) {
        q[k] = 0;
        for (int i = 0; i < END12; i++) q[k] += A[k][i] * ends[i];
    }
    return true;
}

void restrained_direction(const Restrained *x, double delta, double yz[2])
{
    double q[9];
    const double Iy = x->tube->section.Iy, Iz = x->tube->section.Iz;
    yz[0] = Iz <= Iy ? 1 : 0, yz[1] = 1 - yz[0]; /* between still ends: the soft way */
    if (!critical_vector(x, delta, q)) return;
    double size[2];
    for (int p = 0; p < 2; p++) { /* what compression gives up in the plane, by d f/d w */
        const MeshTube *t = x->tube;
        const double EI = plane_stiffness(t, p), *a = q + 3 * p;
        double df[3];
        const double P = x->kernel == OWN_FORM ? delta : delta - x->N; /* near enough for a direction */
        exact_plane_slope(P * t->L * t->L / EI, exact_shear_number(t, p), df);
        size[p] = -(df[0] * a[0] * a[0] + df[1] * a[1] * a[1] + df[2] * a[2] * a[2]) / t->L;
        size[p] = size[p] > 0 ? sqrt(size[p]) : 0;
    }
    if (!(size[0] + size[1] > 0)) return;
    /* The planes bow together or apart as their larger parts do. */
    const int lead = fabs(q[1] * q[4]) >= fabs(q[2] * q[5]) ? 1 : 2;
    const double sign = q[lead] * q[3 + lead] < 0 ? -1 : 1, norm = hypot(size[0], size[1]);
    yz[0] = size[0] / norm, yz[1] = sign * size[1] / norm;
}

/* Inverse of a small symmetric positive matrix by its eigenvectors; false when it is singular. */
static bool invert(int n, const double *A, double *B)
{
    double copy[16], values[4], vectors[16];
    memcpy(copy, A, (size_t)(n * n) * sizeof *copy);
    symmetric_eigen(n, copy, values, vectors);
    memset(B, 0, (size_t)(n * n) * sizeof *B);
    for (int e = 0; e < n; e++) {
        if (!(fabs(values[e]) > 1e-12 * fabs(values[n - 1]))) return false;
        for (int i = 0; i < n; i++)
            for (int j = 0; j < n; j++) B[i * n + j] += vectors[e * n + i] * vectors[e * n + j] / values[e];
    }
    return true;
}

/* Flexibility of the end rotations relative to the chord (about z then y at end 1, the same at end 2), chord held. */
static bool end_flexibility(const MeshTube *t, const double F[END12][END12], double R[16])
{
    double G[36], w[4][2], pp[4], inverse[4];
    bending_flexibility(t, F, G);
    /* relative rotations: end 1 = a2 - a1, end 2 = a2 + a1 */
    static const int plus[4] = {2, 5, 2, 5}, other[4] = {1, 4, 1, 4}, sign[4] = {-1, -1, 1, 1};
    for (int i = 0; i < 4; i++)
        for (int j = 0; j < 4; j++)
            R[4 * i + j] = G[6 * plus[i] + plus[j]] + sign[j] * G[6 * plus[i] + other[j]] +
                           sign[i] * G[6 * other[i] + plus[j]] + sign[i] * sign[j] * G[6 * other[i] + other[j]];
    for (int i = 0; i < 4; i++)
        for (int p = 0; p < 2; p++) w[i][p] = G[6 * plus[i] + 3 * p] + sign[i] * G[6 * other[i] + 3 * p];
    for (int p = 0; p < 2; p++)
        for (int q = 0; q < 2; q++) pp[2 * p + q] = G[18 * p + 3 * q];
    if (fabs(pp[0]) + fabs(pp[3]) < 1e-14 * (fabs(R[0]) + fabs(R[5]))) return true; /* supports hold the chord */
    if (!invert(2, pp, inverse)) return false;
    for (int i = 0; i < 4; i++)
        for (int j = 0; j < 4; j++)
            for (int p = 0; p < 2; p++)
                for (int q = 0; q < 2; q++) R[4 * i + j] -= w[i][p] * inverse[2 * p + q] * w[j][q];
    return true;
}

void restrained_ends(const Restrained *x, const double F[END12][END12], double k[2][2][2])
{
    double R[16], K[16], rest[16], part[4], inverse[4];
    for (int i = 0; i < 8; i++) (&k[0][0][0])[i] = NAN;
    if (x->kernel != OWN_PLANES || !end_flexibility(x->tube, F, R) || !invert(4, R, K)) return;
    double scale = 0;
    for (int i = 0; i < 4; i++) scale = fmax(scale, K[5 * i]);
    for (int p = 0; p < 2; p++) { /* the tube's own part taken out: a1'f1 a1 + a2'f2 a2 in end rotations */
        const double f1 = x->S0[3 * p + 1], f2 = x->S0[3 * p + 2], near = (f1 + f2) / 4, far = (f2 - f1) / 4;
        K[5 * p] -= near, K[5 * (p + 2)] -= near;
        K[4 * p + p + 2] -= far, K[4 * (p + 2) + p] -= far;
    }
    for (int i = 0; i < 16; i++)
        if (fabs(K[i]) < 1e-11 * scale) K[i] = 0; /* lost in the subtraction: nothing to speak of */
    if (!invert(4, K, rest)) return;
    for (int e = 0; e < 2; e++) {
        for (int i = 0; i < 2; i++)
            for (int j = 0; j < 2; j++) part[2 * i + j] = rest[4 * (2 * e + i) + 2 * e + j];
        if (!invert(2, part, inverse)) continue;
        /* rows: about y, about z */
        k[e][0][0] = inverse[3], k[e][1][1] = inverse[0], k[e][0][1] = k[e][1][0] = -inverse[1];
    }
}
