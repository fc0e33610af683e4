/* elliptical.h - what the gaussian and the t copula have in common. */
#ifndef ELLIPTICAL_H
#define ELLIPTICAL_H

#include "../status.h"

static const double PI = 3.14159265358979323846;

/* The correlation sin(pi tau / 2) that an elliptical copula with this Kendall's tau has, whatever
 * its degrees of freedom; exact at -1, 0 and 1, elsewhere to 4e-16. OUT_OF_DOMAIN outside [-1;1].
 * Source: Greiner (1909); Lindskog, McNeil & Schmock (2003). */
status correlation_from_tau(double tau, double *correlation);

/* Its inverse, 2 asin(correlation) / pi, with the same exact values. */
status tau_from_correlation(double correlation, double *tau);

#endif
