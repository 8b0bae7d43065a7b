/* endfix.h - the public C API: real end fixity of the tubes of welded frames.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ENDFIX_ENDFIX_H
#define ENDFIX_ENDFIX_H

#include "endfix/frame.h"
#include "endfix/results.h"
#include "endfix/run.h"
#include "endfix/status.h"

#endif
