/* pareto.c - the Pareto distribution of type I: alpha a, threshold b, survival (b / x)^a from b on.
 *
 * Method
 *   Closed forms. Moments: with a given threshold, alpha = mean / (mean - threshold), and the
 *   sd does not count; without one, alpha = 1 + sqrt(1 + (mean / sd)^2), threshold = mean
 *   (alpha - 1) / alpha.
 *
 *   The fit takes the smallest loss for the threshold and alpha = n / sum of log(x / b); the error
 *   of the threshold is that of the minimum of n losses, b / (alpha n).
 *
 * Special cases
 *   The mean is infinite for alpha <= 1, the sd for alpha <= 2. A quantile beyond the largest
 *   number is INFINITY.
 *
 * Accuracy
 *   1e-15 relative in both tails, times log(x / b) for small alpha.
 */
#include "distributions.h"

#include <math.h>

static double log_density(const margin *m, double x)
{
    return x < m->b ? -INFINITY : log(m->a / m->b) - (m->a + 1) * log(x / m->b);
}

/* log(x / b), which keeps its digits next to the threshold */
static double log_ratio(double x, double b)
{
    return x < 2 * b ? log1p((x - b) / b) : log(x / b);
}

static double probability(const margin *m, double x, bool above)
{
    if (!(x > m->b)) return above ? 1 : 0;
    double log_survival = -m->a * log_ratio(x, m->b);
    return above ? exp(log_survival) : -expm1(log_survival);
}

static double quantile(const margin *m, double p, bool above)
{
    return m->b * exp(-(above ? log(p) : log1p(-p)) / m->a);
}

static void moments(const margin *m, double *mean, double *sd)
{
    double alpha = m->a;
    *mean = alpha > 1 ? m->b * alpha / (alpha - 1) : INFINITY;
    *sd = alpha > 2 ? m->b / (alpha - 1) * sqrt(alpha / (alpha - 2)) : INFINITY;
}

static status from_moments(double mean, double sd, double threshold, margin *m)
{
    double alpha;
    if (!(mean > 0)) return OUT_OF_DOMAIN;
    if (isnan(threshold)) {
        double ratio = mean / sd;
        alpha = 1 + sqrt(1 + ratio * ratio);
        threshold = mean * (alpha - 1) / alpha;
    } else {
        if (!(threshold > 0 && threshold < mean)) return OUT_OF_DOMAIN;
        alpha = mean / (mean - threshold);
    }
    *m = (margin){ &pareto_distribution, alpha, threshold, NAN };
    return OK;
}

static status fit(const double *loss, size_t n, margin *m, double *error)
{
    double lowest = INFINITY, logs = 0, count = (double)n;
    for (size_t i = 0; i < n; i++) lowest = fmin(lowest, loss[i]);
    for (size_t i = 0; i < n; i++) logs += log_ratio(loss[i], lowest);
    double alpha = count / logs;
    *m = (margin){ &pareto_distribution, alpha, lowest, NAN };
    error[0] = alpha / sqrt(count);
    error[1] = lowest / (alpha * count);
    return OK;
}

const distribution pareto_distribution = {
    .word = "pareto",
    .parameter = {
        { .name = "alpha", .low_open = true },
        { .name = "threshold", .low_open = true },
    },
    .log_density = log_density,
    .probability = probability,
    .quantile = quantile,
    .moments = moments,
    .from_moments = from_moments,
    .moments_need = "mean above 0 and, where there is one, a threshold between 0 and the mean",
    .takes_threshold = true,
    .fit = fit,
    .fitted_to = ABOVE_ZERO,
};
