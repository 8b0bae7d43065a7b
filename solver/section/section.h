/* section.h - tube shapes: a registry of kinds, each from its sizes to section values.
 * A new shape is one file section/<kind>.c and one line in kinds.h.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SECTION_SECTION_H
#define SECTION_SECTION_H

#include "core/core.h"
#include "endfix/frame.h"

typedef enum SectionUnit { UNIT_LENGTH, UNIT_AREA, UNIT_INERTIA } SectionUnit;

typedef struct SectionParameter {
    const char *key;  /* word in the frame file and in messages; NULL ends the list */
    SectionUnit unit;
    const char *help;
    double lo, hi;    /* SI; lo <= value <= hi, else refused with the limit */
    bool optional;    /* NaN when absent */
} SectionParameter;

typedef struct SectionKind {
    const char *name; /* the key in the frame file: "round", "square", ... "given" */
    const char *help, *source;
    bool trade_form;  /* true: written as "a x b [x c]"; false: own keys (given values) */
    SectionParameter parameter[EF_SECTION_PARAMETERS + 1];
    /* Closed form. On a fault writes a reason (one line, no name) to why and returns false. */
    bool (*values)(const double *p, EfSection *out, char *why, size_t size);
    /* Outline for pictures and as a test's oracle: point t in [0,1) of loop 0 (outer) or 1 (hole);
     * returns false when the loop does not exist. yz in m. NULL where there is none. */
    bool (*outline)(const double *p, int loop, double t, double yz[2]);
} SectionKind;

/* Kinds by index, NULL past the end; and by name, NULL if unknown. */
const SectionKind *section_kind(size_t i);
const SectionKind *section_kind_named(const char *name);

/* Checks the limits of every parameter and computes the values: the one entry for all callers.
 * Accepted means: every value finite and positive. */
bool section_values(const SectionKind *kind, const double *p, EfSection *out, char *why, size_t size);

#endif
