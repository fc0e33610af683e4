/* amh.c - C = u v / (1 - theta (1-u)(1-v)), theta in [-1;1], pairs (Ali, Mikhail & Haq 1978).
 *
 * Method
 *   tau = 1 - 2/(3 theta) - 2 (1-theta)^2 log(1-theta) / (3 theta^2) is the sum of
 *   4 theta^n / (3 n (n+1) (n+2)) over n >= 1, and Spearman's rho, with a dilogarithm in closed
 *   form (Nelsen 2006), that of 12 theta^n / ((n+1)(n+2))^2: the sums are taken where the closed
 *   forms cancel. Both are inverted by a root in theta. The conditional distribution is a
 *   quadratic in v.
 *
 * Special cases
 *   theta = 1 is clayton with theta = 1, which has lower tail dependence.
 *
 * Accuracy
 *   tau, rho and theta to 1e-13 relative, also near 0.
 */
#include "families.h"
#include "../evaluate.h"
#include "../root.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_sf_dilog.h>
#include <math.h>

#define LOWEST_TAU (-0.181725814826520825113)
#define LOWEST_RHO (-0.271064666877374852027)
#define HIGHEST_RHO 0.478417604357434475338
static const double SERIES_TO = 0.7;

/* The sum over n from 1 of theta^n / ((n (n+1) (n+2)) or ((n+1)(n+2))^2. */
static double series(double theta, bool for_rho)
{
    double power = theta, sum = 0;
    for (int n = 1; n < 110 && power != 0; n++) {
        double product = (n + 1.0) * (n + 2.0);
        sum += power / (for_rho ? product * product : n * product);
        power *= theta;
    }
    return sum;
}

static double tau_of(double theta)
{
    if (fabs(theta) < SERIES_TO) return 4.0 / 3 * series(theta, false);
    if (fabs(theta) == 1) return theta > 0 ? 1.0 / 3 : LOWEST_TAU;
    double rest = 1 - theta, logarithm = rest * rest * log(rest);
    return 1 - 2 / (3 * theta) - 2 * logarithm / (3 * theta * theta);
}

static double rho_of(double theta)
{
    if (fabs(theta) < SERIES_TO) return 12 * series(theta, true);
    if (fabs(theta) == 1) return theta > 0 ? HIGHEST_RHO : LOWEST_RHO;
    gsl_sf_result dilog;
    if (gsl_sf_dilog_e(theta, &dilog) != GSL_SUCCESS) return NAN;
    double rest = 1 - theta, logarithm = rest * log(rest), square = theta * theta;
    return 12 * (1 + theta) / square * dilog.val - 24 / square * logarithm
           - 3 * (theta + 12) / theta;
}

static status tau_from_theta(double theta, double *tau)
{
    if (!(fabs(theta) <= 1)) return OUT_OF_DOMAIN;
    *tau = tau_of(theta);
    return OK;
}

static status rho_from_theta(double theta, double df, double *rho)
{
    (void)df;
    if (!(fabs(theta) <= 1)) return OUT_OF_DOMAIN;
    *rho = rho_of(theta);
    return OK;
}

static double tau_over(double theta, const void *tau)
{
    return tau_of(theta) - *(const double *)tau;
}

static double rho_over(double theta, const void *rho)
{
    return rho_of(theta) - *(const double *)rho;
}

/* theta lies between 0 and 1 or -1 and, for tau 2/9 theta near 0, within these multiples. */
static status theta_from_tau(double tau, double *theta)
{
    if (!(tau >= LOWEST_TAU && tau <= 1.0 / 3)) return OUT_OF_DOMAIN;
    *theta = tau == 1.0 / 3 ? 1 : tau == LOWEST_TAU ? -1 : 0;
    if (tau == 0 || *theta != 0) return OK;
    double near = 2.9 * tau, far = fmax(-1, fmin(1, 5.6 * tau));
    return root_between(tau_over, &tau, near, far, theta);
}

static status theta_from_spearman(double rho, double *theta)
{
    if (!(rho >= LOWEST_RHO && rho <= HIGHEST_RHO)) return OUT_OF_DOMAIN;
    *theta = rho == HIGHEST_RHO ? 1 : rho == LOWEST_RHO ? -1 : 0;
    if (rho == 0 || *theta != 0) return OK;
    return root_between(rho_over, &rho, 2 * rho, fmax(-1, fmin(1, 3.8 * rho)), theta);
}

static double tail(double theta, double df, enum corner corner)
{
    (void)df;
    return theta == 1 && corner == LOWER ? 0.5 : 0;
}

/* 1 - theta (1-u)(1-v), for theta > 0 from its positive parts */
static double bottom(double u, double v, double theta)
{
    return theta > 0 ? (1 - theta) + theta * (u + v - u * v) : 1 - theta * (1 - u) * (1 - v);
}

static double cdf(double u, double v, double theta)
{
    return u / bottom(u, v, theta) * v;
}

static double log_density(double u, double v, double theta)
{
    double c = cdf(u, v, theta), below = bottom(u, v, theta);
    return log((1 - theta) + 2 * theta * c) - 2 * log(below);
}

static double conditional(double u, double v, double theta)
{
    double below = bottom(u, v, theta);
    double slope = theta > 0 ? (1 - theta) + theta * v : 1 - theta * (1 - v);
    return v / below * (slope / below);
}

/* bottom^2 - v slope has a factor 1 - v; the other from its positive parts */
static double beyond(double u, double v, double theta)
{
    double below = bottom(u, v, theta), left = 1 - u, s = -theta;
    double square = theta > 0 ? ((1 - theta) + theta * u) * ((1 - theta) + theta * u)
                              : (1 - s) + s * (1 - v) + 2 * s * left;
    double rest = theta > 0 ? theta * v * ((1 - theta) + theta * u * (2 - u))
                            : s * left * (s * left) * (1 - v);
    return (1 - v) / below * ((square + rest) / below);
}

/* For theta > 0 where squares of u or w might underflow: x = v / alpha, with a from its positive
 * parts. */
static double far_quantile(double u, double w, double theta)
{
    double beta = theta * (1 - u), alpha = (1 - theta) + theta * u;
    double a = theta * ((1 - w) + w * ((1 - theta) + theta * u * (2 - u)));
    double b = (1 - theta) / alpha - 2 * w * beta, root = sqrt(b * b + 4 * a * w);
    return alpha * (b >= 0 ? 2 * w / (b + root) : (root - b) / (2 * a));
}

/* a v^2 + b v = c, with bottom = alpha + beta v */
static double conditional_quantile(double u, double w, double theta)
{
    if (theta > 0 && fmin(u, w) < 0x1p-53) return far_quantile(u, w, theta);
    double beta = theta * (1 - u), alpha = theta > 0 ? (1 - theta) + theta * u : 1 - beta;
    double a = theta - w * beta * beta, b = (1 - theta) - 2 * w * alpha * beta;
    double c = w * alpha * alpha, below_root = b * b + 4 * a * c;
    double root = sqrt(below_root > 0 ? below_root : 0);
    return b >= 0 ? 2 * c / (b + root) : (root - b) / (2 * a);
}

static status draw_amh(const copula *c, const struct draw_rows *where, pool *p)
{
    (void)p;
    return draw_by_conditional(c, where, conditional_quantile);
}

/* 1 - theta x, for theta > 0 from its positive parts */
static double one_minus(double theta, double x, double one_minus_x)
{
    return theta > 0 ? (1 - theta) + theta * one_minus_x : 1 - theta * x;
}

/* v - C(1-u, v) */
static double one_turned(double u, double v, double theta)
{
    double top = one_minus(theta, 1 - v, v);
    return u * (top / one_minus(theta, u * (1 - v), (1 - u) + u * v)) * v;
}

/* u + v - 1 + C(1-u, 1-v) */
static double both_turned(double u, double v, double theta)
{
    double top = theta > 0 ? (1 - theta) + theta * ((1 - u) + (1 - v))
                           : (1 + theta) - theta * (u + v);
    return u * (top / one_minus(theta, u * v, (1 - u) + u * (1 - v))) * v;
}

static const struct pair_functions pair = {
    .cdf = cdf,
    .log_density = log_density,
    .conditional = conditional,
    .beyond = beyond,
    .conditional_quantile = conditional_quantile,
    .turned = { one_turned, both_turned },
};

const family amh_family = {
    .word = "amh",
    .has_theta = true,
    .theta_low = -1, .theta_high = 1, .theta_low_beyond_pairs = -1,
    .tau_low = LOWEST_TAU, .tau_high = 1.0 / 3,
    .rho_low = LOWEST_RHO, .rho_high = HIGHEST_RHO,
    .most_dimensions = 2,
    .use = "weak dependence of a pair, somewhat stronger among small losses",
    .source = "Ali, Mikhail & Haq (1978)",
    .theta_from_tau = theta_from_tau,
    .tau_from_theta = tau_from_theta,
    .rho_from_theta = rho_from_theta,
    .theta_from_spearman = theta_from_spearman,
    .tail = tail,
    .draw = draw_amh,
    .evaluator = &pair_evaluator,
    .pair = &pair,
};
