/* solve.h - the whole job on a frame built in code, and plane frames.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SUPPORT_SOLVE_H
#define SUPPORT_SOLVE_H

#include "endfix/endfix.h"
#include "support/build_frame.h"
#include "support/check.h"

enum { PLANE_XY = 28, /* held across the plane: z rx ry */ TWIST_X = 8 };

/* Base tube of the column cases: 40 x 2 mm, E 200 GPa, nu 0.3; EI = 8643.14971 N m2. */
int frame_t1(EfContext *cx, EfFrame *f);
extern const double T1_EI;

/* A size of EI about both axes (E 200 GPa) and a huge area: inextensible. */
int frame_stiff(EfContext *cx, EfFrame *f, double EI);

/* Holds `mask` at every joint on top of what is held there. */
void frame_hold_all(EfContext *cx, EfFrame *f, unsigned mask);

/* Rotational spring about y and z, or lateral spring, at a joint that has a support. */
void frame_spring(EfFrame *f, int support, int direction, double stiffness);

/* Runs; fails the test on an error or an incomplete tally. */
const EfResults *solve_frame(EfContext *cx, const EfFrame *f, int count);

/* k-th critical factor of case 0. */
double factor_of(const EfResults *r, int k);

#endif
