/* test_buckling.c - statics and critical factors of small frames against closed forms (Euler 1744; Timoshenko and
 * Gere, Theory of Elastic Stability, 1961, from memory).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <string.h>

#include "analysis/buckling.h"
#include "support/build_frame.h"

static const double PI = 3.14159265358979323846;

typedef struct Solved {
    EfContext *cx;
    Mesh mesh;
    Assembly a;
    State *state;
    EfResults results;
    EfCaseResult r;
} Solved;

static void solve(EfContext *cx, const EfFrame *f, int want, bool both, Solved *s)
{
    Run *run;
    int n;
    *s = (Solved){.cx = cx};
    CHECK_OK(cx, mesh_build(cx, f, &s->mesh));
    CHECK_OK(cx, mesh_runs(cx, &s->mesh, NULL, &n, &run));
    CHECK_OK(cx, assembly_new(cx, &s->mesh, &s->a));
    CHECK_OK(cx, statics_solve(cx, &s->a, n, run, &s->state));
    CHECK_OK(cx, statics_report(cx, &s->a, &s->state[0], &s->r));
    CHECK_OK(cx, buckling_case(cx, &s->a, &s->state[0], &s->results, want, both, &s->r));
}

static void done(Solved *s)
{
    assembly_free(&s->a);
    ef_close(s->cx);
}

/* A column of length 2 along x, pushed by 1 kN at its far end; holds given. */
static EfFrame *column(EfContext *cx, unsigned near, unsigned far)
{
    EfFrame *f = frame_new(cx);
    const int size = frame_round(cx, f, 0.03, 0.002);
    frame_joint(cx, f, 0, 0, 0), frame_joint(cx, f, 2, 0, 0);
    frame_tube(cx, f, 0, 1, size);
    frame_support(cx, f, 0, near), frame_support(cx, f, 1, far);
    const int c = frame_case(cx, f, "push");
    frame_push(cx, f, c, 1, (int[]){1}, (double[3]){-1000, 0, 0});
    return f;
}

static double euler(const EfFrame *f, double L)
{
    return PI * PI * 205e9 * f->size[0].section.Iy / (L * L);
}

static void end_conditions(void **state)
{
    (void)state;
    /* pinned 1, clamped 4, clamped and pinned 2.0457, free 1/4; every factor twice in a round tube */
    const struct {
        unsigned near, far;
        double c, next;
    } e[] = {{15, 6, 1, 4}, {63, 62, 4, 8.1830}, {63, 6, 2.045749, 6.0468}, {63, 0, 0.25, 2.25}};
    for (int i = 0; i < 4; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, e[i].near, e[i].far);
        Solved s;
        solve(cx, f, 4, false, &s);
        const EfCritical *c = &s.r.critical;
        assert_int_equal(c->outcome, EF_FOUND);
        assert_int_equal(c->counted, c->found);
        assert_true(c->nmode >= 4);
        CHECK_REL(c->factor[0] * 1000, e[i].c * euler(f, 2), 1e-6);
        CHECK_REL(c->factor[1], c->factor[0], 1e-9);
        CHECK_REL(c->factor[2] * 1000, e[i].next * euler(f, 2), 2e-5);
        for (int k = 0; k < 4; k++) {
            assert_true(c->residual[k] < 1e-7);
            CHECK_REL(c->lost[k], 1, 1e-9);
            CHECK_REL(c->stored[k], 1, 1e-9);
            assert_int_equal(c->role[k], EF_ROLE_LEANING);
        }
        assert_int_equal(c->family[1], 0);
        assert_int_equal(c->family[2], 1);
        done(&s);
    }
}

static void nothing_compressed(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = column(cx, 63, 0);
    ((EfLoad *)(uintptr_t)f->cases[0].load)->force[0] = 1000;
    Solved s;
    solve(cx, f, 3, true, &s);
    assert_int_equal(s.r.critical.outcome, EF_NONE);
    assert_int_equal(s.r.critical.nmode, 0);
    assert_int_equal(s.r.negative.outcome, EF_FOUND);
    CHECK_REL(s.r.negative.factor[0] * 1000, euler(f, 2) / 4, 1e-6);
    CHECK_REL(s.r.axial[0], 1000, 1e-12);
    assert_true(s.r.balance.residual < 1e-12);
    done(&s);
}

/* Two collinear tubes, middle joint free: one column of twice the length; steady half, growing half. */
static void steady_and_growing(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = frame_new(cx);
    const int size = frame_round(cx, f, 0.03, 0.002);
    frame_joint(cx, f, 0, 0, 0), frame_joint(cx, f, 1, 0, 0), frame_joint(cx, f, 2, 0, 0);
    frame_tube(cx, f, 0, 1, size), frame_tube(cx, f, 1, 2, size);
    frame_support(cx, f, 0, 15), frame_support(cx, f, 2, 6);
    const int c = frame_case(cx, f, "push");
    const double P = euler(f, 2);
    frame_push(cx, f, c, 1, (int[]){2}, (double[3]){-0.5 * P, 0, 0})->steady = true;
    frame_push(cx, f, c, 1, (int[]){2}, (double[3]){-0.25 * P, 0, 0});
    Solved s;
    solve(cx, f, 2, false, &s);
    CHECK_REL(s.r.critical.factor[0], 2, 1e-6);
    CHECK_REL(s.r.all_grow_factor, 4.0 / 3, 1e-6);
    CHECK_REL(s.r.steady_factor, 2, 1e-6);
    CHECK_REL(s.r.axial_growing[0], -0.25 * P, 1e-9);
    done(&s);
    cx = ef_open();
    f = column(cx, 15, 6);
    ((EfLoad *)(uintptr_t)f->cases[0].load)->steady = true;
    ((EfLoad *)(uintptr_t)f->cases[0].load)->force[0] = -1.25 * P;
    frame_push(cx, f, 0, 1, (int[]){1}, (double[3]){-1, 0, 0});
    solve(cx, f, 2, false, &s);
    assert_int_equal(s.r.critical.outcome, EF_STEADY_BUCKLES);
    CHECK_REL(s.r.steady_factor, 0.8, 1e-6);
    done(&s);
}

/* A strut free in space, pushed at its ends: exactly 1 and 4 Euler loads, whatever hangs on it (theory of free bodies:
 * a critical state is a state of equilibrium of the loads on the displaced body). */
static void free_strut(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = frame_new(cx);
    const int size = frame_round(cx, f, 0.03, 0.002);
    frame_joint(cx, f, 0, 0, 0), frame_joint(cx, f, 1.2, 1.6, 0);
    frame_tube(cx, f, 0, 1, size);
    const int c = frame_case(cx, f, "push");
    frame_push(cx, f, c, 1, (int[]){0}, (double[3]){600, 800, 0});
    frame_push(cx, f, c, 1, (int[]){1}, (double[3]){-600, -800, 0});
    Solved s;
    solve(cx, f, 4, false, &s);
    CHECK_REL(s.r.critical.factor[0] * 1000, euler(f, 2), 1e-6);
    CHECK_REL(s.r.critical.factor[1] * 1000, euler(f, 2), 1e-6);
    CHECK_REL(s.r.critical.factor[2] * 1000, 4 * euler(f, 2), 1e-6);
    assert_int_equal(s.r.critical.counted, s.r.critical.found);
    done(&s);
}

/* Cantilever strip under a tip load across: P = 4.0126 sqrt(EIy GJ)/L^2 (Timoshenko and Gere 1961, art. 6.3). */
static void lateral_buckling(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = frame_new(cx);
    const int size = frame_given(cx, f, 1e-2, 1e-3, 1e-9, 4e-9);
    frame_joint(cx, f, 0, 0, 0), frame_joint(cx, f, 1, 0, 0);
    frame_tube(cx, f, 0, 1, size);
    frame_support(cx, f, 0, 63);
    const int c = frame_case(cx, f, "tip");
    frame_push(cx, f, c, 1, (int[]){1}, (double[3]){0, 0, -100});
    Solved s;
    solve(cx, f, 1, false, &s);
    const double G = f->material[0].G;
    CHECK_REL(s.r.critical.factor[0] * 100, 4.0126 * sqrt(205e9 * 1e-9 * G * 4e-9), 1e-4);
    done(&s);
}

static void mechanism_words(const EfFrame *f, EfContext *cx, const char *words)
{
    Mesh mesh;
    Run *run;
    State *state;
    Assembly a = {0};
    int n;
    CHECK_OK(cx, mesh_build(cx, f, &mesh));
    CHECK_OK(cx, mesh_runs(cx, &mesh, NULL, &n, &run));
    EfStatus st = assembly_new(cx, &mesh, &a);
    if (st == EF_OK) st = statics_solve(cx, &a, n, run, &state);
    assert_int_equal(st, EF_E_MECHANISM);
    if (!strstr(ef_message(cx), words)) print_error("%s\n", ef_message(cx));
    assert_non_null(strstr(ef_message(cx), words));
    assembly_free(&a);
    ef_close(cx);
}

static void mechanisms_in_words(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = column(cx, 7, 6); /* spins about its axis */
    mechanism_words(f, cx, "spin");
    cx = ef_open(); /* a joint on two pinned collinear tubes */
    f = frame_new(cx);
    const int size = frame_round(cx, f, 0.03, 0.002);
    frame_joint(cx, f, 0, 0, 0), frame_joint(cx, f, 1, 0, 0), frame_joint(cx, f, 2, 0, 0);
    frame_tube(cx, f, 0, 1, size), frame_tube(cx, f, 1, 2, size);
    for (int t = 0; t < 2; t++) f->tube[t].release[0] = f->tube[t].release[1] = 48;
    frame_support(cx, f, 0, 63), frame_support(cx, f, 2, 63);
    const int c = frame_case(cx, f, "push");
    frame_push(cx, f, c, 1, (int[]){1}, (double[3]){-1, 0, 0});
    mechanism_words(f, cx, "Joint J1 can move along");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(end_conditions),     cmocka_unit_test(nothing_compressed),
        cmocka_unit_test(steady_and_growing), cmocka_unit_test(free_strut),
        cmocka_unit_test(lateral_buckling),   cmocka_unit_test(mechanisms_in_words),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
