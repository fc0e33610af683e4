/* gumbel.c - psi(t) = exp(-t^(1/theta)), theta >= 1 (Gumbel 1960).
 *
 * Method
 *   tau = 1 - 1/theta. Spearman's rho is an integral of Pickands' function. The frailty is positive
 *   stable with index 1/theta (Marshall & Olkin 1988).
 *
 * Special cases
 *   theta = 1, tau = 0: independence. tau = 1 is not reached.
 *   Beyond theta = 1e17 tau is 1 to rounding; far beyond, the frailty would leave the range of
 *   doubles.
 *
 * Accuracy
 *   tau and theta to 2 units in the last place, tau and rho relative also near 0.
 */
#include "families.h"
#include "../archimedean.h"
#include "../elementary.h"
#include "../frailty.h"
#include "../quadrature.h"
#include "../stable_sums.h"

#include <math.h>

static status theta_from_tau(double tau, double *theta)
{
    if (!(tau >= 0 && tau < 1)) return OUT_OF_DOMAIN;
    *theta = 1 / (1 - tau);
    return OK;
}

static status tau_from_theta(double theta, double *tau)
{
    if (!(theta >= 1)) return OUT_OF_DOMAIN;
    *tau = theta < 2 ? (theta - 1) / theta : 1 - 1 / theta;
    return OK;
}

/* (1 - A)(3 + A) / (1 + A)^2, where A is Pickands' function at w = 1/(1 + exp p), p > 0. log A is
 * summed from two negative parts, so that nothing cancels near theta = 1. */
static double integrand(double p, double theta)
{
    double small = exp(-p);
    double powered = log1p(small * expm1(-(theta - 1) * p) / (1 + small));
    double log_a = powered / theta - log1p(small) * (theta - 1) / theta;
    double rise = -expm1(log_a), a = 1 - rise;
    return rise * (3 + a) / ((1 + a) * (1 + a)) * small / ((1 + small) * (1 + small));
}

/* rho = 12 int (1 + A)^-2 dw - 3 (Nelsen 2006), even in p. Panels of 5 in theta p, where the
 * integrand bends, then of 5 in p; its poles are pi away in either. */
static status rho_from_theta(double theta, double df, double *rho)
{
    (void)df;
    if (!(theta >= 1 && theta < HUGE_VAL)) return OUT_OF_DOMAIN;
    double sum = 0, from = 0;
    for (int panel = 0; panel < 16; panel++) {
        double to = panel < 8 ? 5 * (panel + 1) / theta : fmax(from, 5.0 * (panel - 7));
        sum += integral_over(integrand, theta, from, to);
        from = to;
    }
    *rho = 6 * sum;
    return OK;
}

/* (1 + A0)^-2 - (1 + A)^-2, where A0 = max(w, 1 - w) is Pickands' function of the upper bound */
static double below_bound(double p, double theta)
{
    double small = exp(-p), bound = 1 / (1 + small), rise = expm1(log1p(exp(-theta * p)) / theta);
    double a = bound * (1 + rise), ends = (1 + bound) * (1 + a);
    return bound * rise * (2 + bound + a) / (ends * ends) * small * bound * bound;
}

/* Where theta is large all of it lies within 40 in theta p. */
static double one_minus_rho(double theta)
{
    double sum = 0;
    for (int panel = 0; panel < 8; panel++)
        sum += integral_over(below_bound, theta, 5 * panel / theta, 5 * (panel + 1) / theta);
    return 24 * sum;
}

/* 2 - 2^(1/theta) */
static double tail(double theta, double df, enum corner corner)
{
    (void)df;
    return corner == UPPER ? -2 * expm1((1 - theta) / theta * log(2)) : 0;
}

static double psi(double log_t, double theta)
{
    return portable_exp(-portable_exp(log_t / theta));
}

static double log_inverse(double u, double theta)
{
    return theta * log(-log(u));
}

static double log_inverse_turned(double u, double theta)
{
    return theta * log(-log1p(-u));
}

/* v - C(1-u, v) = v (1 - exp(y - (x^theta + y^theta)^(1/theta))) with x = -log(1-u), y = -log v */
static double one_turned(double u, double v, double theta)
{
    double y = -log(v), log_ratio = theta * log(-log1p(-u) / y);
    return -v * expm1(-y * expm1(portable_log1pexp(log_ratio) / theta));
}

/* The probability that a column is beyond exp(-y) given that the other is exp(-x), one less
 * exp(x - z) (z/x)^(1-theta) with z = (x^theta + y^theta)^(1/theta). */
static double beyond(double x, double y, double theta)
{
    double log_rise = portable_log1pexp(theta * (log(y) - log(x))) / theta;
    return -expm1(-x * expm1(log_rise) - (theta - 1) * log_rise);
}

static double pair_beyond(double u, double v, double theta)
{
    return beyond(-log(u), -log(v), theta);
}

struct given {
    double theta, y;                         /* -log of the other column */
};

static double above_given(double lost, const void *with)
{
    const struct given *k = with;
    return beyond(-log1p(-lost), k->y, k->theta);
}

/* u + v - 1 + C(1-u, 1-v) */
static double both_turned(double u, double v, double theta)
{
    struct given k = { theta, -log1p(-fmax(u, v)) };
    double small = fmin(u, v);
    return integral_to_bend(above_given, &k, small, small / theta);
}

static status prepare(double theta, size_t highest, pool *p, void **prepared)
{
    struct stable_sums *sums;
    status s = stable_sums_of(1 / theta, (theta - 1) / theta, highest, p, &sums);
    *prepared = sums;
    return s;
}

/* psi(t) / t^order times a polynomial in t^(1/theta) with positive coefficients */
static double log_derivative(void *prepared, size_t order, double log_t, double theta)
{
    double log_x = log_t / theta;
    return log_stable_sum(prepared, order, log_x) - exp(log_x) - (double)order * log_t;
}

static const struct generator generator = {
    .log_inverse = log_inverse,
    .log_inverse_turned = log_inverse_turned,
    .prepare = prepare,
    .log_derivative = log_derivative,
    .derivative_seconds = stable_sum_seconds,
    .beyond = pair_beyond,
    .turned = { one_turned, both_turned },
};

const family gumbel_family = {
    .word = "gumbel",
    .has_theta = true,
    .theta_low = 1, .theta_high = 1e17, .theta_low_beyond_pairs = 1,
    .tau_low = 0, .tau_high = 1, .tau_open = 2,
    .theta_from_tau = theta_from_tau,
    .tau_from_theta = tau_from_theta,
    .rho_from_theta = rho_from_theta,
    .one_minus_rho = one_minus_rho,
    .tail = tail,
    .draw = draw_by_frailty,
    .frailty = &stable_frailty,
    .psi = psi,
    .evaluator = &archimedean_evaluator,
    .generator = &generator,
    .use = "large losses that come together, such as losses and their expense",
    .source = "Gumbel (1960)",
};
