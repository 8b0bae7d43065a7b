/* given.c - a section by its values.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "section/kinds.h"

static double or_else(double given, double otherwise) { return isnan(given) ? otherwise : given; }

static bool values(const double *p, EfSection *s, char *why, size_t size)
{
    (void)why, (void)size;
    s->A = p[0], s->Iy = p[1], s->Iz = p[2], s->J = p[3];
    s->As_y = or_else(p[4], s->A), s->As_z = or_else(p[5], s->A);
    s->depth_y = p[6], s->depth_z = p[7];
    return true;
}

const SectionKind kind_given = {
    .name = "given", .help = "area, Iy, Iz, J as values", .source = "the frame file", .trade_form = false, .values = values,
    .parameter = {{"area", UNIT_AREA, "area", 1e-9, 10, false},
                  {"Iy", UNIT_INERTIA, "second moment, bending in the x-z plane", 1e-18, 10, false},
                  {"Iz", UNIT_INERTIA, "second moment, bending in the x-y plane", 1e-18, 10, false},
                  {"J", UNIT_INERTIA, "torsion constant", 1e-18, 10, false},
                  {"shear area y", UNIT_AREA, "for shear along local y, default the area", 1e-9, 10, true},
                  {"shear area z", UNIT_AREA, "for shear along local z, default the area", 1e-9, 10, true},
                  {"depth y", UNIT_LENGTH, "outside along local y, for stresses", 1e-5, 10, true},
                  {"depth z", UNIT_LENGTH, "outside along local z, for stresses", 1e-5, 10, true}},
};
