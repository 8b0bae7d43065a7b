/* krylov.c - block Lanczos with full reorthogonalisation for theta = lambda / (lambda - sigma).
 *
 * OP = (K + sigma G)^-1 K is self-adjoint in K. Factors in (0, sigma) are exactly the negative theta, whose number
 * is known from the count, so the iteration knows when it has them all.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "analysis/krylov.h"

#include <cblas.h>
#include <math.h>
#include <stdint.h>
#include <string.h>

#include "linalg/dense.h"

enum { MAX_BLOCKS = 40, MAX_SIZE = MAX_BLOCKS * RHS, RR = RHS * RHS };
/* K-norm of the residual over |theta| at which a factor has settled: its own error is the square, and one polishing
 * step follows. */
static const double CONVERGED = 1e-8;
/* x'Kx over x'diag(K)x below which only rounding is left: a rigid motion of a free body, or a space run out. */
static const double ROUNDING = 1e-13;

typedef struct Lanczos {
    const Pencil *p;
    int blocks;
    double *V[MAX_BLOCKS + 1];       /* [n][RHS] each, K-orthonormal or zero columns */
    bool live[MAX_SIZE + RHS];       /* column is not zero */
    double *T;                       /* [MAX_SIZE + RHS][MAX_SIZE + RHS] projection of OP, leading part filled */
    double *Kv;                      /* K times the newest block */
    double *w;
    double coupling[RR];             /* of the newest block to the one before */
    double *vectors, *values;        /* of the projection */
} Lanczos;

/* H [RHS][RHS] = A' B */
static void block_dot(int n, const double *A, const double *B, double *H)
{
    cblas_dgemm(CblasRowMajor, CblasTrans, CblasNoTrans, RHS, RHS, n, 1, A, RHS, B, RHS, 0, H, RHS);
}

/* W += factor A H */
static void block_add(int n, const double *A, const double *H, double factor, double *W)
{
    cblas_dgemm(CblasRowMajor, CblasNoTrans, CblasNoTrans, n, RHS, RHS, factor, A, RHS, H, RHS, 1, W, RHS);
}

/* W := W M */
static void block_multiply_right(int n, double *W, const double *M)
{
    for (int i = 0; i < n; i++) {
        double row[RHS] = {0};
        for (int k = 0; k < RHS; k++)
            for (int l = 0; l < RHS; l++) row[l] += W[i * RHS + k] * M[k * RHS + l];
        memcpy(W + i * RHS, row, sizeof row);
    }
}

/* x'diag(K)x of the combination v [RHS] of the columns of w. */
static double diagonal_norm(const Pencil *p, const double *w, const double *v)
{
    const int *start = p->a->mesh->pattern.start;
    double sum = 0;
    for (int i = 0; i < p->n; i++) {
        const double d = i < 6 * p->a->nj ? p->K[BLOCK2 * start[i / 6] + 7 * (i % 6)] : 1;
        double x = 0;
        for (int k = 0; k < RHS; k++) x += v[k] * w[i * RHS + k];
        sum += d * x * x;
    }
    return sum;
}

/* One pass: makes w K-orthonormal; columns that carry nothing above `floor` (squared norm) become zero.
 * back [RHS][RHS]: w_old = w_new back. Kw is kept up to date. */
static void normalise(const Lanczos *z, double *w, double *Kw, double floor, bool live[RHS], double *back)
{
    double M[RR], values[RHS], vectors[RR], turn[RR] = {0};
    block_dot(z->p->n, w, Kw, M);
    symmetric_eigen(RHS, M, values, vectors);
    for (int k = 0; k < RHS; k++) { /* the largest first; vectors row k */
        const int e = RHS - 1 - k;
        live[k] = values[e] > floor && values[e] > 1e-14 * values[RHS - 1] &&
                  values[e] > ROUNDING * diagonal_norm(z->p, w, vectors + e * RHS);
        for (int i = 0; i < RHS; i++) {
            turn[i * RHS + k] = live[k] ? vectors[e * RHS + i] / sqrt(values[e]) : 0;
            back[k * RHS + i] = live[k] ? vectors[e * RHS + i] * sqrt(values[e]) : 0;
        }
    }
    block_multiply_right(z->p->n, w, turn);
    block_multiply_right(z->p->n, Kw, turn);
}

/* Takes the K-projections on the basis off w, once. Coefficients, times `scale`, are added to column block `to` of T
 * when to >= 0. */
static void orthogonalise(Lanczos *z, double *w, double *Kw, int to, const double *scale)
{
    const int ld = MAX_SIZE + RHS;
    for (int b = 0; b < z->blocks; b++) {
        double H[RR];
        block_dot(z->p->n, z->V[b], Kw, H);
        block_add(z->p->n, z->V[b], H, -1, w);
        for (int i = 0; i < RHS && to >= 0; i++)
            for (int k = 0; k < RHS; k++)
                for (int l = 0; l < RHS; l++) z->T[(b * RHS + i) * ld + to * RHS + k] += H[i * RHS + l] * scale[l * RHS + k];
    }
    pencil_stiffness(z->p, w, Kw);
}

/* The next block from z->w (already OP times something, or a start); false in *grown when nothing new is left.
 * Gram and Schmidt twice: what was small before the first normalisation is clean only after the second pass. */
static EfStatus append(EfContext *cx, Lanczos *z, int to, bool *grown)
{
    const int n = z->p->n;
    double unit[RR] = {0}, first[RR], second[RR], M[RR];
    bool live[RHS], again[RHS];
    for (int k = 0; k < RHS; k++) unit[k * RHS + k] = 1;
    block_dot(n, z->w, z->Kv, M); /* Kv holds K w here */
    double before = 0;
    for (int k = 0; k < RHS; k++) before = fmax(before, M[k * RHS + k]);
    orthogonalise(z, z->w, z->Kv, to, unit);
    normalise(z, z->w, z->Kv, 1e-24 * before, live, first);
    orthogonalise(z, z->w, z->Kv, to, first);
    normalise(z, z->w, z->Kv, 0.25, again, second);
    *grown = again[0];
    if (!*grown) return EF_OK;
    memset(z->coupling, 0, sizeof z->coupling);
    for (int i = 0; i < RHS; i++)
        for (int k = 0; k < RHS; k++)
            for (int l = 0; l < RHS; l++) z->coupling[i * RHS + l] += second[i * RHS + k] * first[k * RHS + l];
    double *v;
    ALLOC(cx, tmp, v, n * RHS);
    memcpy(v, z->w, (size_t)(n * RHS) * sizeof *v);
    pencil_stiffness(z->p, v, z->Kv);
    for (int k = 0; k < RHS; k++) z->live[z->blocks * RHS + k] = again[k];
    z->V[z->blocks++] = v;
    return EF_OK;
}

/* A block without symmetry, passed through OP once so that it obeys the constraints of a free body. */
static EfStatus start_block(EfContext *cx, Lanczos *z, bool *grown)
{
    const int n = z->p->n;
    uint64_t s = 0x9E3779B97F4A7C15u + (uint64_t)z->blocks;
    for (int i = 0; i < n * RHS; i++) {
        s = s * 6364136223846793005u + 1442695040888963407u;
        z->w[i] = (double)(s >> 11) / 9007199254740992.0 - 0.5;
    }
    assembly_clear_held(z->p->a, z->p->held, z->w, RHS);
    pencil_stiffness(z->p, z->w, z->Kv);
    memcpy(z->w, z->Kv, (size_t)(n * RHS) * sizeof *z->w);
    TRY(pencil_solve(cx, z->p, z->w));
    pencil_stiffness(z->p, z->w, z->Kv);
    return append(cx, z, -1, grown);
}

/* OP times the newest block, into T and the next block. */
static EfStatus step(EfContext *cx, Lanczos *z, bool *grown)
{
    const int to = z->blocks - 1;
    memcpy(z->w, z->Kv, (size_t)(z->p->n * RHS) * sizeof *z->w);
    TRY(pencil_solve(cx, z->p, z->w));
    pencil_stiffness(z->p, z->w, z->Kv);
    return append(cx, z, to, grown);
}

/* Eigenvalues of the projection on the first `blocks` blocks; returns how many negative ones there are, and in
 * *open how many of them have not settled. */
static EfStatus project(EfContext *cx, Lanczos *z, int blocks, bool closed, int *negative, int *open)
{
    const int m = blocks * RHS, ld = MAX_SIZE + RHS;
    for (int i = 0; i < m; i++)
        for (int k = 0; k < m; k++) {
            const int bi = i / RHS, bk = k / RHS; /* columns know the blocks before them only */
            const double up = z->T[i * ld + k], down = z->T[k * ld + i];
            const double t = bi < bk ? up : bi > bk ? down : (up + down) / 2;
            z->vectors[i * m + k] = z->live[i] && z->live[k] ? t : i == k; /* a dead column stands for infinity */
        }
    TRY(symmetric_eigen_large(cx, m, z->vectors, z->values));
    *negative = *open = 0;
    for (int e = 0; e < m && z->values[e] < 0; e++) {
        double rest = 0;
        for (int i = 0; i < RHS && !closed; i++) {
            double r = 0;
            for (int k = 0; k < RHS; k++) r += z->coupling[i * RHS + k] * z->vectors[e * m + m - RHS + k];
            rest += r * r;
        }
        (*negative)++;
        *open += sqrt(rest) > CONVERGED * fabs(z->values[e]);
    }
    return EF_OK;
}

static EfStatus take_modes(EfContext *cx, const Lanczos *z, int blocks, int n, Modes *modes)
{
    const Pencil *p = z->p;
    const int m = blocks * RHS;
    modes->n = n;
    ALLOC(cx, tmp, modes->factor, n);
    ALLOC(cx, tmp, modes->x, (size_t)n * (size_t)p->n);
    for (int q = 0; q < n; q++) { /* theta nearest zero is the lowest factor */
        const int e = n - 1 - q;
        const double theta = z->values[e];
        double *x = modes->x + (size_t)q * (size_t)p->n;
        modes->factor[q] = p->sigma * theta / (theta - 1);
        for (int b = 0; b < blocks; b++)
            for (int i = 0; i < p->n; i++)
                for (int k = 0; k < RHS; k++) x[i] += z->V[b][i * RHS + k] * z->vectors[e * m + b * RHS + k];
    }
    return EF_OK;
}

static EfStatus iterate(EfContext *cx, Lanczos *z, int *blocks, int *negative)
{
    const int want = z->p->count;
    bool grown;
    int open = 0, restarts = 0;
    *blocks = *negative = 0;
    TRY(start_block(cx, z, &grown));
    while (z->blocks > 0 && z->blocks <= MAX_BLOCKS) {
        if (!keep_going()) return fail(cx, EF_E_TALLY, "Stopped on request.");
        const int done = z->blocks;
        TRY(step(cx, z, &grown));
        *blocks = done;
        if (done * RHS < want && grown) continue;
        TRY(project(cx, z, done, !grown, negative, &open));
        if (*negative >= want && open == 0) return EF_OK;
        if (grown) continue;
        if (restarts++ == 3) return EF_OK; /* the whole space has been searched */
        TRY(start_block(cx, z, &grown));
        if (!grown) return EF_OK;
    }
    *negative -= open;
    return EF_OK;
}

EfStatus krylov_modes(EfContext *cx, const Pencil *p, Modes *modes)
{
    Lanczos z = {.p = p};
    *modes = (Modes){0};
    if (p->count <= 0) return EF_OK;
    const int ld = MAX_SIZE + RHS;
    int blocks, negative;
    ALLOC(cx, tmp, z.T, ld * ld);
    ALLOC(cx, tmp, z.vectors, ld * ld);
    ALLOC(cx, tmp, z.values, ld);
    ALLOC(cx, tmp, z.Kv, p->n * RHS);
    ALLOC(cx, tmp, z.w, p->n * RHS);
    TRY(iterate(cx, &z, &blocks, &negative));
    TRY(take_modes(cx, &z, blocks, negative, modes));
    return ritz_polish(cx, p, modes);
}
