/* exact.c - the exact member under a constant axial force: stability functions with Engesser shear.
 *
 * Split into rotations that are equal and opposite relative to the chord (symmetric) and equal (antisymmetric)
 * the two functions are  2 g  and  1/(2 h/beta + Phi g/6)  with g = (u/2) cot(u/2), h = (1 - g)/u^2, both
 * analytic through zero force (Livesley and Chandler 1956 give the unsplit functions; from memory).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "element/element.h"

static const double PI = 3.14159265358979323846;

/* h = sum c_k x^k for small x: 1/12, 1/720, ... (Bernoulli numbers). */
static const double series_h[] = {1.0 / 12,      1.0 / 720,          1.0 / 30240,       1.0 / 1209600,
                                  1.0 / 47900160, 691.0 / 1307674368000.0, 1.0 / 74724249600.0,
                                  3617.0 / 10670622842880000.0};
enum { NSERIES = sizeof series_h / sizeof series_h[0] };

/* g, h and their derivatives by x = u^2 (negative in tension). */
typedef struct GH {
    double g, h, dg, dh;
} GH;

static GH functions(double x)
{
    GH f = {0};
    if (fabs(x) < 0.5) {
        for (int k = NSERIES - 1; k >= 0; k--) f.h = f.h * x + series_h[k];
        for (int k = NSERIES - 1; k >= 1; k--) f.dh = f.dh * x + k * series_h[k];
        f.g = 1 - x * f.h;
        f.dg = -f.h - x * f.dh;
        return f;
    }
    const double half = sqrt(fabs(x)) / 2;
    f.g = x > 0 ? half / tan(half) : half / tanh(half);
    f.h = (1 - f.g) / x;
    f.dg = (f.g - f.g * f.g - x / 4) / (2 * x);
    f.dh = (-f.dg - f.h) / x;
    return f;
}

/* Clamped-clamped critical states below. Symmetric ones are the poles u = 2 pi n; antisymmetric ones sit where
 * beta g = 1, once a branch n >= 1. Branch number and sign of g are made consistent at a pole. */
static int clamped_count(double x, double beta, double g)
{
    if (x <= 0) return 0;
    const double t = sqrt(x) / (2 * PI);
    int n = (int)floor(t);
    if (n >= 1 && t - n < 1e-9 && g < 0) n--;
    else if (n + 1 - t < 1e-9 && t > 0.5 && g > 0) n++;
    return n == 0 ? 0 : 2 * n - 1 + (beta * g < 1);
}

int exact_plane(double w, double Phi, double f[3])
{
    const double beta = 1 - w * Phi / 12;
    if (!(beta > 0)) return -1;
    const GH v = functions(w / beta);
    f[0] = -w;
    f[1] = 4 * v.g;
    f[2] = 2 / (2 * v.h / beta + Phi * v.g / 6);
    return clamped_count(w / beta, beta, v.g);
}

void exact_plane_slope(double w, double Phi, double df[3])
{
    const double beta = 1 - w * Phi / 12, dx = 1 / (beta * beta);
    const GH v = functions(w / beta);
    const double D = 2 * v.h / beta + Phi * v.g / 6;
    const double dD = 2 * v.dh * dx / beta + v.h * Phi / (6 * beta * beta) + Phi * v.dg * dx / 6;
    df[0] = -1;
    df[1] = 4 * v.dg * dx;
    df[2] = -2 * dD / (D * D);
}

double exact_shear_number(const MeshTube *t, int plane)
{
    if (!t->shear) return 0;
    const double EI = t->E * (plane == 0 ? t->section.Iz : t->section.Iy);
    return 12 * EI / (t->G * (plane == 0 ? t->section.As_y : t->section.As_z) * t->L * t->L);
}

/* The nine diagonal values; returns J0 of both planes or -1. */
static int exact_diagonal(const MeshTube *t, double N, double d[9])
{
    int count = 0;
    for (int p = 0; p < 2; p++) {
        const double EI = t->E * (p == 0 ? t->section.Iz : t->section.Iy);
        const int c = exact_plane(-N * t->L * t->L / EI, exact_shear_number(t, p), d + 3 * p);
        if (c < 0) return -1;
        count += c;
        for (int k = 0; k < 3; k++) d[3 * p + k] *= EI / t->L;
        if (!isfinite(d[3 * p + 1]) || !isfinite(d[3 * p + 2])) return -1;
    }
    d[6] = 0;
    d[7] = 4 * t->G * t->section.J / t->L;
    d[8] = t->E * t->section.A * t->L;
    return count;
}

/* Eliminates the last unknown of M [n][n] (leading dimension ld); its sign, or -2 near zero. */
static int eliminate_last(int n, int ld, double *M)
{
    const double *row = M + (n - 1) * ld, d = row[n - 1];
    double scale = 0;
    for (int i = 0; i < n; i++) scale = fmax(scale, fabs(row[i]));
    if (!(fabs(d) > 1e-12 * scale)) return -2;
    for (int i = 0; i < n - 1; i++)
        for (int j = 0; j < n - 1; j++) M[i * ld + j] -= row[i] * row[j] / d;
    return d < 0 ? -1 : 1;
}

int exact_matrix(const MeshTube *t, double N, const double end[END12], double S[END12][END12])
{
    double A[9][END12], d[9];
    int count = exact_diagonal(t, N, d);
    if (count < 0) return -1;
    tube_coordinates(t->L, A);
    int freed[END12], column[END12];
    const int nfree = t->has_joint_parts ? tube_freed_ends(t, freed) : 0, n = END12 + nfree;
    for (int i = 0; i < END12; i++) column[i] = i;
    for (int k = 0; k < nfree; k++) column[freed[k]] = END12 + k;
    double M[2 * END12 * 2 * END12];
    memset(M, 0, (size_t)(n * n) * sizeof *M);
    for (int k = 0; k < 9; k++)
        for (int i = 0; i < END12; i++)
            for (int j = 0; j < END12 && A[k][i] != 0; j++) M[column[i] * n + column[j]] += A[k][i] * d[k] * A[k][j];
    for (int k = 0; k < nfree; k++) {
        const int a = freed[k], e = END12 + k;
        const double s = tube_end_spring(t, a);
        M[a * n + a] += s, M[e * n + e] += s, M[a * n + e] -= s, M[e * n + a] -= s;
    }
    for (int k = nfree - 1; k >= 0; k--) {
        const int sign = eliminate_last(END12 + k + 1, n, M);
        if (sign == -2) return -1;
        count += sign < 0;
    }
    for (int i = 0; i < END12; i++) memcpy(S[i], M + i * n, sizeof S[i]);
    tube_arms(t, END12, &S[0][0]);
    tube_arm_stiffness(t, end, END12, &S[0][0]);
    return count;
}
