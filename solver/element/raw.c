/* raw.c - elastic and geometric matrices of a tube in Legendre series.
 *
 * With slopes in Legendre polynomials, bubbles d_j (P_j+1 - P_j-1), j >= 2, leave the end values alone and
 * their curvatures are orthogonal, so the elastic matrix is diagonal; geometric terms are short products.
 * A shear-flexible tube keeps the slope of the axis as unknowns of its own beside the rotation.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "element/raw.h"

enum { MAX_SERIES = MAX_BUBBLES + 8 };

static Series one(int k, double a) { return (Series){.n = 1, .k = {k, 0}, .a = {a, 0}}; }

static Series two(int k, double a, int l, double b) { return (Series){.n = 2, .k = {k, l}, .a = {a, b}}; }

static const Series none = {0};

/* ---- the functions ------------------------------------------------------------------------------------ */

static PlaneFunction slender(Series s, Series curvature)
{
    return (PlaneFunction){.slope = s, .rotation = s, .curvature = curvature};
}

/* Euler-Bernoulli bubble j >= 2 of unit bending energy x 2. */
static PlaneFunction bubble(int j, double L, double EI)
{
    const double d = sqrt(L / (4 * EI * (2 * j + 1)));
    return slender(two(j + 1, d, j - 1, -d), one(j, 2 / L * d * (2 * j + 1)));
}

static int plane_slender(double L, double EI, int bubbles, PlaneFunction *f)
{
    f[0] = slender(one(0, 1), none);
    f[1] = slender(one(1, 1), one(0, 2 / L));
    f[2] = slender(one(2, 1), one(1, 6 / L));
    for (int j = 2; j < bubbles + 2; j++) f[j + 1] = bubble(j, L, EI);
    return bubbles + 3;
}

/* Shear flexible: rotation bubbles from j = 1 (their mean is the shear's), slopes P_k, k >= 1, of their own. */
static int plane_shear(double L, double EI, double GA, int bubbles, PlaneFunction *f)
{
    f[0] = slender(one(0, 1), none);
    f[1] = slender(one(1, 1), one(0, 2 / L));
    f[2] = (PlaneFunction){.slope = none, .rotation = one(0, 1), .curvature = none};
    const double d = sqrt(L / (12 * EI));
    int n = 3;
    f[n++] = (PlaneFunction){.slope = one(2, d), .rotation = two(2, d, 0, -d), .curvature = one(1, 6 / L * d)};
    for (int j = 2; j < bubbles + 2; j++) f[n++] = bubble(j, L, EI);
    for (int k = 1; k < bubbles + 2; k++) f[n++] = (PlaneFunction){.slope = one(k, sqrt((2 * k + 1) / (GA * L)))};
    return n;
}

static int twist_functions(double L, double GJ, int bubbles, TwistFunction *f)
{
    f[0] = (TwistFunction){.angle = one(0, 1), .rate = none};
    f[1] = (TwistFunction){.angle = one(1, 1), .rate = one(0, 2 / L)};
    for (int j = 1; j <= bubbles; j++) {
        const double e = sqrt((2 * j + 1) / (GJ * L)), a = e * L / 2 / (2 * j + 1);
        f[j + 1] = (TwistFunction){.angle = two(j + 1, a, j - 1, -a), .rate = one(j, e)};
    }
    return bubbles + 2;
}

static double plane_EI(const MeshTube *t, int plane) { return t->E * (plane == 0 ? t->section.Iz : t->section.Iy); }

static double plane_GA(const MeshTube *t, int plane)
{
    return t->G * (plane == 0 ? t->section.As_y : t->section.As_z);
}

void raw_layout(const MeshTube *t, TubeBasis basis, RawTube *raw)
{
    raw->tube = t;
    for (int p = 0; p < 2; p++)
        raw->nplane = t->shear ? plane_shear(t->L, plane_EI(t, p), plane_GA(t, p), basis.bending, raw->plane[p])
                               : plane_slender(t->L, plane_EI(t, p), basis.bending, raw->plane[p]);
    raw->ntwist = twist_functions(t->L, t->G * t->section.J, basis.torsion, raw->twist);
    raw->n = END12 + 2 * (raw->nplane - 3) + raw->ntwist - 2;
    raw->nfree = 0;
    if (!t->has_joint_parts) return;
    raw->nfree = tube_freed_ends(t, raw->free_end);
}

/* ---- products ------------------------------------------------------------------------------------------- */

/* out := xi out, with xi P_k = ((k + 1) P_k+1 + k P_k-1)/(2k + 1); length terms become one more. */
static void times_xi(double *out, int length)
{
    double next[MAX_SERIES] = {0};
    for (int k = 0; k < length; k++) {
        next[k + 1] += out[k] * (k + 1) / (2 * k + 1);
        if (k > 0) next[k - 1] += out[k] * k / (2 * k + 1);
    }
    memcpy(out, next, (size_t)(length + 1) * sizeof *out);
}

/* out := (p0 + p1 xi + .. ) s as a Legendre series, by Horner; returns its length. */
static int times_polynomial(const Series *s, const double *p, int degree, double out[MAX_SERIES])
{
    while (degree > 0 && p[degree] == 0) degree--;
    int length = 0;
    for (int i = 0; i < s->n; i++)
        if (s->k[i] + 1 > length) length = s->k[i] + 1;
    memset(out, 0, (size_t)(length + degree + 1) * sizeof *out);
    for (int power = degree;; power--) {
        for (int i = 0; i < s->n; i++) out[s->k[i]] += p[power] * s->a[i];
        if (power == 0) return length;
        times_xi(out, length++);
    }
}

/* Integral over xi of a dense series of some length times s. */
static double inner(const double *dense, int length, const Series *s)
{
    double sum = 0;
    for (int i = 0; i < s->n; i++)
        if (s->k[i] < length) sum += dense[s->k[i]] * s->a[i] * 2 / (2 * s->k[i] + 1);
    return sum;
}

static double at_end(const Series *s, int end)
{
    double sum = 0;
    for (int i = 0; i < s->n; i++) sum += end == 0 && s->k[i] % 2 ? -s->a[i] : s->a[i];
    return sum;
}

double series_integral(const Series *s, double xi)
{
    /* int P_k = (P_k+1 - P_k-1)/(2k + 1) */
    double P[MAX_SERIES] = {1, xi}, sum = 0;
    for (int k = 1; k + 1 < MAX_SERIES; k++) P[k + 1] = ((2 * k + 1) * xi * P[k] - k * P[k - 1]) / (k + 1);
    for (int i = 0; i < s->n; i++) {
        const int k = s->k[i];
        sum += s->a[i] * (k == 0 ? xi + 1 : (P[k + 1] - P[k - 1]) / (2 * k + 1));
    }
    return sum;
}

/* ---- generalised matrices ------------------------------------------------------------------------------- */

enum { MAX_GENERAL = 2 * MAX_PLANE + MAX_TWIST + 1 };

typedef struct General {
    int n, w, twist, strain; /* size; first unknown of the plane of w, of twist, the strain */
    double value[MAX_GENERAL][MAX_GENERAL];
} General;

static void general_start(const RawTube *raw, General *g)
{
    g->w = raw->nplane;
    g->twist = 2 * raw->nplane;
    g->strain = g->twist + raw->ntwist;
    g->n = g->strain + 1;
    for (int i = 0; i < g->n; i++) memset(g->value[i], 0, (size_t)g->n * sizeof(double));
}

static void both(General *g, int i, int j, double v)
{
    g->value[i][j] += v;
    if (i != j) g->value[j][i] += v;
}

/* Adds the generalised matrix to M [n][n]: end unknowns through g = A e, the others in place. The arm ends
 * of freed directions are not touched: their tube end is an unknown of its own. */
static void general_add(const RawTube *raw, const General *g, int n, double *M)
{
    double A[9][END12];
    tube_coordinates(raw->tube->L, A);
    int where[MAX_GENERAL], end9[MAX_GENERAL], next = END12;
    for (int i = 0; i < g->n; i++) {
        const int in_plane = i < g->twist ? i % raw->nplane : 3;
        end9[i] = i < g->twist ? (in_plane < 3 ? 3 * (i / raw->nplane) + in_plane : -1)
                  : i < g->strain ? (i - g->twist < 2 ? 6 + i - g->twist : -1) : 8;
        where[i] = end9[i] < 0 ? next++ : -1;
    }
    int column[END12];
    for (int k = 0; k < END12; k++) column[k] = k;
    for (int k = 0; k < raw->nfree; k++) column[raw->free_end[k]] = raw->n + k;
    for (int i = 0; i < g->n; i++) {
        double row[END12] = {0}; /* the row's end part, in e */
        for (int j = 0; j < g->n; j++) {
            const double v = g->value[i][j];
            if (v == 0) continue;
            if (end9[j] < 0) {
                if (end9[i] < 0) M[where[i] * n + where[j]] += v;
                continue;
            }
            for (int k = 0; k < END12; k++) row[k] += v * A[end9[j]][k];
        }
        for (int k = 0; k < END12; k++) {
            if (row[k] == 0) continue;
            if (end9[i] < 0) {
                M[where[i] * n + column[k]] += row[k];
                M[column[k] * n + where[i]] += row[k];
                continue;
            }
            for (int l = 0; l < END12; l++) M[column[l] * n + column[k]] += A[end9[i]][l] * row[k];
        }
    }
}

static void plane_elastic(const RawTube *raw, int plane, General *g)
{
    const MeshTube *t = raw->tube;
    const double one_[1] = {1}, EI = plane_EI(t, plane), GA = plane_GA(t, plane), half = t->L / 2;
    const PlaneFunction *f = raw->plane[plane];
    const int base = plane == 0 ? 0 : g->w;
    for (int i = 0; i < raw->nplane; i++) {
        double c[MAX_SERIES], s[MAX_SERIES], r[MAX_SERIES];
        const int nc = times_polynomial(&f[i].curvature, one_, 0, c);
        const int ns = times_polynomial(&f[i].slope, one_, 0, s), nr = times_polynomial(&f[i].rotation, one_, 0, r);
        for (int j = 0; j <= i; j++) {
            double v = EI * half * inner(c, nc, &f[j].curvature);
            if (t->shear)
                v += GA * half * (inner(s, ns, &f[j].slope) - inner(s, ns, &f[j].rotation) -
                                  inner(r, nr, &f[j].slope) + inner(r, nr, &f[j].rotation));
            both(g, base + i, base + j, v);
        }
    }
}

static void add_springs(const RawTube *raw, int n, double *K)
{
    for (int k = 0; k < raw->nfree; k++) {
        const int i = raw->free_end[k], e = raw->n + k;
        const double s = tube_end_spring(raw->tube, i);
        K[i * n + i] += s, K[e * n + e] += s, K[i * n + e] -= s, K[e * n + i] -= s;
    }
}

void raw_stiffness(const RawTube *raw, double *K)
{
    const MeshTube *t = raw->tube;
    const int n = raw->n + raw->nfree;
    General g;
    general_start(raw, &g);
    plane_elastic(raw, 0, &g);
    plane_elastic(raw, 1, &g);
    both(&g, g.twist + 1, g.twist + 1, 4 * t->G * t->section.J / t->L);
    for (int i = 2; i < raw->ntwist; i++) both(&g, g.twist + i, g.twist + i, 1);
    both(&g, g.strain, g.strain, t->E * t->section.A * t->L);
    general_add(raw, &g, n, K);
    add_springs(raw, n, K);
}

/* N/2 (v'^2 + w'^2) + N Ip/(2A) twist'^2 */
static void by_axial(const RawTube *raw, const TubeForces *f, General *g)
{
    const MeshTube *t = raw->tube;
    const double half = t->L / 2, polar = (t->section.Iy + t->section.Iz) / t->section.A;
    double d[MAX_SERIES];
    for (int p = 0; p < 2; p++)
        for (int i = 0; i < raw->nplane; i++) {
            const int length = times_polynomial(&raw->plane[p][i].slope, f->N, 2, d);
            for (int j = 0; j <= i; j++) {
                const double v = half * inner(d, length, &raw->plane[p][j].slope);
                if (v != 0) both(g, p * g->w + i, p * g->w + j, v);
            }
        }
    for (int i = 1; i < raw->ntwist; i++) {
        const int length = times_polynomial(&raw->twist[i].rate, f->N, 2, d);
        for (int j = 1; j <= i; j++)
            both(g, g->twist + i, g->twist + j, half * polar * inner(d, length, &raw->twist[j].rate));
    }
}

/* - (M twist)' slope, with M = Mz for the plane of w and My for that of v, and half its end values. */
static void by_moment(const RawTube *raw, const double M[4], int plane, General *g)
{
    const MeshTube *t = raw->tube;
    const double D[3] = {2 / t->L * M[1], 4 / t->L * M[2], 6 / t->L * M[3]}; /* dM/dx */
    const double at[2] = {M[0] - M[1] + M[2] - M[3], M[0] + M[1] + M[2] + M[3]};
    for (int i = 0; i < raw->ntwist; i++) {
        double d[MAX_SERIES], r[MAX_SERIES];
        const int nd = times_polynomial(&raw->twist[i].angle, D, 2, d);
        const int nr = times_polynomial(&raw->twist[i].rate, M, 3, r);
        for (int j = 0; j < raw->nplane; j++) {
            const PlaneFunction *f = &raw->plane[plane][j];
            double v = -t->L / 2 * (inner(d, nd, &f->slope) + inner(r, nr, &f->slope));
            for (int e = 0; e < 2 && j < 3; e++)
                v += (e ? 0.5 : -0.5) * at[e] * at_end(&raw->twist[i].angle, e) * at_end(&f->rotation, e);
            if (v != 0) both(g, g->twist + i, plane * g->w + j, v);
        }
    }
    /* u' (M rotation)': only end values count, the strain being constant. */
    for (int j = 0; j < 3; j++) {
        const int other = 1 - plane; /* Mz with the rotation of v, -My with that of w */
        const Series *r = &raw->plane[other][j].rotation;
        const double v = at[1] * at_end(r, 1) - at[0] * at_end(r, 0);
        both(g, g->strain, other * g->w + j, other == 0 ? v : -v);
    }
}

/* Mx/2 (rotation_v' rotation_w - rotation_w' rotation_v) */
static void by_torque(const RawTube *raw, double Mx, General *g)
{
    if (Mx == 0) return;
    const double c = Mx / 2 * raw->tube->L / 2, one_[1] = {1};
    for (int i = 0; i < raw->nplane; i++) {
        double r[MAX_SERIES], k[MAX_SERIES];
        const int nr = times_polynomial(&raw->plane[0][i].rotation, one_, 0, r);
        const int nk = times_polynomial(&raw->plane[0][i].curvature, one_, 0, k);
        for (int j = 0; j < raw->nplane; j++) {
            const PlaneFunction *w = &raw->plane[1][j];
            const double v = c * (inner(k, nk, &w->rotation) - inner(r, nr, &w->curvature));
            if (v != 0) both(g, i, g->w + j, v);
        }
    }
}

/* Initial-stress energy with the second-order section rotation R = I + S + S^2/2 (theory of the consistent
 * geometric stiffness with semi-tangential joint moments; derivation in DEVELOPERS.md, tested by rigid rotation). */
void raw_geometric(const RawTube *raw, const TubeForces *f, double *G)
{
    General g;
    general_start(raw, &g);
    by_axial(raw, f, &g);
    by_moment(raw, f->Mz, 1, &g);
    by_moment(raw, f->My, 0, &g);
    by_torque(raw, f->Mx, &g);
    general_add(raw, &g, raw->n + raw->nfree, G);
}
