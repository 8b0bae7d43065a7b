/* fixity.c - every tube's own critical compression in the loaded frame, and what EfFixity shows of it.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "analysis/fixity.h"

#include <math.h>
#include <string.h>

#include "analysis/own.h"
#include "linalg/dense.h"

static const double PI = 3.14159265358979323846;
static const double IDLE = 1e-6;  /* of the largest axial force: less is no load */
static const double BEFORE = 0.9; /* of the lowest factor, where the frame buckles before its case load */

struct OwnEngine {
    const Assembly *a;
    const Stress *steady, *growing;
    bool full;       /* engine 1's matrix */
    Exact exact;
    Pencil pencil;
    const unsigned *held;
    const Factor *factor;
    double r;
    double *inverse; /* selected inverse at r */
    double *X;       /* free body: K^-1 C, [nj][6][3] with C = K_g R (the case's own rows, kept while a tube is pushed) */
    double M[3][3];  /* and (C' K^-1 C)^-1 */
    double *B;       /* the body's own rotation theta = B' x, by least squares of its joints, [nj][6][3] */
    double *Y;       /* K^-1 B in the constrained space, [nj][6][3] */
    double W[3][3];  /* B' Y */
};

/* ---- the matrix at r -------------------------------------------------------------------------------------------- */

/* C = K(r) R / r: a rigid rotation feels nothing but the loads. */
static EfStatus constrain(EfContext *cx, OwnCurve *c)
{
    struct OwnEngine *o = c->engine;
    const Assembly *a = o->a;
    double *rigid, *rows, C[9] = {0}, values[3], vectors[9];
    ALLOC(cx, tmp, rigid, 18 * a->nj);
    ALLOC(cx, tmp, rows, 18 * a->nj);
    TRY(assembly_rigid_rotations(cx, a, o->held, 3, rigid));
    block_multiply(&a->mesh->pattern, o->full ? o->pencil.S : o->exact.S, rigid, rows, 3);
    assembly_clear_held(a, o->held, rows, 3);
    memcpy(o->X, rows, (size_t)(18 * a->nj) * sizeof *rows);
    TRY(factor_solve(cx, o->factor, o->X, 3));
    for (int i = 0; i < 6 * a->nj; i++)
        for (int k = 0; k < 3; k++)
            for (int l = 0; l < 3; l++) C[3 * k + l] += rows[3 * i + k] * o->X[3 * i + l];
    symmetric_eigen(3, C, values, vectors);
    const double largest = fmax(fabs(values[0]), fabs(values[2]));
    memset(o->M, 0, sizeof o->M);
    for (int e = 0; e < 3; e++)
        for (int k = 0; k < 3 && fabs(values[e]) > 1e-9 * largest; k++)
            for (int l = 0; l < 3; l++) o->M[k][l] += vectors[3 * e + k] * vectors[3 * e + l] / values[e];
    return EF_OK;
}

/* Columns of the body's rotation: theta = N^-1 sum r x u over the joints, r from their centre. */
static EfStatus body_rotation(EfContext *cx, struct OwnEngine *o)
{
    const Assembly *a = o->a;
    const EfJoint *joint = a->mesh->frame->joint;
    double centre[3] = {0}, N[9] = {0}, values[3], vectors[9], *u;
    ALLOC(cx, tmp, u, 6 * a->nj);
    for (int j = 0; j < a->nj; j++)
        for (int i = 0; i < 3; i++) centre[i] += joint[j].x[i] / a->nj;
    for (int j = 0; j < a->nj; j++) {
        const double r[3] = {joint[j].x[0] - centre[0], joint[j].x[1] - centre[1], joint[j].x[2] - centre[2]};
        for (int i = 0; i < 3; i++)
            for (int k = 0; k < 3; k++) N[3 * i + k] += (i == k ? r[0] * r[0] + r[1] * r[1] + r[2] * r[2] : 0) - r[i] * r[k];
    }
    symmetric_eigen(3, N, values, vectors);
    for (int c = 0; c < 3; c++) {
        double n[3] = {0};
        for (int e = 0; e < 3; e++)
            for (int i = 0; i < 3 && values[e] > 1e-9 * values[2]; i++) n[i] += vectors[3 * e + c] * vectors[3 * e + i] / values[e];
        memset(u, 0, (size_t)(6 * a->nj) * sizeof *u);
        for (int j = 0; j < a->nj; j++)
            for (int i = 0; i < 3; i++) {
                const int p = (i + 1) % 3, q = (i + 2) % 3;
                u[6 * j + i] = n[p] * (joint[j].x[q] - centre[q]) - n[q] * (joint[j].x[p] - centre[p]);
            }
        assembly_to_axes(a, u, u);
        assembly_clear_held(a, o->held, u, 1);
        for (int i = 0; i < 6 * a->nj; i++) o->B[3 * i + c] = u[i];
    }
    return EF_OK;
}

/* S [3][3] = A' B for [6 nj][3] */
static void dot3(int rows, const double *A, const double *B, double S[3][3])
{
    memset(S, 0, 9 * sizeof S[0][0]);
    for (int i = 0; i < rows; i++)
        for (int k = 0; k < 3; k++)
            for (int l = 0; l < 3; l++) S[k][l] += A[3 * i + k] * B[3 * i + l];
}

/* Y = K^-1 B less its part that the case's rows forbid; W = B' Y. */
static EfStatus rotation_flexibility(struct OwnEngine *o, EfContext *cx)
{
    const int rows = 6 * o->a->nj;
    double S[3][3], H[3][3] = {{0}};
    TRY(body_rotation(cx, o));
    memcpy(o->Y, o->B, (size_t)(3 * rows) * sizeof *o->Y);
    TRY(factor_solve(cx, o->factor, o->Y, 3));
    dot3(rows, o->X, o->B, S);
    for (int k = 0; k < 3; k++)
        for (int l = 0; l < 3; l++)
            for (int i = 0; i < 3; i++) H[k][l] += o->M[k][i] * S[i][l];
    for (int i = 0; i < rows; i++)
        for (int l = 0; l < 3; l++)
            for (int k = 0; k < 3; k++) o->Y[3 * i + l] -= o->X[3 * i + k] * H[k][l];
    dot3(rows, o->B, o->Y, o->W);
    return EF_OK;
}

static EfStatus set_factor(EfContext *cx, OwnCurve *c, double r)
{
    struct OwnEngine *o = c->engine;
    o->r = r;
    TRY(o->full ? pencil_shift(cx, &o->pencil, r) : exact_at(cx, &o->exact, r));
    const ArenaMark mark = arena_mark(&cx->tmp);
    TRY(factor_selected_inverse(cx, o->factor, o->inverse));
    for (int j = 0; j < o->a->nj; j++) /* a held direction gives way to nothing */
        for (int s = 0; s < BLOCK; s++)
            if (o->held[j] >> s & 1) o->inverse[BLOCK2 * o->a->mesh->pattern.start[j] + 7 * s] = 0;
    if (o->a->base >= 0) TRY(constrain(cx, c));
    if (o->a->base >= 0) TRY(rotation_flexibility(o, cx));
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

/* Block (i, j) of the flexibility, joints of a tube: B [6][6]. */
static void flexibility_block(const struct OwnEngine *o, int i, int j, double B[6][6])
{
    const BlockPattern *p = &o->a->mesh->pattern;
    const double *v = o->inverse + BLOCK2 * (i >= j ? pattern_block(p, i, j) : pattern_block(p, j, i));
    for (int s = 0; s < 6; s++)
        for (int t = 0; t < 6; t++) B[s][t] = i >= j ? v[6 * s + t] : v[6 * t + s];
    if (o->a->base < 0) return;
    const double *x = o->X + 18 * i, *y = o->X + 18 * j;
    for (int s = 0; s < 6; s++)
        for (int t = 0; t < 6; t++)
            for (int k = 0; k < 3; k++)
                for (int l = 0; l < 3; l++) B[s][t] -= x[3 * s + k] * o->M[k][l] * y[3 * t + l];
}

/* Flexibility at a tube's joints in its local axes. */
static void tube_flexibility(const struct OwnEngine *o, int tube, double F[END12][END12])
{
    const int *end = o->a->mesh->tube[tube].end;
    for (int e = 0; e < 2; e++)
        for (int f = 0; f < 2; f++) {
            double B[6][6], w[6][6];
            double(*Te)[3][3] = o->a->turn[tube][e], (*Tf)[3][3] = o->a->turn[tube][f];
            flexibility_block(o, end[e], end[f], B);
            for (int s = 0; s < 6; s++)
                for (int t = 0; t < 6; t++) {
                    w[s][t] = 0;
                    for (int k = 0; k < 3; k++) w[s][t] += Te[s / 3][s % 3][k] * B[s / 3 * 3 + k][t];
                }
            for (int s = 0; s < 6; s++)
                for (int t = 0; t < 6; t++) {
                    double sum = 0;
                    for (int k = 0; k < 3; k++) sum += w[s][t / 3 * 3 + k] * Tf[t / 3][t % 3][k];
                    F[6 * e + s][6 * f + t] = sum;
                }
        }
}

/* In a free body the pair of forces that pushes the tube alone turns with the body: what counts is the movement
 * relative to the body's own rotation, d - R theta. Else the pair, fixed in space, would turn the body instead of
 * buckling the tube. */
static void relative_flexibility(const struct OwnEngine *o, int tube, double F[END12][END12])
{
    const MeshTube *m = &o->a->mesh->tube[tube];
    const EfJoint *joint = o->a->mesh->frame->joint;
    double R[END12][3] = {{0}}, D[END12][3] = {{0}}, chord[3];
    for (int i = 0; i < 3; i++) chord[i] = joint[m->end[1]].x[i] - joint[m->end[0]].x[i];
    for (int i = 0; i < 3; i++)
        for (int c = 0; c < 3; c++) {
            const int p = (c + 1) % 3, q = (c + 2) % 3;
            R[3 + i][c] = R[9 + i][c] = m->R[i][c];
            R[6 + i][c] = m->R[i][q] * chord[p] - m->R[i][p] * chord[q]; /* e_c x chord */
        }
    for (int e = 0; e < 2; e++)
        for (int s = 0; s < 6; s++)
            for (int c = 0; c < 3; c++)
                for (int k = 0; k < 3; k++)
                    D[6 * e + s][c] += o->a->turn[tube][e][s / 3][s % 3][k] * o->Y[3 * (6 * m->end[e] + s / 3 * 3 + k) + c];
    for (int i = 0; i < END12; i++)
        for (int j = 0; j < END12; j++)
            for (int c = 0; c < 3; c++) {
                F[i][j] -= D[i][c] * R[j][c] + R[i][c] * D[j][c];
                for (int d = 0; d < 3; d++) F[i][j] += R[i][c] * o->W[c][d] * R[j][d];
            }
}

/* ---- one tube ------------------------------------------------------------------------------------------------------ */

static TubeForces forces_at(const struct OwnEngine *o, int t, double r)
{
    TubeForces f = {0};
    const TubeForces *parts[2] = {&o->growing->forces[t], o->steady ? &o->steady->forces[t] : NULL};
    const double factor[2] = {r, 1};
    for (int k = 0; k < 2 && parts[k]; k++) {
        for (int i = 0; i < 3; i++) f.N[i] += factor[k] * parts[k]->N[i];
        for (int i = 0; i < 4 && o->full; i++) f.My[i] += factor[k] * parts[k]->My[i], f.Mz[i] += factor[k] * parts[k]->Mz[i];
        for (int i = 0; i < END12; i++) f.end[i] += factor[k] * parts[k]->end[i];
        if (o->full) f.Mx += factor[k] * parts[k]->Mx;
    }
    return f;
}

/* A unit compression as the growing force, what is there as the steady one. Arrays in cx->tmp. */
static EfStatus push_form(EfContext *cx, const MeshTube *m, const TubeForces *at, TubeForm *form)
{
    const TubeForces unit = {.N = {-1, 0, 0}, .end = {[0] = 1, [6] = -1}};
    const double clamped = 4 * PI * PI * m->E * fmax(m->section.Iy, m->section.Iz) / (m->L * m->L);
    double twist;
    const double waves = tube_waves(m, at, &unit, clamped, &twist);
    return tube_form(cx, m, at, &unit, tube_basis(waves, twist, 1e-11, NULL), form);
}

/* The tube in the frame at r; its F for those who want more of it. *has_value is false for a tube that its own forces
 * would buckle between clamped ends: what holds it then is the balance of a free body, and own c means nothing. */
static EfStatus restrain(EfContext *cx, const struct OwnEngine *o, int t, double F[END12][END12], Restrained *x, bool *has_value)
{
    *has_value = true;
    const MeshTube *m = &o->a->mesh->tube[t];
    const TubeForces at = forces_at(o, t, o->r);
    *x = (Restrained){.tube = m, .N = at.N[0]};
    memcpy(x->end, at.end, sizeof x->end);
    x->kernel = m->has_offset || m->has_joint_parts ? OWN_EXACT : OWN_PLANES;
    if (o->full || o->exact.varies[t]) {
        x->kernel = OWN_FORM;
        const EfStatus st = push_form(cx, m, &at, &x->form);
        *has_value = st != EF_E_TALLY;
        if (!*has_value) return EF_OK;
        TRY(st);
    }
    tube_flexibility(o, t, F);
    if (o->a->base >= 0) relative_flexibility(o, t, F);
    restrained_set(x, (const double(*)[END12])F);
    return EF_OK;
}

static double clamped_load(const MeshTube *m, bool stiff_plane)
{
    const double I = stiff_plane ? fmax(m->section.Iy, m->section.Iz) : fmin(m->section.Iy, m->section.Iz);
    return 4 * PI * PI * m->E * I / (m->L * m->L) * (1 + 1e-6);
}

/* Upper end of the search for delta: clamped ends carry no more. */
static double search_end(const OwnCurve *c, int t, double P, bool stiff_plane)
{
    const double clamped = clamped_load(&c->mesh->tube[t], stiff_plane);
    return fmax(clamped - P, 1e-3 * clamped);
}

EfStatus own_critical_at(EfContext *cx, OwnCurve *c, double r, const bool *wanted, double *critical)
{
    struct OwnEngine *o = c->engine;
    TRY(set_factor(cx, c, r));
    const int count = o->full ? o->pencil.count : o->exact.count;
    for (int t = 0; t < c->mesh->nt; t++) {
        if (!wanted[t]) continue;
        critical[t] = NAN;
        if (count != 0) continue; /* the frame does not stand: no tube has a value */
        const ArenaMark mark = arena_mark(&cx->tmp);
        double F[END12][END12];
        Restrained x;
        const double P = c->P0[t] + r * c->P1[t];
        bool has_value;
        TRY(restrain(cx, o, t, F, &x, &has_value));
        if (has_value) critical[t] = P + restrained_root(&x, 1, search_end(c, t, P, false));
        arena_rewind(&cx->tmp, mark);
    }
    return EF_OK;
}

/* ---- making the curve ------------------------------------------------------------------------------------------------ */

static double most_compressed(const TubeForces *f) { return -tube_axial_min(f); }

static EfStatus fill_loads(EfContext *cx, OwnCurve *c, const Stress *steady, const Stress *growing)
{
    const int nt = c->mesh->nt;
    ALLOC(cx, tmp, c->P0, nt);
    ALLOC(cx, tmp, c->P1, nt);
    ALLOC(cx, tmp, c->euler, nt);
    for (int t = 0; t < nt; t++) {
        const MeshTube *m = &c->mesh->tube[t];
        c->P1[t] = most_compressed(&growing->forces[t]);
        if (steady) { /* at the place along the tube where both together press most at the case load */
            TubeForces sum = growing->forces[t];
            for (int i = 0; i < 3; i++) sum.N[i] += steady->forces[t].N[i];
            c->P0[t] = most_compressed(&sum) - c->P1[t];
        }
        c->euler[t] = PI * PI * m->E * fmin(m->section.Iy, m->section.Iz) / (m->joint_length * m->joint_length);
    }
    return EF_OK;
}

EfStatus own_curve_new(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, double cap, bool full,
                       OwnCurve *c)
{
    struct OwnEngine *o;
    *c = (OwnCurve){.mesh = a->mesh, .cap = cap};
    TRY(fill_loads(cx, c, steady, growing));
    ALLOC(cx, tmp, o, 1);
    c->engine = o;
    *o = (struct OwnEngine){.a = a, .steady = steady, .growing = growing, .full = full};
    ALLOC(cx, tmp, o->inverse, a->nvalue);
    if (a->base >= 0) {
        ALLOC(cx, tmp, o->X, 18 * a->nj);
        ALLOC(cx, tmp, o->B, 18 * a->nj);
        ALLOC(cx, tmp, o->Y, 18 * a->nj);
    }
    if (!full) {
        TRY(exact_build(cx, a, steady, growing, &o->exact));
        o->held = o->exact.held, o->factor = o->exact.factor;
        return EF_OK;
    }
    bool buckled;
    TRY(pencil_build(cx, a, steady, growing, isfinite(cap) ? cap : 1, &buckled, &o->pencil));
    if (buckled) return fail(cx, EF_E_TALLY, "The steady loads alone buckle a tube.");
    o->held = o->pencil.held, o->factor = o->pencil.factor;
    return EF_OK;
}

void own_curve_free(OwnCurve *c)
{
    if (!c->engine) return;
    exact_free(&c->engine->exact);
    pencil_free(&c->engine->pencil);
}

/* ---- what is shown ------------------------------------------------------------------------------------------------------ */

static EfStatus make_room(EfContext *cx, int nt, EfFixity *f)
{
    double **columns[] = {&f->frame_c, &f->own_critical, &f->own_c, &f->second_c, &f->clear_c, &f->reserve, &f->safe_c, &f->safe_at};
    for (size_t i = 0; i < sizeof columns / sizeof *columns; i++) {
        ALLOC(cx, keep, *columns[i], nt);
        for (int t = 0; t < nt; t++) (*columns[i])[t] = NAN;
    }
    ALLOC(cx, keep, f->own_plane, 3 * nt);
    ALLOC(cx, keep, f->end_stiffness, 8 * nt);
    for (int i = 0; i < 3 * nt; i++) f->own_plane[i] = NAN;
    for (int i = 0; i < 8 * nt; i++) f->end_stiffness[i] = NAN;
    ALLOC(cx, keep, f->role, nt);
    ALLOC(cx, keep, f->shape_of, nt);
    ALLOC(cx, keep, f->note, nt);
    return EF_OK;
}

EfStatus fixity_blank(EfContext *cx, const Mesh *mesh, const char *note, EfFixity *f)
{
    TRY(make_room(cx, mesh->nt, f));
    f->own_at = NAN;
    for (int t = 0; t < mesh->nt; t++) f->note[t] = note, f->shape_of[t] = -1;
    return EF_OK;
}

/* Frame c and role of every tube from the shapes. */
static void fill_from_shapes(const OwnCurve *c, const EfCritical *shapes, EfFixity *f)
{
    const int nt = c->mesh->nt;
    for (int t = 0; t < nt; t++) {
        f->shape_of[t] = -1;
        f->role[t] = EF_ROLE_IDLE;
        f->note[t] = "";
        for (int k = shapes->nmode - 1; k >= 0; k--) {
            const int role = shapes->role[k * nt + t];
            if (role != EF_ROLE_IDLE && role != EF_ROLE_RIDING) f->role[t] = role;
            if (role == EF_ROLE_LEANING) f->shape_of[t] = k;
        }
        const double P = f->shape_of[t] < 0 ? 0 : c->P0[t] + shapes->factor[f->shape_of[t]] * c->P1[t];
        if (P > 0) f->frame_c[t] = P / c->euler[t];
    }
}

/* Why a tube has less than a pin-ended one: its ends move across its line, or its neighbours lean on it. */
static const char *low_cause(const Restrained *x, const OwnCurve *c, int t, double P)
{
    if (x->kernel != OWN_PLANES) return "sways";
    Restrained held = *x;
    const MeshTube *m = x->tube;
    held.hold_chord = 1e6 * m->E * fmax(m->section.Iy, m->section.Iz) / m->L;
    const double chord = P + restrained_root(&held, 1, search_end(c, t, P, false));
    return chord >= c->euler[t] ? "sways" : "leaned on";
}

static EfStatus fill_tube(EfContext *cx, const OwnCurve *c, int t, EfFixity *f)
{
    const struct OwnEngine *o = c->engine;
    const MeshTube *m = &c->mesh->tube[t];
    const double P = c->P0[t] + o->r * c->P1[t];
    double F[END12][END12], k[2][2][2], yz[2];
    Restrained x;
    bool has_value;
    TRY(restrain(cx, o, t, F, &x, &has_value));
    if (!has_value) return EF_OK;
    const double delta = restrained_root(&x, 1, search_end(c, t, P, false));
    const double second = restrained_root(&x, 2, search_end(c, t, P, true));
    f->own_critical[t] = P + delta;
    f->own_c[t] = f->own_critical[t] / c->euler[t];
    f->second_c[t] = (P + second) / c->euler[t];
    f->clear_c[t] = f->own_c[t] * (m->L * m->L) / (m->joint_length * m->joint_length);
    restrained_direction(&x, delta, yz);
    for (int i = 0; i < 3; i++) f->own_plane[3 * t + i] = yz[0] * m->R[1][i] + yz[1] * m->R[2][i];
    restrained_ends(&x, (const double(*)[END12])F, k);
    memcpy(f->end_stiffness + 8 * t, k, sizeof k);
    if (f->own_c[t] < 1) f->note[t] = low_cause(&x, c, t, P);
    return EF_OK;
}

EfStatus fixity_fill(EfContext *cx, OwnCurve *c, const EfCaseResult *result, EfFixity *f)
{
    const int nt = c->mesh->nt;
    double largest = 0;
    TRY(make_room(cx, nt, f));
    fill_from_shapes(c, &result->critical, f);
    /* The cap is 0.999 of the lowest factor: where that is under the case load, the neighbours are held at 0.9 of it. */
    f->own_at = c->cap > 1 ? 1 : BEFORE * c->cap / 0.999;
    TRY(set_factor(cx, c, f->own_at));
    const bool stands = (c->engine->full ? c->engine->pencil.count : c->engine->exact.count) == 0;
    for (int t = 0; t < nt; t++) largest = fmax(largest, fabs(result->axial[t]));
    for (int t = 0; t < nt; t++) {
        const double P = c->P0[t] + c->P1[t];
        if (P <= IDLE * largest) {
            f->note[t] = P < -IDLE * largest ? "tension" : "idle";
            continue;
        }
        if (!stands) continue;
        const ArenaMark mark = arena_mark(&cx->tmp);
        TRY(fill_tube(cx, c, t, f));
        arena_rewind(&cx->tmp, mark);
    }
    return EF_OK;
}
