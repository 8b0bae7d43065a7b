/* assemble.c - axes of the joints' unknowns and the joint matrix.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "analysis/assemble.h"

#include <math.h>
#include <string.h>

#include "linalg/dense.h"

/* ---- small pieces ------------------------------------------------------------------------------------------ */

static void multiply33(double A[3][3], double B[3][3], double C[3][3]) /* C = A B' */
{
    for (int i = 0; i < 3; i++)
        for (int j = 0; j < 3; j++) C[i][j] = A[i][0] * B[j][0] + A[i][1] * B[j][1] + A[i][2] * B[j][2];
}

static void set_turns(const Assembly *a, int tube)
{
    MeshTube *t = &a->mesh->tube[tube];
    for (int e = 0; e < 2; e++)
        for (int k = 0; k < 2; k++) multiply33(t->R, a->axes[t->end[e]][k], a->turn[tube][e][k]);
}

void assembly_gather(const Assembly *a, int tube, const double *x, double *d, int n)
{
    const int *end = a->mesh->tube[tube].end;
    for (int e = 0; e < 2; e++)
        for (int k = 0; k < 2; k++) {
            double(*R)[3] = a->turn[tube][e][k];
            const double *u = x + (6 * end[e] + 3 * k) * n;
            double *out = d + (6 * e + 3 * k) * n;
            for (int i = 0; i < 3; i++)
                for (int c = 0; c < n; c++)
                    out[i * n + c] = R[i][0] * u[c] + R[i][1] * u[n + c] + R[i][2] * u[2 * n + c];
        }
}

void assembly_scatter(const Assembly *a, int tube, const double *d, double *x, int n)
{
    const int *end = a->mesh->tube[tube].end;
    for (int e = 0; e < 2; e++)
        for (int k = 0; k < 2; k++) {
            double(*R)[3] = a->turn[tube][e][k];
            double *u = x + (6 * end[e] + 3 * k) * n;
            const double *in = d + (6 * e + 3 * k) * n;
            for (int i = 0; i < 3; i++)
                for (int c = 0; c < n; c++)
                    u[i * n + c] += R[0][i] * in[c] + R[1][i] * in[n + c] + R[2][i] * in[2 * n + c];
        }
}

void assembly_to_axes(const Assembly *a, const double *global, double *own)
{
    for (int j = 0; j < a->nj; j++)
        for (int k = 0; k < 2; k++) {
            double(*R)[3] = a->axes[j][k];
            const double *g = global + 6 * j + 3 * k, v[3] = {g[0], g[1], g[2]};
            for (int i = 0; i < 3; i++) own[6 * j + 3 * k + i] = R[i][0] * v[0] + R[i][1] * v[1] + R[i][2] * v[2];
        }
}

void assembly_to_global(const Assembly *a, const double *own, double *global)
{
    for (int j = 0; j < a->nj; j++)
        for (int k = 0; k < 2; k++) {
            double(*R)[3] = a->axes[j][k];
            const double *o = own + 6 * j + 3 * k, v[3] = {o[0], o[1], o[2]};
            for (int i = 0; i < 3; i++) global[6 * j + 3 * k + i] = R[0][i] * v[0] + R[1][i] * v[1] + R[2][i] * v[2];
        }
}

/* ---- the joint matrix -------------------------------------------------------------------------------------- */

/* block += A' S B for the 6x6 part of a tube's matrix between two of its ends; A, B turn translation and rotation. */
static void add_block(double A[2][3][3], double B[2][3][3], double S[END12][END12], int row, int column, double *block)
{
    for (int p = 0; p < 2; p++)
        for (int q = 0; q < 2; q++) {
            double w[3][3]; /* S B */
            for (int i = 0; i < 3; i++)
                for (int j = 0; j < 3; j++) {
                    const double *s = &S[row + 3 * p + i][column + 3 * q];
                    w[i][j] = s[0] * B[q][0][j] + s[1] * B[q][1][j] + s[2] * B[q][2][j];
                }
            for (int i = 0; i < 3; i++)
                for (int j = 0; j < 3; j++)
                    block[6 * (3 * p + i) + 3 * q + j] += A[p][0][i] * w[0][j] + A[p][1][i] * w[1][j] + A[p][2][i] * w[2][j];
        }
}

void assembly_add_tube(const Assembly *a, int tube, double S[END12][END12], double *value)
{
    double(*T)[2][3][3] = a->turn[tube];
    const int *place = a->place[tube], *end = a->mesh->tube[tube].end;
    add_block(T[0], T[0], S, 0, 0, value + BLOCK2 * place[0]);
    add_block(T[1], T[1], S, 6, 6, value + BLOCK2 * place[1]);
    if (end[0] > end[1]) add_block(T[0], T[1], S, 0, 6, value + BLOCK2 * place[2]);
    else add_block(T[1], T[0], S, 6, 0, value + BLOCK2 * place[2]);
}

/* block(i, j) += H' A H' of two carriers of an arm, in the joints' axes. */
static void add_arm_pair(const Assembly *a, const Carrier *c, double A[3][3], int k, int l, double *value)
{
    const int i = c->joint[k], j = c->joint[l];
    if (i < j) return; /* the lower part only */
    double Hk[3][6], Hl[3][6], Gk[3][6], Gl[3][6];
    carrier_rotation_row(c, k, Hk);
    carrier_rotation_row(c, l, Hl);
    for (int r = 0; r < 3; r++) {
        for (int s = 0; s < 6; s++) { /* columns turned into the joints' axes */
            const int p = s / 3;
            const double *ak = a->axes[i][p][s % 3], *al = a->axes[j][p][s % 3];
            Gk[r][s] = Hk[r][3 * p] * ak[0] + Hk[r][3 * p + 1] * ak[1] + Hk[r][3 * p + 2] * ak[2];
            Gl[r][s] = Hl[r][3 * p] * al[0] + Hl[r][3 * p + 1] * al[1] + Hl[r][3 * p + 2] * al[2];
        }
    }
    double *block = value + BLOCK2 * pattern_block(&a->mesh->pattern, i, j);
    for (int s = 0; s < 6; s++)
        for (int t = 0; t < 6; t++)
            for (int r = 0; r < 3; r++)
                for (int q = 0; q < 3; q++) block[6 * s + t] += Gk[r][s] * A[r][q] * Gl[q][t];
}

void assembly_add_arms(const Assembly *a, const Loads *loads, double factor, double *value)
{
    for (int m = 0; m < loads->narm; m++) {
        const Carrier *c = loads->arm[m].carrier;
        const double *f = loads->arm[m].force;
        double r[3], A[3][3];
        for (int i = 0; i < 3; i++) r[i] = c->point[i] - c->centre[i];
        const double dot = f[0] * r[0] + f[1] * r[1] + f[2] * r[2];
        /* The point moves by t x r + t x (t x r)/2 and the force does work on it: K = -[sym(f r') - (f.r) I]. */
        for (int i = 0; i < 3; i++)
            for (int j = 0; j < 3; j++) A[i][j] = -factor * ((f[i] * r[j] + f[j] * r[i]) / 2 - (i == j ? dot : 0));
        for (int k = 0; k < c->ncarrier; k++)
            for (int l = 0; l < c->ncarrier; l++) add_arm_pair(a, c, A, k, l, value);
    }
}

void assembly_hold(const Assembly *a, const unsigned *held, double *value)
{
    const BlockPattern *p = &a->mesh->pattern;
    for (int j = 0; j < p->nj; j++)
        for (int b = p->start[j]; b < p->start[j + 1]; b++) {
            const int i = p->row[b];
            double *block = value + BLOCK2 * b;
            for (int s = 0; s < BLOCK; s++)
                for (int t = 0; t < BLOCK; t++)
                    if ((held[i] >> s & 1) || (held[j] >> t & 1)) block[6 * s + t] = i == j && s == t;
        }
}

void assembly_clear_held(const Assembly *a, const unsigned *held, double *x, int n)
{
    for (int j = 0; j < a->nj; j++)
        for (int s = 0; s < BLOCK; s++)
            if (held[j] >> s & 1) memset(x + (6 * j + s) * n, 0, (size_t)n * sizeof *x);
}

/* ---- building ------------------------------------------------------------------------------------------------ */

static void start_axes(const Assembly *a)
{
    const Mesh *mesh = a->mesh;
    for (int j = 0; j < a->nj; j++) {
        for (int k = 0; k < 2; k++)
            for (int i = 0; i < 3; i++)
                for (int c = 0; c < 3; c++) a->axes[j][k][i][c] = mesh->axes[j] ? mesh->axes[j][i][c] : i == c;
        a->held[j] = mesh->held[j];
    }
}

/* Rotational stiffness of the joints by their tubes and springs, in the axes as they are: D [nj][3][3]. */
static void add_rotation(const Assembly *a, double D[3][3], double S[END12][END12], int tube, int e)
{
    double(*R)[3] = a->turn[tube][e][1];
    for (int i = 0; i < 3; i++)
        for (int j = 0; j < 3; j++)
            for (int p = 0; p < 3; p++)
                for (int q = 0; q < 3; q++) D[i][j] += R[p][i] * S[6 * e + 3 + p][6 * e + 3 + q] * R[q][j];
}

/* Turns the rotation axes of a joint so that what nothing resists lies along axes, and holds those. */
static void hold_idle(const Assembly *a, int j, double D[3][3])
{
    int free_axis[3], n = 0;
    for (int i = 0; i < 3; i++)
        if (!(a->held[j] >> (3 + i) & 1)) free_axis[n++] = i;
    double M[9], values[3], vectors[9], axes[3][3];
    double scale = 0;
    for (int i = 0; i < n; i++)
        for (int k = 0; k < n; k++) M[i * n + k] = D[free_axis[i]][free_axis[k]];
    symmetric_eigen(n, M, values, vectors);
    for (int i = 0; i < 3; i++) scale = fmax(scale, fabs(D[i][i]));
    if (n == 0 || (scale > 0 && values[0] > 1e-9 * scale)) return;
    memcpy(axes, a->axes[j][1], sizeof axes);
    for (int k = 0; k < n; k++) {
        double *row = a->axes[j][1][free_axis[k]];
        for (int c = 0; c < 3; c++) {
            row[c] = 0;
            for (int i = 0; i < n; i++) row[c] += vectors[k * n + i] * axes[free_axis[i]][c];
        }
        if (!(values[k] > 1e-9 * scale)) a->idle[j] |= 1u << (3 + free_axis[k]);
    }
    a->held[j] |= a->idle[j];
}

static void add_joint_springs(const Assembly *a, int j, double *block)
{
    for (int s = 0; s < 6; s++) {
        const double k = a->mesh->spring[j][s];
        if (!(k > 0)) continue;
        double (*own)[3] = a->mesh->axes[j], axis[3] = {s % 3 == 0, s % 3 == 1, s % 3 == 2}, in[3];
        if (own) memcpy(axis, own[s % 3], sizeof axis);
        const int p = s / 3;
        for (int i = 0; i < 3; i++) {
            const double *row = a->axes[j][p][i];
            in[i] = row[0] * axis[0] + row[1] * axis[1] + row[2] * axis[2];
        }
        for (int i = 0; i < 3; i++)
            for (int l = 0; l < 3; l++) block[6 * (3 * p + i) + 3 * p + l] += k * in[i] * in[l];
    }
}

void assembly_add_springs(const Assembly *a, double *value)
{
    for (int j = 0; j < a->nj; j++) add_joint_springs(a, j, value + BLOCK2 * a->mesh->pattern.start[j]);
}

static void find_places(const Assembly *a, int tube)
{
    const int i = a->mesh->tube[tube].end[0], j = a->mesh->tube[tube].end[1];
    a->place[tube][0] = pattern_block(&a->mesh->pattern, i, i);
    a->place[tube][1] = pattern_block(&a->mesh->pattern, j, j);
    a->place[tube][2] = i > j ? pattern_block(&a->mesh->pattern, i, j) : pattern_block(&a->mesh->pattern, j, i);
}

/* Elastic matrices of all tubes, then idle rotations: K [nt][12][12] is scratch. */
static EfStatus tubes_and_idle(EfContext *cx, Assembly *a, double (*K)[END12][END12])
{
    const Mesh *mesh = a->mesh;
    double(*D)[3][3];
    ALLOC(cx, tmp, D, a->nj);
    for (int t = 0; t < a->nt; t++) {
        find_places(a, t);
        set_turns(a, t);
        if (!tube_stiffness(&mesh->tube[t], K[t]))
            return fail(cx, EF_E_MECHANISM, "Tube %s is loose by its own releases. Release fewer directions at its ends.",
                        mesh->frame->tube[t].name);
        for (int e = 0; e < 2; e++) add_rotation(a, D[mesh->tube[t].end[e]], K[t], t, e);
    }
    for (int j = 0; j < a->nj; j++) {
        for (int i = 0; i < 3; i++) D[j][i][i] += mesh->spring[j][3 + i];
        hold_idle(a, j, D[j]);
    }
    return EF_OK;
}

EfStatus assembly_new(EfContext *cx, const Mesh *mesh, Assembly *a)
{
    *a = (Assembly){.mesh = mesh, .nj = mesh->nj, .nt = mesh->nt, .base = mesh->free_body ? 0 : -1};
    a->nvalue = BLOCK2 * mesh->pattern.start[mesh->nj];
    ALLOC(cx, keep, a->axes, a->nj);
    ALLOC(cx, keep, a->turn, a->nt);
    ALLOC(cx, keep, a->place, a->nt);
    ALLOC(cx, keep, a->held, a->nj);
    ALLOC(cx, keep, a->idle, a->nj);
    ALLOC(cx, keep, a->elastic, a->nvalue);
    const ArenaMark mark = arena_mark(&cx->tmp);
    double(*K)[END12][END12];
    ALLOC(cx, tmp, K, a->nt);
    start_axes(a);
    TRY(tubes_and_idle(cx, a, K));
    for (int t = 0; t < a->nt; t++) {
        set_turns(a, t); /* the rotation axes may have turned */
        assembly_add_tube(a, t, K[t], a->elastic);
    }
    assembly_add_springs(a, a->elastic);
    arena_rewind(&cx->tmp, mark);
    return factor_analyse(cx, &mesh->pattern, &a->analysis);
}

void assembly_free(Assembly *a)
{
    analysis_free(a->analysis);
    a->analysis = NULL;
}

EfStatus assembly_held_with_base(EfContext *cx, const Assembly *a, unsigned mask, unsigned **held)
{
    ALLOC(cx, keep, *held, a->nj);
    memcpy(*held, a->held, (size_t)a->nj * sizeof **held);
    if (a->base >= 0) (*held)[a->base] |= mask;
    return EF_OK;
}

/* ---- free bodies ---------------------------------------------------------------------------------------------- */

EfStatus assembly_rigid_rotations(EfContext *cx, const Assembly *a, const unsigned *held, int width, double *r)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    double *u;
    ALLOC(cx, tmp, u, 6 * a->nj);
    const double *o = a->mesh->frame->joint[a->base].x;
    for (int c = 0; c < 3; c++) {
        for (int j = 0; j < a->nj; j++) {
            const double *x = a->mesh->frame->joint[j].x;
            const double t[3] = {c == 0, c == 1, c == 2}, d[3] = {x[0] - o[0], x[1] - o[1], x[2] - o[2]};
            const double v[6] = {t[1] * d[2] - t[2] * d[1], t[2] * d[0] - t[0] * d[2], t[0] * d[1] - t[1] * d[0],
                                 t[0], t[1], t[2]};
            memcpy(u + 6 * j, v, sizeof v);
        }
        assembly_to_axes(a, u, u);
        assembly_clear_held(a, held, u, 1);
        for (int i = 0; i < 6 * a->nj; i++) r[i * width + c] = u[i];
    }
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

void assembly_ground_rotation(const Assembly *a, const double axis[3], double *value)
{
    double *block = value + BLOCK2 * a->mesh->pattern.start[a->base], own[3];
    const double *e = a->elastic + BLOCK2 * a->mesh->pattern.start[a->base], s = e[21] + e[28] + e[35];
    for (int i = 0; i < 3; i++) {
        const double *row = a->axes[a->base][1][i];
        own[i] = row[0] * axis[0] + row[1] * axis[1] + row[2] * axis[2];
    }
    for (int i = 0; i < 3; i++)
        for (int l = 0; l < 3; l++) block[6 * (3 + i) + 3 + l] += s * own[i] * own[l];
}
