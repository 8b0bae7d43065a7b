/* doubts.h - what looks like a slip in a frame that can be read: told, never corrected.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef CHECK_DOUBTS_H
#define CHECK_DOUBTS_H

#include "core/core.h"
#include "endfix/frame.h"

/* One line a doubt, by kind, at most a few lines a kind. Arrays and lines owned by cx->keep. */
EfStatus frame_doubts(EfContext *cx, const EfFrame *frame, int *n, const char ***text);

#endif
