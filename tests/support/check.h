/* check.h - what every test program includes: cmocka, and comparisons that a NaN fails.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SUPPORT_CHECK_H
#define SUPPORT_CHECK_H

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <stdio.h>

#include <cmocka.h>
#undef fail /* ours records a failure in a context */

/* Fails unless |got - want| <= tol * |want| is true (so a NaN fails). */
#define CHECK_REL(got, want, tol) check_near_at((got), (want), (tol) * fabs((double)(want)), #got, __FILE__, __LINE__)
/* Fails unless |got - want| <= tol is true. */
#define CHECK_ABS(got, want, tol) check_near_at((got), (want), (tol), #got, __FILE__, __LINE__)
/* Fails with the message of the context unless the call gives EF_OK. */
#define CHECK_OK(cx, call) check_ok_at((cx), (int)(call), #call, __FILE__, __LINE__)

struct EfContext;
void check_near_at(double got, double want, double allowed, const char *what, const char *file, int line);
void check_ok_at(const struct EfContext *cx, int status, const char *what, const char *file, int line);

/* The i-th value of stream s, uniform in [lo, hi): the same on every machine. */
double test_uniform(uint64_t stream, uint64_t i, double lo, double hi);

#endif
