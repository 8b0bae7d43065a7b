/* test_columns.c - published checks on columns. Values were recomputed from the characteristic equations named; tables
 * and equations: Timoshenko and Gere, Theory of Elastic Stability, 2nd ed. 1961 (T&G; from memory unless said).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <string.h>

#include "support/solve.h"

static const double PI = 3.14159265358979323846;

/* A straight column along x with joints at x[0..n-1], 1 N of push at the far end; supports at the ends. */
static EfFrame *column(EfContext *cx, int n, const double *x, unsigned near, unsigned far)
{
    EfFrame *f = frame_new(cx);
    const int size = frame_t1(cx, f);
    for (int i = 0; i < n; i++) frame_joint(cx, f, x[i], 0, 0);
    for (int i = 1; i < n; i++) frame_tube(cx, f, i - 1, i, size);
    frame_support(cx, f, 0, near);
    frame_support(cx, f, n - 1, far);
    const int c = frame_case(cx, f, "push");
    frame_push(cx, f, c, 1, (int[]){n - 1}, (double[3]){-1, 0, 0});
    return f;
}

static const double two_metres[] = {0, 2};

static void expect(EfContext *cx, const EfFrame *f, double want, double tolerance)
{
    const EfResults *r = solve_frame(cx, f, 2);
    CHECK_REL(factor_of(r, 0), want, tolerance);
    CHECK_REL(r->cases[0].witness.factor, want, tolerance);
    ef_close(cx);
}

/* T&G 2.1-2.3; Euler 1744: six end conditions. Here also own c and frame c. */
static void end_conditions(void **state)
{
    (void)state;
    const struct {
        unsigned near, far;
        double value;
    } e[] = {{15, 6, 9.8696044010894}, {63, 0, 2.4674011002723}, {63, 6, 20.190728556427},
             {63, 62, 39.478417604357}, {63, 56, 9.8696044010894}, {15, 56, 2.4674011002723}};
    for (int i = 0; i < 6; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, 2, two_metres, e[i].near, e[i].far);
        const EfResults *r = solve_frame(cx, f, 2);
        CHECK_REL(factor_of(r, 0) * 4 / T1_EI, e[i].value, 1e-6);
        CHECK_REL(factor_of(r, 1), factor_of(r, 0), 1e-9);
        CHECK_REL(r->cases[0].witness.factor * 4 / T1_EI, e[i].value, 1e-6);
        CHECK_REL(r->cases[0].fixity.own_c[0], e[i].value / (PI * PI), 1e-6);
        CHECK_REL(r->cases[0].fixity.frame_c[0], e[i].value / (PI * PI), 1e-6);
        ef_close(cx);
    }
}

/* T&G 2.3, Bazant and Cedolin 1991 1.4 (from memory): rotational springs beta EI/L at the ends. */
static void rotational_springs(void **state)
{
    (void)state;
    const struct {
        unsigned near, far;
        double near_beta, far_beta, value;
    } e[] = {{15, 6, 0.5, 0.5, 11.7718591638}, {15, 6, 1, 1, 13.4923571465},   {15, 6, 2, 2, 16.4634334628},
             {15, 6, 5, 5, 22.6698726496},     {15, 6, 10, 10, 28.1676965233}, {15, 6, 100, 100, 37.9473005864},
             {15, 6, 1, 0, 11.5981660598},     {15, 6, 2, 0, 12.8944272372},   {15, 6, 5, 0, 15.2768321247},
             {15, 6, 10, 0, 17.0762946517},    {63, 6, 0, 1, 22.9687744523},   {63, 6, 0, 5, 29.5747638753},
             {15, 0, 0.5, 0, 0.426763243888},  {15, 0, 1, 0, 0.740173884395},  {15, 0, 2, 0, 1.1596575824},
             {15, 0, 5, 0, 1.72616954528},     {15, 0, 10, 0, 2.04166950895}};
    for (size_t i = 0; i < sizeof e / sizeof *e; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, 2, two_metres, e[i].near, e[i].far);
        for (int d = EF_RY; d <= EF_RZ; d++) {
            frame_spring(f, 0, d, e[i].near_beta * T1_EI / 2);
            frame_spring(f, 1, d, e[i].far_beta * T1_EI / 2);
        }
        expect(cx, f, e[i].value * T1_EI / 4, 1e-6);
    }
}

/* The same springs inside the tube's ends (semi-rigid joints) instead of in the supports. */
static void springs_in_the_joints(void **state)
{
    (void)state;
    const double beta[] = {1, 5, 100}, value[] = {13.4923571465, 22.6698726496, 37.9473005864};
    for (int i = 0; i < 3; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, 2, two_metres, 63, 62);
        for (int e = 0; e < 2; e++) f->tube[0].spring[e][EF_RY] = f->tube[0].spring[e][EF_RZ] = beta[i] * T1_EI / 2;
        expect(cx, f, value[i] * T1_EI / 4, 1e-6);
    }
}

/* T&G 2.5-2.6, Winter 1958 (from memory): lateral springs; threshold 16 pi^2 EI/L^3. */
static void lateral_springs(void **state)
{
    (void)state;
    const double x[] = {0, 1, 2}, part[] = {0.1, 0.25, 0.5, 0.75, 0.9, 1, 1.5};
    const double value[] = {1.32245991255, 1.79897224547, 2.57065164063, 3.30750470659, 3.72901543108, 4, 4};
    for (int i = 0; i < 7; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, 3, x, 15, 6);
        const int s = frame_support(cx, f, 1, 0);
        for (int d = EF_Y; d <= EF_Z; d++) frame_spring(f, s, d, part[i] * 16 * PI * PI * T1_EI / 8);
        expect(cx, f, value[i] * PI * PI * T1_EI / 4, 1e-6);
    }
    const double stiffness[] = {1, 3, 10, 50}, tip[] = {3.27349061527, 4.85604573063, 9.95634265659, 18.9921800321};
    for (int i = 0; i < 4; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, 2, two_metres, 63, 0);
        for (int d = EF_Y; d <= EF_Z; d++) frame_spring(f, 1, d, stiffness[i] * T1_EI / 8);
        expect(cx, f, tip[i] * T1_EI / 4, 1e-6);
    }
}

/* T&G 2.14 table 2-10 (from memory): stepped columns, pin-ended with a stiffer middle part. */
static void stepped_columns(void **state)
{
    (void)state;
    const double ratio[] = {0.01, 0.1, 0.2, 0.4, 0.6, 0.8}, part[] = {0.2, 0.4, 0.6, 0.8};
    const double m[6][4] = {{0.153444, 0.2705236508, 0.5984317371, 2.257060184},
                            {1.467500678, 2.400627381, 4.497778931, 8.587988683},
                            {2.795506197, 4.22179611, 6.694181903, 9.330143686},
                            {5.088439689, 6.677388105, 8.509800079, 9.674208944},
                            {6.979412661, 8.185003601, 9.243775193, 9.783837412},
                            {8.551221314, 9.17672015, 9.631455902, 9.837646207}};
    for (int i = 0; i < 6; i++)
        for (int k = 0; k < 4; k++) {
            EfContext *cx = ef_open();
            const double end = (1 - part[k]) / 2, x[] = {0, end, 1 - end, 1}, EI = 1000;
            EfFrame *f = column(cx, 4, x, 15, 6);
            f->tube[0].size = f->tube[2].size = frame_stiff(cx, f, ratio[i] * EI);
            f->tube[1].size = frame_stiff(cx, f, EI);
            expect(cx, f, m[i][k] * EI, i == 0 && k == 0 ? 4e-6 : 1e-6); /* the first value has six digits */
        }
    const double lower[] = {0.5, 0.25, 0.5}, top[] = {0.5, 0.5, 0.25}, value[] = {2.06723289674, 1.51526108714, 2.40504499794};
    for (int i = 0; i < 3; i++) {
        EfContext *cx = ef_open();
        const double x[] = {0, 1 - top[i], 1}, EI = 1000;
        EfFrame *f = column(cx, 3, x, 63, 0);
        f->tube[0].size = frame_stiff(cx, f, EI);
        f->tube[1].size = frame_stiff(cx, f, (i == 1 ? 0.25 : lower[i == 2 ? 0 : i]) * EI);
        expect(cx, f, value[i] * EI, 1e-6);
    }
    EfContext *cx = ef_open(); /* P at the top and P at the step */
    const double x[] = {0, 1.5, 3};
    EfFrame *f = column(cx, 3, x, 63, 0);
    f->tube[0].size = frame_stiff(cx, f, 200e9 * 1e-7);
    f->tube[1].size = frame_stiff(cx, f, 200e9 * 0.5e-7);
    frame_push(cx, f, 0, 1, (int[]){1}, (double[3]){-1, 0, 0});
    expect(cx, f, 4056.13262607, 1e-6);
}

/* T&G 2.12, Greenhill 1881 (7.8373 confirmed in an encyclopedia article on self-buckling): own weight q per length. */
static void own_weight(void **state)
{
    (void)state;
    const struct {
        unsigned near, far;
        double value;
    } e[] = {{63, 0, 7.8373474389435}, {15, 6, 18.568724841}, {63, 6, 52.5006630752}, {7 + 8, 62, 30.0094211294}, {63, 62, 74.628568719}};
    for (int i = 0; i < 5; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, 2, two_metres, e[i].near, e[i].far);
        ((EfLoad *)(uintptr_t)f->cases[0].load)->force[0] = 0;
        frame_push_along(cx, f, 0, 1, (int[]){0}, (double[3]){-1, 0, 0});
        expect(cx, f, e[i].value * T1_EI / 8, 1e-5);
    }
    /* steady weight in parts of pi^2 EI/(4 l^2), growing top load */
    const double part[] = {0.25, 0.5, 0.75, 1, 2, 3};
    const double top[] = {2.28317518427, 2.09733141571, 1.90984535532, 1.72069259468, 0.946929346474, 0.144577899012};
    for (int i = 0; i < 6; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, 2, two_metres, 63, 0);
        const double q = part[i] * PI * PI * T1_EI / (4 * 4) / 2;
        frame_push_along(cx, f, 0, 1, (int[]){0}, (double[3]){-q, 0, 0})->steady = true;
        expect(cx, f, top[i] * T1_EI / 4, 1e-5);
    }
}

/* T&G 2.4, Livesley and Chandler 1956 (from memory): two-span columns. */
static void two_spans(void **state)
{
    (void)state;
    const double first[] = {1, 0.8, 0.6, 0.4}, value[] = {1, 1.34230110035, 1.57655485736, 1.75428758001};
    for (int i = 0; i < 4; i++) {
        EfContext *cx = ef_open();
        const double x[] = {0, first[i], 2};
        EfFrame *f = column(cx, 3, x, 15, 6);
        frame_support(cx, f, 1, 6);
        expect(cx, f, value[i] * PI * PI * T1_EI / ((2 - first[i]) * (2 - first[i])), 1e-6);
    }
    const double x[] = {0, 1, 2};
    EfContext *cx = ef_open();
    EfFrame *f = column(cx, 3, x, 63, 6);
    frame_support(cx, f, 1, 6);
    expect(cx, f, 12.7796790266 * T1_EI, 1e-6);
    cx = ef_open();
    f = column(cx, 3, x, 15, 6);
    frame_support(cx, f, 1, 6);
    frame_push(cx, f, 0, 1, (int[]){1}, (double[3]){-1, 0, 0});
    expect(cx, f, 6.13012983082 * T1_EI, 1e-6);
}

/* T&G 2.10 (from memory): column on an elastic foundation, as 40 tubes on springs. */
static void elastic_foundation(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    double x[41];
    for (int i = 0; i < 41; i++) x[i] = 2.0 * i / 40;
    EfFrame *f = column(cx, 41, x, 15, 6);
    const double beta = 20 * 16 * T1_EI / 16;
    for (int i = 1; i < 40; i++) {
        const int s = frame_support(cx, f, i, 0);
        for (int d = EF_Y; d <= EF_Z; d++) frame_spring(f, s, d, beta * 2 / 40);
    }
    expect(cx, f, 4.28511374997 * PI * PI * T1_EI / 4, 1e-6);
}

/* Engesser 1889, T&G 2.17 (from memory): P = PE/(1 + PE/GAs); thin-tube shear coefficient of Cowper 1966. */
static void shear_flexible(void **state)
{
    (void)state;
    const double ratio[] = {5, 20, 100}, value[] = {3.31871788074, 6.60846007102, 8.98301623537};
    for (int i = 0; i < 3; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, 2, two_metres, 15, 6);
        f->shear_flexible = true;
        EfSection *s = &f->size[0].section;
        s->As_y = s->As_z = ratio[i] * T1_EI / 4 / f->material[0].G;
        expect(cx, f, value[i] * T1_EI / 4, 1e-6);
    }
    const double L[] = {0.2, 0.5, 1}, P[] = {1749714.93554, 329674.833954, 84564.2477634};
    for (int i = 0; i < 3; i++) {
        EfContext *cx = ef_open();
        const double x[] = {0, L[i]};
        EfFrame *f = column(cx, 2, x, 15, 6);
        f->shear_flexible = true;
        EfSection *s = &f->size[0].section;
        s->As_y = s->As_z = 0.53061224 * s->A;
        expect(cx, f, P[i], 1e-6);
    }
}

/* Derived from the equations of a column with rigid stubs, tan(k b/2) = 1/(k a) (T&G 2.14, limit of a stiff part). */
static void rigid_stubs_and_hinges(void **state)
{
    (void)state;
    const double a[] = {0.05, 0.1, 0.2, 0.4}, value[] = {1.00020493241, 1.00162557889, 1.0127000645, 1.09946965057};
    for (int i = 0; i < 4; i++) {
        EfContext *cx = ef_open();
        EfFrame *f = column(cx, 2, two_metres, 15, 6);
        f->tube[0].offset[0][0] = a[i], f->tube[0].offset[1][0] = -a[i];
        expect(cx, f, value[i] * PI * PI * T1_EI / 4, 1e-6);
    }
    EfContext *cx = ef_open();
    EfFrame *f = column(cx, 2, two_metres, 15, 6);
    f->tube[0].offset[0][0] = 0.3;
    expect(cx, f, 1.0203057734 * PI * PI * T1_EI / 4, 1e-6);
    const double at[] = {0.5, 0.3, 0.1}, hinge[] = {9.86960440109, 20.3045398017, 24.9012755935};
    for (int i = 0; i < 3; i++) {
        cx = ef_open();
        const double x[] = {0, 2 * at[i], 2};
        f = column(cx, 3, x, 63, 62);
        f->tube[1].release[0] = 1u << EF_RY | 1u << EF_RZ;
        expect(cx, f, hinge[i] * T1_EI / 4, 1e-6);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(end_conditions),  cmocka_unit_test(rotational_springs), cmocka_unit_test(springs_in_the_joints),
        cmocka_unit_test(lateral_springs), cmocka_unit_test(stepped_columns),    cmocka_unit_test(own_weight),
        cmocka_unit_test(two_spans),       cmocka_unit_test(elastic_foundation), cmocka_unit_test(shear_flexible),
        cmocka_unit_test(rigid_stubs_and_hinges),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
