/* elliptical.c - Kendall's tau of elliptical copulas.
 *
 * Method
 *   tau = 2 asin(correlation) / pi (Greiner 1909), for every elliptical copula (Lindskog, McNeil &
 *   Schmock 2003).
 *
 * Accuracy
 *   4e-16 absolute, 4e-16 relative near 0; -1, 0 and 1 are exact.
 */
#include "elliptical.h"

#include <math.h>

status correlation_from_tau(double tau, double *correlation)
{
    if (!(tau >= -1 && tau <= 1)) return OUT_OF_DOMAIN;
    *correlation = fabs(tau) == 1 ? tau : sin(PI / 2 * tau);
    return OK;
}

status tau_from_correlation(double correlation, double *tau)
{
    if (!(correlation >= -1 && correlation <= 1)) return OUT_OF_DOMAIN;
    *tau = fabs(correlation) == 1 ? correlation : asin(correlation) / (PI / 2);
    return OK;
}
