/* families.c - shapes of equal factors: any mixture of them is a shape too, so the mixture is chosen in which each
 * is driven by as few tubes as possible (joint diagonalisation of the tubes' energies; Cardoso and Souloumiac 1996).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "analysis/buckling.h"

/* Factors closer than this count as one. */
static const double EQUAL = 1e-7;

/* A [m][m] of one tube: minus its energy, bilinear in the shapes first .. first + m - 1. */
static void tube_matrix(const Search *s, int tube, int first, int m, double *A)
{
    const Pencil *p = &s->pencil;
    const int n = END12 + p->form[tube].m;
    double x[8][MAX_RAW], sum[MAX_RAW], e[8];
    for (int k = 0; k < m; k++) {
        pencil_tube(p, tube, s->modes.x + (size_t)(first + k) * (size_t)p->n, 1, 0, x[k]);
        const TubeEnergy q = tube_energy(&p->form[tube], x[k]);
        e[k] = q.elastic + q.steady + s->modes.factor[first + k] * q.growing;
        A[k * m + k] = -e[k];
    }
    for (int k = 0; k < m; k++)
        for (int l = 0; l < k; l++) {
            for (int i = 0; i < n; i++) sum[i] = x[k][i] + x[l][i];
            const TubeEnergy q = tube_energy(&p->form[tube], sum);
            const double both = q.elastic + q.steady + s->modes.factor[first] * q.growing;
            A[k * m + l] = A[l * m + k] = -(both - e[k] - e[l]) / 2;
        }
}

/* Rotates shapes k and l of the family in all tubes' matrices. */
static void turn_matrices(int nt, int m, double *A, int k, int l, double c, double s)
{
    for (int t = 0; t < nt; t++) {
        double *M = A + t * m * m;
        for (int i = 0; i < m; i++) {
            const double a = M[i * m + k], b = M[i * m + l];
            M[i * m + k] = c * a + s * b, M[i * m + l] = c * b - s * a;
        }
        for (int i = 0; i < m; i++) {
            const double a = M[k * m + i], b = M[l * m + i];
            M[k * m + i] = c * a + s * b, M[l * m + i] = c * b - s * a;
        }
    }
}

static void turn_shapes(Modes *modes, int n, int k, int l, double c, double s)
{
    double *x = modes->x + (size_t)k * (size_t)n, *y = modes->x + (size_t)l * (size_t)n;
    for (int i = 0; i < n; i++) {
        const double a = x[i], b = y[i];
        x[i] = c * a + s * b, y[i] = c * b - s * a;
    }
}

/* The angle that makes the pair's matrices most diagonal. */
static double best_angle(int nt, int m, const double *A, int k, int l)
{
    double g11 = 0, g12 = 0, g22 = 0;
    for (int t = 0; t < nt; t++) {
        const double *M = A + t * m * m, d = M[k * m + k] - M[l * m + l], o = 2 * M[k * m + l];
        g11 += d * d, g12 += d * o, g22 += o * o;
    }
    const double on = g11 - g22, off = 2 * g12;
    return 0.5 * atan2(off, on + hypot(on, off));
}

static EfStatus separate(EfContext *cx, const Search *s, int first, int m)
{
    const int nt = s->pencil.a->nt;
    const ArenaMark mark = arena_mark(&cx->tmp);
    Modes modes = s->modes;
    double *A;
    ALLOC(cx, tmp, A, (size_t)(nt * m) * (size_t)m);
    for (int t = 0; t < nt; t++) tube_matrix(s, t, first, m, A + t * m * m);
    for (int sweep = 0, turned = 1; turned && sweep < 30; sweep++) {
        turned = 0;
        for (int k = 0; k < m; k++)
            for (int l = k + 1; l < m; l++) {
                const double angle = best_angle(nt, m, A, k, l);
                if (fabs(angle) < 1e-9) continue;
                turn_matrices(nt, m, A, k, l, cos(angle), sin(angle));
                turn_shapes(&modes, s->pencil.n, first + k, first + l, cos(angle), sin(angle));
                turned = 1;
            }
    }
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

EfStatus separate_families(EfContext *cx, const Search *s, int n)
{
    const double *f = s->modes.factor;
    for (int first = 0; first < n;) {
        int m = 1;
        while (first + m < n && m < 8 && f[first + m] - f[first] < EQUAL * f[first]) m++;
        if (m > 1) TRY(separate(cx, s, first, m));
        first += m;
    }
    return EF_OK;
}
