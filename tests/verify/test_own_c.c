/* test_own_c.c - own c by the small matrix equals brute force: that tube's force alone raised in the full matrix.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <string.h>

#include "analysis/buckling.h"
#include "analysis/fixity.h"
#include "check/check.h"
#include "support/build_frame.h"

static const double PI = 3.14159265358979323846;

typedef struct Case {
    EfContext *cx;
    Mesh mesh;
    Assembly a;
    State *state;
    Stress growing;
    EfResults results;
    EfCaseResult r;
} Case;

static void prepare(EfContext *cx, const EfFrame *f, Case *c)
{
    Run *run;
    int n;
    *c = (Case){.cx = cx};
    CHECK_OK(cx, mesh_build(cx, f, &c->mesh));
    CHECK_OK(cx, mesh_runs(cx, &c->mesh, NULL, &n, &run));
    CHECK_OK(cx, assembly_new(cx, &c->mesh, &c->a));
    CHECK_OK(cx, statics_solve(cx, &c->a, n, run, &c->state));
    CHECK_OK(cx, statics_report(cx, &c->a, &c->state[0], &c->r));
    CHECK_OK(cx, buckling_case(cx, &c->a, &c->state[0], &c->results, 2, false, &c->r));
    CHECK_OK(cx, stress_of(cx, &c->a, &c->state[0], 0, 1, &c->growing));
}

static void done(Case *c)
{
    assembly_free(&c->a);
    ef_close(c->cx);
}

/* Does the frame at r, with tube t pushed by delta more, still stand? */
static int count_pushed(Case *c, Exact *e, int t, double r, double delta)
{
    const TubeForces kept = e->axial1[t];
    e->axial1[t].N[0] -= delta / r;
    e->axial1[t].end[0] += delta / r, e->axial1[t].end[6] -= delta / r;
    CHECK_OK(c->cx, exact_at(c->cx, e, r));
    e->axial1[t] = kept;
    return e->count;
}

static double brute_force(Case *c, Exact *e, int t, double r, double hi)
{
    double lo = 0;
    assert_true(count_pushed(c, e, t, r, hi) > 0);
    for (int pass = 0; pass < 44; pass++) {
        const double middle = (lo + hi) / 2;
        if (count_pushed(c, e, t, r, middle) > 0) hi = middle;
        else lo = middle;
    }
    return (lo + hi) / 2;
}

static void compare_all(Case *c, double tolerance)
{
    const ArenaMark mark = arena_mark(&c->cx->tmp);
    const double lowest = c->r.critical.factor[0], r = 0.6 * lowest;
    OwnCurve curve;
    Exact e;
    CHECK_OK(c->cx, own_curve_new(c->cx, &c->a, NULL, &c->growing, 0.999 * lowest, false, &curve));
    CHECK_OK(c->cx, exact_build(c->cx, &c->a, NULL, &c->growing, &e));
    bool *wanted = arena_take(c->cx, &c->cx->tmp, (size_t)c->mesh.nt, sizeof *wanted);
    double *own = arena_take(c->cx, &c->cx->tmp, (size_t)c->mesh.nt, sizeof *own);
    int compared = 0;
    for (int t = 0; t < c->mesh.nt; t++) wanted[t] = curve.P1[t] > 1;
    CHECK_OK(c->cx, own_critical_at(c->cx, &curve, r, wanted, own));
    for (int t = 0; t < c->mesh.nt; t++) {
        if (!wanted[t]) continue;
        const MeshTube *m = &c->mesh.tube[t];
        const double clamped = 4 * PI * PI * m->E * m->section.Iz / (m->L * m->L), P = r * curve.P1[t];
        CHECK_REL(own[t], P + brute_force(c, &e, t, r, 2 * clamped), tolerance);
        compared++;
    }
    assert_true(compared > 3);
    exact_free(&e);
    own_curve_free(&curve);
    arena_rewind(&c->cx->tmp, mark);
}

/* A skew tower of `bays` bays on three feet, pushed down and sideways. */
static EfFrame *tower(EfContext *cx, int bays, uint64_t stream)
{
    EfFrame *f = frame_new(cx);
    const int leg = frame_round(cx, f, 0.025, 0.0015), web = frame_round(cx, f, 0.016, 0.001);
    for (int b = 0; b <= bays; b++)
        for (int k = 0; k < 3; k++) {
            const double angle = 2 * PI * k / 3 + 0.2 * b, radius = 0.5 - 0.05 * b;
            const uint64_t i = (uint64_t)(3 * b + k);
            frame_joint(cx, f, radius * cos(angle) + test_uniform(stream, 3 * i, -0.05, 0.05),
                        radius * sin(angle) + test_uniform(stream, 3 * i + 1, -0.05, 0.05),
                        0.8 * b + test_uniform(stream, 3 * i + 2, -0.05, 0.05));
        }
    for (int b = 0; b < bays; b++)
        for (int k = 0; k < 3; k++) {
            const int j = 3 * b + k, next = 3 * b + (k + 1) % 3;
            frame_tube(cx, f, j, j + 3, leg);
            frame_tube(cx, f, j + 3, next + 3, web);
            frame_tube(cx, f, next, j + 3, web);
        }
    for (int k = 0; k < 3; k++) frame_support(cx, f, k, k == 0 ? HOLD_FIXED : HOLD_PINNED);
    const int c = frame_case(cx, f, "down");
    frame_push(cx, f, c, 1, (int[]){3 * bays}, (double[3]){900, 200, -4000});
    frame_push(cx, f, c, 1, (int[]){3 * bays + 1}, (double[3]){-300, 800, -3000});
    return f;
}

static void plain_tubes(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    Case c;
    prepare(cx, tower(cx, 3, 1), &c);
    compare_all(&c, 1e-9);
    done(&c);
}

static void arms_springs_and_releases(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = tower(cx, 3, 2);
    for (int t = 0; t < f->ntube; t += 3) f->tube[t].offset[0][2] = 0.04, f->tube[t].offset[1][0] = 0.03;
    for (int t = 1; t < f->ntube; t += 4) f->tube[t].release[0] = 48;
    for (int t = 2; t < f->ntube; t += 4) f->tube[t].spring[1][EF_RY] = 900, f->tube[t].spring[1][EF_RZ] = 400;
    Case c;
    prepare(cx, f, &c);
    compare_all(&c, 1e-8);
    done(&c);
}

static void shear_flexible(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = tower(cx, 2, 3);
    f->shear_flexible = true;
    Case c;
    prepare(cx, f, &c);
    compare_all(&c, 1e-9);
    done(&c);
}

/* The reserve of every tube: at it, the tube pushed alone in the full matrix has just the strength that it needs. */
static void reserves(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = tower(cx, 3, 6);
    f->material[0].yield = f->material[0].yield_compression = 60e6; /* low, so that Johnson's parabola counts */
    EfResults *r;
    Case c;
    Exact e;
    CHECK_OK(cx, ef_run(cx, f, NULL, &r));
    prepare(cx, f, &c);
    CHECK_OK(cx, exact_build(cx, &c.a, NULL, &c.growing, &e));
    int compared = 0;
    for (int t = 0; t < c.mesh.nt; t++) {
        const double reserve = r->cases[0].fixity.reserve[t];
        if (isnan(reserve)) continue;
        const MeshTube *m = &c.mesh.tube[t];
        const double P = -reserve * tube_axial_min(&c.growing.forces[t]);
        const double clamped = 4 * PI * PI * m->E * m->section.Iz / (m->L * m->L);
        const double critical = P + brute_force(&c, &e, t, reserve, 2 * clamped);
        const EfMaterial *material = &f->material[f->size[f->tube[t].size].material];
        CHECK_REL(column_rule_of(material)->strength(material, &m->section, critical), P, 1e-7);
        CHECK_REL(r->cases[0].fixity.safe_c[t], critical * m->joint_length * m->joint_length / (PI * PI * m->E * m->section.Iz), 1e-6);
        compared++;
    }
    assert_true(compared > 2);
    exact_free(&e);
    done(&c);
}

/* Engine 1's matrix instead: the same where end moments and torque are small. */
static void both_matrices(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    Case c;
    prepare(cx, tower(cx, 3, 4), &c);
    double own[2][64];
    bool wanted[64];
    for (int full = 0; full < 2; full++) {
        const ArenaMark mark = arena_mark(&cx->tmp);
        OwnCurve curve;
        CHECK_OK(cx, own_curve_new(cx, &c.a, NULL, &c.growing, 0.999 * c.r.critical.factor[0], full, &curve));
        for (int t = 0; t < c.mesh.nt; t++) wanted[t] = curve.P1[t] > 100;
        CHECK_OK(cx, own_critical_at(cx, &curve, 0.5 * c.r.critical.factor[0], wanted, own[full]));
        own_curve_free(&curve);
        arena_rewind(&cx->tmp, mark);
    }
    for (int t = 0; t < c.mesh.nt; t++)
        if (wanted[t]) CHECK_REL(own[1][t], own[0][t], 2e-2);
    done(&c);
}

/* A free strut pushed at its ends has exactly its Euler load, whatever the case load is. */
static void free_strut(void **state)
{
    (void)state;
    const double at[] = {0.2, 0.5, 0.95};
    for (int i = 0; i < 3; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = frame_new(cx);
        const int size = frame_round(cx, f, 0.03, 0.002);
        frame_joint(cx, f, 0, 0, 0), frame_joint(cx, f, 1.2, 1.6, 0);
        frame_tube(cx, f, 0, 1, size);
        const double PE = PI * PI * 205e9 * f->size[0].section.Iy / 4;
        const int c = frame_case(cx, f, "push");
        frame_push(cx, f, c, 1, (int[]){0}, (double[3]){0.6 * at[i] * PE, 0.8 * at[i] * PE, 0});
        frame_push(cx, f, c, 1, (int[]){1}, (double[3]){-0.6 * at[i] * PE, -0.8 * at[i] * PE, 0});
        Case k;
        prepare(cx, f, &k);
        OwnCurve curve;
        double own;
        bool wanted = true;
        CHECK_OK(cx, own_curve_new(cx, &k.a, NULL, &k.growing, 0.999 * k.r.critical.factor[0], false, &curve));
        CHECK_OK(cx, own_critical_at(cx, &curve, 1, &wanted, &own));
        CHECK_REL(own, PE, 1e-8);
        own_curve_free(&curve);
        done(&k);
    }
}

/* What EfFixity shows of a clamped-pinned column: c 2.045749, its ends' stiffness, its direction. */
static void shown(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = frame_new(cx);
    const int size = frame_given(cx, f, 2e-4, 3e-8, 2e-8, 4e-8);
    frame_joint(cx, f, 0, 0, 0), frame_joint(cx, f, 2, 0, 0);
    frame_tube(cx, f, 0, 1, size);
    frame_support(cx, f, 0, HOLD_FIXED), frame_support(cx, f, 1, 6);
    const int c = frame_case(cx, f, "push");
    frame_push(cx, f, c, 1, (int[]){1}, (double[3]){-500, 0, 0});
    Case k;
    prepare(cx, f, &k);
    OwnCurve curve;
    EfFixity x;
    CHECK_OK(cx, own_curve_new(cx, &k.a, NULL, &k.growing, 0.999 * k.r.critical.factor[0], false, &curve));
    CHECK_OK(cx, fixity_fill(cx, &curve, &k.r, &x));
    CHECK_REL(x.own_c[0], 2.045749, 1e-6);
    CHECK_REL(x.frame_c[0], 2.045749, 1e-6);
    CHECK_REL(x.second_c[0], 1.5 * 2.045749, 1e-6);
    CHECK_ABS(fabs(x.own_plane[1]), 1, 1e-9); /* Iz is the smaller: it bows along y */
    own_curve_free(&curve);
    done(&k);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(plain_tubes),    cmocka_unit_test(arms_springs_and_releases),
        cmocka_unit_test(shear_flexible), cmocka_unit_test(both_matrices), cmocka_unit_test(reserves),
        cmocka_unit_test(free_strut),     cmocka_unit_test(shown),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
