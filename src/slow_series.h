/* slow_series.h - sums whose terms fall only like a power. */
#ifndef SLOW_SERIES_H
#define SLOW_SERIES_H

/* The sum of t_1 + t_2 + ... where t_1 = first, t_n = ratio(n, with) t_(n-1), and t_n falls like
 * n^-(1 + decay) with an expansion in whole powers of 1/n, decay > 0. Error about 1e-15 of the sum
 * for decay > 1, 1e-15 / decay below. Source: Richardson's extrapolation; Sidi, Practical
 * Extrapolation Methods (2003). */
double sum_of_slow_series(double first, double (*ratio)(double n, double with), double with,
                          double decay);

#endif
