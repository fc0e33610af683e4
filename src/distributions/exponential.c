/* exponential.c - the exponential distribution with mean a.
 *
 * Method
 *   Closed forms. Special cases: by moments only the mean counts, since the sd equals it.
 *
 * Accuracy
 *   1e-15 relative in both tails.
 */
#include "distributions.h"
#include "../margin_fit.h"

#include <math.h>

static double log_density(const margin *m, double x)
{
    return x < 0 ? -INFINITY : -x / m->a - log(m->a);
}

static double probability(const margin *m, double x, bool above)
{
    if (!(x > 0)) return above ? 1 : 0;
    return above ? exp(-x / m->a) : -expm1(-x / m->a);
}

static double quantile(const margin *m, double p, bool above)
{
    return -m->a * (above ? log(p) : log1p(-p));
}

static void moments(const margin *m, double *mean, double *sd)
{
    *mean = *sd = m->a;
}

static status from_moments(double mean, double sd, double threshold, margin *m)
{
    (void)sd;
    (void)threshold;
    if (!(mean > 0)) return OUT_OF_DOMAIN;
    *m = (margin){ &exponential_distribution, mean, NAN, NAN };
    return OK;
}

static status fit(const double *loss, size_t n, margin *m, double *error)
{
    double mean = mean_loss(loss, n);
    *m = (margin){ &exponential_distribution, mean, NAN, NAN };
    error[0] = mean / sqrt((double)n);
    return OK;
}

const distribution exponential_distribution = {
    .word = "exponential",
    .parameter = { { .name = "mean", .low_open = true } },
    .log_density = log_density,
    .probability = probability,
    .quantile = quantile,
    .moments = moments,
    .from_moments = from_moments,
    .moments_need = "mean above 0",
    .fit = fit,
    .fitted_to = FROM_ZERO,
};
