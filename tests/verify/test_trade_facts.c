/* test_trade_facts.c - what people of the trade carry in their heads, as checks (common practice, no source), and
 * what the formulas give exactly beside it. Pin-ended tubes 31 in long.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <string.h>

#include "support/solve.h"

static const double POUND = 0.45359237; /* kg, 1959 */

/* Critical load in lbf and mass in lb of a round tube between pins. */
static void pinned_tube(const char *size, const char *modulus, const char *density, double *load, double *mass)
{
    char text[1000];
    snprintf(text, sizeof text,
             "units: {length: in, force: lbf, mass: lb}\nmaterials: {m: {E: %s, nu: 0.3, density: %s}}\n"
             "sizes: {s: {round: \"%s\", material: m}}\njoints: {A: [0, 0, 0], B: [31, 0, 0]}\ntubes: {t: [A, B, s]}\n"
             "supports: {A: [x, y, z, rx], B: [y, z]}\ncases: {c: {level: ultimate, loads: [{at: B, force: [-1, 0, 0]}]}}\n",
             modulus, density, size);
    EfContext *cx = ef_open();
    EfFrame *f;
    CHECK_OK(cx, ef_read_frame_text(cx, "fact", text, -1, &f));
    const EfResults *r = solve_frame(cx, f, 1);
    *load = factor_of(r, 0);
    *mass = r->mass / POUND;
    CHECK_REL(r->cases[0].fixity.own_c[0], 1, 1e-6);
    ef_close(cx);
}

static void steel_tubes_of_one_weight(void **state)
{
    (void)state;
    double large, small, wide, thick;
    pinned_tube("5/8 in x 0.035 in", "29 Msi", "0.283 lb/in3", &large, &wide);
    pinned_tube("3/8 in x 0.065 in", "29 Msi", "0.283 lb/in3", &small, &thick);
    CHECK_REL(large, 850, 0.01);  /* "about 850 lbf" */
    CHECK_REL(small, 240, 0.016); /* "about 240 lbf" */
    CHECK_REL(large, 843.7, 1e-4);
    CHECK_REL(small, 236.4, 3e-4);
    CHECK_REL(thick, wide, 0.05); /* "the same weight" */
    CHECK_REL(wide, 0.5691, 2e-4);
    CHECK_REL(large / small, 3.57, 1e-3);
}

static void aluminium_against_steel(void **state)
{
    (void)state;
    double steel, same, larger, steel_mass, same_mass, larger_mass;
    pinned_tube("5/8 in x 0.035 in", "29 Msi", "0.283 lb/in3", &steel, &steel_mass);
    pinned_tube("5/8 in x 0.035 in", "9.9 Msi", "0.098 lb/in3", &same, &same_mass);
    pinned_tube("7/8 in x 0.035 in", "10.1 Msi", "0.098 lb/in3", &larger, &larger_mass);
    CHECK_REL(same / steel, 0.35, 0.03); /* "about 35 %" */
    CHECK_REL(same / steel, 0.341, 2e-3);
    CHECK_REL(same_mass / steel_mass, 0.346, 1e-3);
    CHECK_REL(larger / steel, 1, 5e-3); /* "about equal" */
    CHECK_REL(larger, 846.5, 3e-4);
    CHECK_REL(larger_mass / steel_mass, 0.4930, 5e-4);
}

/* 10 % less wall takes 8.5 % of the load. */
static void thinner_wall(void **state)
{
    (void)state;
    double full, thin, mass;
    pinned_tube("5/8 in x 0.035 in", "29 Msi", "0.283 lb/in3", &full, &mass);
    pinned_tube("0.625 in x 0.0315 in", "29 Msi", "0.283 lb/in3", &thin, &mass);
    CHECK_ABS(thin / full - 1, -0.0845, 2e-4);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(steel_tubes_of_one_weight), cmocka_unit_test(aluminium_against_steel),
                                       cmocka_unit_test(thinner_wall)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
