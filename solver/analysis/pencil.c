/* pencil.c - building the eigenproblem of hierarchic tubes and working with it.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "analysis/pencil.h"

#include <math.h>
#include <string.h>

#include "linalg/dense.h"

/* Relative accuracy asked of a tube's matrix at the highest factor sought. */
static const double BASIS_TOLERANCE = 1e-9;

/* ---- stresses ---------------------------------------------------------------------------------------------- */

static void add_forces(TubeForces *sum, const TubeForces *f, double factor)
{
    for (int i = 0; i < 3; i++) sum->N[i] += factor * f->N[i];
    for (int i = 0; i < 4; i++) sum->My[i] += factor * f->My[i], sum->Mz[i] += factor * f->Mz[i];
    for (int i = 0; i < END12; i++) sum->end[i] += factor * f->end[i];
    sum->Mx += factor * f->Mx;
}

EfStatus stress_of(EfContext *cx, const Assembly *a, const State *state, double steady_factor, double growing_factor,
                   Stress *stress)
{
    *stress = (Stress){.arms = {&state->run->steady, &state->run->growing}, .factor = {steady_factor, growing_factor}};
    ALLOC(cx, keep, stress->forces, a->nt);
    for (int t = 0; t < a->nt; t++) {
        if (state->steady.x && steady_factor != 0) add_forces(&stress->forces[t], &state->steady.forces[t], steady_factor);
        add_forces(&stress->forces[t], &state->growing.forces[t], growing_factor);
    }
    return EF_OK;
}

static bool has_arms(const Stress *s)
{
    return (s->factor[0] != 0 && s->arms[0]->narm > 0) || (s->factor[1] != 0 && s->arms[1]->narm > 0);
}

static void add_stress_arms(const Assembly *a, const Stress *s, double *value)
{
    for (int i = 0; i < 2; i++)
        if (s->factor[i] != 0) assembly_add_arms(a, s->arms[i], s->factor[i], value);
}

/* ---- building ------------------------------------------------------------------------------------------------ */

static EfStatus build_forms(EfContext *cx, Pencil *p, bool *buckled)
{
    const Assembly *a = p->a;
    ALLOC(cx, tmp, p->form, a->nt);
    ALLOC(cx, tmp, p->interior, a->nt);
    ALLOC(cx, tmp, p->L_place, a->nt);
    int size = 0;
    p->n = 6 * a->nj;
    for (int t = 0; t < a->nt; t++) {
        const MeshTube *tube = &a->mesh->tube[t];
        const TubeForces *steady = p->steady ? &p->steady->forces[t] : NULL, *growing = &p->growing->forces[t];
        double twist, error;
        const double waves = tube_waves(tube, steady, growing, p->reach, &twist);
        const TubeBasis basis = tube_basis(waves, twist, BASIS_TOLERANCE, &error);
        p->mesh_error = fmax(p->mesh_error, error);
        const EfStatus st = tube_form(cx, tube, steady, growing, basis, &p->form[t]);
        if (st == EF_E_TALLY) *buckled = true;
        if (st == EF_E_TALLY) return EF_OK;
        TRY(st);
        p->interior[t] = p->n;
        p->L_place[t] = size;
        p->n += p->form[t].m;
        size += p->form[t].m * p->form[t].m;
    }
    ALLOC(cx, tmp, p->L, size);
    return EF_OK;
}

static EfStatus build_joint_part(EfContext *cx, Pencil *p)
{
    const Assembly *a = p->a;
    ALLOC(cx, tmp, p->K, a->nvalue);
    memcpy(p->K, a->elastic, (size_t)a->nvalue * sizeof *p->K);
    for (int t = 0; p->steady && t < a->nt; t++) { /* the steady part of every tube */
        double K[END12][END12];
        if (!tube_stiffness(&a->mesh->tube[t], K)) return EF_E_MECHANISM;
        for (int i = 0; i < END12; i++)
            for (int j = 0; j < END12; j++) K[i][j] = p->form[t].K[i][j] - K[i][j];
        assembly_add_tube(a, t, K, p->K);
    }
    if (p->steady) add_stress_arms(a, p->steady, p->K);
    if (!has_arms(p->growing)) return EF_OK;
    ALLOC(cx, tmp, p->arms, a->nvalue);
    add_stress_arms(a, p->growing, p->arms);
    return EF_OK;
}

/* Counts the negative directions of R' G R; a rotation that no load feels is grounded at the base joint. */
static EfStatus treat_rigid_rotations(EfContext *cx, Pencil *p)
{
    const Assembly *a = p->a;
    double *r, *g, V[9] = {0}, values[3], vectors[9], scale = 0;
    ALLOC(cx, tmp, r, p->n * RHS);
    ALLOC(cx, tmp, g, p->n * RHS);
    TRY(assembly_rigid_rotations(cx, a, p->held, RHS, r));
    pencil_geometric(p, r, g);
    for (int i = 0; i < 6 * a->nj; i++)
        for (int k = 0; k < 3; k++)
            for (int l = 0; l < 3; l++) V[3 * k + l] += r[i * RHS + k] * g[i * RHS + l];
    for (int t = 0; t < a->nt; t++)
        scale += fabs(tube_axial(&p->growing->forces[t], 0)) * a->mesh->tube[t].L;
    symmetric_eigen(3, V, values, vectors);
    for (int k = 0; k < 3; k++)
        if (fabs(values[k]) > 1e-9 * scale) p->rigid_negative += values[k] < 0;
        else assembly_ground_rotation(a, vectors + 3 * k, p->K);
    return EF_OK;
}

EfStatus pencil_build(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, double reach,
                      bool *buckled, Pencil *p)
{
    *p = (Pencil){.a = a, .steady = steady, .growing = growing, .reach = reach};
    *buckled = false;
    TRY(build_forms(cx, p, buckled));
    if (*buckled) return EF_OK;
    TRY(build_joint_part(cx, p));
    ALLOC(cx, tmp, p->S, a->nvalue);
    ALLOC(cx, tmp, p->held, a->nj);
    memcpy(p->held, a->held, (size_t)a->nj * sizeof *p->held);
    if (a->base >= 0) {
        p->held[a->base] |= 7;
        const ArenaMark mark = arena_mark(&cx->tmp);
        TRY(treat_rigid_rotations(cx, p));
        arena_rewind(&cx->tmp, mark);
    }
    return factor_new(cx, a->analysis, &p->factor);
}

void pencil_free(Pencil *p)
{
    factor_free(p->factor);
    p->factor = NULL;
}

/* ---- shift and count ------------------------------------------------------------------------------------------- */

/* K + sigma G with the interiors eliminated: S and L. Returns the negative interior pivots, -1: too near a root. */
static int eliminate(Pencil *p, double sigma)
{
    const Assembly *a = p->a;
    int negative = 0;
    memcpy(p->S, p->K, (size_t)a->nvalue * sizeof *p->S);
    for (int t = 0; t < a->nt; t++) {
        double S[END12][END12];
        const int n = tube_condense(&p->form[t], sigma, p->L + p->L_place[t], S);
        if (n < 0) return -1;
        negative += n;
        for (int i = 0; i < END12; i++)
            for (int j = 0; j < END12; j++) S[i][j] -= p->form[t].K[i][j];
        assembly_add_tube(a, t, S, p->S);
    }
    for (int i = 0; p->arms && i < a->nvalue; i++) p->S[i] += sigma * p->arms[i];
    assembly_hold(a, p->held, p->S);
    return negative;
}

EfStatus pencil_shift(EfContext *cx, Pencil *p, double sigma)
{
    /* A count taken at a root would be noise: such a shift is moved a little. */
    static const double move[] = {0, 1.3e-6, 1.1e-5, 7.3e-5, 3.1e-4};
    const size_t n = sizeof move / sizeof *move;
    for (size_t i = 0; i < n; i++) {
        p->sigma = sigma * (1 + move[i]);
        const int inside = eliminate(p, p->sigma);
        if (inside < 0) continue;
        const EfStatus st = factor_numeric(cx, p->factor, p->S);
        if (st == EF_E_TALLY) continue;
        TRY(st);
        if (factor_growth(p->factor) > 1e7 || (i + 1 < n && factor_smallest_pivot(p->factor, NULL) < 1e-10)) continue;
        p->count = inside + factor_negative(p->factor) - p->rigid_negative;
        return EF_OK;
    }
    return fail(cx, EF_E_TALLY, "The matrix could not be factorised near factor %.6g, so factors there cannot be counted.", sigma);
}

EfStatus pencil_base_negative(EfContext *cx, Pencil *p, int *negative)
{
    memcpy(p->S, p->K, (size_t)p->a->nvalue * sizeof *p->S);
    assembly_hold(p->a, p->held, p->S);
    const EfStatus st = factor_numeric(cx, p->factor, p->S);
    if (st == EF_E_TALLY)
        return fail(cx, EF_E_TALLY, "The steady loads alone bring the frame to its critical state.");
    TRY(st);
    *negative = factor_negative(p->factor);
    return EF_OK;
}

/* ---- products --------------------------------------------------------------------------------------------------- */

EfStatus pencil_solve(EfContext *cx, const Pencil *p, double *x)
{
    const Assembly *a = p->a;
    const double f = p->sigma;
    double d[END12 * RHS];
    for (int t = 0; t < a->nt; t++) { /* b_j -= f G_ji B^-1 b_i */
        const TubeForm *form = &p->form[t];
        if (form->m == 0) continue;
        double *q = x + p->interior[t] * RHS;
        const int n = END12 + form->m;
        tube_interior_solve(form->m, p->L + p->L_place[t], q);
        memset(d, 0, sizeof d);
        for (int i = 0; i < form->m; i++)
            for (int k = 0; k < END12; k++) {
                const double g = -f * form->G[(END12 + i) * n + k];
                for (int c = 0; c < RHS; c++) d[k * RHS + c] += g * q[i * RHS + c];
            }
        assembly_scatter(a, t, d, x, RHS);
    }
    assembly_clear_held(a, p->held, x, RHS);
    TRY(factor_solve(cx, p->factor, x, RHS));
    for (int t = 0; t < a->nt; t++) { /* x_i = B^-1 b_i - B^-1 f G_ij x_j */
        const TubeForm *form = &p->form[t];
        if (form->m == 0) continue;
        double *q = x + p->interior[t] * RHS, w[MAX_INTERIOR * RHS];
        const int n = END12 + form->m;
        assembly_gather(a, t, x, d, RHS);
        memset(w, 0, (size_t)(form->m * RHS) * sizeof *w);
        for (int i = 0; i < form->m; i++)
            for (int k = 0; k < END12; k++) {
                const double g = f * form->G[(END12 + i) * n + k];
                for (int c = 0; c < RHS; c++) w[i * RHS + c] += g * d[k * RHS + c];
            }
        tube_interior_solve(form->m, p->L + p->L_place[t], w);
        for (int i = 0; i < form->m * RHS; i++) q[i] -= w[i];
    }
    return EF_OK;
}

void pencil_stiffness(const Pencil *p, const double *x, double *y)
{
    const int joints = 6 * p->a->nj * RHS;
    block_multiply(&p->a->mesh->pattern, p->K, x, y, RHS);
    assembly_clear_held(p->a, p->held, y, RHS);
    memcpy(y + joints, x + joints, (size_t)(p->n * RHS - joints) * sizeof *y);
}

void pencil_geometric(const Pencil *p, const double *x, double *y)
{
    const Assembly *a = p->a;
    memset(y, 0, (size_t)(p->n * RHS) * sizeof *y);
    if (p->arms) block_multiply(&a->mesh->pattern, p->arms, x, y, RHS);
    for (int t = 0; t < a->nt; t++) {
        const TubeForm *form = &p->form[t];
        const int n = END12 + form->m;
        double own[MAX_RAW * RHS], out[MAX_RAW * RHS];
        assembly_gather(a, t, x, own, RHS);
        memcpy(own + END12 * RHS, x + p->interior[t] * RHS, (size_t)(form->m * RHS) * sizeof *own);
        memset(out, 0, (size_t)(n * RHS) * sizeof *out);
        for (int i = 0; i < n; i++)
            for (int k = 0; k < n; k++) {
                const double g = form->G[i * n + k];
                for (int c = 0; g != 0 && c < RHS; c++) out[i * RHS + c] += g * own[k * RHS + c];
            }
        assembly_scatter(a, t, out, y, RHS);
        memcpy(y + p->interior[t] * RHS, out + END12 * RHS, (size_t)(form->m * RHS) * sizeof *y);
    }
    assembly_clear_held(a, p->held, y, RHS);
}

void pencil_tube(const Pencil *p, int tube, const double *x, int width, int c, double *own)
{
    const int *end = p->a->mesh->tube[tube].end;
    double joints[END12];
    for (int e = 0; e < 2; e++)
        for (int k = 0; k < 2; k++) {
            double(*R)[3] = p->a->turn[tube][e][k];
            for (int i = 0; i < 3; i++) {
                joints[6 * e + 3 * k + i] = 0;
                for (int s = 0; s < 3; s++)
                    joints[6 * e + 3 * k + i] += R[i][s] * x[(6 * end[e] + 3 * k + s) * width + c];
            }
        }
    memcpy(own, joints, sizeof joints);
    for (int i = 0; i < p->form[tube].m; i++) own[END12 + i] = x[(p->interior[tube] + i) * width + c];
}
