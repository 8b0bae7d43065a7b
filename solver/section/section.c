/* section.c - the registry of shapes and the one way to their values.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "section/section.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#include "section/kinds.h"

static const SectionKind *const kinds[] = {SECTION_KINDS};

const SectionKind *section_kind(size_t i) { return i < sizeof kinds / sizeof *kinds ? kinds[i] : NULL; }

const SectionKind *section_kind_named(const char *name)
{
    for (size_t i = 0; section_kind(i); i++)
        if (strcmp(kinds[i]->name, name) == 0) return kinds[i];
    return NULL;
}

bool section_refuse(char *why, size_t size, const char *reason)
{
    snprintf(why, size, "%s", reason);
    return false;
}

static bool within_limits(const SectionKind *kind, const double *p, char *why, size_t size)
{
    for (int i = 0; kind->parameter[i].key; i++) {
        const SectionParameter *q = &kind->parameter[i];
        if (isnan(p[i]) && q->optional) continue;
        if (isnan(p[i])) {
            snprintf(why, size, "%s is missing", q->key);
            return false;
        }
        if (p[i] >= q->lo && p[i] <= q->hi) continue;
        const char *unit = q->unit == UNIT_LENGTH ? "m" : q->unit == UNIT_AREA ? "m2" : "m4";
        snprintf(why, size, "%s must lie between %g and %g %s, not %g %s", q->key, q->lo, q->hi, unit, p[i], unit);
        return false;
    }
    return true;
}

bool section_values(const SectionKind *kind, const double *p, EfSection *out, char *why, size_t size)
{
    *out = (EfSection){.depth_y = NAN, .depth_z = NAN, .wall = NAN};
    if (!within_limits(kind, p, why, size) || !kind->values(p, out, why, size)) return false;
    const double all[] = {out->A, out->Iy, out->Iz, out->J, out->As_y, out->As_z};
    for (size_t i = 0; i < sizeof all / sizeof *all; i++)
        if (!(all[i] > 0 && isfinite(all[i]))) return section_refuse(why, size, "these sizes give no positive section values");
    return true;
}
