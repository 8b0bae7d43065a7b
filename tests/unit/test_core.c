/* test_core.c - arenas, failing allocations, messages.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <string.h>

#include "core/core.h"
#include "support/check.h"

static EfStatus take_three(EfContext *cx)
{
    double *a;
    char *b;
    ALLOC(cx, keep, a, 1000);
    ALLOC(cx, tmp, b, 0);
    ALLOC(cx, keep, a, (size_t)1 << 20);
    assert_true(a[(1 << 20) - 1] == 0 && b != NULL);
    return EF_OK;
}

static void test_every_allocation_can_fail(void **state)
{
    (void)state;
    int tries = 0;
    for (EfStatus s = EF_E_MEMORY; s != EF_OK; tries++) {
        EfContext *cx = ef_open();
        cx->fail_after = tries + 1;
        s = take_three(cx);
        assert_true(s == EF_OK || s == EF_E_MEMORY);
        if (s != EF_OK) assert_string_equal(ef_message(cx), "out of memory");
        ef_close(cx);
    }
    assert_true(tries >= 3);
}

static void test_rewind_gives_back_zeroed_memory(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    ArenaMark m = arena_mark(&cx->tmp);
    for (int round = 0; round < 3; round++) {
        int *p = arena_take(cx, &cx->tmp, 100, sizeof *p);
        for (int i = 0; i < 100; i++) assert_int_equal(p[i], 0);
        memset(p, 7, 100 * sizeof *p);
        arena_rewind(&cx->tmp, m);
    }
    assert_null(arena_take(cx, &cx->tmp, (size_t)-1 / 4, 8));
    assert_int_equal(cx->status, EF_E_MEMORY);
    ef_close(cx);
}

static void test_first_failure_is_kept(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    assert_int_equal(fail(cx, EF_E_INPUT, "joint %s is loose", "B3L"), EF_E_INPUT);
    assert_int_equal(fail(cx, EF_E_IO, "later"), EF_E_INPUT);
    assert_string_equal(ef_message(cx), "joint B3L is loose");
    assert_int_equal(ef_exit_status(EF_E_TALLY), 3);
    ef_close(cx);
}

static void test_the_nearest_word_is_offered(void **state)
{
    (void)state;
    static const char *const known[] = {"fin gust", "pull-up", "pull-down", "hard landing", "pull-op"};
    assert_string_equal(nearest_word("pullup", 5, known), "pull-up");
    assert_string_equal(nearest_word("HARD LADNING", 5, known), "hard landing");
    assert_string_equal(nearest_word("pull-dwon", 5, known), "pull-down");
    assert_string_equal(nearest_word("fingusts", 5, known), "fin gust");
    assert_null(nearest_word("tail wheel", 5, known));
    assert_null(nearest_word("fin gust", 0, known));
    char word[200];
    memset(word, 'q', sizeof word - 1);
    word[sizeof word - 1] = '\0';
    assert_null(nearest_word(word, 5, known));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_every_allocation_can_fail),
        cmocka_unit_test(test_rewind_gives_back_zeroed_memory),
        cmocka_unit_test(test_first_failure_is_kept),
        cmocka_unit_test(test_the_nearest_word_is_offered),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
