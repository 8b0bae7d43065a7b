/* kinds.h - inside section: the list of shapes. A new shape adds its line here and its file.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SECTION_KINDS_H
#define SECTION_KINDS_H

#include "section/section.h"

extern const SectionKind kind_round, kind_square, kind_rectangle, kind_ellipse, kind_rod, kind_given;

#define SECTION_KINDS &kind_round, &kind_square, &kind_rectangle, &kind_ellipse, &kind_rod, &kind_given

/* Writes a reason to why and returns false. */
bool section_refuse(char *why, size_t size, const char *reason);

#endif
