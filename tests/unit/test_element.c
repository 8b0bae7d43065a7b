/* test_element.c - the two tube elements: rigid rotation, closed forms, one against the other.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <stdlib.h>
#include <string.h>

#include "element/element.h"
#include "support/check.h"

static MeshTube sample(void)
{
    MeshTube t = {.L = 1.37, .joint_length = 1.37, .E = 205e9, .G = 79e9, .mass_per_length = 1.1};
    t.section = (EfSection){.A = 2.4e-4, .Iy = 4.3e-8, .Iz = 3.1e-8, .J = 5.9e-8, .As_y = 1.2e-4, .As_z = 1.1e-4};
    for (int i = 0; i < 3; i++) t.R[i][i] = 1;
    for (int i = 0; i < END12; i++) t.spring[i / 6][i % 6] = INFINITY;
    return t;
}

static void cross(const double a[3], const double b[3], double c[3])
{
    c[0] = a[1] * b[2] - a[2] * b[1], c[1] = a[2] * b[0] - a[0] * b[2], c[2] = a[0] * b[1] - a[1] * b[0];
}

/* Forces in a tube whose joints were displaced at random, with line loads. */
static TubeForces random_forces(const MeshTube *t, const TubeLoad *q, uint64_t stream)
{
    double d[END12];
    TubeForces f;
    for (uint64_t i = 0; i < END12; i++) d[i] = test_uniform(stream, i, -1e-3, 1e-3);
    assert_true(tube_forces(t, q, d, &f));
    return f;
}

/* Acceptance test of any geometric stiffness: a rigid rotation t needs forces t x f and moments (t x m)/2 at
 * the ends; line loads turn along: plus the equivalent of t x q. Returns the worst error relative to the forces. */
static double rotation_error(const MeshTube *t, const TubeLoad *q, TubeBasis basis, uint64_t stream)
{
    EfContext *cx = ef_open();
    TubeForces f = random_forces(t, q, stream);
    TubeForm form;
    CHECK_OK(cx, tube_form(cx, t, NULL, &f, basis, &form));
    const int n = END12 + form.m;
    double worst = 0, scale = 0;
    for (int axis = 0; axis < 3; axis++) {
        double r[3] = {0}, x[MAX_RAW] = {0};
        r[axis] = 1;
        const double end[2][3] = {{-t->offset[0][0], -t->offset[0][1], -t->offset[0][2]},
                                  {t->L - t->offset[1][0], -t->offset[1][1], -t->offset[1][2]}};
        for (int e = 0; e < 2; e++) {
            cross(r, end[e], x + 6 * e);
            memcpy(x + 6 * e + 3, r, sizeof r);
        }
        TubeLoad turned = {{0}, {0}, 0};
        cross(r, q->from, turned.from);
        cross(r, q->to, turned.to);
        double fq[END12], want[END12];
        assert_true(tube_load(t, &turned, fq));
        for (int e = 0; e < 2; e++) {
            double moment[3], arm[3];
            memcpy(moment, f.end + 6 * e + 3, sizeof moment);
            cross(t->offset[e], f.end + 6 * e, arm);
            cross(r, f.end + 6 * e, want + 6 * e);
            /* About the joint the arm adds r x f, and the whole turns by half. */
            for (int i = 0; i < 3; i++) moment[i] += arm[i];
            cross(r, moment, want + 6 * e + 3);
            for (int i = 0; i < 3; i++) want[6 * e + 3 + i] /= 2;
        }
        for (int i = 0; i < END12; i++) {
            double got = 0;
            for (int j = 0; j < END12; j++) got += form.G[i * n + j] * x[j];
            worst = fmax(worst, fabs(got - (want[i] + fq[i])));
            scale = fmax(scale, fabs(want[i]));
        }
    }
    ef_close(cx);
    return worst / scale;
}

static void test_rigid_rotation(void **state)
{
    (void)state;
    MeshTube t = sample();
    const TubeLoad none = {{0}, {0}, 0}, load = {{130, -270, 310}, {90, 160, -240}, 0};
    CHECK_ABS(rotation_error(&t, &none, (TubeBasis){0, 0}, 1), 0, 1e-12);
    CHECK_ABS(rotation_error(&t, &none, (TubeBasis){5, 4}, 2), 0, 1e-12);
    CHECK_ABS(rotation_error(&t, &load, (TubeBasis){5, 4}, 3), 0, 1e-12);
    t.shear = true;
    CHECK_ABS(rotation_error(&t, &none, (TubeBasis){3, 2}, 4), 0, 1e-10);
    CHECK_ABS(rotation_error(&t, &load, (TubeBasis){3, 2}, 5), 0, 1e-10);
    t.shear = false;
    t.has_offset = true;
    t.offset[0][1] = 0.07, t.offset[0][2] = -0.03, t.offset[1][0] = -0.05, t.offset[1][2] = 0.04;
    CHECK_ABS(rotation_error(&t, &none, (TubeBasis){4, 4}, 6), 0, 1e-12);
}

/* Largest difference of the condensed hierarchic matrix and the exact one, over the largest entry. */
static double engines_differ(const MeshTube *t, double N, int bubbles)
{
    EfContext *cx = ef_open();
    TubeForces f = {.N = {N}, .end = {-N, 0, 0, 0, 0, 0, N, 0, 0, 0, 0, 0}};
    TubeForm form;
    CHECK_OK(cx, tube_form(cx, t, NULL, &f, (TubeBasis){bubbles, 0}, &form));
    double *L = arena_take(cx, &cx->tmp, (size_t)(form.m * form.m), sizeof *L), S[12][12], X[12][12];
    const int a = tube_condense(&form, 1, L, S), b = exact_matrix(t, N, f.end, X);
    assert_int_equal(a, b);
    double worst = 0, scale = 0;
    for (int i = 0; i < END12; i++)
        for (int j = 0; j < END12; j++) {
            if (i % 6 == 3 && j % 6 == 3) continue; /* the exact member leaves out N Ip/A twist'^2 */
            worst = fmax(worst, fabs(S[i][j] - X[i][j]));
            scale = fmax(scale, fabs(X[i][j]));
        }
    ef_close(cx);
    return worst / scale;
}

static void test_bubbles_reach_the_stability_functions(void **state)
{
    (void)state;
    MeshTube t = sample();
    const double PE = M_PI * M_PI * t.E * t.section.Iz / (t.L * t.L);
    CHECK_ABS(engines_differ(&t, -1.37 * PE, 9), 0, 1e-11);
    CHECK_ABS(engines_differ(&t, -3.6 * PE, 12), 0, 1e-11);
    CHECK_ABS(engines_differ(&t, 2.9 * PE, 10), 0, 1e-11);
    CHECK_ABS(engines_differ(&t, -5.3 * PE, 14), 0, 1e-10); /* past the clamped load: negative pivots counted */
    assert_true(engines_differ(&t, -3.6 * PE, 1) > 1e-5);
    t.shear = true;
    CHECK_ABS(engines_differ(&t, -1.37 * PE, 9), 0, 1e-10);
    t.has_joint_parts = true;
    t.release[0] = 1u << EF_RY | 1u << EF_RZ;
    t.spring[1][EF_RZ] = 4.1e3;
    CHECK_ABS(engines_differ(&t, -0.83 * PE, 9), 0, 1e-10);
    t.shear = false;
    t.has_offset = true;
    t.offset[0][0] = 0.06, t.offset[1][1] = 0.02, t.offset[1][2] = -0.015;
    CHECK_ABS(engines_differ(&t, -0.83 * PE, 9), 0, 1e-10);
}

/* tube_basis promises a bound on the error of the condensed matrix. */
static void test_basis_bounds_its_error(void **state)
{
    (void)state;
    const MeshTube t = sample();
    const double PE = M_PI * M_PI * t.E * t.section.Iz / (t.L * t.L);
    for (int i = 0; i < 12; i++) {
        const double N = -(0.13 + 0.34 * i) * PE, q = fabs(N) * t.L * t.L / (t.E * t.section.Iz);
        const TubeBasis b = tube_basis(q, 0, 1e-9, NULL);
        assert_true(b.torsion == 0);
        assert_true(engines_differ(&t, N, b.bending) < 1e-8);
    }
}

static void test_static_closed_forms(void **state)
{
    (void)state;
    MeshTube t = sample();
    const TubeLoad q = {{0, 0, -210}, {0, 0, -210}, 0};
    double f[END12];
    assert_true(tube_load(&t, &q, f)); /* fixed-end forces: qL/2, qL^2/12 (any handbook) */
    CHECK_REL(f[2], -210 * t.L / 2, 1e-13);
    CHECK_REL(f[4], 210 * t.L * t.L / 12, 1e-13);
    CHECK_REL(f[10], -210 * t.L * t.L / 12, 1e-13);
    /* Cantilever, shear flexible: tip deflection FL^3/3EI + FL/GA. */
    t.shear = true;
    double K[12][12];
    assert_true(tube_stiffness(&t, K));
    const double EI = t.E * t.section.Iz, a = K[7][7], b = K[7][11], d = K[11][11];
    CHECK_REL(d / (a * d - b * b), t.L * t.L * t.L / (3 * EI) + t.L / (t.G * t.section.As_y), 1e-12);
    /* Propped end: release about z leaves 3EI/L (slender). */
    t.shear = false;
    t.has_joint_parts = true;
    t.release[1] = 1u << EF_RZ;
    assert_true(tube_stiffness(&t, K));
    CHECK_REL(K[5][5], 3 * EI / t.L, 1e-12);
    CHECK_ABS(K[11][11], 0, 1e-6);
    assert_true(tube_load(&t, &(TubeLoad){{0, 170, 0}, {0, 170, 0}, 0}, f));
    CHECK_REL(f[5], 170 * t.L * t.L / 8, 1e-12); /* propped: qL^2/8 */
    t.release[0] = t.release[1] = 1u << EF_Y;
    assert_false(tube_stiffness(&t, K));
}

static void test_section_forces_balance(void **state)
{
    (void)state;
    const MeshTube t = sample();
    const TubeLoad q = {{130, -270, 310}, {90, 160, -240}, 0};
    const TubeForces f = random_forces(&t, &q, 9);
    double m[2];
    tube_moments(&f, 1, m);
    CHECK_REL(m[0], f.end[10], 1e-11);
    CHECK_REL(m[1], f.end[11], 1e-11);
    CHECK_REL(tube_axial(&f, 1), f.end[6], 1e-11);
    CHECK_REL(tube_axial(&f, -1), -f.end[0], 1e-11);
}

/* Steady forces in the base: K_base + G must equal the matrix of their sum. */
static void test_steady_forces_add_up(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const MeshTube t = sample();
    const TubeLoad none = {{0}, {0}, 0}, load = {{13, -27, 31}, {9, 16, -24}, 0};
    TubeForces a = random_forces(&t, &load, 21), b = random_forces(&t, &none, 22), sum = a;
    for (int i = 0; i < 3; i++) a.N[i] *= 1e-2, sum.N[i] = a.N[i] + b.N[i];
    for (int i = 0; i < 4; i++) sum.My[i] = a.My[i] + b.My[i], sum.Mz[i] = a.Mz[i] + b.Mz[i];
    sum.Mx = a.Mx + b.Mx;
    TubeForm two, one;
    const TubeBasis basis = {6, 6};
    CHECK_OK(cx, tube_form(cx, &t, &a, &b, basis, &two));
    CHECK_OK(cx, tube_form(cx, &t, NULL, &sum, basis, &one));
    double L[64 * 64], S[12][12], X[12][12];
    assert_int_equal(tube_condense(&two, 1, L, S), tube_condense(&one, 1, L, X));
    for (int i = 0; i < END12; i++)
        for (int j = 0; j < END12; j++) CHECK_ABS(S[i][j], X[i][j], 1e-9 * fabs(X[0][0]));
    ef_close(cx);
}

/* Livesley and Chandler 1956, Horne and Merchant 1965 (layout from memory; values recomputed): s, s c and the sway
 * magnification m at rho = P/PE. Symmetric part 2 g = s - sc, antisymmetric part = s + sc. */
static void test_table_of_stability_functions(void **state)
{
    (void)state;
    const double rho[] = {-2, -1, -0.5, 0, 0.25, 0.5, 0.75, 1, 1.5, 2, 2.5, 3, 3.5, 3.9};
    const double s[] = {6.14681734, 5.17479136, 4.61944204, 4, 3.65979237, 3.29446547, 2.89913786, 2.4674011,
                        1.45696938, 0.142796959, -1.74985542, -5.03197515, -13.7189833, -78.3348586};
    const double c[] = {0.260000612, 0.338064685, 0.402114394, 0.5, 0.570796327, 0.665857906, 0.79953785, 1,
                        1.97306181, 24.6841467, -2.67316402, -1.41567485, -1.08237179, -1.00309209};
    const double pi2 = 9.869604401089358;
    for (int i = 0; i < 14; i++) {
        double f[3];
        assert_true(exact_plane(rho[i] * pi2, 0, f) == 0);
        /* stiffness on half the difference of the rotations is 2 (s - sc), on their mean relative to the chord 2 (s + sc) */
        CHECK_REL((f[1] + f[2]) / 4, s[i], 2e-8);
        CHECK_REL((f[2] - f[1]) / 4, s[i] * c[i], 2e-8);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_table_of_stability_functions),
        cmocka_unit_test(test_rigid_rotation),
        cmocka_unit_test(test_bubbles_reach_the_stability_functions),
        cmocka_unit_test(test_basis_bounds_its_error),
        cmocka_unit_test(test_static_closed_forms),
        cmocka_unit_test(test_section_forces_balance),
        cmocka_unit_test(test_steady_forces_add_up),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
