/* test_factor.c - the block factor against LAPACK's eigenvalues and dense inverses, and CHOLMOD's own factor.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <cholmod.h>
#include <stdlib.h>
#include <string.h>

#include "linalg/dense.h"
#include "linalg/factor.h"

/* A random graph of joints: a chain (unless `apart`) and some more pairs. */
static void random_pattern(EfContext *cx, int nj, int more, bool apart, uint64_t stream, BlockPattern *p)
{
    int(*pair)[2] = arena_take(cx, &cx->tmp, (size_t)(nj + more), sizeof *pair);
    int n = 0;
    for (int j = 1; j < nj && !apart; j++) pair[n][0] = j, pair[n++][1] = j - 1;
    for (int i = 0; i < more; i++) {
        pair[n][0] = (int)test_uniform(stream, (uint64_t)(2 * i), 0, nj);
        pair[n++][1] = (int)test_uniform(stream, (uint64_t)(2 * i + 1), 0, nj);
    }
    CHECK_OK(cx, pattern_from_pairs(cx, nj, n, (const int(*)[2])pair, p));
}

static double *random_values(EfContext *cx, const BlockPattern *p, uint64_t stream, double diagonal)
{
    double *v = arena_take(cx, &cx->tmp, (size_t)(BLOCK2 * p->start[p->nj]), sizeof *v);
    for (int i = 0; i < BLOCK2 * p->start[p->nj]; i++) v[i] = test_uniform(stream, (uint64_t)i, -1, 1);
    for (int j = 0; j < p->nj; j++) {
        double *d = v + BLOCK2 * p->start[j];
        for (int r = 0; r < BLOCK; r++)
            for (int c = 0; c <= r; c++) d[BLOCK * c + r] = d[BLOCK * r + c] += r == c ? diagonal : 0;
    }
    return v;
}

static double *dense(EfContext *cx, const BlockPattern *p, const double *v)
{
    const int n = BLOCK * p->nj;
    double *A = arena_take(cx, &cx->tmp, (size_t)(n * n), sizeof *A);
    for (int j = 0; j < p->nj; j++)
        for (int b = p->start[j]; b < p->start[j + 1]; b++)
            for (int r = 0; r < BLOCK; r++)
                for (int c = 0; c < BLOCK; c++) {
                    const int i = BLOCK * p->row[b] + r, k = BLOCK * j + c;
                    A[i * n + k] = A[k * n + i] = v[BLOCK2 * b + BLOCK * r + c];
                }
    return A;
}

/* 1, 3 and 19 columns give what RHS columns gave: x [6 nj][RHS] for b. */
static void any_number_of_columns(EfContext *cx, const BlockPattern *p, const Factor *f, const double *x, const double *b)
{
    const int rows = BLOCK * p->nj;
    double *y = arena_take(cx, &cx->tmp, (size_t)(rows * 19), sizeof *y), largest = 0;
    for (int i = 0; i < rows * RHS; i++) largest = fmax(largest, fabs(x[i]));
    const double tolerance = 1e-12 * fmax(1, factor_growth(f) * factor_growth(f)) * largest;
    for (int n = 1; n <= 19; n = n == 1 ? 3 : n + 16) {
        for (int i = 0; i < rows; i++)
            for (int c = 0; c < n; c++) y[i * n + c] = b[i * RHS + c % RHS];
        CHECK_OK(cx, factor_solve(cx, f, y, n));
        for (int i = 0; i < rows; i++)
            for (int c = 0; c < n; c++) CHECK_ABS(y[i * n + c], x[i * RHS + c % RHS], tolerance);
    }
}

/* Count, solve and selected inverse of one random matrix against dense ones. */
static void compare(int nj, int more, bool apart, double diagonal, uint64_t stream)
{
    EfContext *cx = ef_open();
    BlockPattern p;
    Analysis *a = NULL;
    Factor *f = NULL;
    random_pattern(cx, nj, more, apart, stream, &p);
    const double *v = random_values(cx, &p, stream + 1, diagonal);
    const int n = BLOCK * nj;
    double *w = arena_take(cx, &cx->tmp, (size_t)n, sizeof *w), *V = dense(cx, &p, v);
    CHECK_OK(cx, symmetric_eigen_large(cx, n, V, w));
    int negative = 0;
    for (int i = 0; i < n; i++) negative += w[i] < 0;
    CHECK_OK(cx, factor_analyse(cx, &p, &a));
    CHECK_OK(cx, factor_new(cx, a, &f));
    CHECK_OK(cx, factor_numeric(cx, f, v));
    assert_int_equal(factor_negative(f), negative);

    double *x = arena_take(cx, &cx->tmp, (size_t)(n * RHS), sizeof *x), *y = arena_take(cx, &cx->tmp, (size_t)(n * RHS), sizeof *y);
    double *b = arena_take(cx, &cx->tmp, (size_t)(n * RHS), sizeof *b);
    for (int i = 0; i < n * RHS; i++) x[i] = b[i] = test_uniform(stream + 2, (uint64_t)i, -1, 1);
    CHECK_OK(cx, factor_solve(cx, f, x, RHS));
    block_multiply(&p, v, x, y, RHS);
    const double tolerance = 1e-12 * fmax(1, factor_growth(f) * factor_growth(f));
    for (int i = 0; i < n * RHS; i++) CHECK_ABS(y[i], b[i], tolerance);

    double *Z = arena_take(cx, &cx->tmp, (size_t)(BLOCK2 * p.start[nj]), sizeof *Z);
    CHECK_OK(cx, factor_selected_inverse(cx, f, Z));
    any_number_of_columns(cx, &p, f, x, b);
    double largest = 0;
    for (int i = 0; i < n; i++) largest = fmax(largest, 1 / fabs(w[i]));
    for (int j = 0; j < nj; j++)
        for (int k = p.start[j]; k < p.start[j + 1]; k++)
            for (int r = 0; r < BLOCK; r++)
                for (int c = 0; c < BLOCK; c++) {
                    double want = 0;
                    for (int e = 0; e < n; e++) want += V[e * n + BLOCK * p.row[k] + r] * V[e * n + BLOCK * j + c] / w[e];
                    CHECK_ABS(Z[BLOCK2 * k + BLOCK * r + c], want, tolerance * largest);
                }
    factor_free(f);
    analysis_free(a);
    ef_close(cx);
}

static void definite(void **state)
{
    (void)state;
    for (uint64_t s = 0; s < 6; s++) compare(12 + 5 * (int)s, 20, false, 30, 100 * s);
    compare(44, 1500, false, 60, 600); /* one front of several wide panels */
}

static void indefinite(void **state)
{
    (void)state;
    for (uint64_t s = 0; s < 6; s++) compare(8 + 6 * (int)s, 25, false, 0.3, 1000 + 100 * s);
    compare(44, 1500, false, 14, 1600);
}

static void single_joint_and_loose_parts(void **state)
{
    (void)state;
    compare(1, 0, false, 5, 7);
    compare(30, 12, true, 2, 8);
}

static void bad_pivots(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    BlockPattern p;
    Analysis *a = NULL;
    Factor *f = NULL;
    random_pattern(cx, 5, 3, false, 3, &p);
    double *v = random_values(cx, &p, 4, 10);
    CHECK_OK(cx, factor_analyse(cx, &p, &a));
    CHECK_OK(cx, factor_new(cx, a, &f));
    v[BLOCK2 * p.start[3] + 7] = NAN;
    assert_int_equal(factor_numeric(cx, f, v), EF_E_TALLY);
    memset(v, 0, (size_t)(BLOCK2 * p.start[5]) * sizeof *v);
    assert_int_equal(factor_numeric(cx, f, v), EF_E_TALLY);
    assert_string_equal(ef_message(cx), "");
    factor_free(f);
    analysis_free(a);
    ef_close(cx);
}

/* The smallest pivot names the soft direction. */
static void smallest_pivot(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    BlockPattern p;
    Analysis *a = NULL;
    Factor *f = NULL;
    CHECK_OK(cx, pattern_from_pairs(cx, 3, 1, (const int[][2]){{0, 2}}, &p));
    double *v = arena_take(cx, &cx->tmp, (size_t)(BLOCK2 * p.start[3]), sizeof *v);
    for (int j = 0; j < 3; j++)
        for (int i = 0; i < BLOCK; i++) v[BLOCK2 * p.start[j] + 7 * i] = 1;
    v[BLOCK2 * pattern_block(&p, 2, 0) + 7 * 4] = 1 - 1e-9; /* joints 0 and 2, direction ry */
    CHECK_OK(cx, factor_analyse(cx, &p, &a));
    CHECK_OK(cx, factor_new(cx, a, &f));
    CHECK_OK(cx, factor_numeric(cx, f, v));
    int row;
    CHECK_REL(factor_smallest_pivot(f, &row), 2e-9, 1e-6);
    assert_true(row == 4 || row == 16);
    factor_free(f);
    analysis_free(a);
    ef_close(cx);
}

/* The pivot is measured against the matrix's own diagonal, however much its neighbours took from it before: 200 arms
 * of stiffness 1 on a centre that only 1e-6 holds leave it that much of its 200. */
static void pivot_after_many_neighbours(void **state)
{
    (void)state;
    enum { ARMS = 200 };
    EfContext *cx = ef_open();
    BlockPattern p;
    Analysis *a = NULL;
    Factor *f = NULL;
    int pair[ARMS][2], row;
    for (int i = 0; i < ARMS; i++) pair[i][0] = 0, pair[i][1] = i + 1;
    CHECK_OK(cx, pattern_from_pairs(cx, ARMS + 1, ARMS, (const int(*)[2])pair, &p));
    double *v = arena_take(cx, &cx->tmp, (size_t)(BLOCK2 * p.start[p.nj]), sizeof *v);
    for (int k = 0; k < BLOCK; k++) {
        v[7 * k] = ARMS + (k == 2 ? 1e-6 : 1);
        for (int i = 1; i <= ARMS; i++) v[BLOCK2 * pattern_block(&p, i, 0) + 7 * k] = -1, v[BLOCK2 * p.start[i] + 7 * k] = 1;
    }
    CHECK_OK(cx, factor_analyse(cx, &p, &a));
    CHECK_OK(cx, factor_new(cx, a, &f));
    CHECK_OK(cx, factor_numeric(cx, f, v));
    CHECK_REL(factor_smallest_pivot(f, &row), 1e-6 / ARMS, 1e-6);
    assert_int_equal(row, 2);
    factor_free(f);
    analysis_free(a);
    ef_close(cx);
}

/* A grid large enough for nested dissection: log determinant and solve against CHOLMOD's LL'. */
static void grid_against_cholmod(void **state)
{
    (void)state;
    enum { W = 24, NJ = W * W };
    EfContext *cx = ef_open();
    BlockPattern p;
    Analysis *a = NULL;
    Factor *f = NULL;
    int(*pair)[2] = arena_take(cx, &cx->tmp, 2 * NJ, sizeof *pair), np = 0;
    for (int i = 0; i < NJ; i++) {
        if (i % W) pair[np][0] = i, pair[np++][1] = i - 1;
        if (i >= W) pair[np][0] = i, pair[np++][1] = i - W;
    }
    CHECK_OK(cx, pattern_from_pairs(cx, NJ, np, (const int(*)[2])pair, &p));
    const double *v = random_values(cx, &p, 11, 14);
    CHECK_OK(cx, factor_analyse(cx, &p, &a));
    CHECK_OK(cx, factor_new(cx, a, &f));
    CHECK_OK(cx, factor_numeric(cx, f, v));
    assert_int_equal(factor_negative(f), 0);

    cholmod_common c;
    cholmod_start(&c);
    const size_t n = BLOCK * NJ;
    cholmod_triplet *T = cholmod_allocate_triplet(n, n, (size_t)(BLOCK2 * p.start[NJ]), -1, CHOLMOD_REAL, &c);
    int *ti = T->i, *tj = T->j;
    double *tx = T->x;
    for (int j = 0; j < NJ; j++)
        for (int b = p.start[j]; b < p.start[j + 1]; b++)
            for (int r = 0; r < BLOCK; r++)
                for (int k = 0; k < BLOCK; k++) {
                    if (BLOCK * p.row[b] + r < BLOCK * j + k) continue;
                    ti[T->nnz] = BLOCK * p.row[b] + r, tj[T->nnz] = BLOCK * j + k;
                    tx[T->nnz++] = v[BLOCK2 * b + BLOCK * r + k];
                }
    cholmod_sparse *A = cholmod_triplet_to_sparse(T, 0, &c);
    cholmod_factor *L = cholmod_analyze(A, &c);
    assert_true(cholmod_factorize(A, L, &c));
    cholmod_dense *B = cholmod_ones(n, 1, CHOLMOD_REAL, &c), *X = cholmod_solve(CHOLMOD_A, L, B, &c);
    double *x = arena_take(cx, &cx->tmp, n, sizeof *x);
    for (size_t i = 0; i < n; i++) x[i] = 1;
    CHECK_OK(cx, factor_solve(cx, f, x, 1));
    for (size_t i = 0; i < n; i++) CHECK_ABS(x[i], ((double *)X->x)[i], 1e-12);
    cholmod_free_dense(&B, &c), cholmod_free_dense(&X, &c), cholmod_free_factor(&L, &c);
    cholmod_free_sparse(&A, &c), cholmod_free_triplet(&T, &c), cholmod_finish(&c);
    factor_free(f);
    analysis_free(a);
    ef_close(cx);
}

/* Every allocation may fail once: a clean status, nothing lost (the sanitizer build looks). */
static void allocation_failures(void **state)
{
    (void)state;
    for (long n = 1;; n++) {
        EfContext *cx = ef_open();
        BlockPattern p;
        random_pattern(cx, 20, 30, false, 5, &p);
        const double *v = random_values(cx, &p, 6, 20);
        double *Z = arena_take(cx, &cx->tmp, (size_t)(BLOCK2 * p.start[20]), sizeof *Z);
        cx->fail_after = n;
        Analysis *a = NULL;
        Factor *f = NULL;
        EfStatus st = factor_analyse(cx, &p, &a);
        if (st == EF_OK) st = factor_new(cx, a, &f);
        if (st == EF_OK) st = factor_numeric(cx, f, v);
        if (st == EF_OK) st = factor_selected_inverse(cx, f, Z);
        factor_free(f);
        analysis_free(a);
        const bool reached = cx->fail_after == 0;
        assert_int_equal(st, reached ? EF_E_MEMORY : EF_OK);
        ef_close(cx);
        if (!reached) return;
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(definite),       cmocka_unit_test(indefinite),
        cmocka_unit_test(bad_pivots),     cmocka_unit_test(single_joint_and_loose_parts),
        cmocka_unit_test(smallest_pivot), cmocka_unit_test(grid_against_cholmod),
        cmocka_unit_test(allocation_failures), cmocka_unit_test(pivot_after_many_neighbours),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
