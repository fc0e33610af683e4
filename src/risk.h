/* risk.h - measures of a sample of losses, with their standard errors.
 *
 * Losses are finite, rows independent of each other. The errors are those of simulation or
 * sampling only.
 */
#ifndef RISK_H
#define RISK_H

#include "memory.h"
#include "samples.h"
#include "status.h"

#include <math.h>
#include <stdbool.h>

/* error is NaN where the sample is too small to tell */
typedef struct { double value, error; } estimate;

/* Whether a loss, or the sum of a row, leaves room to add up any number of such: up to 1e300. */
static inline bool adds_up(double loss)
{
    return fabs(loss) <= 1e300;
}

/* The losses of one period: each row's sum over the columns, s->rows numbers. OUT_OF_DOMAIN when a
 * loss or a sum does not add up (see above); NO_MEMORY. */
status row_sums(const samples *s, pool *p, const double **sums);

/* The order statistics that an estimate of the value at risk and of its error rest on, from 1
 * to n: k is the measure itself, low and high lie ceil(2 sqrt(n level (1 - level))) to either
 * side, or at the end of the sample. `known` when neither end was met: then the error can be
 * told. */
struct order_window { size_t k, low, high; bool known; };
struct order_window window_around(size_t n, double level);

/* n (1 - level), the number of observations in the tail, with n level taken as whole when it is
 * within 1e-9 of a whole number, unless that leaves nothing; above 0 */
double tail_weight(size_t n, double level);

/* The error of a value at risk with these losses at window.low and window.high: the spacing of
 * order statistics estimates the density there (Siddiqui 1960). */
double value_at_risk_error(size_t n, double level, struct order_window w, double low, double high);

/* The error of a shortfall, or of a line's part in one, from the variance over all n rows of its
 * influence values times (1 - level) (Manistre & Hancock 2005), with weight = tail_weight(); NaN
 * when the variance is beyond the range of numbers. */
double shortfall_error(double variance, size_t n, double weight);

/* The value at risk at each of `count` levels in (0;1): the k-th smallest, k = order_of(n, level).
 * TOO_FEW when there are no losses; NO_MEMORY. */
status values_at_risk(const double *loss, size_t n, const double *level, size_t count, pool *p,
                      estimate *out);

/* The expected shortfall of Acerbi & Tasche (2002) at each level: the mean of the worst n (1 -
 * level) losses, the one at the value at risk counted by the fraction needed. Errors from
 * influence values (Manistre & Hancock 2005). */
status tail_values_at_risk(const double *loss, size_t n, const double *level, size_t count, pool *p,
                           estimate *out);

/* A layer of `limit` (INFINITY for none) beyond `excess`. error and sd are NaN for a single
 * loss, exhausting without a limit. TOO_FEW when there are no losses. */
struct layer_cost { double mean, error, sd, attaching, exhausting; };
status layer_cost_of(const double *loss, size_t n, double excess, double limit,
                     struct layer_cost *cost);

/* How many points exceedance_curve() gives: `points`, or n if that is less. */
size_t exceedance_points(size_t n, size_t points);

/* Losses, rising, with the share of observations at or above each: the smallest and the
 * largest, and between them order statistics at geometrically spaced ranks, so that the tail
 * is drawn as finely as the rest; where losses are tied a point can come again. n >= 1, points >=
 * 2; both arrays take exceedance_points(). NO_MEMORY. */
status exceedance_curve(const double *loss, size_t n, size_t points, pool *p, double *at,
                        double *probability);

#endif
