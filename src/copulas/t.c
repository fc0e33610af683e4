/* t.c - the copula of the multivariate t distribution, also with a number of degrees of freedom
 * for each column (grouped t).
 *
 * Method
 *   The parameter of a pair is its correlation; see elliptical.c for its tau, which does not depend
 *   on the degrees of freedom when both columns have the same.
 *
 *   Spearman's rho: t_rho.c.
 *
 *   Tail dependence: Embrechts, McNeil & Straumann (2002), twice the tail of a t with df + 1
 *   degrees of freedom.
 *
 * Accuracy
 *   rho and tail dependence to 1e-13.
 */
#include "elliptical.h"
#include "families.h"
#include "../elliptical_points.h"
#include "../student_tail.h"
#include "../t_rho.h"

#include <math.h>

static status rho_from_theta(double theta, double df, double *rho)
{
    if (!(theta >= -1 && theta <= 1 && df > 0)) return OUT_OF_DOMAIN;
    *rho = rho_of_t(theta, df);
    return OK;
}

static double tail(double theta, double df, enum corner corner)
{
    double r = corner == CROSSED ? -theta : theta;
    if (fabs(r) == 1) return r > 0 ? 1 : 0;
    return 2 * exp(student_log_tail(asinh(sqrt((1 - r) / (1 + r))), df + 1));
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
