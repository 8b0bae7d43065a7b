/* test_demo_frames.c - the demo frames against figures of a quick solver of divided tubes (cubic elements, axial and
 * torsion terms alone), to 1 %; tests/verify/data.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <stdlib.h>
#include <string.h>

#include "support/solve.h"

static const EfResults *run(EfContext *cx, const char *name)
{
    char path[500];
    EfFrame *f = NULL;
    EfResults *r = NULL;
    snprintf(path, sizeof path, "%s/meshes/%s", EF_SOURCE_DIR, name);
    CHECK_OK(cx, ef_read_frame(cx, path, &f));
    CHECK_OK(cx, ef_run(cx, f, NULL, &r));
    return r;
}

static const EfCaseResult *case_named(const EfResults *r, const char *name)
{
    for (int i = 0; i < r->ncase; i++)
        if (strcmp(r->cases[i].name, name) == 0) return &r->cases[i];
    return NULL;
}

static int tube_named(const EfResults *r, const char *name)
{
    for (int t = 0; t < r->frame->ntube; t++)
        if (strcmp(r->frame->tube[t].name, name) == 0) return t;
    return -1;
}

static void ironbark(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const EfResults *r = run(cx, "ironbark.yaml");
    const struct {
        const char *name;
        double factor[3];
    } e[] = {{"pull-up with torque", {1.793, 1.821, 2.558}}, {"side load", {5.179, 5.307, 10.64}},
             {"push-over", {1.939, 2.154, 4.367}}, {"hard landing", {1.541, 1.564, 1.801}}};
    for (int i = 0; i < 4; i++) {
        const EfCaseResult *c = case_named(r, e[i].name);
        for (int k = 0; k < 3; k++) CHECK_REL(c->critical.factor[k], e[i].factor[k], 2e-3);
        assert_int_equal(c->critical.counted, c->critical.found);
        CHECK_REL(c->witness.factor, c->critical.factor[0], 1e-3); /* small end moments here */
        assert_true(c->witness.axial_difference < 1e-9);
    }
    assert_int_equal(case_named(r, "nose-over stop")->critical.outcome, EF_NONE);
    const int main3 = tube_named(r, "main-3");
    CHECK_REL(case_named(r, "hard landing")->fixity.own_c[main3], 1.74, 5e-3);
    CHECK_REL(case_named(r, "push-over")->fixity.own_c[tube_named(r, "side-R")], 2.85, 5e-3);
    CHECK_REL(case_named(r, "side load")->fixity.own_c[tube_named(r, "main-4")], 1.99, 5e-3);
    /* elastic pair of the ledger: guess 1.776 (c 2), frame 1.541: unsafe by 14 % by the elastic figures */
    const EfLedgerRow *l = case_named(r, "hard landing")->ledger;
    CHECK_REL(l->hand_elastic, 1.776, 2e-3);
    CHECK_REL(l->frame_elastic, 1.541, 2e-3);
    assert_int_equal(l->verdict, EF_VERDICT_UNSAFE);
    assert_int_equal(case_named(r, "push-over")->ledger[0].verdict, EF_VERDICT_SAFE);
    assert_int_equal(r->exit_status, 0);
    ef_close(cx);
}

static void quernstone(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const EfResults *r = run(cx, "verify/quernstone_as_given.yaml");
    CHECK_REL(r->mass, 417.9, 1e-3);
    const struct {
        const char *name;
        double factor[3], n[3];
    } e[] = {{"pull-up", {1.703, 1.716, 1.920}, {0, 0, 5.701}},
             {"push-over", {3.356, 3.440, 3.505}, {0, 0, -2.851}},
             {"fin gust", {1.338, 1.347, 1.911}, {0, 0.348, 1.50}},
             {"engine torque and pull-up", {1.957, 1.971, 2.494}, {-0.586, 0, 4.276}},
             {"tail-down landing", {1.788, 1.872, 1.933}, {0.787, 0, 5.978}}};
    for (int i = 0; i < 5; i++) {
        const EfCaseResult *c = case_named(r, e[i].name);
        assert_true(c->free_body);
        for (int k = 0; k < 3; k++) CHECK_REL(c->critical.factor[k], e[i].factor[k], 3e-3);
        for (int k = 0; k < 3; k++) CHECK_ABS(c->n_at_cg[k], e[i].n[k], 5e-3);
        CHECK_REL(c->witness.factor, c->critical.factor[0], 1e-4);
        assert_true(c->balance.residual < 1e-9);
    }
    /* own c in the free body with the case's own rows kept */
    const EfFixity *x = &case_named(r, "fin gust")->fixity;
    CHECK_REL(x->own_c[tube_named(r, "keel-R-3")], 2.763, 2e-3);
    CHECK_REL(x->own_c[tube_named(r, "side-R-1")], 3.370, 2e-3);
    CHECK_REL(x->own_c[tube_named(r, "roof-1")], 3.427, 2e-3);
    CHECK_REL(x->own_c[tube_named(r, "side-R-4")], 3.322, 2e-3);
    ef_close(cx);
}

/* Every row of the tables: six factors, load factors at the centre of mass; masses and the centre of mass. */
static void factors_and_masses(void **state)
{
    (void)state;
    const char *const frames[2][2] = {{"quernstone_as_given", "verify/quernstone_as_given.yaml"}, {"ironbark", "ironbark.yaml"}};
    for (int i = 0; i < 2; i++) {
        EfContext *cx = ef_open();
        const EfResults *r = run(cx, frames[i][1]);
        char line[400], frame[100], name[100];
        double v[9];
        int factors = 0, masses = 0;
        FILE *f = fopen(EF_SOURCE_DIR "/tests/verify/data/quick_factors.csv", "r");
        assert_non_null(f);
        while (fgets(line, sizeof line, f)) {
            const int n = sscanf(line, "%99[^,],%99[^,],%lf,%lf,%lf,%lf,%lf,%lf,%lf,%lf,%lf", frame, name, v, v + 1, v + 2, v + 3,
                                 v + 4, v + 5, v + 6, v + 7, v + 8);
            if (n < 8 || strcmp(frame, frames[i][0]) != 0) continue;
            const EfCaseResult *c = case_named(r, name);
            for (int k = 0; k < 6; k++) CHECK_REL(c->critical.factor[k], v[k], 0.01);
            for (int k = 0; n == 11 && k < 3; k++) CHECK_ABS(c->n_at_cg[k], v[6 + k], 2e-3);
            factors++;
        }
        fclose(f);
        f = fopen(EF_SOURCE_DIR "/tests/verify/data/quick_masses.csv", "r");
        assert_non_null(f);
        while (fgets(line, sizeof line, f)) {
            if (sscanf(line, "%99[^,],%lf,%lf,%lf,%lf,%lf", frame, v, v + 1, v + 2, v + 3, v + 4) != 6 || strcmp(frame, frames[i][0]) != 0) continue;
            CHECK_REL(r->mass, v[0], 1e-4);
            CHECK_REL(r->tubes_mass, v[1], 1e-3);
            for (int k = 0; k < 3; k++) CHECK_ABS(r->centre_of_mass[k], v[2 + k], 1e-3);
            masses++;
        }
        fclose(f);
        assert_true(factors >= 4 && masses == 1);
        ef_close(cx);
    }
}

/* A tube whose own c ends before its own check is reached has no reserve and says so; the job goes on. */
static void no_own_c(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const EfResults *r = run(cx, "verify/no_own_c.yaml");
    const EfFixity *x = &r->cases[0].fixity;
    int blank = 0;
    for (int t = 0; t < r->frame->ntube; t++) blank += strcmp(x->note[t], "no own c") == 0 && isnan(x->reserve[t]) && isnan(x->safe_c[t]);
    assert_int_equal(blank, 1);
    assert_int_equal(r->cases[0].critical.counted, r->cases[0].critical.found);
    ef_close(cx);
}

/* Every row of the table: axial force, and own c (that tube's force alone raised in the divided frame). */
static void own_c_of_the_nearest_tubes(void **state)
{
    (void)state;
    const char *const frames[2][2] = {{"quernstone_as_given", "verify/quernstone_as_given.yaml"}, {"ironbark", "ironbark.yaml"}};
    for (int i = 0; i < 2; i++) {
        EfContext *cx = ef_open();
        const EfResults *r = run(cx, frames[i][1]);
        FILE *f = fopen(EF_SOURCE_DIR "/tests/verify/data/quick_tubes.csv", "r");
        assert_non_null(f);
        char line[400], frame[100], name[100], tube[100];
        int compared = 0;
        while (fgets(line, sizeof line, f)) {
            double v[6];
            if (sscanf(line, "%99[^,],%99[^,],%99[^,],%lf,%lf,%lf,%lf,%lf,%lf", frame, name, tube, v, v + 1, v + 2, v + 3, v + 4, v + 5) != 9) continue;
            if (strcmp(frame, frames[i][0]) != 0) continue;
            const EfCaseResult *c = case_named(r, name);
            const int t = tube_named(r, tube);
            assert_non_null(c);
            assert_true(t >= 0);
            CHECK_ABS(c->axial_min[t] / 1e3, v[0], 0.01 * fabs(v[0]) + 0.002);
            if (fabs(c->fixity.own_c[t] / v[5] - 1) > 0.012) print_error("%s, %s:\n", name, tube);
            CHECK_REL(c->fixity.own_c[t], v[5], 0.012);
            compared++;
        }
        fclose(f);
        assert_true(compared >= 15);
        ef_close(cx);
    }
}

/* Rounding leaves pivots of 1e-9 here; the softest motion still strains nothing, and is told. */
static void hidden_mechanism(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f;
    EfResults *r;
    CHECK_OK(cx, ef_read_frame(cx, EF_SOURCE_DIR "/meshes/verify/turns_about_a_line.yaml", &f));
    assert_int_equal(ef_run(cx, f, NULL, &r), EF_E_MECHANISM);
    assert_non_null(strstr(ef_message(cx), "can move together without straining anything"));
    ef_close(cx);
}

/* Rounding is not a load: a free tube whose loads cancel where they act has no critical factor. */
static void loads_that_cancel(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const EfResults *r = run(cx, "verify/loads_that_cancel.yaml");
    assert_int_equal(r->cases[0].critical.outcome, EF_NONE);
    assert_true(r->cases[0].balance.residual < 1e-9);
    assert_int_equal(r->exit_status, 0);
    ef_close(cx);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(ironbark), cmocka_unit_test(quernstone),
                                       cmocka_unit_test(own_c_of_the_nearest_tubes), cmocka_unit_test(hidden_mechanism),
                                       cmocka_unit_test(loads_that_cancel), cmocka_unit_test(factors_and_masses),
                                       cmocka_unit_test(no_own_c)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
