/* tau_test.h - how likely a Kendall's tau is when two columns are independent. */
#ifndef TAU_TEST_H
#define TAU_TEST_H

#include "memory.h"
#include "status.h"

#include <stddef.h>
#include <stdint.h>

typedef enum { SIDE_BOTH, SIDE_ABOVE, SIDE_BELOW } side;

/* The p-value of independence of x and y against dependence of this side; rows with a gap in either
 * are left out. Exact without ties up to 200 rows, else by the normal distribution with the
 * variance corrected for ties (Kendall 1970) and no continuity correction. Two-sided: twice the
 * smaller tail, at most 1. A p-value below 1e-308 is 0. TOO_FEW under two rows, NO_VARIATION when a
 * column is constant. */
status tau_test(const double *x, const double *y, size_t n, side which, double *p_value,
                size_t *used, pool *p);

/* P(discordant <= d) of n independent rows without ties; relative error below 1e-14 down to 1e-308.
 * OK, or NO_MEMORY. Takes n times d steps. */
status tau_null_probability(size_t n, uint64_t d, double *probability, pool *p);

#endif
