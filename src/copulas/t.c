/* t.c - the copula of the multivariate t distribution, also with a number of degrees of freedom
 * for each column (grouped t).
 *
 * Method
 *   The parameter of a pair is its correlation; see elliptical.c for its tau, which does not depend
 *   on the degrees of freedom when both columns have the same.
 *
 *   Spearman's rho: t_rho.c.
 *
 *   Tail dependence: Embrechts, McNeil & Straumann (2002), as an incomplete beta function.
 *
 * Accuracy
 *   rho to 1e-13.
 */
#include "elliptical.h"
#include "families.h"
#include "../elliptical_points.h"
#include "../t_rho.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_sf_gamma.h>
#include <math.h>

static status rho_from_theta(double theta, double df, double *rho)
{
    if (!(theta >= -1 && theta <= 1 && df > 0)) return OUT_OF_DOMAIN;
    *rho = rho_of_t(theta, df);
    return OK;
}

/* I_w((df + 1)/2, 1/2) with w = (1 + correlation)/2 is twice the t distribution function of the
 * textbooks, without its cancellation. */
static double tail(double theta, double df, enum corner corner)
{
    double w = (1 + (corner == CROSSED ? -theta : theta)) / 2;
    if (w == 0 || w == 1) return w;
    gsl_sf_result lambda;
    int failed = gsl_sf_beta_inc_e((df + 1) / 2, 0.5, w, &lambda);
    return failed == GSL_EUNDRFLW || failed == GSL_SUCCESS ? lambda.val : NAN;
}

const family t_family = {
    .word = "t",
    .has_matrix = true, .has_df = true,
    .theta_low = -1, .theta_high = 1, .theta_low_beyond_pairs = -1,
    .tau_low = -1, .tau_high = 1,
    .theta_from_tau = correlation_from_tau,
    .tau_from_theta = tau_from_correlation,
    .rho_from_theta = rho_from_theta,
    .tail = tail,
    .draw = draw_t,
    .evaluator = &t_evaluator,
    .use = "many lines by one matrix, with extremes that come together in every corner",
    .source = "Demarta & McNeil (2005)",
};
