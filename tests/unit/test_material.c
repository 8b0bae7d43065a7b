/* test_material.c - the built-in materials are complete, sane and named once.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <string.h>

#include "material/material.h"

static void every_row_is_sane(void **state)
{
    (void)state;
    for (size_t i = 0; material_builtin(i); i++) {
        const EfMaterial *m = material_builtin(i);
        assert_true(m->builtin);
        assert_true(strlen(m->source) > 20);
        assert_true(strcmp(m->status, "source") == 0 || strcmp(m->status, "memory") == 0);
        /* Isotropic: G = E/(2 (1 + nu)); tables round it. */
        CHECK_REL(m->G, m->E / (2 * (1 + m->nu)), 0.03);
        assert_true(m->ultimate > m->yield && m->density > 2000 && m->density < 9000);
        assert_true(m->expansion > 5e-6 && m->expansion < 30e-6);
        assert_true(!m->weldable || isnan(m->welded_yield) || m->welded_yield <= m->yield);
        assert_true(m->weldable || isnan(m->welded_yield));
        assert_ptr_equal(material_named(m->name), m);
    }
    assert_null(material_named("unobtainium"));
}

/* 286e6 psi in the long-column formula of the aircraft steels is pi^2 E (Bruhn, column formulas for round steel tubes). */
static void aircraft_steel_modulus(void **state)
{
    (void)state;
    CHECK_REL(9.869604401 * material_named("4130N")->E / 6894.757, 286e6, 1e-3);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(every_row_is_sane), cmocka_unit_test(aircraft_steel_modulus)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
