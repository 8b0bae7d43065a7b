/* test_properties.c - what must not matter does not: direction in space, numbering, size of the loads, units.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <stdlib.h>
#include <string.h>

#include "core/core.h"
#include "support/solve.h"

enum { NJ = 12 };

/* A skew three-sided tower of random joints with equipment on top; on feet, or free in space. */
static EfFrame *tower(EfContext *cx, bool on_feet, const int *joint_at, const int *tube_order, double scale)
{
    EfFrame *f = frame_new(cx);
    const int leg = frame_round(cx, f, 0.025, 0.0015), web = frame_round(cx, f, 0.016, 0.001);
    double x[NJ][3];
    int ends[64][3], nt = 0, place[NJ];
    for (int i = 0; i < NJ; i++) {
        const double angle = 2 * 3.14159265358979 * (i % 3) / 3 + 0.2 * (i / 3), r = 0.5 - 0.05 * (i / 3);
        const uint64_t s = (uint64_t)i;
        x[i][0] = r * cos(angle) + test_uniform(5, 3 * s, -0.05, 0.05);
        x[i][1] = r * sin(angle) + test_uniform(5, 3 * s + 1, -0.05, 0.05);
        x[i][2] = 0.8 * (i / 3) + test_uniform(5, 3 * s + 2, -0.05, 0.05);
    }
    for (int i = 0; i + 3 < NJ; i++) {
        const int next = i / 3 * 3 + (i + 1) % 3;
        const int rows[3][3] = {{i, i + 3, leg}, {i + 3, next + 3, web}, {next, i + 3, web}};
        for (int k = 0; k < 3; k++) memcpy(ends[nt++], rows[k], sizeof rows[k]);
    }
    for (int k = 0; k < 3; k++) ends[nt][0] = k, ends[nt][1] = (k + 1) % 3, ends[nt++][2] = web;
    for (int i = 0; i < NJ; i++) {
        const int j = joint_at[i];
        frame_joint(cx, f, x[j][0], x[j][1], x[j][2]);
        place[j] = i;
    }
    for (int i = 0; i < nt; i++) {
        const int *e = ends[tube_order ? tube_order[i] : i];
        frame_tube(cx, f, place[e[0]], place[e[1]], e[2]);
    }
    const int top[3] = {place[NJ - 3], place[NJ - 2], place[NJ - 1]};
    frame_equipment(cx, f, 25, (double[3]){0.1, 0.05, 3.0}, 3, top);
    const int c = frame_case(cx, f, "down");
    frame_push(cx, f, c, 1, &top[0], (double[3]){900 * scale, 200 * scale, -4000 * scale});
    frame_push(cx, f, c, 1, &top[1], (double[3]){-300 * scale, 800 * scale, -3000 * scale});
    if (!on_feet)
        for (int k = 0; k < 3; k++) frame_push(cx, f, c, 1, &place[k], (double[3]){-200 * scale, -300 * scale, 2300 * scale});
    for (int k = 0; k < 3 && on_feet; k++) {
        const int s = frame_support(cx, f, place[k], k == 0 ? HOLD_FIXED : HOLD_PINNED);
        for (int i = 0; i < 3; i++) f->support[s].axes[i][i] = 1;
    }
    return f;
}

static void identity(int n, int *p)
{
    for (int i = 0; i < n; i++) p[i] = i;
}

static void shuffle(int n, int *p)
{
    identity(n, p);
    for (int i = n - 1; i > 0; i--) {
        const int k = (int)test_uniform(77, (uint64_t)i, 0, i + 1), x = p[i];
        p[i] = p[k], p[k] = x;
    }
}

static void same(double a, double b, double tolerance)
{
    if (isnan(a) && isnan(b)) return;
    CHECK_REL(a, b, tolerance);
}

/* b against a; order maps tubes of b to those of a; factors of b are 1/scale of those of a. */
static void compare(const EfResults *a, const EfResults *b, const int *order, double scale)
{
    const EfCaseResult *p = &a->cases[0], *q = &b->cases[0];
    assert_int_equal(p->critical.nmode, q->critical.nmode);
    for (int k = 0; k < p->critical.nmode; k++) {
        CHECK_REL(q->critical.factor[k] * scale, p->critical.factor[k], 1e-9);
        assert_string_equal(q->critical.kind[k][0] == 'b' ? "b" : "", p->critical.kind[k][0] == 'b' ? "b" : "");
    }
    same(q->witness.factor * scale, p->witness.factor, 1e-9);
    for (int t = 0; t < b->frame->ntube; t++) {
        const int s = order ? order[t] : t;
        CHECK_ABS(q->axial[t], scale * p->axial[s], 1e-9 * 4000 * scale);
        if (scale != 1) continue; /* own c depends on the neighbours' load */
        same(q->fixity.own_c[t], p->fixity.own_c[s], 1e-8);
        same(q->fixity.second_c[t], p->fixity.second_c[s], 1e-8);
        same(q->fixity.reserve[t], p->fixity.reserve[s], 1e-8);
        same(q->fixity.safe_c[t], p->fixity.safe_c[s], 1e-7);
        assert_string_equal(q->fixity.note[t], p->fixity.note[s]);
        assert_int_equal(q->fixity.role[t], p->fixity.role[s]);
        for (int k = 0; k < p->critical.nmode; k++)
            CHECK_ABS(q->critical.lost[k * b->frame->ntube + t], p->critical.lost[k * b->frame->ntube + s], 1e-6);
    }
}

static void direction_in_space(void **state)
{
    (void)state;
    for (int on_feet = 0; on_feet < 2; on_feet++) {
        EfContext *cx = ef_open();
        int order[NJ];
        identity(NJ, order);
        const EfResults *a = solve_frame(cx, tower(cx, on_feet, order, NULL, 1), 4);
        EfFrame *f = tower(cx, on_feet, order, NULL, 1);
        double R[3][3];
        rotation((double[3]){0.7, -1.1, 0.4}, R);
        frame_turn(f, R, (double[3]){3, -2, 5});
        compare(a, solve_frame(cx, f, 4), NULL, 1);
        ef_close(cx);
    }
}

static void numbering(void **state)
{
    (void)state;
    for (int on_feet = 0; on_feet < 2; on_feet++) {
        EfContext *cx = ef_open();
        int joints[NJ], plain[NJ], tubes[64];
        identity(NJ, plain);
        shuffle(NJ, joints);
        const EfResults *a = solve_frame(cx, tower(cx, on_feet, plain, NULL, 1), 4);
        shuffle(a->frame->ntube, tubes);
        compare(a, solve_frame(cx, tower(cx, on_feet, joints, tubes, 1), 4), tubes, 1);
        ef_close(cx);
    }
}

static void size_of_loads(void **state)
{
    (void)state;
    for (int on_feet = 0; on_feet < 2; on_feet++) {
        EfContext *cx = ef_open();
        int order[NJ];
        identity(NJ, order);
        const EfResults *a = solve_frame(cx, tower(cx, on_feet, order, NULL, 1), 4);
        const double scale[] = {1e-3, 1.7, 40};
        for (int i = 0; i < 3; i++) compare(a, solve_frame(cx, tower(cx, on_feet, order, NULL, scale[i]), 4), NULL, scale[i]);
        ef_close(cx);
    }
}

/* The same frame written in millimetres and kilonewtons, and in inches and pounds. */
static void units(void **state)
{
    (void)state;
    static const char *const text[3] = {
        "units: {length: m, force: N}\nsizes: {s: {round: 0.0254 x 0.00127, material: 4130N}}\n"
        "joints: {A: [0, 0, 0], B: [0.762, 0, 0], C: [0, 0.762, 0], D: [0.254, 0.254, 1.016]}\n"
        "tubes: {a: [A, D, s], b: [B, D, s], c: [C, D, s]}\nsupports: {A: pinned, B: pinned, C: pinned}\n"
        "cases: {h: {level: ultimate, loads: [{at: D, force: [222.41108076, 0, -8896.4432305]}]}}\n",
        "units: {length: mm, force: kN}\nsizes: {s: {round: 25.4 x 1.27, material: 4130N}}\n"
        "joints: {A: [0, 0, 0], B: [762, 0, 0], C: [0, 762, 0], D: [254, 254, 1016]}\n"
        "tubes: {a: [A, D, s], b: [B, D, s], c: [C, D, s]}\nsupports: {A: pinned, B: pinned, C: pinned}\n"
        "cases: {h: {level: ultimate, loads: [{at: D, force: [0.22241108076, 0, -8.8964432305]}]}}\n",
        "units: {length: in, force: lbf}\nsizes: {s: {round: 1 x 0.05, material: 4130N}}\n"
        "joints: {A: [0, 0, 0], B: [30, 0, 0], C: [0, 30, 0], D: [10, 10, 40]}\n"
        "tubes: {a: [A, D, s], b: [B, D, s], c: [C, D, s]}\nsupports: {A: pinned, B: pinned, C: pinned}\n"
        "cases: {h: {level: ultimate, loads: [{at: D, force: [50, 0, -2000]}]}}\n"};
    EfContext *cx = ef_open();
    const EfResults *r[3];
    for (int i = 0; i < 3; i++) {
        EfFrame *f;
        CHECK_OK(cx, ef_read_frame_text(cx, "units", text[i], -1, &f));
        r[i] = solve_frame(cx, f, 4);
    }
    compare(r[0], r[1], NULL, 1);
    compare(r[0], r[2], NULL, 1);
    ef_close(cx);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(direction_in_space), cmocka_unit_test(numbering),
                                       cmocka_unit_test(size_of_loads), cmocka_unit_test(units)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
