/* commands.h - the commands; each returns the program's exit status.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef CLI_COMMANDS_H
#define CLI_COMMANDS_H

#include "cli/options.h"

int command_check(const Arguments *a);
int command_show(const Arguments *a);
int command_new(const Arguments *a);

/* Flushes stdout: `status`, or 4 with a line when it could not be written. */
int finish(int status);

#endif
