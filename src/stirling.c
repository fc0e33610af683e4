/* stirling.c - the gamma function by Stirling's series
 *
 * Method
 *   Abramowitz & Stegun 6.1.41; an argument below 10 is moved up by 10 with
 *   Gamma(a) = Gamma(a + 10) / (a (a+1) ... (a+9)).
 *
 * Special cases
 *   None: a is positive.
 *
 * Accuracy
 *   As in stirling.h; the first term left out is below 1e-15 at 10.
 */
#include "stirling.h"

#include "elementary.h"

static const double LOG_SQRT_2_PI = 0.918938533204672741780;

double log_stirling_factor(double a)
{
    if (a < 10.0) {
        double product = 1.0, moved = a + 10.0;
        for (int k = 0; k < 10; k++) product *= a + k;
        return log_stirling_factor(moved) + (moved - 0.5) * portable_log(moved) - 10.0
               - (a - 0.5) * portable_log(a) - portable_log(product);
    }
    double z = 1.0 / (a * a), sum = 1.0 / 156.0;
    sum = sum * z - 691.0 / 360360.0;
    sum = sum * z + 1.0 / 1188.0;
    sum = sum * z - 1.0 / 1680.0;
    sum = sum * z + 1.0 / 1260.0;
    sum = sum * z - 1.0 / 360.0;
    sum = sum * z + 1.0 / 12.0;
    return sum / a;
}

double portable_log_gamma(double a)
{
    return (a - 0.5) * portable_log(a) - a + LOG_SQRT_2_PI + log_stirling_factor(a);
}
