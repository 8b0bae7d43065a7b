/* report.c - what a first-order answer tells: forces, reactions, moments and the balance.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "analysis/statics.h"

/* Steady plus growing section forces. */
static TubeForces total_forces(const State *s, int t)
{
    TubeForces f = s->growing.forces[t];
    if (!s->steady.x) return f;
    const TubeForces *g = &s->steady.forces[t];
    for (int i = 0; i < 3; i++) f.N[i] += g->N[i];
    for (int i = 0; i < 4; i++) f.My[i] += g->My[i], f.Mz[i] += g->Mz[i];
    for (int i = 0; i < END12; i++) f.end[i] += g->end[i];
    f.Mx += g->Mx;
    return f;
}

static EfStatus tube_rows(EfContext *cx, const Assembly *a, const State *s, EfCaseResult *r)
{
    const int nt = a->nt;
    ALLOC(cx, keep, r->axial, nt);
    ALLOC(cx, keep, r->axial_min, nt);
    ALLOC(cx, keep, r->axial_growing, nt);
    ALLOC(cx, keep, r->end_force, nt * END12);
    ALLOC(cx, keep, r->end_force_limit, nt * END12);
    ALLOC(cx, keep, r->station_moment, nt * 10);
    for (int t = 0; t < nt; t++) {
        const TubeForces f = total_forces(s, t);
        r->axial[t] = tube_axial(&f, 0);
        r->axial_min[t] = tube_axial_min(&f);
        r->axial_growing[t] = tube_axial(&s->growing.forces[t], 0);
        for (int k = 0; k < 5; k++) tube_moments(&f, 0.5 * k - 1, r->station_moment + 10 * t + 2 * k);
        for (int i = 0; i < END12; i++) {
            r->end_force[END12 * t + i] = f.end[i];
            /* At ultimate level no limit load is declared, so there is no yield check. */
            r->end_force_limit[END12 * t + i] = s->run->level == EF_LEVEL_LIMIT ? f.end[i] / s->run->ultimate_factor : NAN;
        }
    }
    return EF_OK;
}

/* Force of the supports and springs on each joint, global: what the tubes and the loads leave. out [nj][6]. */
static EfStatus left_over(EfContext *cx, const Assembly *a, const State *s, double *out)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    double *own;
    ALLOC(cx, tmp, own, 6 * a->nj);
    for (int t = 0; t < a->nt; t++) {
        const TubeForces f = total_forces(s, t);
        double arm[END12];
        memcpy(arm, f.end, sizeof arm);
        for (int e = 0; e < 2; e++) { /* moved from the tube's end to the joint */
            const double *o = a->mesh->tube[t].offset[e], *p = f.end + 6 * e;
            arm[6 * e + 3] += o[1] * p[2] - o[2] * p[1];
            arm[6 * e + 4] += o[2] * p[0] - o[0] * p[2];
            arm[6 * e + 5] += o[0] * p[1] - o[1] * p[0];
        }
        assembly_scatter(a, t, arm, own, 1);
    }
    assembly_to_global(a, own, out);
    for (int i = 0; i < 6 * a->nj; i++)
        out[i] -= s->run->growing.joint[i] + (s->steady.x ? s->run->steady.joint[i] : 0);
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

static bool supported(const Mesh *mesh, int j)
{
    if (mesh->held[j]) return true;
    for (int s = 0; s < 6; s++)
        if (mesh->spring[j][s] > 0) return true;
    return false;
}

static void add_about_origin(double sum[6], const double f[6], const double x[3])
{
    for (int i = 0; i < 6; i++) sum[i] += f[i];
    sum[3] += x[1] * f[2] - x[2] * f[1];
    sum[4] += x[2] * f[0] - x[0] * f[2];
    sum[5] += x[0] * f[1] - x[1] * f[0];
}

/* Reactions, and what is left over on joints that nothing holds: the check of equilibrium. */
static EfStatus reactions(EfContext *cx, const Assembly *a, const State *s, EfCaseResult *r)
{
    const EfFrame *frame = a->mesh->frame;
    double *f, lost[2] = {0, 0}, scale[2] = {0, 0};
    ALLOC(cx, tmp, f, 6 * a->nj);
    TRY(left_over(cx, a, s, f));
    ALLOC(cx, keep, r->reaction_joint, a->nj);
    ALLOC(cx, keep, r->reaction, 6 * a->nj);
    for (int t = 0; t < a->nt; t++)
        for (int i = 0; i < END12; i++) scale[i / 3 % 2] = fmax(scale[i / 3 % 2], fabs(r->end_force[END12 * t + i]));
    for (int i = 0; i < 3; i++) scale[0] = fmax(scale[0], fabs(r->balance.applied[i])); /* loads may balance themselves to nothing */
    for (int i = 0; i < 6 * a->nj; i++)
        scale[i / 3 % 2] = fmax(scale[i / 3 % 2], fabs(s->run->growing.joint[i]));
    for (int j = 0; j < a->nj; j++) {
        if (supported(a->mesh, j)) {
            r->reaction_joint[r->nreaction] = j;
            memcpy(r->reaction + 6 * r->nreaction++, f + 6 * j, 6 * sizeof *f);
            add_about_origin(r->balance.reactions, f + 6 * j, frame->joint[j].x);
            continue;
        }
        for (int i = 0; i < 6; i++) lost[i / 3] = fmax(lost[i / 3], fabs(f[6 * j + i]));
    }
    double extent = 0; /* moments are compared with forces over the frame's size where they are small */
    for (int t = 0; t < a->nt; t++) extent = fmax(extent, a->mesh->tube[t].joint_length);
    scale[1] = fmax(scale[1], scale[0] * extent);
    r->balance.residual = scale[0] > 0 ? fmax(lost[0] / scale[0], lost[1] / scale[1]) : 0;
    return EF_OK;
}

EfStatus statics_report(EfContext *cx, const Assembly *a, const State *s, EfCaseResult *r)
{
    const Run *run = s->run;
    r->name = run->name, r->level = run->level, r->ultimate_factor = run->ultimate_factor;
    r->reversed = run->reversed, r->combination = run->combination, r->run = run->index;
    r->required = run->required, r->free_body = a->mesh->free_body, r->has_steady = s->steady.x != NULL;
    memcpy(r->n_at_cg, run->n_at_cg, sizeof r->n_at_cg);
    memcpy(r->angular_acceleration, run->angular_acceleration, sizeof r->angular_acceleration);
    ALLOC(cx, keep, r->displacement, 6 * a->nj);
    for (int i = 0; i < 6 * a->nj; i++) r->displacement[i] = s->growing.x[i] + (s->steady.x ? s->steady.x[i] : 0);
    assembly_to_global(a, r->displacement, r->displacement);
    TRY(tube_rows(cx, a, s, r));
    const ArenaMark mark = arena_mark(&cx->tmp);
    for (int i = 0; i < 6; i++) {
        r->balance.inertia[i] = run->inertia_total[i];
        r->balance.applied[i] = run->growing.total[i] + (run->has_steady ? run->steady.total[i] : 0) - run->inertia_total[i];
    }
    TRY(reactions(cx, a, s, r));
    arena_rewind(&cx->tmp, mark);
    /* The sum of everything must vanish too. */
    double force = 0, moment = 0, sum = 0, turn = 0;
    for (int i = 0; i < 6; i++) {
        const double all = r->balance.applied[i] + r->balance.inertia[i] + r->balance.reactions[i];
        const double size = fmax(fabs(r->balance.applied[i]), fabs(r->balance.reactions[i]));
        if (i < 3) force = fmax(force, size), sum = fmax(sum, fabs(all));
        else moment = fmax(moment, size), turn = fmax(turn, fabs(all));
    }
    double reach = 0;
    for (int j = 0; j < a->nj; j++)
        for (int i = 0; i < 3; i++) reach = fmax(reach, fabs(a->mesh->frame->joint[j].x[i]));
    moment = fmax(moment, force * reach);
    if (force > 0) r->balance.residual = fmax(r->balance.residual, sum / force);
    if (moment > 0) r->balance.residual = fmax(r->balance.residual, turn / moment);
    return EF_OK;
}
