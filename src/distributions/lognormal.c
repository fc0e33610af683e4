/* lognormal.c - the lognormal distribution: log x is normal with mean a (mu) and sd b (sigma).
 *
 * Method
 *   The normal distribution of log x. Moments: sigma^2 = log(1 + (sd / mean)^2), mu = log(mean) -
 *   sigma^2 / 2. The fit is that of the normal to log x.
 *
 * Special cases
 *   x <= 0 has probability 0.
 *
 * Accuracy
 *   Quantile to (1 + |log x|) 1e-16 relative or a few times that.
 */
#include "distributions.h"
#include "../margin_fit.h"

#include <gsl/gsl_cdf.h>
#include <math.h>

static double log_density(const margin *m, double x)
{
    if (!(x > 0)) return -INFINITY;
    double y = log(x), z = (y - m->a) / m->b;
    return -0.5 * z * z - log(m->b) - y - 0.91893853320467274178;
}

static double probability(const margin *m, double x, bool above)
{
    if (!(x > 0)) return above ? 1 : 0;
    double z = (log(x) - m->a) / m->b;
    return 0.5 * erfc((above ? z : -z) * 0.70710678118654752440);
}

static double quantile(const margin *m, double p, bool above)
{
    double z = gsl_cdf_ugaussian_Pinv(p);
    return exp(m->a + m->b * (above ? -z : z));
}

static void moments(const margin *m, double *mean, double *sd)
{
    *mean = exp(m->a + 0.5 * m->b * m->b);
    *sd = *mean * sqrt(expm1(m->b * m->b));
}

static status from_moments(double mean, double sd, double threshold, margin *m)
{
    (void)threshold;
    if (!(mean > 0)) return OUT_OF_DOMAIN;
    double ratio = sd / mean, variance = log1p(ratio * ratio);
    *m = (margin){ &lognormal_distribution, log(mean) - 0.5 * variance, sqrt(variance), NAN };
    return OK;
}

static status fit(const double *loss, size_t n, margin *m, double *error)
{
    double count = (double)n, mu = mean_log_loss(loss, n), squares = 0;
    for (size_t i = 0; i < n; i++) {
        double away = log(loss[i]) - mu;
        squares += away * away;
    }
    double sigma = sqrt(squares / count);
    *m = (margin){ &lognormal_distribution, mu, sigma, NAN };
    error[0] = sigma / sqrt(count);
    error[1] = sigma / sqrt(2 * count);
    return OK;
}

const distribution lognormal_distribution = {
    .word = "lognormal",
    .scores = BY_LOG_SCORE,
    .parameter = {
        { .name = "mu", .low = -INFINITY },
        { .name = "sigma", .low_open = true },
    },
    .log_density = log_density,
    .probability = probability,
    .quantile = quantile,
    .moments = moments,
    .from_moments = from_moments,
    .moments_need = "mean above 0",
    .fit = fit,
    .fitted_to = ABOVE_ZERO,
};
