/* coordinates.c - tube-end displacements, arms (offsets) and the nine generalised coordinates.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "element/element.h"

void tube_coordinates(double L, double A[9][END12])
{
    memset(A, 0, sizeof(double[9][END12]));
    A[0][7] = 1 / L, A[0][1] = -1 / L;
    A[1][11] = 0.5, A[1][5] = -0.5;
    A[2][11] = 0.5, A[2][5] = 0.5, A[2][7] = -1 / L, A[2][1] = 1 / L;
    /* The slope of w is minus the rotation about y. */
    A[3][8] = 1 / L, A[3][2] = -1 / L;
    A[4][10] = -0.5, A[4][4] = 0.5;
    A[5][10] = -0.5, A[5][4] = -0.5, A[5][8] = -1 / L, A[5][2] = 1 / L;
    A[6][3] = 0.5, A[6][9] = 0.5;
    A[7][9] = 0.5, A[7][3] = -0.5;
    A[8][6] = 1 / L, A[8][0] = -1 / L;
}

/* e = j + t x r: entry (i, k) of the arm's part that multiplies the rotation. */
static void arm_matrix(const double r[3], double X[3][3])
{
    const double m[3][3] = {{0, r[2], -r[1]}, {-r[2], 0, r[0]}, {r[1], -r[0], 0}};
    memcpy(X, m, sizeof m);
}

void tube_arm_ends(const MeshTube *t, const double j[END12], double e[END12])
{
    memcpy(e, j, sizeof(double[END12]));
    if (!t->has_offset) return;
    for (int end = 0; end < 2; end++) {
        double X[3][3];
        arm_matrix(t->offset[end], X);
        for (int i = 0; i < 3; i++)
            for (int k = 0; k < 3; k++) e[6 * end + i] += X[i][k] * j[6 * end + 3 + k];
    }
}

void tube_arms(const MeshTube *t, int n, double *K)
{
    if (!t->has_offset) return;
    for (int end = 0; end < 2; end++) {
        double X[3][3];
        arm_matrix(t->offset[end], X);
        const int u = 6 * end, r = 6 * end + 3;
        for (int row = 0; row < n; row++) /* K := K O: columns of rotations gain those of translations */
            for (int k = 0; k < 3; k++)
                for (int i = 0; i < 3; i++) K[row * n + r + k] += K[row * n + u + i] * X[i][k];
        for (int column = 0; column < n; column++)
            for (int k = 0; k < 3; k++)
                for (int i = 0; i < 3; i++) K[(r + k) * n + column] += X[i][k] * K[(u + i) * n + column];
    }
}

void tube_arm_stiffness(const MeshTube *t, const double end[END12], int n, double *G)
{
    if (!t->has_offset) return;
    /* The end moves by t x r + t x (t x r)/2; the force f does work on the second part:
     * t'[sym(f r') - (f.r) I] t / 2. */
    for (int e = 0; e < 2; e++) {
        const double *f = end + 6 * e, *r = t->offset[e];
        const double dot = f[0] * r[0] + f[1] * r[1] + f[2] * r[2];
        for (int i = 0; i < 3; i++)
            for (int k = 0; k < 3; k++)
                G[(6 * e + 3 + i) * n + 6 * e + 3 + k] += (f[i] * r[k] + f[k] * r[i]) / 2 - (i == k ? dot : 0);
    }
}

static bool released(const MeshTube *t, int i) { return t->release[i / 6] >> (i % 6) & 1; }

int tube_freed_ends(const MeshTube *t, int freed[END12])
{
    int n = 0;
    for (int i = 0; i < END12; i++) {
        if (i == 9 && released(t, 3) && released(t, 9)) continue;
        if (released(t, i) || isfinite(t->spring[i / 6][i % 6])) freed[n++] = i;
    }
    return n;
}

double tube_end_spring(const MeshTube *t, int i) { return released(t, i) ? 0 : t->spring[i / 6][i % 6]; }
