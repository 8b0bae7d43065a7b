/* solve.c - the whole job for verification tests.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/solve.h"

const double T1_EI = 8643.14971;

int frame_t1(EfContext *cx, EfFrame *f)
{
    f->material[0].E = f->material[0].E_compression = 200e9;
    f->material[0].nu = 0.3;
    f->material[0].G = 200e9 / 2.6;
    return frame_round(cx, f, 0.04, 0.002);
}

int frame_stiff(EfContext *cx, EfFrame *f, double EI)
{
    f->material[0].E = f->material[0].E_compression = 200e9;
    f->material[0].G = 200e9 / 2.6;
    return frame_given(cx, f, 0.24, EI / 200e9, EI / 200e9, 2 * EI / 200e9);
}

void frame_hold_all(EfContext *cx, EfFrame *f, unsigned mask)
{
    for (int j = 0; j < f->njoint; j++) {
        int s = 0;
        while (s < f->nsupport && f->support[s].joint != j) s++;
        if (s < f->nsupport) f->support[s].held |= mask;
        else frame_support(cx, f, j, mask);
    }
}

void frame_spring(EfFrame *f, int support, int direction, double stiffness)
{
    f->support[support].spring[direction] = stiffness;
}

const EfResults *solve_frame(EfContext *cx, const EfFrame *f, int count)
{
    EfResults *r = NULL;
    const EfOptions o = {.count = count};
    CHECK_OK(cx, ef_run(cx, f, &o, &r));
    for (int i = 0; i < r->ncase; i++) {
        const EfCritical *c = &r->cases[i].critical;
        if (c->counted != c->found) print_error("%s: %d counted, %d found\n", r->cases[i].name, c->counted, c->found);
        assert_int_equal(c->counted, c->found);
        assert_int_equal(r->cases[i].witness.counted, 0);
        assert_true(r->cases[i].balance.residual < 1e-7);
    }
    return r;
}

double factor_of(const EfResults *r, int k)
{
    assert_true(r->cases[0].critical.nmode > k);
    return r->cases[0].critical.factor[k];
}
