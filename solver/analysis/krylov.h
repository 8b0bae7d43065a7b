/* krylov.h - all critical factors between zero and a shift, by block Lanczos (Grimes, Lewis and Simon 1994: the
 * buckling transformation, in the inner product of the base stiffness).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_KRYLOV_H
#define ANALYSIS_KRYLOV_H

#include "analysis/pencil.h"

/* Factors ascending with their shapes; arrays in cx->tmp. */
typedef struct Modes {
    int n;
    double *factor;   /* [n] */
    double *residual; /* [n] ||K x + factor G x|| / ||K x|| */
    double *x;        /* [n][p->n], x' K x = 1 */
} Modes;

/* Finds the p->count factors in (0, p->sigma); fewer in modes->n when the iteration gives out. */
EfStatus krylov_modes(EfContext *cx, const Pencil *p, Modes *modes);

/* One step of inverse iteration and Rayleigh-Ritz on the modes found (ritz.c): cleans the stiff part of the shapes,
 * and fills the residuals. Factors ascend again after it. */
EfStatus ritz_polish(EfContext *cx, const Pencil *p, Modes *modes);

#endif
