/* shapes.c - shapes in global components, energies lost and stored by every tube, roles and families.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "analysis/buckling.h"

static const double SAME_FAMILY = 1e-3; /* relative gap of factors */
static const double NO_PART = 1e-3;     /* share of energy below which a tube takes no part */
static const double DRIVES = 0.05;      /* and of the lost energy from which a tube may be said to drive a shape */
static const double NO_MOVE = 0.02;     /* of the largest movement */

/* ---- shapes ------------------------------------------------------------------------------------------------------ */

/* Shape and line data of mode k before scaling. */
static void fill_movement(const EfResults *results, const Search *s, int k, double *own, double *shape, double *line)
{
    const Pencil *p = &s->pencil;
    const double *x = s->modes.x + (size_t)k * (size_t)p->n;
    assembly_to_global(p->a, x, shape);
    for (int i = 0, t = -1; i < results->npoint; i++) {
        const MeshTube *m = &p->a->mesh->tube[results->point_tube[i]];
        double u[3];
        if (results->point_tube[i] != t) pencil_tube(p, t = results->point_tube[i], x, 1, 0, own);
        tube_line(m, &p->form[t], own, results->point_station[i], u);
        for (int c = 0; c < 3; c++) line[3 * i + c] = m->R[0][c] * u[0] + m->R[1][c] * u[1] + m->R[2][c] * u[2];
    }
}

/* Scales to a largest movement of 1 (joints and tubes), positive where it is largest; a shape that only turns its
 * joints to a largest rotation of 1. Returns the scale. */
static double scale_movement(const EfResults *results, int nj, double *shape, double *line)
{
    double move = 0, turn = 0, sign = 1, turn_sign = 1;
    for (int j = 0; j < nj; j++)
        for (int i = 0; i < 6; i++) {
            const double v = shape[6 * j + i];
            if (i < 3 && fabs(v) > move * (1 + 1e-9)) move = fabs(v), sign = v < 0 ? -1 : 1;
            if (i >= 3 && fabs(v) > turn * (1 + 1e-9)) turn = fabs(v), turn_sign = v < 0 ? -1 : 1;
        }
    for (int i = 0; i < 3 * results->npoint; i++)
        if (fabs(line[i]) > move * (1 + 1e-9)) move = fabs(line[i]), sign = line[i] < 0 ? -1 : 1;
    const double by = move > 1e-9 * turn ? sign / move : turn > 0 ? turn_sign / turn : 1;
    for (int i = 0; i < 6 * nj; i++) shape[i] *= by;
    for (int i = 0; i < 3 * results->npoint; i++) line[i] *= by;
    return by;
}

/* ---- energies ---------------------------------------------------------------------------------------------------- */

/* Energy of support springs. */
static double spring_energy(const Mesh *mesh, const double *shape)
{
    double sum = 0;
    for (int j = 0; j < mesh->nj; j++)
        for (int i = 0; i < 6; i++) {
            const double k = mesh->spring[j][i], *u = shape + 6 * j + i / 3 * 3;
            if (!(k > 0)) continue;
            const double *axis = mesh->axes[j] ? mesh->axes[j][i % 3] : NULL;
            const double d = axis ? axis[0] * u[0] + axis[1] * u[1] + axis[2] * u[2] : u[i % 3];
            sum += k * d * d / 2;
        }
    return sum;
}

/* Energy of forces on arms, steady plus factor x growing: x in the joints' axes. */
static EfStatus arm_energy(EfContext *cx, const Pencil *p, double factor, const double *x, double *energy)
{
    *energy = 0;
    const ArenaMark mark = arena_mark(&cx->tmp);
    double *value, *y;
    ALLOC(cx, tmp, value, p->a->nvalue);
    ALLOC(cx, tmp, y, 6 * p->a->nj);
    for (int i = 0; i < 2; i++) {
        if (p->growing->factor[i] != 0) assembly_add_arms(p->a, p->growing->arms[i], factor * p->growing->factor[i], value);
        if (p->steady && p->steady->factor[i] != 0) assembly_add_arms(p->a, p->steady->arms[i], p->steady->factor[i], value);
    }
    block_multiply(&p->a->mesh->pattern, value, x, y, 1);
    for (int i = 0; i < 6 * p->a->nj; i++) *energy += x[i] * y[i] / 2;
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

/* Shares of mode k: what compression gives up against what tubes, springs and tension take in. */
static EfStatus fill_shares(EfContext *cx, const Search *s, int k, double *own, const double *shape, double scale,
                            EfCritical *c)
{
    const Pencil *p = &s->pencil;
    const int nt = p->a->nt;
    const double *x = s->modes.x + (size_t)k * (size_t)p->n, factor = s->modes.factor[k];
    double *lost = c->lost + (size_t)k * (size_t)nt, *stored = c->stored + (size_t)k * (size_t)nt, arms, all = 0;
    TRY(arm_energy(cx, p, factor, x, &arms));
    double stored_others = spring_energy(p->a->mesh, shape) / (scale * scale) + fmax(arms, 0), lost_others = fmax(-arms, 0);
    for (int t = 0; t < nt; t++) {
        pencil_tube(p, t, x, 1, 0, own);
        const TubeEnergy e = tube_energy(&p->form[t], own);
        const double geometric = e.steady + factor * e.growing;
        lost[t] = fmax(-geometric, 0);
        stored[t] = e.elastic + fmax(geometric, 0);
        all += lost[t];
    }
    all += lost_others;
    double in = stored_others;
    for (int t = 0; t < nt; t++) in += stored[t];
    for (int t = 0; t < nt; t++) lost[t] /= all, stored[t] /= in;
    c->lost_others[k] = lost_others / all;
    c->stored_others[k] = stored_others / in;
    return EF_OK;
}

/* Largest movement of a tube's ends and points. */
static void fill_roles(const EfResults *results, const Mesh *mesh, int k, double *moved, EfCritical *c)
{
    const int nt = mesh->nt;
    const double *line = c->line + (size_t)k * (size_t)results->npoint * 3;
    memset(moved, 0, (size_t)nt * sizeof *moved);
    for (int i = 0; i < results->npoint; i++)
        for (int d = 0; d < 3; d++) moved[results->point_tube[i]] = fmax(moved[results->point_tube[i]], fabs(line[3 * i + d]));
    for (int t = 0; t < nt; t++) {
        const double W = c->lost[k * nt + t], U = c->stored[k * nt + t];
        int role = EF_ROLE_BRACING;
        const bool gives = W >= (1 - 1e-3) * U;
        if ((W < NO_PART && U < NO_PART) || (gives && W < DRIVES)) role = moved[t] > NO_MOVE ? EF_ROLE_RIDING : EF_ROLE_IDLE;
        else if (gives) role = EF_ROLE_LEANING;
        c->role[k * nt + t] = role;
    }
}

/* ---- all -------------------------------------------------------------------------------------------------------------- */

static int shown_modes(const Modes *m, int want)
{
    int n = m->n < want ? m->n : want;
    while (n > 0 && n < m->n && m->factor[n] - m->factor[n - 1] < 1e-6 * m->factor[n]) n++;
    return n;
}

static EfStatus make_room(EfContext *cx, const EfResults *results, int nj, int nt, EfCritical *c)
{
    const size_t n = (size_t)c->nmode;
    ALLOC(cx, keep, c->factor, n);
    ALLOC(cx, keep, c->residual, n);
    ALLOC(cx, keep, c->mesh_error, n);
    ALLOC(cx, keep, c->shape, n * (size_t)nj * 6);
    ALLOC(cx, keep, c->line, n * (size_t)results->npoint * 3);
    ALLOC(cx, keep, c->lost, n * (size_t)nt);
    ALLOC(cx, keep, c->stored, n * (size_t)nt);
    ALLOC(cx, keep, c->lost_others, n);
    ALLOC(cx, keep, c->stored_others, n);
    ALLOC(cx, keep, c->role, n * (size_t)nt);
    ALLOC(cx, keep, c->family, n);
    ALLOC(cx, keep, c->kind, n);
    return EF_OK;
}

static EfStatus fill_mode(EfContext *cx, const EfResults *results, const Search *s, int k, double *own, double *moved,
                          EfCritical *c)
{
    const Assembly *a = s->pencil.a;
    double *shape = c->shape + (size_t)k * (size_t)a->nj * 6, *line = c->line + (size_t)k * (size_t)results->npoint * 3;
    fill_movement(results, s, k, own, shape, line);
    const double scale = scale_movement(results, a->nj, shape, line);
    TRY(fill_shares(cx, s, k, own, shape, scale, c));
    fill_roles(results, a->mesh, k, moved, c);
    c->factor[k] = s->modes.factor[k];
    c->residual[k] = s->modes.residual[k];
    c->mesh_error[k] = s->pencil.mesh_error;
    if (k > 0) c->family[k] = c->family[k - 1] + (c->factor[k] - c->factor[k - 1] > SAME_FAMILY * c->factor[k]);
    return kind_of_shape(cx, a->mesh, c, k, &c->kind[k]);
}

EfStatus shapes_fill(EfContext *cx, const EfResults *results, const Search *s, int want, EfCritical *c)
{
    *c = (EfCritical){.outcome = s->outcome, .counted = s->pencil.count, .found = s->modes.n, .counted_at = s->pencil.sigma};
    if (!s->pencil.factor) return EF_OK;
    const Assembly *a = s->pencil.a;
    c->nmode = shown_modes(&s->modes, want);
    TRY(separate_families(cx, s, c->nmode));
    TRY(make_room(cx, results, a->nj, a->nt, c));
    const ArenaMark mark = arena_mark(&cx->tmp);
    double *own, *moved;
    ALLOC(cx, tmp, own, MAX_RAW);
    ALLOC(cx, tmp, moved, a->nt);
    for (int k = 0; k < c->nmode; k++) TRY(fill_mode(cx, results, s, k, own, moved, c));
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}
