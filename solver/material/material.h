/* material.h - the built-in materials, each value with its source and status.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef MATERIAL_MATERIAL_H
#define MATERIAL_MATERIAL_H

#include "core/core.h"
#include "endfix/frame.h"

/* Built-in materials by index, NULL past the end; and by (short) name, NULL if unknown. */
const EfMaterial *material_builtin(size_t i);
const EfMaterial *material_named(const char *name);

#endif
