/* evaluation_work.h - about how long questions about a copula take.
 *
 * Seconds of one core near 3 GHz, rarely off by more than a factor of 3: steps counted, times
 * what a step was measured to take. The same question always comes to the same number.
 */
#ifndef EVALUATION_WORK_H
#define EVALUATION_WORK_H

#include "evaluate.h"

/* For one point of evaluate.h. */
typedef double seconds_of_point(const struct evaluation *e);

seconds_of_point cdf_seconds, density_seconds, conditional_seconds, from_conditional_seconds;

/* About how long what was asked so far took, counted as it was done, where points of a model may
 * take much longer than that; else 0. */
double seconds_spent(const struct evaluation *e);

/* How many rays kendall_at() takes, see kendall_rays.h: fewer where one takes longer, from 64 to
 * 4,096, or 16 times as many points; 0 where it takes none. */
size_t kendall_rays(const struct evaluation *e);

/* For n values of kendall_at(). */
double kendall_seconds(const struct evaluation *e, size_t n);

/* Quasi-Monte Carlo points that a probability is made of; 0 where it is not made so. */
size_t box_points(const struct evaluation *e);

/* Where n probabilities are by quasi-Monte Carlo: halves the number of points, down to 2,048, until
 * they take about a second. Returns what they take then, also where nothing can be halved. */
double with_fewer_box_points(const struct evaluation *e, size_t n);

#endif
