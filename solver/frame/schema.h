/* schema.h - the frame file described: a commented sample, and a JSON Schema made from the key tables.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef FRAME_SCHEMA_H
#define FRAME_SCHEMA_H

#include "core/core.h"

/* A commented frame file; it is valid and tested. */
const char *frame_sample(void);

/* JSON Schema (2020-12) of the format. Owned by cx->keep; NULL: out of memory. */
const char *frame_schema(EfContext *cx);

#endif
