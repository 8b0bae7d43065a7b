/* file.h - whole files: replaced in one step or not at all, and read into memory.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef STORE_FILE_H
#define STORE_FILE_H

#include "core/core.h"

/* Puts n bytes in the place of the file `path`. They go to a new file beside it, are flushed to the disk and
 * renamed over the old one: whatever fails, the old file stays as it was and the new one is removed.
 * What is not a regular file (a terminal, a pipe) is written straight. The program should ignore SIGXFSZ,
 * so that a size limit is an error like a full disk. */
EfStatus file_replace(EfContext *cx, const char *path, const void *bytes, size_t n);

/* The whole file, in the tmp arena. */
EfStatus file_read(EfContext *cx, const char *path, unsigned char **bytes, size_t *n);

#endif
