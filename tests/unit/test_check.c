/* test_check.c - column rules, reserves of analytic curves, verdicts.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <string.h>

#include "check/check.h"
#include "material/material.h"

/* 4130 normalised after welding, Fco 60 ksi, 286e6: s = 40, 60, 80 give 54 965, 48 671, 39 860 psi, and Euler takes
 * over at 97.6 (Johnson's formula with the constants of Bruhn's table of column formulas). */
static void johnson_on_welded_4130(void **state)
{
    (void)state;
    const double psi = 6894.757293168;
    EfMaterial m = *material_named("4130N");
    m.welded_yield = 60000 * psi;
    const EfSection unit = {.A = 1};
    const ColumnRule *rule = column_rule_of(&m);
    assert_string_equal(rule->name, "euler-johnson");
    const double s[] = {40, 60, 80, 97.6, 120}, want[] = {54965, 48671, 39860, 30025, 286e6 / (120.0 * 120)};
    for (int i = 0; i < 5; i++) CHECK_REL(rule->strength(&m, &unit, 286e6 * psi / (s[i] * s[i])) / psi, want[i], 1e-3);
    /* value and slope run on at half of the yield */
    const double Py = 60000 * psi, h = 1e-4;
    CHECK_REL(rule->strength(&m, &unit, Py / 2 * (1 + h)), Py / 2 * (1 + h), 2 * h * h);
    CHECK_REL(column_rule_named("euler")->strength(&m, &unit, 7 * Py), 7 * Py, 1e-15);
    assert_null(column_rule_named("eulr"));
    EfMaterial bare = m;
    bare.yield = bare.yield_compression = bare.welded_yield = NAN;
    CHECK_REL(rule->strength(&bare, &unit, 5), 5, 1e-15);
}

/* N_cr falls in a straight line from 4 to the cap; strength doubles or halves: roots by hand. */
typedef struct Lines {
    int calls;
} Lines;

static EfStatus falling(EfContext *cx, void *from, double r, const bool *wanted, double *critical)
{
    (void)cx;
    ((Lines *)from)->calls++;
    for (int t = 0; t < 3; t++)
        if (wanted[t]) critical[t] = t == 2 ? 50 : 4 - r * r / (t + 1);
    return EF_OK;
}

static double itself(const void *of, int tube, double elastic)
{
    (void)of, (void)tube;
    return elastic;
}

static void reserves(void **state)
{
    (void)state;
    for (int exact = 0; exact < 2; exact++) {
        EfContext *cx = ef_open();
        Lines lines = {0};
        const double P0[] = {0, 0.5, 0}, P1[] = {1, 2, 1};
        const bool wanted[] = {true, true, true};
        const ReserveTask task = {.nt = 3, .P0 = P0, .P1 = P1, .cap = 2.5, .wanted = wanted, .strength = itself,
                                  .own = falling, .from = &lines, .exact = exact};
        double reserve[3], critical[3], at_cap[3];
        CHECK_OK(cx, reserve_solve(cx, &task, reserve, critical, at_cap));
        /* 4 - r^2 = r; 4 - r^2/2 = 0.5 + 2 r; never */
        const double want[] = {(-1 + sqrt(17)) / 2, -2 + sqrt(4 + 7)};
        for (int t = 0; t < 2; t++) {
            CHECK_REL(reserve[t], want[t], exact ? 1e-9 : 2e-3);
            assert_true(reserve[t] <= want[t] * (1 + 1e-9)); /* on the safe side */
            CHECK_REL(critical[t], P0[t] + want[t] * P1[t], exact ? 1e-8 : 5e-3);
        }
        assert_true(isnan(reserve[2]));
        CHECK_REL(at_cap[2], 50, 1e-15);
        ef_close(cx);
    }
}

static void verdicts(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const struct {
        double hand, frame;
        const char *text;
    } v[] = {{2.07, 1.793, "unsafe by 14 %"}, {0.80, 1.338, "safe side by 67 %"}, {1, 1.049, "agrees"},
             {1, 1.0501, "safe side by 5 %"}, {1, 0.999, "unsafe by 1 %"},        {1, 1, "agrees"},
             {1, NAN, "not comparable"},      {NAN, 1, "not comparable"}};
    for (size_t i = 0; i < sizeof v / sizeof *v; i++) {
        EfLedgerRow row;
        CHECK_OK(cx, ledger_verdict(cx, v[i].hand, v[i].frame, &row));
        assert_string_equal(row.verdict_text, v[i].text);
    }
    ef_close(cx);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(johnson_on_welded_4130), cmocka_unit_test(reserves),
                                       cmocka_unit_test(verdicts)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
