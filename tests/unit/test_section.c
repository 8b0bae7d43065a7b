/* test_section.c - section values against integration of the outline, and against published tables.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <string.h>

#include "section/section.h"

/* Area and second moments of the region between the loops, by Green's theorem on fine chords. */
static void integrate(const SectionKind *kind, const double *p, double *A, double *Iy, double *Iz)
{
    enum { N = 40000 };
    *A = *Iy = *Iz = 0;
    for (int loop = 0; loop < 2; loop++) {
        const double sign = loop == 0 ? 1 : -1;
        double a[2], b[2];
        if (!kind->outline(p, loop, 0, a)) return;
        for (int i = 1; i <= N; i++) {
            kind->outline(p, loop, i < N ? (double)i / N : 0, b);
            const double cross = a[0] * b[1] - b[0] * a[1];
            *A += sign * cross / 2;
            *Iy += sign * cross * (a[1] * a[1] + a[1] * b[1] + b[1] * b[1]) / 12;
            *Iz += sign * cross * (a[0] * a[0] + a[0] * b[0] + b[0] * b[0]) / 12;
            memcpy(a, b, sizeof a);
        }
    }
}

static void compare(const char *name, const double *p, double tolerance)
{
    char why[200] = "";
    EfSection s;
    double A, Iy, Iz;
    const SectionKind *kind = section_kind_named(name);
    assert_non_null(kind);
    if (!section_values(kind, p, &s, why, sizeof why)) print_error("%s\n", why), assert_true(false);
    integrate(kind, p, &A, &Iy, &Iz);
    CHECK_REL(s.A, A, tolerance);
    CHECK_REL(s.Iy, Iy, tolerance);
    CHECK_REL(s.Iz, Iz, tolerance);
}

static void values_are_those_of_the_outline(void **state)
{
    (void)state;
    compare("round", (double[8]){0.0254, 0.00124}, 1e-7);
    compare("rod", (double[8]){0.008}, 1e-7);
    compare("square", (double[8]){0.04, 0.003, 0.006}, 1e-7);
    compare("square", (double[8]){0.04, 0.003, 0}, 1e-7);
    compare("rectangle", (double[8]){0.06, 0.03, 0.002, 0.004}, 1e-7);
    /* A thin wall on its middle line: the same to the square of wall over size. */
    compare("ellipse", (double[8]){0.04, 0.017, 0.0005}, 3e-4);
}

/* A circle is an ellipse with equal axes: thin-wall values, so t/D squared apart. */
static void ellipse_of_equal_axes(void **state)
{
    (void)state;
    char why[200];
    EfSection e, r;
    assert_true(section_values(section_kind_named("ellipse"), (double[8]){0.05, 0.05, 0.001}, &e, why, sizeof why));
    assert_true(section_values(section_kind_named("round"), (double[8]){0.05, 0.001}, &r, why, sizeof why));
    CHECK_REL(e.A, r.A, 1e-12);
    CHECK_REL(e.Iy, r.Iy, 1e-3);
    CHECK_REL(e.J, r.J, 1e-3);
    CHECK_REL(e.As_y, e.A / 2, 1e-9);
}

/* EN 10219-2 tables: cold-formed square and rectangular hollow sections, A, I, torsion constant (from memory). */
static void cold_formed_tables(void **state)
{
    (void)state;
    char why[200];
    EfSection s;
    assert_true(section_values(section_kind_named("square"), (double[8]){0.05, 0.003, 0.006}, &s, why, sizeof why));
    CHECK_REL(s.A * 1e4, 5.41, 2e-3);   /* cm2 */
    CHECK_REL(s.Iy * 1e8, 19.5, 3e-3);  /* cm4 */
    CHECK_REL(s.J * 1e8, 32.1, 1e-2);
    assert_true(section_values(section_kind_named("rectangle"), (double[8]){0.06, 0.04, 0.003, 0.006}, &s, why, sizeof why));
    CHECK_REL(s.A * 1e4, 5.41, 2e-3);
    CHECK_REL(s.Iy * 1e8, 25.4, 3e-3);
    CHECK_REL(s.Iz * 1e8, 13.4, 4e-3);
    CHECK_REL(s.J * 1e8, 29.3, 1e-2);
}

/* A 3/4 x 0.035 in tube: A 0.0786 in2, I 0.005036 in4 (aircraft tube tables, from memory). */
static void aircraft_tube_table(void **state)
{
    (void)state;
    char why[200];
    EfSection s;
    const double inch = 0.0254;
    assert_true(section_values(section_kind_named("round"), (double[8]){0.75 * inch, 0.035 * inch}, &s, why, sizeof why));
    CHECK_REL(s.A / (inch * inch), 0.0786, 1e-3);
    CHECK_REL(s.Iy / (inch * inch * inch * inch), 0.005036, 1e-3);
    assert_true(s.round);
}

static void faults_are_told(void **state)
{
    (void)state;
    char why[200];
    EfSection s;
    assert_false(section_values(section_kind_named("round"), (double[8]){0.02, 0.011}, &s, why, sizeof why));
    assert_non_null(strstr(why, "half of the diameter"));
    assert_false(section_values(section_kind_named("round"), (double[8]){0.02, NAN}, &s, why, sizeof why));
    assert_non_null(strstr(why, "wall is missing"));
    assert_false(section_values(section_kind_named("square"), (double[8]){0.02, 0.002, 0.02}, &s, why, sizeof why));
    assert_false(section_values(section_kind_named("ellipse"), (double[8]){0.01, 0.02, 0.001}, &s, why, sizeof why));
    assert_false(section_values(section_kind_named("given"), (double[8]){-1, 1, 1, 1, NAN, NAN, NAN, NAN}, &s, why, sizeof why));
    assert_null(section_kind_named("hexagon"));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(values_are_those_of_the_outline), cmocka_unit_test(ellipse_of_equal_axes),
        cmocka_unit_test(cold_formed_tables),              cmocka_unit_test(aircraft_tube_table),
        cmocka_unit_test(faults_are_told),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
