/* stirling.h - the gamma function, the same bits everywhere.
 */
#ifndef STIRLING_H
#define STIRLING_H

/* log of Gamma(a) exp(a) / (sqrt(2 pi / a) a^a), which tends to 0 as 1/(12 a): what Stirling's
 * formula leaves out. a > 0; error below 2e-14. */
double log_stirling_factor(double a);

/* log Gamma(a), a > 0; error below 3e-14, or 1e-15 of the result where that is more */
double portable_log_gamma(double a);

#endif
