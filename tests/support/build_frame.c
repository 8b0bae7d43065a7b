/* build_frame.c - frames for tests, built in code.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/build_frame.h"

#include <string.h>

#include "support/check.h"

/* Room for one more: arrays double at powers of two. The old one stays in the arena. */
#define GROW(cx, array, n) ((array) = grown((cx), (array), (n), sizeof *(array)))

static void *grown(EfContext *cx, const void *old, int n, size_t size)
{
    if (n > 0 && (n & (n - 1)) != 0) return (void *)(uintptr_t)old;
    void *fresh = arena_take(cx, &cx->keep, n > 0 ? 2 * (size_t)n : 1, size);
    assert_non_null(fresh);
    return n > 0 ? memcpy(fresh, old, (size_t)n * size) : fresh;
}

static const void *copied(EfContext *cx, const void *from, int n, size_t size)
{
    void *copy = arena_take(cx, &cx->keep, (size_t)n, size);
    assert_non_null(copy);
    return n > 0 ? memcpy(copy, from, (size_t)n * size) : copy;
}

EfFrame *frame_new(EfContext *cx)
{
    EfFrame *f = arena_take(cx, &cx->keep, 1, sizeof *f);
    assert_non_null(f);
    f->title = "frame of a test";
    f->required = (EfRequired){.critical_factor = 1, .collapse_factor = 1, .margin = 0, .guys_taut_to = 1};
    f->fixity_credit = 2;
    GROW(cx, f->material, 0);
    f->nmaterial = 1;
    f->material[0] = (EfMaterial){
        .name = "steel", .E = 205e9, .E_compression = 205e9, .G = 205e9 / 2.58, .nu = 0.29, .density = 7850,
        .expansion = 12e-6, .yield = 460e6, .yield_compression = 460e6, .ultimate = 620e6, .welded_yield = NAN,
        .welded_ultimate = NAN, .ramberg_osgood_n = NAN, .status = "user", .weldable = true};
    return f;
}

int frame_joint(EfContext *cx, EfFrame *f, double x, double y, double z)
{
    GROW(cx, f->joint, f->njoint);
    f->joint[f->njoint] = (EfJoint){.name = keep_format(cx, "J%d", f->njoint), .x = {x, y, z}};
    return f->njoint++;
}

static int add_size(EfContext *cx, EfFrame *f, EfSize size)
{
    GROW(cx, f->size, f->nsize);
    size.name = keep_format(cx, "S%d", f->nsize);
    f->size[f->nsize] = size;
    return f->nsize++;
}

int frame_round(EfContext *cx, EfFrame *f, double diameter, double wall)
{
    const double pi = acos(-1), bore = diameter - 2 * wall;
    EfSize size = {.kind = "round", .parameter = {diameter, wall}};
    EfSection *s = &size.section;
    s->A = pi / 4 * (diameter * diameter - bore * bore);
    s->Iy = s->Iz = pi / 64 * (pow(diameter, 4) - pow(bore, 4));
    s->J = 2 * s->Iy;
    s->As_y = s->As_z = s->A / 2;
    s->depth_y = s->depth_z = diameter;
    s->wall = wall;
    s->round = true;
    size.text = keep_format(cx, "%g x %g", 1e3 * diameter, 1e3 * wall);
    return add_size(cx, f, size);
}

int frame_given(EfContext *cx, EfFrame *f, double A, double Iy, double Iz, double J)
{
    EfSize size = {.kind = "given", .parameter = {A, Iy, Iz, J, NAN, NAN, NAN, NAN}, .text = "given"};
    size.section = (EfSection){.A = A, .Iy = Iy, .Iz = Iz, .J = J, .As_y = A, .As_z = A, .depth_y = NAN,
                               .depth_z = NAN, .wall = NAN};
    return add_size(cx, f, size);
}

int frame_tube(EfContext *cx, EfFrame *f, int from, int to, int size)
{
    GROW(cx, f->tube, f->ntube);
    EfTube *t = &f->tube[f->ntube];
    *t = (EfTube){.name = keep_format(cx, "T%d", f->ntube), .end = {from, to}, .size = size};
    for (int e = 0; e < 2; e++)
        for (int d = 0; d < EF_DIRECTIONS; d++) t->spring[e][d] = INFINITY;
    return f->ntube++;
}

int frame_guy(EfContext *cx, EfFrame *f, int from, int to, double mass_per_length)
{
    GROW(cx, f->guy, f->nguy);
    f->guy[f->nguy] = (EfGuy){.name = keep_format(cx, "G%d", f->nguy), .end = {from, to}, .EA = 2.6e6,
                              .pretension = 3.2e3, .mass_per_length = mass_per_length, .breaking_load = NAN};
    return f->nguy++;
}

int frame_support(EfContext *cx, EfFrame *f, int joint, unsigned held)
{
    GROW(cx, f->support, f->nsupport);
    f->support[f->nsupport] = (EfSupport){.joint = joint, .held = held};
    for (int i = 0; i < 3; i++) f->support[f->nsupport].axes[i][i] = 1;
    return f->nsupport++;
}

int frame_equipment(EfContext *cx, EfFrame *f, double mass, const double at[3], int n, const int *carrier)
{
    GROW(cx, f->equipment, f->nequipment);
    f->equipment[f->nequipment] =
        (EfEquipment){.name = keep_format(cx, "E%d", f->nequipment), .mass = mass, .at = {at[0], at[1], at[2]},
                      .ncarrier = n, .carrier = copied(cx, carrier, n, sizeof *carrier)};
    return f->nequipment++;
}

int frame_case(EfContext *cx, EfFrame *f, const char *name)
{
    GROW(cx, f->cases, f->ncase);
    f->cases[f->ncase] = (EfCase){.name = name, .level = EF_LEVEL_ULTIMATE, .ultimate_factor = 1,
                                  .required = {NAN, NAN, NAN, NAN}};
    return f->ncase++;
}

int frame_combination(EfContext *cx, EfFrame *f, const char *name, int n, const int *part, const double *factor)
{
    GROW(cx, f->combination, f->ncombination);
    f->combination[f->ncombination] =
        (EfCombination){.name = name, .level = EF_LEVEL_ULTIMATE, .ultimate_factor = 1, .npart = n,
                        .part = copied(cx, part, n, sizeof *part), .factor = copied(cx, factor, n, sizeof *factor),
                        .required = {NAN, NAN, NAN, NAN}};
    return f->ncombination++;
}

EfLoad *frame_load(EfContext *cx, EfFrame *f, int in_case, EfLoadKind kind)
{
    EfCase *c = &f->cases[in_case];
    EfLoad *load = grown(cx, c->load, c->nload, sizeof *load);
    load[c->nload] = (EfLoad){.kind = kind};
    c->load = load;
    return &load[c->nload++];
}

EfLoad *frame_push(EfContext *cx, EfFrame *f, int in_case, int n, const int *joint, const double force[3])
{
    EfLoad *load = frame_load(cx, f, in_case, EF_LOAD_JOINT);
    load->njoint = n;
    load->joint = copied(cx, joint, n, sizeof *joint);
    memcpy(load->force, force, sizeof load->force);
    return load;
}

EfLoad *frame_push_along(EfContext *cx, EfFrame *f, int in_case, int n, const int *tube, const double force[3])
{
    EfLoad *load = frame_load(cx, f, in_case, EF_LOAD_TUBE);
    load->ntube = n;
    load->tube = copied(cx, tube, n, sizeof *tube);
    memcpy(load->force, force, sizeof load->force);
    return load;
}

void rotation(const double vector[3], double R[3][3])
{
    const double *v = vector, angle = sqrt(v[0] * v[0] + v[1] * v[1] + v[2] * v[2]);
    const double s = angle > 0 ? sin(angle) / angle : 1, c = angle > 0 ? (1 - cos(angle)) / (angle * angle) : 0.5;
    const double S[3][3] = {{0, -v[2], v[1]}, {v[2], 0, -v[0]}, {-v[1], v[0], 0}};
    for (int i = 0; i < 3; i++)
        for (int j = 0; j < 3; j++) {
            R[i][j] = (i == j) + s * S[i][j];
            for (int k = 0; k < 3; k++) R[i][j] += c * S[i][k] * S[k][j];
        }
}

static void turn(double R[3][3], double x[3])
{
    const double old[3] = {x[0], x[1], x[2]};
    for (int i = 0; i < 3; i++) x[i] = R[i][0] * old[0] + R[i][1] * old[1] + R[i][2] * old[2];
}

static void turn_tube(EfFrame *f, EfTube *t, double R[3][3])
{
    if (t->up[0] == 0 && t->up[1] == 0 && t->up[2] == 0) {
        double along[3];
        for (int i = 0; i < 3; i++)
            along[i] = f->joint[t->end[1]].x[i] + t->offset[1][i] - f->joint[t->end[0]].x[i] - t->offset[0][i];
        const bool upright = hypot(along[0], along[1]) < 1.745e-3 * fabs(along[2]);
        t->up[upright ? 0 : 2] = 1;
    }
    turn(R, t->up);
    turn(R, t->bow_toward);
    for (int e = 0; e < 2; e++) turn(R, t->offset[e]);
}

void frame_turn(EfFrame *f, double R[3][3], const double shift[3])
{
    for (int t = 0; t < f->ntube; t++) turn_tube(f, &f->tube[t], R);
    for (int j = 0; j < f->njoint; j++) {
        turn(R, f->joint[j].x);
        for (int i = 0; i < 3; i++) f->joint[j].x[i] += shift[i];
    }
    for (int e = 0; e < f->nequipment; e++) {
        turn(R, f->equipment[e].at);
        for (int i = 0; i < 3; i++) f->equipment[e].at[i] += shift[i];
    }
    for (int s = 0; s < f->nsupport; s++) {
        for (int i = 0; i < 3; i++) turn(R, f->support[s].axes[i]);
        f->support[s].skew = true;
    }
    for (int c = 0; c < f->ncase; c++) {
        EfLoad *load = (EfLoad *)(uintptr_t)f->cases[c].load; /* taken from the arena by frame_load */
        for (int i = 0; i < f->cases[c].nload; i++) {
            turn(R, load[i].force);
            turn(R, load[i].moment);
        }
    }
}
