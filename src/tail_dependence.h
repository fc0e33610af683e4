/* tail_dependence.h - how often the extremes of two columns come together. */
#ifndef TAIL_DEPENDENCE_H
#define TAIL_DEPENDENCE_H

#include "memory.h"
#include "status.h"

#include <stddef.h>
#include <stdint.h>

/* How many rows of a pair are extreme in both columns, for tails of any size. */
struct joint_ranks {
    size_t rows;                 /* rows that have both observations */
    uint32_t *lower, *upper;     /* with k rows in the tail, k = 0 to rows */
};

struct tail_estimate {
    double lambda;               /* joint/k */
    double error;                /* its standard error; NaN under ten joint observations */
    size_t joint;                /* rows extreme in both columns */
};

/* In O(n log n). TOO_FEW under two rows, OUT_OF_DOMAIN beyond 2^32 - 2. */
status new_joint_ranks(const double *x, const double *y, size_t n, struct joint_ranks *ranks,
                       pool *p);

/* fraction x rows, rounded to the nearest whole number, at least 1 */
size_t rows_in_tail(const struct joint_ranks *ranks, double fraction);

/* With k rows in the tail, k = 1 to n, and mid-ranks R, S of n rows: upper #(R > n-k and S >
 * n-k)/k, lower #(R <= k and S <= k)/k. The error is that of Schmidt & Stadtmueller (2006) with
 * both partial derivatives of the tail copula taken as lambda/2: sqrt(lambda (1 - lambda)(1 -
 * lambda/2)/k). */
void upper_tail(const struct joint_ranks *ranks, size_t k, struct tail_estimate *t);
void lower_tail(const struct joint_ranks *ranks, size_t k, struct tail_estimate *t);

#endif
