/* moments.h - mean and standard deviation of numbers that come in blocks. */
#ifndef MOMENTS_H
#define MOMENTS_H

#include "risk.h"

#include <stddef.h>

/* Start from { 0 }. `second` to `fourth` are sums of powers of the distance from the mean. */
typedef struct { double count, mean, second, third, fourth; } running_moments;

/* Takes in n more numbers. */
void moments_add(running_moments *m, const double *x, size_t n);

/* The mean, and its standard error (NaN for fewer than two numbers, and where the squares are
 * beyond the range of numbers). */
estimate moments_mean(const running_moments *m);

/* The standard deviation with divisor n - 1 (NaN for fewer than two numbers), and its standard
 * error by the delta method; NaN where powers are beyond the range of numbers. */
estimate moments_sd(const running_moments *m);

#endif
