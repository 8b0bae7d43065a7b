/* random_results.h - results with a random value in every field, and a comparison of every field bit for bit.
 * The values inside structs are filled and compared by the tables of the store (whose rows test_store checks against
 * the structs byte by byte); how long each array is, is said here a second time.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SUPPORT_RANDOM_RESULTS_H
#define SUPPORT_RANDOM_RESULTS_H

#include "core/core.h"
#include "endfix/results.h"

/* Ends the test with a message (check.h takes the name of cmocka's own). */
#define FAIL(...) (print_error(__VA_ARGS__), print_error("\n"), _fail(__FILE__, __LINE__))

/* Owned by cx. The same stream gives the same results; `joints` sets the size of the frame (at least 3). */
EfResults *random_results(EfContext *cx, uint64_t stream, int joints);

/* Fails the test at the first field that differs. */
void check_same_results(const EfResults *a, const EfResults *b);

#endif
