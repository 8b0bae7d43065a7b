/* exact.c - the matrix of exact members, its count and its lowest root.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "analysis/exact.h"

#include <math.h>
#include <string.h>

#include "linalg/dense.h"

/* Axial force varies when its change along the tube is more than this part of it. */
static const double CONSTANT = 1e-9;

/* ---- building -------------------------------------------------------------------------------------------------- */

/* The axial force alone; end forces stay, they load the arms. */
static TubeForces axial_part(const TubeForces *f)
{
    TubeForces g = {0};
    memcpy(g.N, f->N, sizeof g.N);
    memcpy(g.end, f->end, sizeof g.end);
    return g;
}

static bool varies(const TubeForces *f)
{
    return fabs(f->N[1]) + fabs(f->N[2]) > CONSTANT * fabs(f->N[0]);
}

static EfStatus take_axial(EfContext *cx, Exact *e)
{
    const int nt = e->a->nt;
    ALLOC(cx, tmp, e->axial1, nt);
    ALLOC(cx, tmp, e->varies, nt);
    ALLOC(cx, tmp, e->form, nt);
    if (e->steady) ALLOC(cx, tmp, e->axial0, nt);
    for (int t = 0; t < nt; t++) {
        e->axial1[t] = axial_part(&e->growing->forces[t]);
        e->varies[t] = varies(&e->axial1[t]);
        if (!e->steady) continue;
        e->axial0[t] = axial_part(&e->steady->forces[t]);
        e->varies[t] |= varies(&e->axial0[t]);
    }
    return EF_OK;
}

/* Forms of the tubes that vary, good up to `reach`. */
static EfStatus build_forms(EfContext *cx, Exact *e, double reach)
{
    e->reach = reach;
    for (int t = 0; t < e->a->nt; t++) {
        if (!e->varies[t]) continue;
        const MeshTube *m = &e->a->mesh->tube[t];
        const TubeForces *steady = e->axial0 ? &e->axial0[t] : NULL;
        double twist;
        const double waves = tube_waves(m, steady, &e->axial1[t], reach, &twist);
        TRY(tube_form(cx, m, steady, &e->axial1[t], tube_basis(waves, 0, 1e-12, NULL), &e->form[t]));
    }
    return EF_OK;
}

int exact_tube(const Exact *e, int tube, double lambda, double S[END12][END12])
{
    if (e->varies[tube]) {
        double L[MAX_INTERIOR * MAX_INTERIOR];
        return tube_condense(&e->form[tube], lambda, L, S);
    }
    double N = lambda * e->axial1[tube].N[0], end[END12];
    for (int i = 0; i < END12; i++) end[i] = lambda * e->axial1[tube].end[i] + (e->axial0 ? e->axial0[tube].end[i] : 0);
    if (e->axial0) N += e->axial0[tube].N[0];
    return exact_matrix(&e->a->mesh->tube[tube], N, end, S);
}

static void add_arms(const Assembly *a, const Stress *s, double factor, double *value)
{
    for (int i = 0; i < 2; i++)
        if (s->factor[i] != 0) assembly_add_arms(a, s->arms[i], factor * s->factor[i], value);
}

/* Everything but the held rows; returns the clamped count or -1. */
static int assemble(const Exact *e, double lambda, double *value)
{
    int count = 0;
    memset(value, 0, (size_t)e->a->nvalue * sizeof *value);
    for (int t = 0; t < e->a->nt; t++) {
        double S[END12][END12];
        const int n = exact_tube(e, t, lambda, S);
        if (n < 0) return -1;
        count += n;
        assembly_add_tube(e->a, t, S, value);
    }
    assembly_add_springs(e->a, value);
    add_arms(e->a, e->growing, lambda, value);
    if (e->steady) add_arms(e->a, e->steady, 1, value);
    for (int k = 0; k < e->nground; k++) assembly_ground_rotation(e->a, e->ground[k], value);
    return count;
}

/* R' K(1) R: rigid rotations feel only the loads, in proportion to the factor. */
static EfStatus treat_rigid_rotations(EfContext *cx, Exact *e)
{
    const Assembly *a = e->a;
    double *r, *g, V[9] = {0}, values[3], vectors[9], scale = 0;
    const double small = 1e-3; /* any factor below the first clamped state serves */
    ALLOC(cx, tmp, r, 6 * a->nj * RHS);
    ALLOC(cx, tmp, g, 6 * a->nj * RHS);
    if (assemble(e, small, e->S) < 0) return fail(cx, EF_E_TALLY, "The exact members could not be assembled.");
    TRY(assembly_rigid_rotations(cx, a, e->held, RHS, r));
    block_multiply(&a->mesh->pattern, e->S, r, g, RHS);
    for (int i = 0; i < 6 * a->nj; i++)
        for (int k = 0; k < 3; k++)
            for (int l = 0; l < 3; l++) V[3 * k + l] += r[i * RHS + k] * g[i * RHS + l] / small;
    for (int t = 0; t < a->nt; t++) scale += fabs(e->axial1[t].N[0]) * a->mesh->tube[t].L;
    symmetric_eigen(3, V, values, vectors);
    for (int k = 0; k < 3; k++)
        if (fabs(values[k]) > 1e-7 * scale) e->rigid_negative += values[k] < 0;
        else memcpy(e->ground[e->nground++], vectors + 3 * k, sizeof e->ground[0]);
    return EF_OK;
}

EfStatus exact_build(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, Exact *e)
{
    *e = (Exact){.a = a, .steady = steady, .growing = growing};
    TRY(take_axial(cx, e));
    ALLOC(cx, tmp, e->S, a->nvalue);
    ALLOC(cx, tmp, e->held, a->nj);
    memcpy(e->held, a->held, (size_t)a->nj * sizeof *e->held);
    if (a->base >= 0) {
        e->held[a->base] |= 7;
        TRY(build_forms(cx, e, 1));
        TRY(treat_rigid_rotations(cx, e));
    }
    return factor_new(cx, a->analysis, &e->factor);
}

void exact_free(Exact *e)
{
    factor_free(e->factor);
    e->factor = NULL;
}

/* ---- count and root -------------------------------------------------------------------------------------------------- */

EfStatus exact_at(EfContext *cx, Exact *e, double lambda)
{
    static const double move[] = {0, 1e-12, 1.3e-10, 1.7e-8, 2.9e-6};
    if (lambda > e->reach || e->reach == 0) TRY(build_forms(cx, e, 1.5 * lambda));
    for (size_t i = 0; i < sizeof move / sizeof *move; i++) {
        e->lambda = lambda * (1 + move[i]);
        const int inside = assemble(e, e->lambda, e->S);
        if (inside < 0) continue;
        assembly_hold(e->a, e->held, e->S);
        const EfStatus st = factor_numeric(cx, e->factor, e->S);
        if (st == EF_E_TALLY) continue;
        TRY(st);
        e->count = inside + factor_negative(e->factor) - e->rigid_negative;
        return EF_OK;
    }
    return fail(cx, EF_E_TALLY, "The exact members could not be factorised near factor %.6g.", lambda);
}

/* Widens [lo, hi] about the guess until count(lo) = 0 < count(hi); *none: not below 1e3 x guess. */
static EfStatus bracket(EfContext *cx, Exact *e, double guess, double *lo, double *hi, bool *none)
{
    *none = false;
    for (double step = 1e-5;; step *= 10) {
        *lo = step < 1 ? guess * (1 - step) : 0;
        if (*lo == 0) break;
        TRY(exact_at(cx, e, *lo));
        if (e->count <= 0) break;
    }
    for (double step = 1e-5;; step *= 10) {
        *hi = guess * (1 + step);
        *none = step > 1e3;
        if (*none) return EF_OK;
        TRY(exact_at(cx, e, *hi));
        if (e->count > 0) return EF_OK;
        *lo = *hi;
    }
}

/* Eigenvalue of K(lambda) nearest zero, K scaled by the elastic diagonal, by inverse iteration with the factor at hand. */
static EfStatus nearest_zero(EfContext *cx, const Exact *e, double *x, double *mu)
{
    const BlockPattern *p = &e->a->mesh->pattern;
    const int n = 6 * e->a->nj;
    double top = 0;
    for (int pass = 0; pass < 3; pass++) {
        double size = 0;
        top = 0;
        for (int i = 0; i < n; i++) x[i] *= fmax(e->a->elastic[BLOCK2 * p->start[i / 6] + 7 * (i % 6)], 1e-300);
        assembly_clear_held(e->a, e->held, x, 1);
        for (int i = 0; i < n; i++) top += x[i] * x[i] / fmax(e->a->elastic[BLOCK2 * p->start[i / 6] + 7 * (i % 6)], 1e-300);
        const double scale = 1 / sqrt(top);
        for (int i = 0; i < n; i++) x[i] *= scale;
        double *b = x + n;
        memcpy(b, x, (size_t)n * sizeof *b);
        TRY(factor_solve(cx, e->factor, x, 1));
        for (int i = 0; i < n; i++) size += x[i] * b[i];
        *mu = 1 / size; /* b = D y with y'Dy = 1, x = K^-1 D y: mu = 1 / (y' D x) */
    }
    return EF_OK;
}

EfStatus exact_lowest(EfContext *cx, Exact *e, double guess, double *factor)
{
    double lo, hi, *x, mu[2] = {0}, at[2] = {0};
    bool none;
    *factor = NAN;
    TRY(bracket(cx, e, guess, &lo, &hi, &none));
    if (none) return EF_OK;
    const int n = 6 * e->a->nj;
    ALLOC(cx, tmp, x, 2 * n);
    for (int i = 0; i < n; i++) x[i] = sin(1.0 + 3.7 * i);
    int known = 0;
    double next = (lo + hi) / 2;
    for (int pass = 0; pass < 60 && hi - lo > 1e-11 * hi; pass++) {
        TRY(exact_at(cx, e, next));
        if (e->count > 0) hi = e->lambda;
        else lo = e->lambda;
        next = (lo + hi) / 2;
        if (hi - lo > 1e-2 * hi) continue;
        at[0] = at[1], mu[0] = mu[1], at[1] = e->lambda;
        TRY(nearest_zero(cx, e, x, &mu[1]));
        if (++known < 2 || mu[1] == mu[0]) continue;
        const double secant = at[1] - mu[1] * (at[1] - at[0]) / (mu[1] - mu[0]);
        if (fabs(secant - at[1]) < 1e-11 * hi && secant >= lo * (1 - 1e-10) && secant <= hi * (1 + 1e-10)) {
            *factor = secant;
            return EF_OK;
        }
        if (secant > lo && secant < hi) next = secant;
    }
    *factor = (lo + hi) / 2;
    return EF_OK;
}

/* ---- first order ---------------------------------------------------------------------------------------------------------- */

static EfStatus axial_of(EfContext *cx, const Assembly *a, const Loads *loads, Factor *factor, const unsigned *held, double *N)
{
    double *x;
    ALLOC(cx, tmp, x, 6 * a->nj);
    assembly_to_axes(a, loads->joint, x);
    for (int t = 0; t < a->nt; t++) {
        double f[END12];
        if (!tube_load(&a->mesh->tube[t], &loads->tube[t], f)) return EF_E_MECHANISM;
        assembly_scatter(a, t, f, x, 1);
    }
    assembly_clear_held(a, held, x, 1);
    TRY(factor_solve(cx, factor, x, 1));
    for (int t = 0; t < a->nt; t++) {
        double d[END12];
        TubeForces forces;
        assembly_gather(a, t, x, d, 1);
        if (!tube_forces(&a->mesh->tube[t], &loads->tube[t], d, &forces)) return EF_E_MECHANISM;
        N[t] += tube_axial(&forces, 0);
    }
    return EF_OK;
}

/* Exact members at zero force. */
static EfStatus axial_with(EfContext *cx, const Assembly *a, const State *state, Factor *factor, double *N)
{
    static const double none[END12] = {0};
    unsigned *held;
    double *K;
    TRY(assembly_held_with_base(cx, a, 63, &held));
    ALLOC(cx, tmp, K, a->nvalue);
    for (int t = 0; t < a->nt; t++) {
        double S[END12][END12];
        if (exact_matrix(&a->mesh->tube[t], 0, none, S) < 0) return fail(cx, EF_E_TALLY, "The exact members could not be assembled.");
        assembly_add_tube(a, t, S, K);
    }
    assembly_add_springs(a, K);
    assembly_hold(a, held, K);
    TRY(factor_numeric(cx, factor, K));
    return axial_of(cx, a, &state->run->growing, factor, held, N);
}

EfStatus exact_axial(EfContext *cx, const Assembly *a, const State *state, double *N)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    Factor *factor = NULL;
    EfStatus st = factor_new(cx, a->analysis, &factor);
    if (st == EF_OK) st = axial_with(cx, a, state, factor, N);
    if (st == EF_E_TALLY) st = fail(cx, EF_E_TALLY, "The matrix of exact members is singular without loads.");
    factor_free(factor);
    arena_rewind(&cx->tmp, mark);
    return st;
}
