/* clayton.c - psi(t) = (1 + t)^(-1/theta), theta >= 0; a pair also has theta in [-1;0) (Clayton
 * 1978).
 *
 * Method
 *   tau = theta / (theta + 2). For theta > 0 the frailty is gamma with shape 1/theta (Marshall &
 *   Olkin 1988). A pair with negative theta is drawn by inverting its conditional distribution:
 *   with a = -theta, dC/du = w gives v^a = 1 - u^a (1 - w^(a/(1-a))).
 *   With negative theta C = max(u^a + v^a - 1, 0)^(1/a).
 *   Points with theta > 0: clayton_points.c.
 *   Spearman's rho is a hypergeometric series at 1, positive and negative theta having one each;
 *   where dependence is strong, strong_rho.c.
 *
 * Special cases
 *   theta = 0: independence. theta = -1, tau = -1: v = 1 - u. tau = 1 is not reached.
 *   Beyond theta = 1e17 tau is 1 to rounding; far beyond, the frailty would leave the range of
 *   doubles.
 *
 * Accuracy
 *   tau and theta to 2 units in the last place; rho to 2e-14, from theta 10 its distance
 *   from 1 to 1e-13.
 */
#include "families.h"
#include "../archimedean.h"
#include "../clayton_points.h"
#include "../elementary.h"
#include "../frailty.h"
#include "../quadrature.h"
#include "../slow_series.h"
#include "../strong_rho.h"

#include <math.h>

static status theta_from_tau(double tau, double *theta)
{
    if (!(tau >= -1 && tau < 1)) return OUT_OF_DOMAIN;
    *theta = 2 * tau / (1 - tau);
    return OK;
}

static status tau_from_theta(double theta, double *tau)
{
    if (!(theta >= -1)) return OUT_OF_DOMAIN;
    *tau = theta / (theta + 2);
    return OK;
}

/* For theta > 0, a = 1/theta: rho is 3 times the sum of (a)_n n! / ((2a+1)_n)^2 over n >= 1. With
 * x = u^theta, y = v^theta expand C = (xy)^a (1 - (1-x)(1-y))^-a and integrate. */
static double ratio_positive(double n, double a)
{
    return (a + n - 1) * n / ((2 * a + n) * (2 * a + n));
}

/* For theta < 0, b = -1/theta: the integral of C is b^2 / ((2b+1)(b+1)) times the sum of
 * (1-b)_n (2b+1)_n / ((2b+2)_n (b+2)_n) over n >= 0, likewise. */
static double ratio_negative(double n, double b)
{
    n--;
    return (n - b) * (2 * b + n) / ((2 * b + n + 1) * (b + n + 1));
}

/* Down to theta = -1/40 the first series still holds, to exp(-40), as far as its terms fall. */
static double rho_near_independence(double theta)
{
    double a = 1 / theta, term = theta / ((2 + theta) * (2 + theta)), sum = 0;
    for (int n = 2; n < 20 && term != 0; n++) {
        sum += term;
        term *= ratio_positive(n, a);
    }
    return 3 * sum;
}

static status rho_from_theta(double theta, double df, double *rho)
{
    (void)df;
    if (!(theta >= -1 && theta < HUGE_VAL)) return OUT_OF_DOMAIN;
    if (fabs(theta) < 0.025) {
        *rho = rho_near_independence(theta);
    } else if (theta > 10) {
        *rho = 1 - one_minus_rho_of_clayton(theta);
    } else if (theta > 0) {
        double a = 1 / theta, first = a / ((2 * a + 1) * (2 * a + 1));
        *rho = 3 * sum_of_slow_series(first, ratio_positive, a, 3 * a);
    } else {
        double b = -1 / theta, sum = sum_of_slow_series(1, ratio_negative, b, 2 * b + 1);
        *rho = 12 * b * b / ((2 * b + 1) * (b + 1)) * sum - 3;
    }
    return OK;
}

/* 2^(-1/theta) in the lower corner; v = 1 - u for theta = -1 */
static double tail(double theta, double df, enum corner corner)
{
    (void)df;
    if (corner == LOWER && theta > 0) return exp2(-1 / theta);
    return corner == CROSSED && theta == -1 ? 1 : 0;
}

static double psi(double log_t, double theta)
{
    return portable_exp(-portable_log1pexp(log_t) / fmax(theta, 1e-20));
}

/* For theta in [-1;0). With x = u^a (1 - w^b) near 1, 1 - x is summed from positive parts. */
static double conditional_quantile(double u, double w, double theta)
{
    double a = -theta;
    if (a == 1) return 1 - u;
    double log_u = a * portable_log(u), log_w = a / (1 - a) * portable_log(w);
    double x = -portable_expm1(log_w) * portable_exp(log_u);
    double log_rest = x < 0.5 ? portable_log1p(-x)
                              : portable_log(-portable_expm1(log_u) + portable_exp(log_u + log_w));
    return portable_exp(log_rest / a);
}

static double positive(double theta)
{
    return fmax(theta, 1e-20);               /* which nothing can tell from independence */
}

/* log(exp(x) - 1) */
static double log_expm1(double x)
{
    return x > 1 ? x + log1p(-exp(-x)) : log(expm1(x));
}

/* log(u^-theta - 1) */
static double log_inverse(double u, double theta)
{
    return log_expm1(-positive(theta) * log(u));
}

static double log_inverse_turned(double u, double theta)
{
    return log_expm1(-positive(theta) * log1p(-u));
}

/* v - C(1-u, v) = v (1 - (1 + v^theta t)^(-1/theta)), t = (1-u)^-theta - 1 */
static double one_turned(double u, double v, double theta)
{
    double a = positive(theta), log_r = a * log(v) + log_inverse_turned(u, a);
    return -v * expm1(-portable_log1pexp(log_r) / a);
}

/* ---- pairs with negative theta ---- */

/* u^a - u for a near 1 */
static double more_than(double u, double a)
{
    return u * expm1((a - 1) * log(u));
}

/* For theta in (-1;0), a = -theta: log(u^a + v^a - 1) / a, -infinity where nothing lies. What is
 * near 1 is kept as what it lacks, and a near 1 as what u^a exceeds u by. */
static double log_cdf(double u, double v, double a)
{
    double small = fmin(u, v), large = fmax(u, v), missing = expm1(a * log(large)), sum;
    if (a > 0.5) sum = ((large - 1) + small) + more_than(small, a) + more_than(large, a);
    else sum = pow(small, a) + missing;
    if (sum > 0.5) return log1p(expm1(a * log(small)) + missing) / a;
    return sum > 0 ? log(sum) / a : -HUGE_VAL;
}

static double pair_cdf(double u, double v, double theta)
{
    return theta == -1 ? fmax(0, u - (1 - v)) : exp(log_cdf(u, v, -theta));
}

static double pair_conditional(double u, double v, double theta)
{
    if (theta == -1) return NAN;
    double log_c = log_cdf(u, v, -theta);
    return fmin(1, exp((1 + theta) * (log_c - log(u))));
}

/* One less (C/u)^(1-a); (C/u)^a is 1 - (1 - v^a) / u^a */
static double pair_beyond(double u, double v, double theta)
{
    if (theta == -1) return NAN;
    double a = -theta, lacks = -expm1(a * log(v)) / pow(u, a);
    double log_ratio = lacks < 0.5 ? log1p(-lacks) / a : log_cdf(u, v, a) - log(u);
    return -expm1((1 - a) * log_ratio);
}

static double pair_log_density(double u, double v, double theta)
{
    double a = -theta, log_c = log_cdf(u, v, a);
    if (theta == -1) return NAN;
    return isinf(log_c) ? log_c
                        : log1p(theta) - (1 - a) * (log(u) + log(v)) + (1 - 2 * a) * log_c;
}

static double pair_quantile(double u, double w, double theta)
{
    return theta == -1 ? NAN : conditional_quantile(u, w, theta);
}

/* -theta in [1e-20;1] of a pair */
static double negated(double theta)
{
    return fmax(-theta, 1e-20);
}

/* The same for negative theta: 1 + r is 1 - (1 - (1-u)^a) / v^a, 0 where nothing lies. */
static double pair_one_turned(double u, double v, double theta)
{
    double a = negated(theta), r = expm1(a * log1p(-u)) * exp(-a * log(v));
    return r > -1 ? -v * expm1(log1p(r) / a) : v;
}

struct given {
    double theta, log_t, t;                  /* t of the other column, its logarithm if theta > 0 */
};

/* The probability that the other column is above its point, given that this one is lost below 1. */
static double above_given(double lost, const void *with)
{
    const struct given *k = with;
    double theta = k->theta, x = theta * log1p(-lost);
    double log_rise = theta > 0 ? portable_log1pexp(k->log_t + x) : log1p(k->t * exp(x));
    return -expm1(-(1 + theta) / theta * log_rise);         /* theta may be next to -1 */
}

/* u + v - 1 + C(1-u, 1-v), theta > 0 */
static double both_turned(double u, double v, double theta)
{
    double a = positive(theta);
    struct given k = { .theta = a, .log_t = log_inverse_turned(fmax(u, v), a) };
    double small = fmin(u, v);
    return integral_to_bend(above_given, &k, small, (1 - small) / a);
}

/* The same for negative theta. */
static double pair_both_turned(double u, double v, double theta)
{
    double a = negated(theta), small = fmin(u, v), large = fmax(u, v);
    struct given k = { .theta = -a, .t = expm1(a * log1p(-large)) };
    if (k.t + expm1(a * log1p(-small)) <= -1) return fmax(0, large - (1 - small));
    return integral_to_bend(above_given, &k, small, small);
}

static const struct generator generator = {
    .log_inverse = log_inverse,
    .log_inverse_turned = log_inverse_turned,
    .turned = { one_turned, both_turned },
};

static const struct pair_functions pair = {
    .cdf = pair_cdf,
    .log_density = pair_log_density,
    .conditional = pair_conditional,
    .beyond = pair_beyond,
    .conditional_quantile = pair_quantile,
    .turned = { pair_one_turned, pair_both_turned },
};

/* Below 1e-20 no draw can be told from independence. */
static status draw_clayton(const copula *c, const struct draw_rows *where, pool *p)
{
    if (fabs(c->theta) < 1e-20) return draw_independent(c, where, p);
    if (c->theta < 0) return draw_by_conditional(c, where, conditional_quantile);
    return draw_by_frailty(c, where, p);
}

const family clayton_family = {
    .word = "clayton",
    .has_theta = true,
    .theta_low = -1, .theta_high = 1e17, .theta_low_beyond_pairs = 0,
    .tau_low = -1, .tau_high = 1, .tau_open = 2,
    .theta_from_tau = theta_from_tau,
    .tau_from_theta = tau_from_theta,
    .rho_from_theta = rho_from_theta,
    .one_minus_rho = one_minus_rho_of_clayton,
    .tail = tail,
    .draw = draw_clayton,
    .frailty = &gamma_frailty,
    .psi = psi,
    .evaluator = &clayton_evaluator,
    .generator = &generator,
    .pair = &pair,
    .use = "losses that are small or absent together; by rotation 180 large ones",
    .source = "Clayton (1978)",
};
