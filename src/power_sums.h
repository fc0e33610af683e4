/* power_sums.h - sums of powers of whole numbers, which the derivatives of frank and joe are.
 *
 * Their frailties are whole numbers k (Marshall & Olkin 1988), so that a derivative of order n is,
 * but for a constant,
 *     sum over k >= 1 of c_k k^n exp(-k mu),    c_k = (1-b)(2-b)...(k-1-b) / k!,   0 <= b <= 1,
 * which is also that derivative, without its sign, of (1 - (1 - exp(-mu))^b) / b.
 */
#ifndef POWER_SUMS_H
#define POWER_SUMS_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>

struct power_sums;

/* For orders from 1 to `highest`, with b = part and 1 - b = rest, and mu = t + shift, whose log is
 * wanted as well because it may be below what doubles hold. From the pool; NO_MEMORY. */
status power_sums_of(double part, double rest, double shift, double log_shift, size_t highest,
                     pool *p, struct power_sums **sums);

/* Log of the sum at t = exp(log_t), in a time that hardly depends on the order. Errors about 1e-15
 * times the order. */
double log_power_sum(const struct power_sums *s, size_t order, double log_t);

/* About how long that takes, whatever was asked before. */
double power_sum_seconds(size_t order, bool next);

#endif
