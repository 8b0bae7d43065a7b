/* ellipse.c - elliptical tube of constant wall, as a thin wall on its middle line, by quadrature.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "section/kinds.h"

static const double PI = 3.14159265358979323846;

/* Integrals over the middle line (half axes a along z, b along y): the trapezium rule on a periodic function
 * converges faster than any power. A wall element of length ds and thickness t at angle to the axes adds its own
 * t^3/12 part across the line. */
static bool values(const double *p, EfSection *s, char *why, size_t size)
{
    enum { N = 256 };
    const double t = p[2], a = (p[0] - t) / 2, b = (p[1] - t) / 2;
    if (p[1] > p[0]) return section_refuse(why, size, "the long axis comes first");
    if (!(2 * t < p[1])) return section_refuse(why, size, "the wall must be less than half of the short axis");
    double line = 0, zz = 0, yy = 0, shear_y = 0, shear_z = 0;
    for (int i = 0; i < N; i++) {
        const double q = 2 * PI * i / N, z = a * cos(q), y = b * sin(q), dz = -a * sin(q), dy = b * cos(q);
        const double ds = hypot(dz, dy), h = 2 * PI / N;
        line += h * ds;
        zz += h * (z * z * ds + t * t / 12 * dy * dy / ds);
        yy += h * (y * y * ds + t * t / 12 * dz * dz / ds);
        shear_y += h * dy * dy / ds;
        shear_z += h * dz * dz / ds;
    }
    s->A = line * t;
    s->Iy = zz * t;
    s->Iz = yy * t;
    s->J = 4 * (PI * a * b) * (PI * a * b) * t / line + line * t * t * t / 3; /* Bredt 1896 */
    s->As_y = shear_y * t; /* the wall's projection on the shear's direction: A/2 for a circle */
    s->As_z = shear_z * t;
    s->depth_y = p[1];
    s->depth_z = p[0];
    s->wall = t;
    return true;
}

/* The middle line moved outwards or inwards by half of the wall. */
static bool outline(const double *p, int loop, double t, double yz[2])
{
    const double a = (p[0] - p[2]) / 2, b = (p[1] - p[2]) / 2, half = (loop == 0 ? p[2] : -p[2]) / 2;
    const double c = cos(2 * PI * t), s = sin(2 * PI * t), n = hypot(a * c, b * s);
    yz[0] = b * c + half * a * c / n;
    yz[1] = a * s + half * b * s / n;
    return loop < 2;
}

const SectionKind kind_ellipse = {
    .name = "ellipse", .help = "long axis (local z) x short axis x wall",
    .source = "thin wall on the middle line, integrated; torsion by Bredt's formula", .trade_form = true, .values = values,
    .outline = outline,
    .parameter = {{"long axis", UNIT_LENGTH, "outside along local z", 1e-4, 10, false},
                  {"short axis", UNIT_LENGTH, "outside along local y", 1e-4, 10, false},
                  {"wall", UNIT_LENGTH, "wall", 1e-5, 1, false}},
};
