/* units.h - inside frame: the closed table of units, and numbers with their unit.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef FRAME_UNITS_H
#define FRAME_UNITS_H

#include "core/core.h"

typedef enum Dimension {
    DIM_NUMBER, DIM_LENGTH, DIM_FORCE, DIM_MASS, DIM_STRESS, DIM_MOMENT, DIM_FORCE_PER_LENGTH, DIM_DENSITY,
    DIM_MASS_PER_LENGTH, DIM_AREA, DIM_INERTIA, DIM_KELVIN, DIM_EXPANSION, DIM_STIFFNESS, DIM_ROTATION_STIFFNESS,
    DIM_ANGLE, DIMENSIONS
} Dimension;

/* Factors of bare numbers to SI, by dimension. */
typedef struct Units {
    double bare[DIMENSIONS];
} Units;

/* m, N, Pa, kg and what belongs to them. */
Units units_default(void);

/* Sets the unit of bare lengths, forces, masses or stresses; areas and inertias follow the length. */
void units_set(Units *u, Dimension d, double factor);

/* Factor of a unit of a dimension; 0 when it is none of its units. */
double unit_factor(Dimension d, const char *unit);

/* The dimension a unit belongs to first; DIMENSIONS when it is unknown. */
Dimension unit_dimension(const char *unit);

/* "a length", "a force", ...; a list of its units for messages. */
const char *dimension_name(Dimension d);
const char *dimension_units(Dimension d);

/* Reads "3.2", "3/4 in", "1 1/2 in", "2.5 kN m/rad" into SI. On a fault writes what is wrong to why. */
bool read_quantity(const Units *u, Dimension d, const char *text, double *value, char *why, size_t size);

#endif
