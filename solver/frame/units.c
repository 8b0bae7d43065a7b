/* units.c - the units a frame file may use, and no others.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "frame/units.h"

#include <ctype.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* The international inch and pound are exact (1959); standard gravity 9.80665 m/s2 (CGPM 1901). */
#define INCH 0.0254
#define FOOT 0.3048
#define POUND 0.45359237
#define POUND_FORCE (POUND * 9.80665)

typedef struct Unit {
    const char *name;
    Dimension dimension;
    double factor;
} Unit;

static const Unit units[] = {
    {"m", DIM_LENGTH, 1}, {"mm", DIM_LENGTH, 1e-3}, {"cm", DIM_LENGTH, 1e-2}, {"in", DIM_LENGTH, INCH}, {"ft", DIM_LENGTH, FOOT},
    {"N", DIM_FORCE, 1}, {"kN", DIM_FORCE, 1e3}, {"MN", DIM_FORCE, 1e6}, {"lbf", DIM_FORCE, POUND_FORCE},
    {"kip", DIM_FORCE, 1e3 * POUND_FORCE},
    {"kg", DIM_MASS, 1}, {"g", DIM_MASS, 1e-3}, {"t", DIM_MASS, 1e3}, {"lb", DIM_MASS, POUND},
    {"Pa", DIM_STRESS, 1}, {"kPa", DIM_STRESS, 1e3}, {"MPa", DIM_STRESS, 1e6}, {"GPa", DIM_STRESS, 1e9},
    {"N/mm2", DIM_STRESS, 1e6}, {"psi", DIM_STRESS, POUND_FORCE / (INCH * INCH)},
    {"ksi", DIM_STRESS, 1e3 * POUND_FORCE / (INCH * INCH)}, {"Msi", DIM_STRESS, 1e6 * POUND_FORCE / (INCH * INCH)},
    {"N m", DIM_MOMENT, 1}, {"kN m", DIM_MOMENT, 1e3}, {"N mm", DIM_MOMENT, 1e-3}, {"lbf in", DIM_MOMENT, POUND_FORCE * INCH},
    {"lbf ft", DIM_MOMENT, POUND_FORCE * FOOT}, {"kip in", DIM_MOMENT, 1e3 * POUND_FORCE * INCH},
    {"N/m", DIM_FORCE_PER_LENGTH, 1}, {"kN/m", DIM_FORCE_PER_LENGTH, 1e3}, {"N/mm", DIM_FORCE_PER_LENGTH, 1e3},
    {"lbf/in", DIM_FORCE_PER_LENGTH, POUND_FORCE / INCH}, {"lbf/ft", DIM_FORCE_PER_LENGTH, POUND_FORCE / FOOT},
    {"kg/m3", DIM_DENSITY, 1}, {"g/cm3", DIM_DENSITY, 1e3}, {"lb/in3", DIM_DENSITY, POUND / (INCH * INCH * INCH)},
    {"kg/m", DIM_MASS_PER_LENGTH, 1}, {"g/m", DIM_MASS_PER_LENGTH, 1e-3}, {"lb/ft", DIM_MASS_PER_LENGTH, POUND / FOOT},
    {"lb/in", DIM_MASS_PER_LENGTH, POUND / INCH},
    {"m2", DIM_AREA, 1}, {"mm2", DIM_AREA, 1e-6}, {"cm2", DIM_AREA, 1e-4}, {"in2", DIM_AREA, INCH * INCH},
    {"m4", DIM_INERTIA, 1}, {"mm4", DIM_INERTIA, 1e-12}, {"cm4", DIM_INERTIA, 1e-8},
    {"in4", DIM_INERTIA, INCH * INCH * INCH * INCH},
    {"K", DIM_KELVIN, 1}, {"1/K", DIM_EXPANSION, 1}, {"ppm/K", DIM_EXPANSION, 1e-6},
    {"N/m", DIM_STIFFNESS, 1}, {"kN/m", DIM_STIFFNESS, 1e3}, {"N/mm", DIM_STIFFNESS, 1e3}, {"kN/mm", DIM_STIFFNESS, 1e6},
    {"lbf/in", DIM_STIFFNESS, POUND_FORCE / INCH},
    {"N m/rad", DIM_ROTATION_STIFFNESS, 1}, {"kN m/rad", DIM_ROTATION_STIFFNESS, 1e3},
    {"lbf in/rad", DIM_ROTATION_STIFFNESS, POUND_FORCE * INCH}, {"lbf ft/rad", DIM_ROTATION_STIFFNESS, POUND_FORCE * FOOT},
    {"rad", DIM_ANGLE, 1}, {"deg", DIM_ANGLE, 3.14159265358979323846 / 180},
};
enum { NUNITS = sizeof units / sizeof units[0] };

static const struct {
    const char *name, *units;
} dimensions[DIMENSIONS] = {
    {"a number", "none"}, {"a length", "m, mm, cm, in, ft"}, {"a force", "N, kN, MN, lbf, kip"}, {"a mass", "kg, g, t, lb"},
    {"a stress", "Pa, kPa, MPa, GPa, N/mm2, psi, ksi, Msi"}, {"a moment", "N m, kN m, N mm, lbf in, lbf ft, kip in"},
    {"a force per length", "N/m, kN/m, N/mm, lbf/in, lbf/ft"}, {"a density", "kg/m3, g/cm3, lb/in3"},
    {"a mass per length", "kg/m, g/m, lb/ft, lb/in"}, {"an area", "m2, mm2, cm2, in2"},
    {"a second moment of area", "m4, mm4, cm4, in4"}, {"a temperature difference", "K"}, {"an expansion coefficient", "1/K, ppm/K"},
    {"a stiffness", "N/m, kN/m, N/mm, kN/mm, lbf/in"}, {"a rotational stiffness", "N m/rad, kN m/rad, lbf in/rad, lbf ft/rad"},
    {"an angle", "rad, deg"},
};

const char *dimension_name(Dimension d) { return dimensions[d].name; }
const char *dimension_units(Dimension d) { return dimensions[d].units; }

Units units_default(void)
{
    Units u;
    for (int d = 0; d < DIMENSIONS; d++) u.bare[d] = 1;
    return u;
}

void units_set(Units *u, Dimension d, double factor)
{
    u->bare[d] = factor;
    if (d != DIM_LENGTH) return;
    u->bare[DIM_AREA] = factor * factor;
    u->bare[DIM_INERTIA] = factor * factor * factor * factor;
}

double unit_factor(Dimension d, const char *unit)
{
    for (int i = 0; i < NUNITS; i++)
        if (units[i].dimension == d && strcmp(units[i].name, unit) == 0) return units[i].factor;
    return 0;
}

Dimension unit_dimension(const char *unit)
{
    for (int i = 0; i < NUNITS; i++)
        if (strcmp(units[i].name, unit) == 0) return units[i].dimension;
    return DIMENSIONS;
}

/* A plain decimal number: no hexadecimal, no inf or nan. Returns its end, or NULL. */
static const char *decimal(const char *s, double *value)
{
    const char *c = s;
    if (*c == '+' || *c == '-') c++;
    if (!(isdigit((unsigned char)*c) || (*c == '.' && isdigit((unsigned char)c[1])))) return NULL;
    if (c[0] == '0' && (c[1] == 'x' || c[1] == 'X')) return NULL;
    char *end;
    *value = strtod(s, &end);
    return end;
}

/* "3.2", "3/4", "1 1/2". Returns the end, or NULL. */
static const char *number(const char *s, double *value)
{
    double top, bottom;
    const char *end = decimal(s, value);
    if (!end) return NULL;
    if (*end == '/' && isdigit((unsigned char)end[1])) {
        const char *after = decimal(end + 1, &bottom);
        *value /= bottom;
        return after;
    }
    const char *next = end;
    while (*next == ' ') next++;
    if (next == end || !isdigit((unsigned char)*next)) return end;
    const char *slash = decimal(next, &top);
    if (!slash || *slash != '/') return end;
    const char *after = decimal(slash + 1, &bottom);
    if (!after) return end;
    *value += (*value < 0 || *s == '-' ? -1 : 1) * top / bottom;
    return after;
}

bool read_quantity(const Units *u, Dimension d, const char *text, double *value, char *why, size_t size)
{
    const char *end = number(text, value);
    if (!end) {
        snprintf(why, size, "`%s` is not a number", text);
        return false;
    }
    while (*end == ' ') end++;
    double factor = u->bare[d];
    if (*end) {
        factor = d == DIM_NUMBER ? 0 : unit_factor(d, end);
        const Dimension other = unit_dimension(end);
        if (factor == 0) {
            if (other != DIMENSIONS) snprintf(why, size, "`%s` is the unit of %s, but this is %s (%s)", end, dimension_name(other), dimension_name(d), dimension_units(d));
            else snprintf(why, size, "`%s` is not a unit of %s (%s)", end, dimension_name(d), dimension_units(d));
            return false;
        }
    }
    *value *= factor;
    if (isfinite(*value) && fabs(*value) < 1e30) return true;
    snprintf(why, size, "`%s` is too large, or a division by zero", text);
    return false;
}
