/* normal.h - the normal distribution function and its inverse, the same bits everywhere.
 */
#ifndef NORMAL_H
#define NORMAL_H

#include "elementary.h"
#include "random.h"

/* P(Z <= x). Relative error below 1e-15 for |x| <= 6 and 2e-14 down to 1e-300; 0 below x = -38,
 * 1 above. */
double normal_probability(double x);

/* log P(Z <= x) for every finite x, error below 2e-14, or 1e-15 of the result where that is more */
double normal_log_probability(double x);

/* x with P(Z <= x) = u for 0 < u < 1 (elsewhere infinite or NaN); relative error below 2e-15 */
double normal_quantile(double u);

/* normal_quantile() of ROWS_AT_ONCE uniforms from [2^-53; 1 - 2^-53], in their place */
void normal_scores_of_rows(double *restrict u);

/* normal_probability() of ROWS_AT_ONCE numbers, in their place, kept within [2^-53; 1 - 2^-53] */
void normal_probabilities_of_rows(double *restrict x);

#endif
