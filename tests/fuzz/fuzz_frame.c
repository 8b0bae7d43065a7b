/* fuzz_frame.c - any bytes as a frame file: an answer or a message, never a crash, hang or leak.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <stddef.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "endfix/endfix.h"

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);
int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    EfContext *cx = ef_open();
    EfFrame *frame = NULL;
    if (!cx) return 0;
    const EfStatus st = ef_read_frame_text(cx, "fuzz.yaml", (const char *)data, (long)size, &frame);
    if ((st == EF_OK) != (frame != NULL) || (st != EF_OK && !ef_message(cx)[0])) abort();
    ef_close(cx);
    return 0;
}
