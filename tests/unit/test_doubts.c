/* test_doubts.c - every doubt is raised where it should be, and a sound frame raises none.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <string.h>

#include "check/doubts.h"
#include "support/build_frame.h"

static EfFrame *sound(EfContext *cx)
{
    EfFrame *f = frame_new(cx);
    const int size = frame_round(cx, f, 0.03, 0.002);
    frame_joint(cx, f, 0, 0, 0), frame_joint(cx, f, 1, 0, 0), frame_joint(cx, f, 0, 1, 0), frame_joint(cx, f, 0.3, 0.3, 0.8);
    for (int i = 0; i < 4; i++)
        for (int k = i + 1; k < 4; k++) frame_tube(cx, f, i, k, size);
    frame_support(cx, f, 0, HOLD_PINNED), frame_support(cx, f, 1, HOLD_PINNED), frame_support(cx, f, 2, HOLD_PINNED);
    return f;
}

static void expect(EfContext *cx, const EfFrame *f, const char *words)
{
    int n, found = 0;
    const char **text;
    CHECK_OK(cx, frame_doubts(cx, f, &n, &text));
    for (int i = 0; i < n; i++) found += words && strstr(text[i], words) != NULL;
    if (words ? !found : n > 0)
        for (int i = 0; i < n; i++) print_error("%s\n", text[i]);
    if (words) assert_true(found > 0);
    else assert_int_equal(n, 0);
    ef_close(cx);
}

static void each_doubt(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f = sound(cx);
    expect(cx, f, NULL);

    cx = ef_open(), f = sound(cx);
    frame_joint(cx, f, 2, 2, 2);
    expect(cx, f, "Joint J4 is loose: no tube");
    cx = ef_open(), f = sound(cx);
    frame_tube(cx, f, 3, frame_joint(cx, f, 0.3, 0.3, 1.6), 0);
    expect(cx, f, "Joint J4 is loose: one tube only");
    cx = ef_open(), f = sound(cx);
    frame_tube(cx, f, 3, 0, 0);
    expect(cx, f, "join the same two joints");
    cx = ef_open(), f = sound(cx);
    frame_tube(cx, f, frame_joint(cx, f, 0.5, -0.5, 0.01), frame_joint(cx, f, 0.5, 0.9, 0.01), 0);
    expect(cx, f, "cross without meeting");
    cx = ef_open(), f = sound(cx);
    frame_tube(cx, f, 0, frame_joint(cx, f, 1, 0.2, 0), 0);
    expect(cx, f, "meet under 11 degrees at joint J0");
    cx = ef_open(), f = sound(cx);
    frame_tube(cx, f, 3, frame_joint(cx, f, 0.3, 0.3, 0.85), 0);
    expect(cx, f, "less than 3 times its size");
    cx = ef_open(), f = sound(cx);
    f->tube[0].size = frame_round(cx, f, 0.01, 0.001);
    expect(cx, f, "has slenderness 312, over 200");
    cx = ef_open(), f = sound(cx);
    f->tube[0].size = frame_round(cx, f, 0.017, 0.001);
    expect(cx, f, "over 150.");
    cx = ef_open(), f = sound(cx);
    frame_round(cx, f, 0.06, 0.001);
    expect(cx, f, "has D/t 60, over 50");
    cx = ef_open(), f = sound(cx);
    f->material[0].E = 205e6;
    expect(cx, f, "has E 0.205 GPa. Is the unit right?");
    cx = ef_open(), f = sound(cx);
    f->material[0].density = 7.85;
    expect(cx, f, "density 7.85 kg/m3");
    cx = ef_open(), f = sound(cx);
    for (int j = 0; j < 4; j++)
        for (int i = 0; i < 3; i++) f->joint[j].x[i] *= 1000;
    expect(cx, f, "Is the unit of length right?");
    cx = ef_open(), f = sound(cx);
    f->nsupport = 0;
    frame_load(cx, f, frame_case(cx, f, "gust"), EF_LOAD_INERTIA)->force[2] = -1;
    expect(cx, f, "Case gust has `inertia`, but the frame is free");
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(each_doubt)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
