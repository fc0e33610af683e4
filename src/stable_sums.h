/* stable_sums.h - the polynomials that gumbel's derivatives are.
 *
 * A derivative of psi(t) = exp(-t^a), 0 < a <= 1, of order n is without its sign psi(t) / t^n times
 * a polynomial in x = t^a of degree n without a constant; it is n! exp(x) P(N = n) of a discrete
 * stable N (Steutel & van Harn 1979).
 */
#ifndef STABLE_SUMS_H
#define STABLE_SUMS_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>

struct stable_sums;

/* For orders from 1 to `highest`, with a = part and 1 - a = rest. From the pool; NO_MEMORY. */
status stable_sums_of(double part, double rest, size_t highest, pool *p,
                      struct stable_sums **sums);

/* Log of the polynomial at x = exp(log_x). The first time, coefficients up to that order are made;
 * then it takes no more steps than the order. Beyond order 2048, whose coefficients would take more
 * than 17 MB, it takes half the order squared, or where orders rise at the same x what is missing.
 * Errors about 1e-15 times the order. */
double log_stable_sum(struct stable_sums *s, size_t order, double log_x);

/* About how long that takes; `next`: where the order before was asked at the same x. */
double stable_sum_seconds(size_t order, bool next);

#endif
