/* factor.h - the Cholesky factor of a correlation matrix that may be singular. */
#ifndef FACTOR_H
#define FACTOR_H

#include "status.h"

#include <stdbool.h>
#include <stddef.h>

/* Lower triangular l, row by row and d x d, with l l' = matrix; its pivots are zero where the
 * matrix is singular to rounding, with the rest of such a row scaled to length one. What stands
 * above the diagonal of l is left as it is. The bits are the same on every machine. OUT_OF_DOMAIN:
 * a pivot far below zero, no correlation matrix. Source: Golub & Van Loan, Matrix Computations,
 * 4.2. */
status correlation_factor(const double *matrix, size_t d, double *l);

/* whether a pivot is zero */
bool factor_is_singular(const double *l, size_t d);

#endif
