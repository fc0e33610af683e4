/* t.c - the copula of the multivariate t distribution, also with a number of degrees of freedom
 * for each column (grouped t).
 *
 * Method
 *   The parameter of a pair is its correlation; see elliptical.c for its tau, which does not depend
 *   on the degrees of freedom when both columns have the same.
 *
 *   Spearman's rho is (6/pi) E asin(correlation sqrt(XY)): given gamma variables G, G', G'' that
 *   scale three independent rows, the pair whose concordance it counts is normal, and
 *   X = G'/(G + G'), Y = G''/(G + G''). With p, q = log(G'/G), log(G''/G) the density is
 *   proportional to exp(a(p + q)) / (1 + exp p + exp q)^(3a), a = df/2, and analytic in a strip of
 *   half-width pi, so that the trapezoid rule converges exponentially (Trefethen & Weideman 2014).
 *
 *   Tail dependence: Embrechts, McNeil & Straumann (2002), as an incomplete beta function.
 *
 * Accuracy
 *   rho to 1e-13.
 */
#include "elliptical.h"
#include "families.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_sf_gamma.h>
#include <math.h>

/* The step of the trapezoid rule: fine enough for the poles of the integrand at a distance of pi
 * and for the width of its peak. Beyond the range the density is below 1e-17 of its peak. */
struct grid {
    double step, range;
};

static struct grid grid_for(double shape)
{
    double width = sqrt(1.5 / shape);
    return (struct grid){ fmin(0.45, 0.65 * width), 40 / shape + 14 * width };
}

/* One row of the double sum: the weights, and weights times asin. */
static void add_row(double correlation, double shape, double p, const struct grid *g,
                    double *weights, double *sum)
{
    double ep = exp(p), peak = -3 * shape * log(3);
    for (double q = -g->range; q <= p; q += g->step) {
        double eq = exp(q), log_weight = shape * (p + q) - 3 * shape * log(1 + ep + eq) - peak;
        if (log_weight < -42) continue;
        double weight = exp(log_weight) * (q < p - g->step / 2 ? 2 : 1);
        *weights += weight;
        *sum += weight * asin(correlation * sqrt(1 / (1 + 1 / ep) / (1 + 1 / eq)));
    }
}

static status rho_from_theta(double theta, double df, double *rho)
{
    if (!(theta >= -1 && theta <= 1 && df > 0)) return OUT_OF_DOMAIN;
    double weights = 0, sum = 0;
    struct grid g = grid_for(df / 2);
    for (double p = -g.range; p <= g.range; p += g.step)
        add_row(theta, df / 2, p, &g, &weights, &sum);
    *rho = fabs(theta) == 1 ? theta : sum / weights / (PI / 6);
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
};
