/* weibull.c - the Weibull distribution: shape a, scale b, survival exp(-(x / b)^a).
 *
 * Method
 *   Closed forms. Moments: the shape solves log Gamma(1 + 2 t) - 2 log Gamma(1 + t) = log(1 +
 *   (sd / mean)^2) for t = 1 / shape, by bracketing; the left side rises from 0 without bound.
 *   Below t = 0.1 it is summed as sum over n >= 2 of zeta(n) (-t)^n (2^n - 2) / n (Abramowitz &
 *   Stegun 1964, 6.1.33), since the two terms nearly cancel. The fit solves the score of the
 *   shape by bracketing; errors from the expected information (Johnson, Kotz & Balakrishnan
 *   1994, ch. 21).
 *
 * Special cases
 *   sd / mean outside [1e-6; 1e6] is refused: no loss data look like that, and the shape
 *   would be beyond 10^6 or below 0.04.
 *
 * Accuracy
 *   Quantile 1e-15 (1 + 1 / a) relative; moments 1e-12.
 */
#include "distributions.h"
#include "../margin_fit.h"
#include "../root.h"

#include <gsl/gsl_sf_zeta.h>
#include <math.h>

static double log_density(const margin *m, double x)
{
    if (!(x > 0)) return -INFINITY;
    double log_y = log(x / m->b);
    return log(m->a / m->b) + (m->a - 1) * log_y - exp(m->a * log_y);
}

static double probability(const margin *m, double x, bool above)
{
    if (!(x > 0)) return above ? 1 : 0;
    double hazard = pow(x / m->b, m->a);
    return above ? exp(-hazard) : -expm1(-hazard);
}

static double quantile(const margin *m, double p, bool above)
{
    return m->b * pow(-(above ? log(p) : log1p(-p)), 1 / m->a);
}

static double mean_of(double shape, double scale)
{
    return scale * exp(lgamma(1 + 1 / shape));
}

/* log(1 + (sd / mean)^2) of the Weibull with shape 1 / t */
static double log_second_moment(double t)
{
    if (t >= 0.1) return lgamma(1 + 2 * t) - 2 * lgamma(1 + t);
    double sum = 0, power = t * t, two = 4;
    for (int n = 2; n < 40; n++) {
        double term = gsl_sf_zeta_int(n) * power * (two - 2) / n;
        sum += n % 2 ? -term : term;
        power *= t;
        two *= 2;
    }
    return sum;
}

static void moments(const margin *m, double *mean, double *sd)
{
    *mean = mean_of(m->a, m->b);
    *sd = *mean * sqrt(expm1(log_second_moment(1 / m->a)));
}

static double surplus(double t, const void *with)
{
    return log_second_moment(t) - *(const double *)with;
}

static status from_moments(double mean, double sd, double threshold, margin *m)
{
    (void)threshold;
    double ratio = sd / mean, t;
    if (!(mean > 0) || ratio < 1e-6 || ratio > 1e6) return OUT_OF_DOMAIN;
    double wanted = log1p(ratio * ratio);
    status s = root_between(surplus, &wanted, 1e-7, 30, &t);
    if (s != OK) return s;
    *m = (margin){ &weibull_distribution, 1 / t, mean / mean_of(1 / t, 1), NAN };
    return OK;
}

/* Logarithms of losses with the largest taken off. */
struct logs {
    const double *loss;
    size_t n;
    double largest, mean;
};

/* the score of the shape, which rises */
static double shape_score(double log_shape, const void *with)
{
    const struct logs *l = with;
    double shape = exp(log_shape), weights = 0, weighted = 0;
    for (size_t i = 0; i < l->n; i++) {
        double y = log(l->loss[i]) - l->largest, weight = exp(shape * y);
        weights += weight;
        weighted += weight * y;
    }
    return weighted / weights - 1 / shape - (l->mean - l->largest);
}

static double scale_for(double shape, const struct logs *l)
{
    double sum = 0;
    for (size_t i = 0; i < l->n; i++) sum += exp(shape * (log(l->loss[i]) - l->largest));
    return exp(l->largest + log(sum / (double)l->n) / shape);
}

static status fit(const double *loss, size_t n, margin *m, double *error)
{
    struct logs l = { loss, n, -INFINITY, mean_log_loss(loss, n) };
    for (size_t i = 0; i < n; i++) l.largest = fmax(l.largest, log(loss[i]));
    double log_shape, count = (double)n;
    status s = root_between(shape_score, &l, log(1e-4), log(1e8), &log_shape);
    if (s != OK) return s;
    double shape = exp(log_shape), scale = scale_for(shape, &l);
    double slope = 1 - 0.57721566490153286, sixth = 1.6449340668482264;      /* pi^2 / 6 */
    *m = (margin){ &weibull_distribution, shape, scale, NAN };
    error[0] = shape / sqrt(sixth * count);
    error[1] = scale / shape * sqrt((1 + slope * slope / sixth) / count);
    return OK;
}

const distribution weibull_distribution = {
    .word = "weibull",
    .parameter = {
        { .name = "shape", .low_open = true },
        { .name = "scale", .low_open = true },
    },
    .log_density = log_density,
    .probability = probability,
    .quantile = quantile,
    .moments = moments,
    .from_moments = from_moments,
    .moments_need = "mean above 0 and sd from a millionth to a million times the mean",
    .fit = fit,
    .fitted_to = ABOVE_ZERO,
};
