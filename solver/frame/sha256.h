/* sha256.h - the digest of FIPS 180-4, for the identity of an input.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef FRAME_SHA256_H
#define FRAME_SHA256_H

#include <stddef.h>
#include <stdint.h>

typedef struct Sha256 {
    uint32_t state[8];
    uint64_t length;
    unsigned char block[64];
} Sha256;

void sha256_start(Sha256 *s);
void sha256_add(Sha256 *s, const void *bytes, size_t n);
/* 64 hexadecimal digits and a zero. */
void sha256_end(Sha256 *s, char hex[65]);

#endif
