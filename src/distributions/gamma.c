/* gamma.c - the gamma distribution: shape a, scale b, mean a b.
 *
 * Method
 *   incomplete_gamma.c. Moments: shape = (mean / sd)^2, scale = sd^2 / mean. The fit solves log a -
 *   psi(a) = log(mean of x) - mean of log x by bracketing; errors from the expected information
 *   (Johnson, Kotz & Balakrishnan 1994, ch. 17).
 *
 * Special cases
 *   A quantile below the smallest number is 0 (shapes well below 1).
 *
 * Accuracy
 *   1e-12 relative, see incomplete_gamma.c. The log-density keeps its digits where losses are all
 *   but alike and the shape is huge, as far as the losses themselves tell them apart.
 */
#include "distributions.h"
#include "../incomplete_gamma.h"
#include "../margin_fit.h"
#include "../root.h"

#include <gsl/gsl_sf_psi.h>
#include <math.h>

static double log_density(const margin *m, double x)
{
    if (!(x > 0)) return -INFINITY;
    return gamma_log_power(m->a, x / m->b) + log(m->a) - log(x);
}

static double probability(const margin *m, double x, bool above)
{
    return gamma_probability(m->a, x / m->b, above);
}

static double quantile(const margin *m, double p, bool above)
{
    return m->b * gamma_quantile(m->a, p, above);
}

static void moments(const margin *m, double *mean, double *sd)
{
    *mean = m->a * m->b;
    *sd = sqrt(m->a) * m->b;
}

static status from_moments(double mean, double sd, double threshold, margin *m)
{
    (void)threshold;
    if (!(mean > 0)) return OUT_OF_DOMAIN;
    double ratio = mean / sd;
    *m = (margin){ &gamma_distribution, ratio * ratio, sd * (sd / mean), NAN };
    return OK;
}

/* log a - psi(a), which falls from infinity to 0 */
static double log_less_psi(double a)
{
    if (a < 30) return log(a) - gsl_sf_psi(a);
    double s = 1 / (a * a);
    return 1 / (2 * a) + s * (1.0 / 12 - s * (1.0 / 120 - s * (1.0 / 252 - s / 240)));
}

static double surplus(double log_shape, const void *with)
{
    return log_less_psi(exp(log_shape)) - *(const double *)with;
}

/* log of the mean less the mean of the logs, as a mean of terms above 0 */
static double log_gap(const double *loss, size_t n, double mean)
{
    double sum = 0;
    for (size_t i = 0; i < n; i++) {
        double away = (loss[i] - mean) / mean;
        sum += away - (away > -0.5 ? log1p(away) : log(loss[i] / mean));
    }
    return sum / (double)n;
}

static status fit(const double *loss, size_t n, margin *m, double *error)
{
    double mean = mean_loss(loss, n), gap = log_gap(loss, n, mean), log_shape;
    status s = root_between(surplus, &gap, log(1e-6), log(1e15), &log_shape);
    if (s != OK) return s;
    double a = exp(log_shape), b = mean / a, trigamma = gsl_sf_psi_1(a);
    double information = (a < 1e4 ? a * trigamma - 1 : (0.5 + 1 / (6 * a)) / a) * (double)n;
    *m = (margin){ &gamma_distribution, a, b, NAN };
    error[0] = sqrt(a / information);
    error[1] = b * sqrt(trigamma / information);
    return OK;
}

const distribution gamma_distribution = {
    .word = "gamma",
    .costly = true,
    .parameter = {
        { .name = "shape", .low_open = true },
        { .name = "scale", .low_open = true },
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
