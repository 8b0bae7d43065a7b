/* test_run.c - every allocation of the whole job may fail once: a clean status, nothing lost (the sanitizer build looks).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "core/core.h"
#include "support/solve.h"

static const char text[] =
    "sizes: {s: {round: 20 mm x 1 mm, material: 4130N}}\n"
    "joints: {A: [0, 0, 0], B: [0.8, 0, 0], C: [0, 0.8, 0], D: [0.3, 0.3, 0.7]}\n"
    "tubes: {a: [A, D, s], b: [B, D, s], c: [C, D, s]}\nsupports: {A: pinned, B: pinned, C: pinned}\n"
    "cases: {h: {level: limit, ultimate factor: 1.5, loads: [{at: D, force: [100, 0, -2000]}, {inertia: [0, 0, -1], steady: true}]}}\n"
    "hand sheet: [{tube: a, case: h, c: 2}]\n";

static void every_allocation(void **state)
{
    (void)state;
    long n = 1, step = 1;
    for (;; n += step) {
        EfContext *cx = ef_open();
        EfFrame *f;
        EfResults *r;
        CHECK_OK(cx, ef_read_frame_text(cx, "frame", text, -1, &f));
        cx->fail_after = n;
        const EfStatus st = ef_run(cx, f, NULL, &r);
        const bool reached = cx->fail_after == 0;
        if (st != (reached ? EF_E_MEMORY : EF_OK)) print_error("allocation %ld: status %d %s\n", n, st, ef_message(cx));
        assert_int_equal(st, reached ? EF_E_MEMORY : EF_OK);
        ef_close(cx);
        if (!reached) break;
        if (n > 400) step = 7; /* the same places come again for every factor */
    }
    assert_true(n > 20);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(every_allocation)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
