/* round.c - round tube and rod: exact values of the ring.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "section/kinds.h"

static const double PI = 3.14159265358979323846;

/* Ring between diameters d and D. Shear area: the thin ring's A/2 and the solid circle's 9A/10 are the ends of
 * Cowper's (1966) formula; here without its Poisson term, 6 (1 + m^2)^2 / (7 (1 + m^2)^2 + 20 m^2) A with
 * m = d/D (nu = 0; from memory), which is 0.857 A solid and 0.5 A thin. */
static void ring(double D, double d, EfSection *s)
{
    const double m = d / D, a = (1 + m * m) * (1 + m * m);
    s->A = PI / 4 * (D - d) * (D + d);
    s->Iy = s->Iz = PI / 64 * (D - d) * (D + d) * (D * D + d * d);
    s->J = 2 * s->Iy;
    s->As_y = s->As_z = s->A * 6 * a / (7 * a + 20 * m * m);
    s->depth_y = s->depth_z = D;
    s->round = true;
}

static bool circle(double radius, double t, double yz[2])
{
    yz[0] = radius * cos(2 * PI * t);
    yz[1] = radius * sin(2 * PI * t);
    return true;
}

static bool tube_values(const double *p, EfSection *out, char *why, size_t size)
{
    if (!(2 * p[1] < p[0])) return section_refuse(why, size, "the wall must be less than half of the diameter");
    ring(p[0], p[0] - 2 * p[1], out);
    out->wall = p[1];
    return true;
}

static bool tube_outline(const double *p, int loop, double t, double yz[2])
{
    return loop < 2 && circle(loop == 0 ? p[0] / 2 : p[0] / 2 - p[1], t, yz);
}

const SectionKind kind_round = {
    .name = "round", .help = "outside diameter x wall", .source = "exact ring; shear area after Cowper 1966, nu = 0",
    .trade_form = true, .values = tube_values, .outline = tube_outline,
    .parameter = {{"diameter", UNIT_LENGTH, "outside diameter", 1e-4, 10, false}, {"wall", UNIT_LENGTH, "wall", 1e-5, 1, false}},
};

static bool rod_values(const double *p, EfSection *out, char *why, size_t size)
{
    (void)why, (void)size;
    ring(p[0], 0, out);
    return true;
}

static bool rod_outline(const double *p, int loop, double t, double yz[2])
{
    return loop == 0 && circle(p[0] / 2, t, yz);
}

const SectionKind kind_rod = {
    .name = "rod", .help = "diameter of a solid round bar", .source = "exact circle; shear area after Cowper 1966, nu = 0",
    .trade_form = true, .values = rod_values, .outline = rod_outline,
    .parameter = {{"diameter", UNIT_LENGTH, "diameter", 1e-4, 10, false}},
};
