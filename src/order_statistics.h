/* order_statistics.h - the k-th smallest of a sample, without sorting it all. */
#ifndef ORDER_STATISTICS_H
#define ORDER_STATISTICS_H

#include <stddef.h>

/* Which order statistic of n is the quantile at this level in [0;1]: k = ceil(n level), from 1
 * to n, with n level taken as whole when it is within 1e-9 of a whole number, so that 100 x
 * 0.99 is 99. */
size_t order_of(size_t n, double level);

/* n level, taken as whole by the same rule */
double whole_if_near(double x);

/* Rearranges x[0..n-1] until each x[wanted[i] - 1] is what a full sort would put there. wanted
 * holds `count` orders from 1 to n, rising. O(n log count) on average, O(n log n) at worst. No
 * NaN. */
void select_orders(double *x, size_t n, const size_t *wanted, size_t count);

/* the k-th smallest, k from 1 to n; x is rearranged */
double select_order(double *x, size_t n, size_t k);

/* Sorts, lowest first. */
void sort_numbers(double *x, size_t n);

#endif
