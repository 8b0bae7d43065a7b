/* check.c - comparisons and random values for tests.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include "core/core.h"

void check_near_at(double got, double want, double allowed, const char *what, const char *file, int line)
{
    if (fabs(got - want) <= allowed) return;
    print_error("%s: got %.17g, want %.17g (off by %.3g, allowed %.3g)\n", what, got, want, got - want, allowed);
    _fail(file, line);
}

void check_ok_at(const struct EfContext *cx, int status, const char *what, const char *file, int line)
{
    if (status == EF_OK) return;
    print_error("%s: status %d: %s\n", what, status, ef_message(cx));
    _fail(file, line);
}

double test_uniform(uint64_t stream, uint64_t i, double lo, double hi)
{
    /* splitmix64: Steele, Lea and Flood 2014 (from memory). */
    uint64_t z = (stream * 0x9e3779b97f4a7c15u) ^ ((i + 1) * 0xbf58476d1ce4e5b9u);
    z = (z ^ (z >> 30)) * 0xbf58476d1ce4e5b9u;
    z = (z ^ (z >> 27)) * 0x94d049bb133111ebu;
    z ^= z >> 31;
    return lo + (hi - lo) * ((double)(z >> 11) * 0x1.0p-53);
}
