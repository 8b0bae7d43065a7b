/* options.h - the command line: one table of options that mean the same everywhere.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef CLI_OPTIONS_H
#define CLI_OPTIONS_H

#include <stdio.h>

#include "endfix/run.h"
#include "postproc/table.h"

typedef struct Arguments {
    const char *word[4]; /* what is not an option: command and its objects */
    int nword;
    EfOptions run;
    Filter filter;
    const char *out;
    UnitSystem units;
    const Writer *writer;
    bool input_only, quiet, strict, schema, help, version;
} Arguments;

/* Reads the command line; on a fault prints one line to stderr and returns false. */
bool read_arguments(int argc, char **argv, Arguments *a);

/* Lists the options. */
void print_options(FILE *out);

#endif
