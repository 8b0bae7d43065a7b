/* dense.h - small symmetric matrices: eigenvalues, vectors, signs.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef LINALG_DENSE_H
#define LINALG_DENSE_H

#include "core/core.h"

/* Eigenvalues (ascending) and unit eigenvectors of the symmetric a [n][n], which is destroyed. Vector k is row k
 * of `vectors` [n][n]. Jacobi's method: small values keep their relative accuracy where the matrix gives it. */
void symmetric_eigen(int n, double *a, double *values, double *vectors);

/* The same for any n by LAPACK: values ascending, vector k is row k of a on return. */
EfStatus symmetric_eigen_large(EfContext *cx, int n, double *a, double *values);

/* Number of negative eigenvalues of a [n][n], which is destroyed, by an LDL' with pivots of one or two rows (Bunch and
 * Parlett 1971). Far quicker where no vectors are wanted. */
int symmetric_count(int n, double *a);

#endif
