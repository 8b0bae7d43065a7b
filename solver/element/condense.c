/* condense.c - elimination of a tube's interior unknowns at a factor, with the signs of the pivots.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "element/element.h"

/* Unpivoted L D L' of B = I + f G_ii: the diagonal of B is near 1, so a pivot near zero means an eigenvalue
 * near f, and the caller moves f. Returns the negative pivots or -1. */
static int factorise(int m, double *B)
{
    int negative = 0;
    for (int i = 0; i < m; i++) {
        double *bi = B + i * m;
        for (int j = 0; j < i; j++) {
            const double *bj = B + j * m;
            double s = bi[j];
            for (int k = 0; k < j; k++) s -= bi[k] * bj[k];
            bi[j] = s; /* l_ij d_j, scaled below */
        }
        double d = bi[i];
        for (int k = 0; k < i; k++) {
            const double l = bi[k] / B[k * m + k];
            d -= l * bi[k];
            bi[k] = l;
        }
        if (!(fabs(d) > 1e-10)) return -1;
        bi[i] = d;
        negative += d < 0;
    }
    return negative;
}

int tube_condense(const TubeForm *form, double factor, double *L, double S[END12][END12])
{
    const int m = form->m, n = END12 + m;
    for (int i = 0; i < END12; i++)
        for (int j = 0; j < END12; j++) S[i][j] = form->K[i][j] + factor * form->G[i * n + j];
    for (int i = 0; i < m; i++)
        for (int j = 0; j <= i; j++) L[i * m + j] = (i == j) + factor * form->G[(END12 + i) * n + END12 + j];
    const int negative = factorise(m, L);
    if (negative < 0) return negative;
    double W[MAX_INTERIOR][END12]; /* L^-1 G_ij */
    for (int i = 0; i < m; i++) {
        memcpy(W[i], form->G + (END12 + i) * n, sizeof W[i]);
        for (int k = 0; k < i; k++) {
            const double l = L[i * m + k];
            for (int j = 0; j < END12; j++) W[i][j] -= l * W[k][j];
        }
    }
    for (int k = 0; k < m; k++) {
        const double c = factor * factor / L[k * m + k];
        for (int i = 0; i < END12; i++)
            for (int j = 0; j < END12; j++) S[i][j] -= c * W[k][i] * W[k][j];
    }
    return negative;
}

void tube_interior_solve(int m, const double *L, double *x)
{
    enum { R = 8 };
    for (int i = 0; i < m; i++)
        for (int k = 0; k < i; k++) {
            const double l = L[i * m + k];
            for (int r = 0; r < R; r++) x[i * R + r] -= l * x[k * R + r];
        }
    for (int i = m - 1; i >= 0; i--) {
        const double d = 1 / L[i * m + i];
        for (int r = 0; r < R; r++) x[i * R + r] *= d;
        for (int k = i + 1; k < m; k++) {
            const double l = L[k * m + i];
            for (int r = 0; r < R; r++) x[i * R + r] -= l * x[k * R + r];
        }
    }
}
