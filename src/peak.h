/* peak.h - integrals of positive functions with one peak, given by their logarithm. */
#ifndef PEAK_H
#define PEAK_H

/* The log of the integral of exp(log_f(x)) for x from `low` to `high`, which may be infinite. In
 * there log_f rises to one maximum, somewhere within from < to, and falls again, beyond any bound
 * if the end is infinite; it may be -infinity far to the right. About 1e-12 relative, however
 * narrow or wide the peak and however sudden its sides, but for what changes over less than a
 * hundredth of the distance from the peak: put an end there. -infinity where log_f is
 * everywhere. */
double log_integral_of_peak(double (*log_f)(double x, const void *with), const void *with,
                            double low, double high, double from, double to);

#endif
