/* fgm.c - C = u v (1 + theta (1-u)(1-v)), theta in [-1;1], pairs (Morgenstern 1956; Gumbel 1960;
 * Farlie 1960).
 *
 * Method
 *   tau = 2 theta/9, Spearman's rho = theta/3 (Nelsen 2006). The conditional distribution is a
 *   quadratic in v: with k = theta (1-2u), w = v (1 + k (1-v)).
 *
 * Accuracy
 *   All to a few units in the last place.
 */
#include "families.h"
#include "../evaluate.h"

#include <math.h>

static status theta_from_tau(double tau, double *theta)
{
    if (!(fabs(tau) <= 2.0 / 9)) return OUT_OF_DOMAIN;
    *theta = fabs(tau) == 2.0 / 9 ? copysign(1, tau) : 4.5 * tau;
    return OK;
}

static status tau_from_theta(double theta, double *tau)
{
    if (!(fabs(theta) <= 1)) return OUT_OF_DOMAIN;
    *tau = 2 * theta / 9;
    return OK;
}

static status rho_from_theta(double theta, double df, double *rho)
{
    (void)df;
    if (!(fabs(theta) <= 1)) return OUT_OF_DOMAIN;
    *rho = theta / 3;
    return OK;
}

static status theta_from_spearman(double rho, double *theta)
{
    if (!(fabs(rho) <= 1.0 / 3)) return OUT_OF_DOMAIN;
    *theta = fabs(rho) == 1.0 / 3 ? copysign(1, rho) : 3 * rho;
    return OK;
}

static double tail(double theta, double df, enum corner corner)
{
    (void)theta;
    (void)df;
    (void)corner;
    return 0;
}

/* 1 + theta x without cancellation, from 1 - x and 1 + x, x in [-1;1] */
static double one_plus(double theta, double one_minus_x, double one_plus_x)
{
    return theta < 0 ? (1 + theta) - theta * one_minus_x : (1 - theta) + theta * one_plus_x;
}

static double cdf(double u, double v, double theta)
{
    return u * v * one_plus(theta, u + v * (1 - u), 1 + (1 - u) * (1 - v));
}

static double log_density(double u, double v, double theta)
{
    return log(one_plus(theta, 2 * (u * (1 - v) + v * (1 - u)), 2 * (u * v + (1 - u) * (1 - v))));
}

static double conditional(double u, double v, double theta)
{
    return v * one_plus(theta, v + 2 * u * (1 - v), v + 2 * (1 - u) * (1 - v));
}

static double beyond(double u, double v, double theta)
{
    return (1 - v) * one_plus(theta, (1 - v) + 2 * (1 - u) * v, (1 - v) + 2 * u * v);
}

static double conditional_quantile(double u, double w, double theta)
{
    double k = theta * (1 - 2 * u), b = one_plus(theta, 2 * u, 2 * (1 - u));
    double square = k < 0 ? b * b - 4 * k * w : (1 - k) * (1 - k) + 4 * k * (1 - w);
    return 2 * w / (b + sqrt(square));
}

static status draw_fgm(const copula *c, const struct draw_rows *where, pool *p)
{
    (void)p;
    return draw_by_conditional(c, where, conditional_quantile);
}

/* With (U, V) from theta (1-U, V) is from -theta. */
static double one_turned(double u, double v, double theta)
{
    return cdf(u, v, -theta);
}

static const struct pair_functions pair = {
    .cdf = cdf,
    .log_density = log_density,
    .conditional = conditional,
    .beyond = beyond,
    .conditional_quantile = conditional_quantile,
    .turned = { one_turned, cdf },
};

const family fgm_family = {
    .word = "fgm",
    .has_theta = true,
    .theta_low = -1, .theta_high = 1, .theta_low_beyond_pairs = -1,
    .tau_low = -2.0 / 9, .tau_high = 2.0 / 9,
    .rho_low = -1.0 / 3, .rho_high = 1.0 / 3,
    .most_dimensions = 2,
    .use = "weak dependence of a pair where formulas have to stay simple",
    .source = "Morgenstern (1956), Gumbel (1960), Farlie (1960)",
    .theta_from_tau = theta_from_tau,
    .tau_from_theta = tau_from_theta,
    .rho_from_theta = rho_from_theta,
    .theta_from_spearman = theta_from_spearman,
    .tail = tail,
    .draw = draw_fgm,
    .evaluator = &pair_evaluator,
    .pair = &pair,
};
