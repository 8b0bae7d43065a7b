/* loads.c - the loads of a case on joints and along tubes.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "mesh/parts.h"

void add_resultant(const double force[3], const double moment[3], const double at[3], double total[6])
{
    double m[3];
    cross(at, force, m);
    for (int i = 0; i < 3; i++) total[i] += force[i], total[3 + i] += moment[i] + m[i];
}

void load_along(const Mesh *mesh, int tube, const double from[3], const double to[3], Loads *l)
{
    static const double none[3] = {0};
    const double L = mesh->tube[tube].L;
    double end[2][3];
    tube_ends(mesh, tube, end);
    TubeLoad *q = &l->tube[tube];
    /* The pair of end forces with the resultant and the moment of a load that varies linearly. */
    for (int e = 0; e < 2; e++) {
        double force[3];
        for (int i = 0; i < 3; i++) force[i] = L * (e == 0 ? 2 * from[i] + to[i] : from[i] + 2 * to[i]) / 6;
        add_resultant(force, none, end[e], l->total);
    }
    for (int i = 0; i < 3; i++) q->from[i] += from[i], q->to[i] += to[i];
}

void load_equipment(const Mesh *mesh, int e, const double force[3], Loads *l)
{
    static const double none[3] = {0};
    const Carrier *c = &mesh->equipment[e];
    carrier_spread(c, force, none, l->joint);
    add_resultant(force, none, c->point, l->total);
    ArmLoad *arm = &l->arm[l->narm++];
    arm->carrier = c;
    memcpy(arm->force, force, sizeof arm->force);
}

static EfStatus load_joints(EfContext *cx, const Mesh *mesh, const EfLoad *load, double factor, Loads *l)
{
    Carrier c;
    double line[3], point[3] = {0}, force[3], moment[3];
    for (int i = 0; i < 3; i++) force[i] = factor * load->force[i], moment[i] = factor * load->moment[i];
    for (int k = 0; k < load->njoint; k++)
        for (int i = 0; i < 3; i++) point[i] += mesh->frame->joint[load->joint[k]].x[i] / load->njoint;
    TRY(carrier_build(cx, mesh->frame, load->njoint, load->joint, point, &c, line));
    if (fabs(dot(line, moment)) > 1e-9 * sqrt(dot(moment, moment)))
        return fail(cx, EF_E_INPUT,
                    "The load in line %d puts a moment about the line of its joints on them, which they cannot carry by "
                    "forces. Add a joint out of the line, or put the moment on one joint.", load->mark.line);
    carrier_spread(&c, force, moment, l->joint);
    add_resultant(force, moment, point, l->total);
    return EF_OK;
}

static void load_inertia(const Mesh *mesh, const double vector[3], double factor, Loads *l)
{
    double weight[3];
    for (int i = 0; i < 3; i++) weight[i] = factor * STANDARD_GRAVITY * vector[i];
    for (int t = 0; t < mesh->nt; t++) {
        const double m = mesh->tube[t].mass_per_length, q[3] = {m * weight[0], m * weight[1], m * weight[2]};
        load_along(mesh, t, q, q, l);
    }
    for (int e = 0; e < mesh->nequipment; e++) {
        const double m = mesh->frame->equipment[e].mass, f[3] = {m * weight[0], m * weight[1], m * weight[2]};
        load_equipment(mesh, e, f, l);
    }
}

static EfStatus load_one(EfContext *cx, const Mesh *mesh, const EfLoad *load, double factor, Loads *l)
{
    switch (load->kind) {
    case EF_LOAD_JOINT: return load_joints(cx, mesh, load, factor, l);
    case EF_LOAD_INERTIA: load_inertia(mesh, load->force, factor, l); return EF_OK;
    case EF_LOAD_TUBE:
        for (int k = 0; k < load->ntube; k++) {
            const double q[3] = {factor * load->force[0], factor * load->force[1], factor * load->force[2]};
            load_along(mesh, load->tube[k], q, q, l);
        }
        return EF_OK;
    case EF_LOAD_WARM:
        for (int k = 0; k < load->ntube; k++) {
            const MeshTube *t = &mesh->tube[load->tube[k]];
            if (!isfinite(t->expansion))
                return fail(cx, EF_E_INPUT, "Tube %s is warmed, but its material has no thermal expansion. Give `expansion`.",
                            mesh->frame->tube[load->tube[k]].name);
            l->tube[load->tube[k]].warm_force -= factor * t->E * t->section.A * t->expansion * load->warm;
        }
        return EF_OK;
    }
    return EF_OK;
}

EfStatus load_case(EfContext *cx, const Mesh *mesh, const EfCase *c, bool steady, double factor, Loads *l)
{
    for (int i = 0; i < c->nload; i++)
        if (c->load[i].steady == steady) TRY(load_one(cx, mesh, &c->load[i], factor, l));
    return EF_OK;
}
