/* test_mesh.c - masses, axes, carriers, runs, and the balance of free bodies.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <string.h>

#include "mesh/mesh.h"
#include "support/build_frame.h"

/* A skew box of tubes with an engine on four joints. */
static EfFrame *box(EfContext *cx)
{
    EfFrame *f = frame_new(cx);
    const int size = frame_round(cx, f, 0.02, 0.001);
    for (int i = 0; i < 8; i++)
        frame_joint(cx, f, (i & 1) * 1.1 + 0.03 * i, (i >> 1 & 1) * 0.8 - 0.02 * i, (i >> 2 & 1) * 0.9 + 0.01 * i * i);
    for (int i = 0; i < 8; i++)
        for (int k = i + 1; k < 8; k++) frame_tube(cx, f, i, k, size);
    frame_equipment(cx, f, 30, (double[3]){-0.4, 0.5, 0.3}, 4, (int[]){0, 2, 4, 6});
    frame_equipment(cx, f, 5, (double[3]){1.5, 0.1, 0.2}, 1, (int[]){1});
    return f;
}

static void free_body_balances(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = box(cx);
    const int c = frame_case(cx, f, "gust");
    frame_push(cx, f, c, 1, (int[]){3}, (double[3]){100, -200, 300});
    frame_push(cx, f, c, 3, (int[]){1, 5, 7}, (double[3]){-30, 80, 900});
    frame_push_along(cx, f, c, 2, (int[]){0, 4}, (double[3]){5, 7, -11});
    Mesh mesh;
    Run *run;
    int n;
    CHECK_OK(cx, mesh_build(cx, f, &mesh));
    assert_true(mesh.free_body);
    CHECK_OK(cx, mesh_runs(cx, &mesh, NULL, &n, &run));
    assert_int_equal(n, 1);
    double scale = 0;
    for (int i = 0; i < 6; i++) scale = fmax(scale, fabs(run->inertia_total[i]));
    for (int i = 0; i < 6; i++) CHECK_ABS(run->growing.total[i], 0, 1e-12 * scale);
    /* The joints' and tubes' own sums say the same as the running total. */
    double sum[6] = {0};
    for (int j = 0; j < mesh.nj; j++) {
        const double *p = run->growing.joint + 6 * j, *x = f->joint[j].x;
        for (int i = 0; i < 6; i++) sum[i] += p[i];
        sum[3] += x[1] * p[2] - x[2] * p[1];
        sum[4] += x[2] * p[0] - x[0] * p[2];
        sum[5] += x[0] * p[1] - x[1] * p[0];
    }
    for (int t = 0; t < mesh.nt; t++)
        for (int i = 0; i < 3; i++)
            sum[i] += mesh.tube[t].L * (run->growing.tube[t].from[i] + run->growing.tube[t].to[i]) / 2;
    for (int i = 0; i < 3; i++) CHECK_ABS(sum[i], 0, 1e-12 * scale);
    /* n is force over weight. */
    CHECK_REL(run->n_at_cg[2], (300 + 900 - 11 * (mesh.tube[0].L + mesh.tube[4].L)) / (mesh.mass * 9.80665), 1e-12);
    ef_close(cx);
}

/* Spreading a force keeps its resultant and moment, and works as the rotation row says. */
static void carriers_keep_force_and_moment(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = box(cx);
    Mesh mesh;
    CHECK_OK(cx, mesh_build(cx, f, &mesh));
    for (int e = 0; e < 2; e++) {
        const Carrier *c = &mesh.equipment[e];
        const double force[3] = {3, -5, 7}, moment[3] = {2, 1, -4};
        double *joint = arena_take(cx, &cx->tmp, (size_t)(6 * mesh.nj), sizeof *joint);
        carrier_spread(c, force, moment, joint);
        double sum[6] = {-force[0], -force[1], -force[2], -moment[0], -moment[1], -moment[2]};
        for (int j = 0; j < mesh.nj; j++) {
            const double *p = joint + 6 * j;
            const double r[3] = {f->joint[j].x[0] - c->point[0], f->joint[j].x[1] - c->point[1], f->joint[j].x[2] - c->point[2]};
            for (int i = 0; i < 6; i++) sum[i] += p[i];
            sum[3] += r[1] * p[2] - r[2] * p[1];
            sum[4] += r[2] * p[0] - r[0] * p[2];
            sum[5] += r[0] * p[1] - r[1] * p[0];
        }
        for (int i = 0; i < 6; i++) CHECK_ABS(sum[i], 0, 1e-12);
        /* A rigid rotation of the carriers gives itself. */
        const double t[3] = {0.3, -0.2, 0.5};
        double seen[3] = {0};
        for (int k = 0; k < c->ncarrier; k++) {
            double H[3][6];
            const double *x = f->joint[c->joint[k]].x;
            const double u[6] = {t[1] * x[2] - t[2] * x[1], t[2] * x[0] - t[0] * x[2], t[0] * x[1] - t[1] * x[0], t[0], t[1], t[2]};
            carrier_rotation_row(c, k, H);
            for (int i = 0; i < 3; i++)
                for (int j = 0; j < 6; j++) seen[i] += H[i][j] * u[j];
        }
        for (int i = 0; i < 3; i++) CHECK_ABS(seen[i], t[i], 1e-12);
    }
    ef_close(cx);
}

static void axes_and_masses(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = frame_new(cx);
    const int size = frame_round(cx, f, 0.02, 0.001);
    frame_joint(cx, f, 0, 0, 0), frame_joint(cx, f, 0, 0, 2), frame_joint(cx, f, 2, 0, 0);
    frame_tube(cx, f, 0, 1, size), frame_tube(cx, f, 0, 2, size);
    f->tube[1].offset[0][0] = 0.1;
    Mesh mesh;
    CHECK_OK(cx, mesh_build(cx, f, &mesh));
    CHECK_ABS(mesh.tube[0].R[2][0], 1, 1e-15); /* upright: z along global x */
    CHECK_ABS(mesh.tube[1].R[2][2], 1, 1e-15); /* level: z up */
    CHECK_ABS(mesh.tube[1].R[1][1], 1, 1e-15);
    CHECK_REL(mesh.tube[1].L, 1.9, 1e-15);
    CHECK_REL(mesh.tube[1].joint_length, 2.0, 1e-15);
    const double per_length = 7850 * 3.14159265358979 * (0.02 * 0.02 - 0.018 * 0.018) / 4;
    CHECK_REL(mesh.mass, per_length * 3.9, 1e-12);
    CHECK_REL(mesh.centre_of_mass[2], per_length * 2 * 1 / mesh.mass, 1e-12);
    ef_close(cx);
}

static void expect_fault(EfFrame *f, EfContext *cx, const char *words)
{
    Mesh mesh;
    Run *run;
    int n;
    EfStatus st = mesh_build(cx, f, &mesh);
    if (st == EF_OK) st = mesh_runs(cx, &mesh, NULL, &n, &run);
    assert_int_equal(st, EF_E_INPUT);
    if (!strstr(ef_message(cx), words)) print_error("%s\n", ef_message(cx));
    assert_non_null(strstr(ef_message(cx), words));
    ef_close(cx);
}

static void faults_are_named(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = box(cx);
    frame_equipment(cx, f, 1, (double[3]){0, 3, 0}, 2, (int[]){0, 1});
    expect_fault(f, cx, "swing about that line");
    cx = ef_open();
    f = box(cx);
    f->tube[2].up[0] = f->joint[3].x[0] - f->joint[0].x[0];
    f->tube[2].up[1] = f->joint[3].x[1] - f->joint[0].x[1];
    f->tube[2].up[2] = f->joint[3].x[2] - f->joint[0].x[2];
    expect_fault(f, cx, "Tube T2: `up` lies along");
    cx = ef_open();
    f = box(cx);
    f->tube[0].offset[0][0] = 3;
    expect_fault(f, cx, "Tube T0");
    cx = ef_open();
    f = box(cx);
    frame_guy(cx, f, 0, 7, 0.1);
    expect_fault(f, cx, "Guys");
    cx = ef_open();
    f = box(cx);
    const int c = frame_case(cx, f, "c");
    frame_push(cx, f, c, 1, (int[]){0}, (double[3]){1, 0, 0})->steady = true;
    expect_fault(f, cx, "steady");
}

static void runs_in_order(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = box(cx);
    frame_support(cx, f, 0, HOLD_FIXED);
    const int a = frame_case(cx, f, "a"), b = frame_case(cx, f, "b");
    frame_push(cx, f, a, 1, (int[]){7}, (double[3]){1, 2, 3});
    frame_push(cx, f, b, 1, (int[]){7}, (double[3]){10, 0, 0});
    frame_push(cx, f, b, 1, (int[]){6}, (double[3]){0, 1, 0})->steady = true;
    f->cases[b].both_ways = true;
    f->cases[a].level = EF_LEVEL_LIMIT, f->cases[a].ultimate_factor = 1.5;
    frame_combination(cx, f, "sum", 2, (int[]){a, b}, (double[]){2, 3});
    Mesh mesh;
    Run *run;
    int n;
    CHECK_OK(cx, mesh_build(cx, f, &mesh));
    CHECK_OK(cx, mesh_runs(cx, &mesh, NULL, &n, &run));
    assert_int_equal(n, 4);
    assert_string_equal(run[2].name, "b reversed");
    CHECK_REL(run[0].growing.joint[6 * 7 + 2], 4.5, 1e-15);
    CHECK_REL(run[2].growing.joint[6 * 7], -10, 1e-15);
    CHECK_REL(run[2].steady.joint[6 * 6 + 1], 1, 1e-15);
    CHECK_REL(run[3].growing.joint[6 * 7], 2 * 1 + 3 * 10, 1e-15);
    assert_true(run[3].combination && run[3].has_steady && run[3].index == 2);
    assert_int_equal(mesh_runs(cx, &mesh, "smu", &n, &run), EF_E_INPUT);
    assert_non_null(strstr(ef_message(cx), "Did you mean sum?"));
    ef_close(cx);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(free_body_balances), cmocka_unit_test(carriers_keep_force_and_moment),
        cmocka_unit_test(axes_and_masses),    cmocka_unit_test(faults_are_named),
        cmocka_unit_test(runs_in_order),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
