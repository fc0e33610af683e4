/* lomax.c - the Pareto distribution of type II: alpha a, scale b, survival (1 + x / b)^-a.
 *
 * Method
 *   Closed forms. Moments, with r = (sd / mean)^2: alpha = 2 r / (r - 1), scale = mean (alpha - 1).
 *   The fit finds the scale by bracketing, alpha being n / sum of log(1 + x / b); errors from the
 *   expected information. Where the sd of the losses is below their mean, the likelihood rises
 *   towards the exponential without end, and there is no fit.
 *
 * Special cases
 *   The mean is infinite for alpha <= 1, the sd for alpha <= 2; so a finite sd is always larger
 *   than the mean. A quantile beyond the largest number is INFINITY.
 *
 * Accuracy
 *   1e-15 relative in both tails, times log(1 + x / b) for small alpha.
 */
#include "distributions.h"
#include "../root.h"

#include <math.h>

static double log_density(const margin *m, double x)
{
    return x < 0 ? -INFINITY : log(m->a / m->b) - (m->a + 1) * log1p(x / m->b);
}

static double probability(const margin *m, double x, bool above)
{
    if (!(x > 0)) return above ? 1 : 0;
    double log_survival = -m->a * log1p(x / m->b);
    return above ? exp(log_survival) : -expm1(log_survival);
}

static double quantile(const margin *m, double p, bool above)
{
    return m->b * expm1(-(above ? log(p) : log1p(-p)) / m->a);
}

static void moments(const margin *m, double *mean, double *sd)
{
    double alpha = m->a;
    *mean = alpha > 1 ? m->b / (alpha - 1) : INFINITY;
    *sd = alpha > 2 ? m->b / (alpha - 1) * sqrt(alpha / (alpha - 2)) : INFINITY;
}

static status from_moments(double mean, double sd, double threshold, margin *m)
{
    (void)threshold;
    if (!(mean > 0 && sd > mean)) return OUT_OF_DOMAIN;
    double excess = (sd - mean) / mean * (sd + mean) / mean;      /* r - 1 */
    double alpha = 2 + 2 / excess;
    *m = (margin){ &lomax_distribution, alpha, mean * (1 + 2 / excess), NAN };
    return OK;
}

struct losses { const double *at; size_t n; };

static double alpha_for(double scale, const struct losses *l)
{
    double sum = 0;
    for (size_t i = 0; i < l->n; i++) sum += log1p(l->at[i] / scale);
    return (double)l->n / sum;
}

/* the slope of the likelihood in log b, over n, with the best alpha for each b */
static double scale_score(double log_scale, const void *with)
{
    const struct losses *l = with;
    double scale = exp(log_scale), sum = 0;
    for (size_t i = 0; i < l->n; i++) sum += l->at[i] / (scale + l->at[i]);
    return (alpha_for(scale, l) + 1) * sum / (double)l->n - 1;
}

static status fit(const double *loss, size_t n, margin *m, double *error)
{
    const struct losses l = { loss, n };
    double lowest = INFINITY, highest = 0, log_scale, count = (double)n;
    for (size_t i = 0; i < n; i++) {
        lowest = fmin(lowest, loss[i]);
        highest = fmax(highest, loss[i]);
    }
    status s = root_between(scale_score, &l, log(lowest) - 10, log(highest) + 15, &log_scale);
    if (s != OK) return s;
    double b = exp(log_scale), a = alpha_for(b, &l);
    *m = (margin){ &lomax_distribution, a, b, NAN };
    error[0] = a * (a + 1) / sqrt(count);
    error[1] = b * (a + 1) * sqrt((a + 2) / (a * count));
    return OK;
}

const distribution lomax_distribution = {
    .word = "lomax",
    .parameter = {
        { .name = "alpha", .low_open = true },
        { .name = "scale", .low_open = true },
    },
    .log_density = log_density,
    .probability = probability,
    .quantile = quantile,
    .moments = moments,
    .from_moments = from_moments,
    .moments_need = "mean above 0 and sd above the mean",
    .fit = fit,
    .fitted_to = ABOVE_ZERO,
    .fit_needs = "losses that vary more than an exponential, whose sd is above their mean",
};
