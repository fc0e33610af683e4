/* incomplete_gamma.h - the gamma distribution function with scale 1, and back. */
#ifndef INCOMPLETE_GAMMA_H
#define INCOMPLETE_GAMMA_H

#include <stdbool.h>

/* log Gamma(1 + a) for a >= 0, relatively accurate near 0 and 1 too */
double log_gamma_1p(double a);

/* log of x^a exp(-x) / Gamma(a + 1) for a and x above 0, without cancellation near x = a: with
 * log(a / x) more the log-density of a gamma variable of shape a (Loader 2000). */
double gamma_log_power(double a, double x);

/* The probability of a gamma variable of this shape (> 0) up to x, or with `above` beyond it;
 * each to 1e-12 relative down to 1e-300. */
double gamma_probability(double shape, double x, bool above);

/* The x with that probability p in (0;1) below it, or with `above` beyond it: to 1e-12
 * relative, or as well as p itself determines it. 0 when x is below the smallest number, which
 * happens for small shapes. */
double gamma_quantile(double shape, double p, bool above);

#endif
