/* student_tail.h - Student's t for any number of degrees of freedom, far into its tails.
 *
 * t = sqrt(df) sinh(y). In y the density is proportional to cosh(y)^-df, which neither overflows
 * for small df nor loses digits for large ones. student.h has tables that are a hundred times
 * faster, but reach only to 2^-53.
 */
#ifndef STUDENT_TAIL_H
#define STUDENT_TAIL_H

/* log P(Y > y), 1e-13 + 1e-16 times itself; df in [1e-3;1e9] or a little beyond */
double student_log_tail(double y, double df);

/* P(Y <= y), relative error 1e-13 down to 1e-300 */
double student_below(double y, double df);

/* y with P(Y <= y) = u for 0 < u < 1, to 1e-14 and 1e-13 relative */
double student_quantile(double u, double df);

/* log of the density K cosh(y)^-df of Y at 0, K = Gamma((df + 1)/2) / (sqrt(pi) Gamma(df/2)) */
double student_log_peak(double df);

/* log cosh y, relative also near 0 */
double log_cosh_of(double y);

#endif
