/* test_dense.c - small symmetric matrices: Jacobi against LAPACK and against closed values, signs against both.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <string.h>

#include "linalg/dense.h"

enum { LARGEST = 24 };

static void random_symmetric(int n, uint64_t stream, double *a)
{
    for (int i = 0; i < n; i++)
        for (int k = 0; k <= i; k++) a[i * n + k] = a[k * n + i] = test_uniform(stream, (uint64_t)(i * n + k), -1, 1);
}

/* A V' = V' diag(values), V V' = 1, ascending. */
static void check_pairs(int n, const double *a, const double *values, const double *V, double tolerance)
{
    for (int p = 0; p < n; p++) {
        assert_true(p == 0 || values[p] >= values[p - 1]);
        for (int i = 0; i < n; i++) {
            double av = 0, dot = 0;
            for (int k = 0; k < n; k++) av += a[i * n + k] * V[p * n + k], dot += V[i * n + k] * V[p * n + k];
            CHECK_ABS(av, values[p] * V[p * n + i], tolerance);
            CHECK_ABS(dot, i == p, tolerance);
        }
    }
}

static void jacobi_against_lapack(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    for (int n = 1; n <= LARGEST; n++) {
        double a[LARGEST * LARGEST], b[LARGEST * LARGEST], V[LARGEST * LARGEST], values[LARGEST], lapack[LARGEST];
        random_symmetric(n, (uint64_t)n, a);
        memcpy(b, a, sizeof b);
        symmetric_eigen(n, b, values, V);
        check_pairs(n, a, values, V, 1e-13 * n);
        memcpy(b, a, sizeof b);
        CHECK_OK(cx, symmetric_eigen_large(cx, n, b, lapack));
        check_pairs(n, a, lapack, b, 1e-13 * n);
        for (int i = 0; i < n; i++) CHECK_ABS(values[i], lapack[i], 1e-13 * n);
    }
    ef_close(cx);
}

/* 2 on the diagonal, -1 beside it: 2 - 2 cos(pi k / (n + 1)) (Strang, Computational Science and Engineering, 2007,
 * section 1.5, from memory). */
static void string_of_beads(void **state)
{
    (void)state;
    enum { N = 12 };
    double a[N * N] = {0}, V[N * N], values[N];
    for (int i = 0; i < N; i++) a[i * N + i] = 2;
    for (int i = 1; i < N; i++) a[i * N + i - 1] = a[(i - 1) * N + i] = -1;
    symmetric_eigen(N, a, values, V);
    for (int k = 1; k <= N; k++) CHECK_REL(values[k - 1], 2 - 2 * cos(acos(-1) * k / (N + 1)), 1e-13);
}

/* Small values keep their relative accuracy in a graded definite matrix: its 2 x 2 case in closed form. */
static void graded(void **state)
{
    (void)state;
    double a[4] = {1, 1e-9, 1e-9, 3e-18}, V[4], values[2];
    symmetric_eigen(2, a, values, V);
    CHECK_REL(values[0], 2e-18, 1e-12); /* det / trace */
    CHECK_REL(values[1], 1, 1e-12);
}

static void signs(void **state)
{
    (void)state;
    for (int n = 1; n <= LARGEST; n++)
        for (uint64_t s = 0; s < 40; s++) {
            double a[LARGEST * LARGEST], b[LARGEST * LARGEST], V[LARGEST * LARGEST], values[LARGEST];
            random_symmetric(n, 1000 + 100 * (uint64_t)n + s, a);
            for (int i = 0; i < n; i++) a[i * n + i] = s % 4 == 0 ? 0 : a[i * n + i] + 0.05 * (double)s; /* 0: pairs of rows */
            memcpy(b, a, sizeof b);
            symmetric_eigen(n, b, values, V);
            int negative = 0;
            for (int i = 0; i < n; i++) negative += values[i] < 0;
            assert_int_equal(symmetric_count(n, a), negative);
        }
}

/* Nothing, or nothing but NaN, is counted without leaving the matrix. */
static void signs_of_bad_matrices(void **state)
{
    (void)state;
    double a[9] = {0}, b[9];
    assert_int_equal(symmetric_count(0, a), 0);
    assert_int_equal(symmetric_count(3, a), 0);
    for (int i = 0; i < 9; i++) b[i] = NAN;
    assert_in_range(symmetric_count(3, b), 0, 3);
    b[0] = NAN;
    assert_in_range(symmetric_count(1, b), 0, 1);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(jacobi_against_lapack), cmocka_unit_test(string_of_beads),       cmocka_unit_test(graded),
        cmocka_unit_test(signs),                 cmocka_unit_test(signs_of_bad_matrices),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
