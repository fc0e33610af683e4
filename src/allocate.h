/* allocate.h - what each line contributes to the risk of their sum. */
#ifndef ALLOCATE_H
#define ALLOCATE_H

#include "risk.h"

/* One row a period, one column a line, without gaps. The parts of the lines add up to the
 * measure of the row sums; `alone` takes the measure of each line by itself. part and alone
 * take losses->cols. Errors assume independent rows and are NaN where the sample is too small
 * to tell. OUT_OF_DOMAIN when losses are too large to add up, see row_sums(), or to be squared
 * where that is needed. */

/* Expected shortfall at a level in (0;1): the mean of a line over the rows in the tail of the
 * sum (Tasche 1999). Rows equal to the value at risk share their weight equally. TOO_FEW;
 * NO_MEMORY. */
status allocate_tail(const samples *losses, double level, pool *p, estimate *part, double *alone);

/* Standard deviation: the covariance of a line with the sum over the sd of the sum. TOO_FEW for
 * fewer than two rows; NO_VARIATION when the sum does not vary; NO_MEMORY. */
status allocate_covariance(const samples *losses, pool *p, estimate *part, double *alone);

#endif
