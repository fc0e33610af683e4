/* tau_weighted.h - Kendall's tau of observations that do not count alike. */
#ifndef TAU_WEIGHTED_H
#define TAU_WEIGHTED_H

#include "memory.h"
#include "status.h"

#include <stddef.h>

/* Tau-b with sums over pairs of rows of the product of their weights, which are relative
 * importance: (C - D)/sqrt(A B), A and B summed over the pairs that differ in x and in y. Rows with
 * a gap in x, y or the weight, or with weight 0, are left out; *used is how many are not. Whole
 * weights give exactly the tau-b of rows repeated so often. x and y may change places without
 * changing a bit, and perfect dependence gives exactly 1 or -1. TOO_FEW under two rows,
 * NO_VARIATION, OUT_OF_DOMAIN for a negative or infinite weight. */
status tau_weighted(const double *x, const double *y, const double *weight, size_t n,
                    double *tau, size_t *used, pool *p);

#endif
