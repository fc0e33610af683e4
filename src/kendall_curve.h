/* kendall_curve.h - the empirical Kendall distribution of a pair of columns. */
#ifndef KENDALL_CURVE_H
#define KENDALL_CURVE_H

#include "memory.h"
#include "status.h"

#include <stddef.h>

/* The values W of the empirical copula at its own rows (Genest & Rivest 1993): of the *used rows
 * that have both, sorted, lowest first, each the share of these rows that are no higher in x and in
 * y, itself included. `w` has room for n. The Kendall distribution at v is the share of W at most
 * v. TOO_FEW without any row. */
status kendall_values(const double *x, const double *y, size_t n, double *w, size_t *used, pool *p);

/* The share of n sorted values at most v, where a value within a rounding error of v is at most
 * v. */
double share_at_most(const double *sorted, size_t n, double v);

#endif
