/* export.h - the matrices of engine 1 in Matrix Market form, for checks by other libraries.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ANALYSIS_EXPORT_H
#define ANALYSIS_EXPORT_H

#include "analysis/buckling.h"

/* Writes FOLDER/<case>.K.mtx and .G.mtx: the problem (K + lambda G) x = 0 on the free unknowns, exactly the one whose
 * factors are shown (same interior functions); and for free bodies .C.mtx, the columns G R of the rigid rotations,
 * to which every shape is orthogonal. */
EfStatus export_matrices(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing,
                         const EfCaseResult *result, const char *folder);

#endif
