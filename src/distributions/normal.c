/* normal.c - the normal distribution: mean a, standard deviation b.
 *
 * Method
 *   Probability by erfc(); quantile by Wichura (1988), AS 241, as GSL has it. The fit takes the
 *   mean and the sd with divisor n.
 *
 * Special cases
 *   Any mean and any sd above 0 are moments of a normal.
 *
 * Accuracy
 *   The standard normal quantile 1e-15 relative; the loss to 1e-15 of the larger of |x| and b.
 */
#include "distributions.h"
#include "../margin_fit.h"

#include <gsl/gsl_cdf.h>
#include <math.h>

static double log_density(const margin *m, double x)
{
    double z = (x - m->a) / m->b;
    return -0.5 * z * z - log(m->b) - 0.91893853320467274178;
}

static double probability(const margin *m, double x, bool above)
{
    double z = (x - m->a) / m->b;
    return 0.5 * erfc((above ? z : -z) * 0.70710678118654752440);
}

static double quantile(const margin *m, double p, bool above)
{
    double z = gsl_cdf_ugaussian_Pinv(p);
    return m->a + m->b * (above ? -z : z);
}

static void moments(const margin *m, double *mean, double *sd)
{
    *mean = m->a;
    *sd = m->b;
}

static status from_moments(double mean, double sd, double threshold, margin *m)
{
    (void)threshold;
    *m = (margin){ &normal_distribution, mean, sd, NAN };
    return OK;
}

/* The sd with divisor n, in units of the largest distance from the mean, so that no scale of the
 * losses is too large or too small to be squared. */
static double deviation(const double *loss, size_t n, double mean)
{
    double largest = 0, squares = 0;
    for (size_t i = 0; i < n; i++) largest = fmax(largest, fabs(loss[i] - mean));
    for (size_t i = 0; i < n; i++) {
        double away = (loss[i] - mean) / largest;
        squares += away * away;
    }
    return largest * sqrt(squares / (double)n);
}

static status fit(const double *loss, size_t n, margin *m, double *error)
{
    double count = (double)n, mean = mean_loss(loss, n), sd = deviation(loss, n, mean);
    *m = (margin){ &normal_distribution, mean, sd, NAN };
    error[0] = sd / sqrt(count);
    error[1] = sd / sqrt(2 * count);
    return OK;
}

const distribution normal_distribution = {
    .word = "normal",
    .scores = BY_SCORE,
    .parameter = {
        { .name = "mean", .low = -INFINITY },
        { .name = "sd", .low_open = true },
    },
    .log_density = log_density,
    .probability = probability,
    .quantile = quantile,
    .moments = moments,
    .from_moments = from_moments,
    .moments_need = "sd above 0",
    .fit = fit,
};
