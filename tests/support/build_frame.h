/* build_frame.h - frames for tests, built in code: everything lives in cx->keep, everything returns its index.
 * Names are J0 J1 .., T0 T1 .. and so on; change what else you need in the structs.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SUPPORT_BUILD_FRAME_H
#define SUPPORT_BUILD_FRAME_H

#include "core/core.h"
#include "endfix/frame.h"

enum { HOLD_PINNED = 7, HOLD_FIXED = 63 };

/* A frame with one material: steel of E 205 GPa, nu 0.29, 7850 kg/m3, yield 460 MPa, 12e-6 1/K. */
EfFrame *frame_new(EfContext *cx);

int frame_joint(EfContext *cx, EfFrame *f, double x, double y, double z);
int frame_round(EfContext *cx, EfFrame *f, double diameter, double wall); /* m */
int frame_given(EfContext *cx, EfFrame *f, double A, double Iy, double Iz, double J);
int frame_tube(EfContext *cx, EfFrame *f, int from, int to, int size);
int frame_guy(EfContext *cx, EfFrame *f, int from, int to, double mass_per_length);
int frame_support(EfContext *cx, EfFrame *f, int joint, unsigned held);
int frame_equipment(EfContext *cx, EfFrame *f, double mass, const double at[3], int n, const int *carrier);
int frame_case(EfContext *cx, EfFrame *f, const char *name); /* ultimate level, no loads */
int frame_combination(EfContext *cx, EfFrame *f, const char *name, int n, const int *part, const double *factor);

/* A load to be filled in; valid until the next one of the same case. */
EfLoad *frame_load(EfContext *cx, EfFrame *f, int in_case, EfLoadKind kind);
/* A force (and no moment) spread over n joints; along n tubes. */
EfLoad *frame_push(EfContext *cx, EfFrame *f, int in_case, int n, const int *joint, const double force[3]);
EfLoad *frame_push_along(EfContext *cx, EfFrame *f, int in_case, int n, const int *tube, const double force[3]);

/* Turns and moves the whole frame with its loads: x := R x + shift. Default `up` becomes a given one. */
void frame_turn(EfFrame *f, double R[3][3], const double shift[3]);

/* Rotation matrix of a rotation vector. */
void rotation(const double vector[3], double R[3][3]);

#endif
