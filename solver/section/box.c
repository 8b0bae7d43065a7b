/* box.c - square and rectangular tubes with rounded corners: exact area and second moments, Bredt's torsion.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "section/kinds.h"

static const double PI = 3.14159265358979323846;

/* A filled rectangle b x h with corner radius r about its centre, bending about the axis parallel to b: the full
 * rectangle less four corner pieces (square less quarter circle). */
static void rounded(double b, double h, double r, double *A, double *I)
{
    const double piece = (1 - PI / 4) * r * r;
    const double first = r * r * r / 6;                  /* about the circle's centre line: r^3/2 - r^3/3 */
    const double second = r * r * r * r * (1.0 / 3 - PI / 16); /* about the circle's centre line */
    const double at = h / 2 - r;
    *A = b * h - 4 * piece;
    *I = b * h * h * h / 12 - 4 * (second + 2 * at * first + at * at * piece);
}

/* Outer corner radius when none is given: twice the wall, common in cold-formed hollow sections. */
static double corner(double given, double wall) { return isnan(given) ? 2 * wall : given; }

static bool box(double h, double b, double t, double radius, EfSection *s, char *why, size_t size)
{
    const double R = corner(radius, t), r = fmax(R - t, 0), least = fmin(b, h);
    if (!(2 * t < least)) return section_refuse(why, size, "the wall must be less than half of the smaller side");
    if (!(2 * R <= least)) return section_refuse(why, size, "the corner radius must be at most half of the smaller side");
    double Ao, Io, Ai, Ii, Iwide, Iinner;
    rounded(b, h, R, &Ao, &Io);
    rounded(b - 2 * t, h - 2 * t, r, &Ai, &Ii);
    rounded(h, b, R, &Ao, &Iwide);
    rounded(h - 2 * t, b - 2 * t, r, &Ai, &Iinner);
    s->A = Ao - Ai;
    s->Iy = Io - Ii;
    s->Iz = Iwide - Iinner;
    /* Bredt 1896 with the mean line, plus the wall's own part as EN 10219-2 annex B has it (from memory). */
    const double rm = fmax(R - t / 2, 0), hm = h - t, bm = b - t;
    const double line = 2 * (hm + bm) - 2 * rm * (4 - PI), inside = hm * bm - rm * rm * (4 - PI);
    s->J = 4 * inside * inside * t / line + line * t * t * t / 3;
    /* Two walls carry the shear along them. */
    s->As_y = 2 * t * bm * (line / (2 * (hm + bm)));
    s->As_z = 2 * t * hm * (line / (2 * (hm + bm)));
    s->depth_y = b;
    s->depth_z = h;
    s->wall = t;
    return true;
}

/* Boundary of a rounded rectangle, counter-clockwise, by eight pieces of t: four sides, four corners. */
static bool box_outline(double h, double b, double t, double R, double at, int loop, double yz[2])
{
    const double r = loop == 0 ? R : fmax(R - t, 0), y = b / 2 - (loop ? t : 0), z = h / 2 - (loop ? t : 0);
    const int piece = (int)(8 * at), quarter = piece / 2;
    const double s = 8 * at - piece, cy = y - r, cz = z - r;
    const double ends[4][4] = {{y, -cz, y, cz}, {cy, z, -cy, z}, {-y, cz, -y, -cz}, {-cy, -z, cy, -z}};
    if (piece % 2 == 0) {
        yz[0] = ends[quarter][0] + s * (ends[quarter][2] - ends[quarter][0]);
        yz[1] = ends[quarter][1] + s * (ends[quarter][3] - ends[quarter][1]);
        return true;
    }
    const double sy[4] = {1, -1, -1, 1}, sz[4] = {1, 1, -1, -1}, angle = PI / 2 * (quarter + s);
    yz[0] = sy[quarter] * cy + r * cos(angle);
    yz[1] = sz[quarter] * cz + r * sin(angle);
    return true;
}

static bool square_values(const double *p, EfSection *out, char *why, size_t size)
{
    return box(p[0], p[0], p[1], p[2], out, why, size);
}

static bool square_outline(const double *p, int loop, double t, double yz[2])
{
    return loop < 2 && box_outline(p[0], p[0], p[1], corner(p[2], p[1]), t, loop, yz);
}

const SectionKind kind_square = {
    .name = "square", .help = "side x wall [x outer corner radius]",
    .source = "exact with round corners; torsion by Bredt's formula", .trade_form = true, .values = square_values,
    .outline = square_outline,
    .parameter = {{"side", UNIT_LENGTH, "outside", 1e-4, 10, false},
                  {"wall", UNIT_LENGTH, "wall", 1e-5, 1, false},
                  {"corner", UNIT_LENGTH, "outer corner radius, default twice the wall", 0, 1, true}},
};

static bool rectangle_values(const double *p, EfSection *out, char *why, size_t size)
{
    return box(p[0], p[1], p[2], p[3], out, why, size);
}

static bool rectangle_outline(const double *p, int loop, double t, double yz[2])
{
    return loop < 2 && box_outline(p[0], p[1], p[2], corner(p[3], p[2]), t, loop, yz);
}

const SectionKind kind_rectangle = {
    .name = "rectangle", .help = "height (local z) x width (local y) x wall [x outer corner radius]",
    .source = "exact with round corners; torsion by Bredt's formula", .trade_form = true, .values = rectangle_values,
    .outline = rectangle_outline,
    .parameter = {{"height", UNIT_LENGTH, "outside along local z", 1e-4, 10, false},
                  {"width", UNIT_LENGTH, "outside along local y", 1e-4, 10, false},
                  {"wall", UNIT_LENGTH, "wall", 1e-5, 1, false},
                  {"corner", UNIT_LENGTH, "outer corner radius, default twice the wall", 0, 1, true}},
};
