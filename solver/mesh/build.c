/* build.c - the mesh: tubes with lengths and axes, supports, carriers, the graph of joints.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "mesh/parts.h"

void cross(const double a[3], const double b[3], double out[3])
{
    const double c[3] = {a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]};
    memcpy(out, c, sizeof c);
}

double dot(const double a[3], const double b[3]) { return a[0] * b[0] + a[1] * b[1] + a[2] * b[2]; }

/* ---- tubes --------------------------------------------------------------------------------------------------- */

void tube_ends(const Mesh *mesh, int tube, double end[2][3])
{
    const EfTube *t = &mesh->frame->tube[tube];
    for (int e = 0; e < 2; e++)
        for (int i = 0; i < 3; i++) end[e][i] = mesh->frame->joint[t->end[e]].x[i] + t->offset[e][i];
}

/* Rows x y z of the tube's axes; `along` is a unit vector. false: `up` lies along the tube. */
static bool tube_axes(const double along[3], const double given[3], double R[3][3])
{
    double up[3] = {given[0], given[1], given[2]};
    if (dot(up, up) == 0) { /* global z, or global x for a tube within 0.1 degree of vertical */
        const bool upright = hypot(along[0], along[1]) < 1.745e-3;
        up[upright ? 0 : 2] = 1;
    }
    const double norm = sqrt(dot(up, up)), part = dot(up, along) / norm;
    double size = 0;
    memcpy(R[0], along, sizeof R[0]);
    for (int i = 0; i < 3; i++) {
        R[2][i] = up[i] / norm - part * along[i];
        size += R[2][i] * R[2][i];
    }
    if (!(size > 1e-10)) return false;
    for (int i = 0; i < 3; i++) R[2][i] /= sqrt(size);
    cross(R[2], R[0], R[1]);
    return true;
}

static bool has_parts(const EfTube *t)
{
    for (int e = 0; e < 2; e++) {
        if (t->release[e]) return true;
        for (int i = 0; i < EF_DIRECTIONS; i++)
            if (isfinite(t->spring[e][i])) return true;
    }
    return false;
}

static EfStatus tube_build(EfContext *cx, const Mesh *mesh, int i, MeshTube *m)
{
    const EfFrame *f = mesh->frame;
    const EfTube *t = &f->tube[i];
    const EfSize *size = &f->size[t->size];
    const EfMaterial *material = &f->material[size->material];
    double end[2][3], along[3], chord[3];
    tube_ends(mesh, i, end);
    for (int k = 0; k < 3; k++) {
        along[k] = end[1][k] - end[0][k];
        chord[k] = f->joint[t->end[1]].x[k] - f->joint[t->end[0]].x[k];
    }
    memcpy(m->end, t->end, sizeof m->end);
    m->L = sqrt(dot(along, along));
    m->joint_length = sqrt(dot(chord, chord));
    if (t->end[0] == t->end[1] || !(m->L > 1e-9 * fmax(m->joint_length, 1e-6)))
        return fail(cx, EF_E_INPUT, "Tube %s has no length left between its ends. Move a joint or shorten its offsets.", t->name);
    if (dot(along, chord) < 0)
        return fail(cx, EF_E_INPUT, "Tube %s: its offsets are longer than the tube. Shorten them.", t->name);
    for (int k = 0; k < 3; k++) along[k] /= m->L;
    if (!tube_axes(along, t->up, m->R))
        return fail(cx, EF_E_INPUT, "Tube %s: `up` lies along the tube. Choose another direction.", t->name);
    for (int e = 0; e < 2; e++)
        for (int k = 0; k < 3; k++) {
            m->offset[e][k] = dot(m->R[k], t->offset[e]);
            m->has_offset |= t->offset[e][k] != 0;
        }
    m->E = material->E, m->G = material->G, m->expansion = material->expansion;
    m->section = size->section;
    m->mass_per_length = material->density * size->section.A;
    m->shear = f->shear_flexible;
    memcpy(m->release, t->release, sizeof m->release);
    memcpy(m->spring, t->spring, sizeof m->spring);
    m->has_joint_parts = has_parts(t);
    return EF_OK;
}

/* ---- supports -------------------------------------------------------------------------------------------------- */

static EfStatus supports_build(EfContext *cx, Mesh *mesh)
{
    const EfFrame *f = mesh->frame;
    ALLOC(cx, keep, mesh->held, mesh->nj);
    ALLOC(cx, keep, mesh->spring, mesh->nj);
    ALLOC(cx, keep, mesh->axes, mesh->nj);
    mesh->free_body = true;
    for (int s = 0; s < f->nsupport; s++) {
        const EfSupport *p = &f->support[s];
        mesh->held[p->joint] = p->held;
        mesh->free_body &= p->held == 0;
        for (int i = 0; i < EF_DIRECTIONS; i++) {
            mesh->spring[p->joint][i] = (p->held >> i & 1) ? 0 : p->spring[i];
            mesh->free_body &= !(mesh->spring[p->joint][i] > 0);
            if (p->movement[i] == 0 || !(p->held >> i & 1)) continue;
            if (!mesh->movement) ALLOC(cx, keep, mesh->movement, mesh->nj);
            mesh->movement[p->joint][i] = p->movement[i];
        }
        if (!p->skew) continue;
        ALLOC(cx, keep, mesh->axes[p->joint], 3);
        memcpy(mesh->axes[p->joint], p->axes, sizeof p->axes);
    }
    return EF_OK;
}

/* ---- equipment and the graph ------------------------------------------------------------------------------------- */

static EfStatus equipment_build(EfContext *cx, Mesh *mesh)
{
    const EfFrame *f = mesh->frame;
    mesh->nequipment = f->nequipment;
    ALLOC(cx, keep, mesh->equipment, f->nequipment);
    for (int e = 0; e < f->nequipment; e++) {
        const EfEquipment *q = &f->equipment[e];
        Carrier *c = &mesh->equipment[e];
        double line[3], arm[3], off[3];
        TRY(carrier_build(cx, f, q->ncarrier, q->carrier, q->at, c, line));
        if (dot(line, line) == 0) continue;
        for (int i = 0; i < 3; i++) arm[i] = c->point[i] - c->centre[i];
        cross(arm, line, off);
        if (sqrt(dot(off, off)) > 1e-6)
            return fail(cx, EF_E_INPUT,
                        "Equipment %s hangs off the line of the joints that carry it, so it could swing about that line. "
                        "Add a joint out of the line to `carried by`, or name one joint only (a rigid arm).", q->name);
    }
    return EF_OK;
}

static EfStatus pattern_build(EfContext *cx, Mesh *mesh)
{
    int n = mesh->nt;
    for (int e = 0; e < mesh->nequipment; e++) n += mesh->equipment[e].ncarrier * mesh->equipment[e].ncarrier;
    const ArenaMark mark = arena_mark(&cx->tmp);
    int(*pair)[2];
    ALLOC(cx, tmp, pair, n);
    n = 0;
    for (int t = 0; t < mesh->nt; t++, n++) memcpy(pair[n], mesh->tube[t].end, sizeof pair[n]);
    for (int e = 0; e < mesh->nequipment; e++) {
        const Carrier *c = &mesh->equipment[e];
        for (int i = 0; i < c->ncarrier; i++)
            for (int k = 0; k < c->ncarrier; k++, n++) pair[n][0] = c->joint[i], pair[n][1] = c->joint[k];
    }
    TRY(pattern_from_pairs(cx, mesh->nj, n, (const int(*)[2])pair, &mesh->pattern));
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

EfStatus mesh_build(EfContext *cx, const EfFrame *frame, Mesh *mesh)
{
    *mesh = (Mesh){.frame = frame, .nj = frame->njoint, .nt = frame->ntube};
    if (frame->nguy > 0)
        return fail(cx, EF_E_INPUT, "Guys are read and checked, but frames with guys cannot be solved yet. Replace guy %s "
                                    "by the force it puts on the frame, or take the guys out.", frame->guy[0].name);
    ALLOC(cx, keep, mesh->tube, mesh->nt);
    for (int t = 0; t < mesh->nt; t++) TRY(tube_build(cx, mesh, t, &mesh->tube[t]));
    TRY(supports_build(cx, mesh));
    TRY(equipment_build(cx, mesh));
    TRY(pattern_build(cx, mesh));
    mesh_masses(mesh);
    return EF_OK;
}
