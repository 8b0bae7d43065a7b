/* word.c - the nearest known word to a mistyped one.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "core/core.h"

#include <ctype.h>
#include <string.h>

enum { LONGEST = 64 }; /* bytes that are compared */

static size_t compared(const char *word)
{
    const size_t n = strlen(word);
    return n < LONGEST ? n : LONGEST;
}

static bool same_letter(char a, char b) { return tolower((unsigned char)a) == tolower((unsigned char)b); }

static size_t least(size_t a, size_t b) { return a < b ? a : b; }

/* Letters to add, drop, change or swap with their neighbour: Damerau 1964 (from memory), letter case ignored. */
static size_t distance(const char *a, const char *b)
{
    const size_t na = compared(a), nb = compared(b);
    size_t row[3][LONGEST + 1];
    for (size_t j = 0; j <= nb; j++) row[0][j] = j;
    for (size_t i = 1; i <= na; i++) {
        size_t *now = row[i % 3], *last = row[(i + 2) % 3], *before = row[(i + 1) % 3];
        now[0] = i;
        for (size_t j = 1; j <= nb; j++) {
            now[j] = least(least(last[j], now[j - 1]) + 1, last[j - 1] + !same_letter(a[i - 1], b[j - 1]));
            if (i > 1 && j > 1 && same_letter(a[i - 1], b[j - 2]) && same_letter(a[i - 2], b[j - 1]))
                now[j] = least(now[j], before[j - 2] + 1);
        }
    }
    return row[na % 3][nb];
}

const char *nearest_word(const char *word, size_t n, const char *const *known)
{
    const char *best = NULL;
    size_t allowed = (compared(word) + 2) / 3;
    for (size_t i = 0; i < n; i++) {
        const size_t d = distance(word, known[i]);
        if (d > allowed || (best && d == allowed)) continue;
        best = known[i];
        allowed = d;
    }
    return best;
}
