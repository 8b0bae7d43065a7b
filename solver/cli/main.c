/* main.c - the program: commands, options, exit status.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <stdio.h>

#include "endfix/endfix.h"

int main(void)
{
    fputs("endfix " EF_VERSION "\n", stdout);
    return 0;
}
