/* gaussian.c - the copula of the multivariate normal distribution.
 *
 * Method
 *   The parameter of a pair is its correlation; see elliptical.c for its tau.
 */
#include "elliptical.h"
#include "families.h"
#include "../elliptical_points.h"

#include <math.h>

/* Pearson (1907) */
static status rho_from_theta(double theta, double df, double *rho)
{
    (void)df;
    if (!(theta >= -1 && theta <= 1)) return OUT_OF_DOMAIN;
    *rho = fabs(theta) == 1 ? theta : asin(theta / 2) / (PI / 6);
    return OK;
}

/* none but at perfect dependence (Sibuya 1960) */
static double tail(double theta, double df, enum corner corner)
{
    (void)df;
    return (corner == CROSSED ? -theta : theta) == 1 ? 1 : 0;
}

const family gaussian_family = {
    .word = "gaussian",
    .has_matrix = true,
    .theta_low = -1, .theta_high = 1, .theta_low_beyond_pairs = -1,
    .tau_low = -1, .tau_high = 1,
    .theta_from_tau = correlation_from_tau,
    .tau_from_theta = tau_from_correlation,
    .rho_from_theta = rho_from_theta,
    .tail = tail,
    .draw = draw_gaussian,
    .evaluator = &gaussian_evaluator,
    .use = "many lines by one matrix of correlations; extremes far out come apart",
    .source = "Pearson (1907), Sibuya (1960)",
};
