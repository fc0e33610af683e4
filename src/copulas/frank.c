/* frank.c - psi(t) = -log(1 - (1 - exp(-theta)) exp(-t)) / theta, theta >= 0; a pair has negative
 * theta as well (Frank 1979).
 *
 * Method
 *   tau = 1 - 4 (1 - D1(theta)) / theta with the Debye function D1 (Genest 1987), odd in theta.
 *   Below 2 the difference cancels, so tau is summed from the series of D1, whose coefficients
 *   are 4 B_2k / ((2k+1) (2k)!); above, D1 = (pi^2/6 - rest) / theta with the rest summed in powers
 *   of exp(-theta). theta from tau is the root of either, in 1 - tau where tau is large, so that it
 *   keeps its accuracy towards 1.
 *   The frailty is log-series with 1 - exp(-theta) (Marshall & Olkin 1988). With (U, V) from theta
 *   (U, 1-V) is from -theta.
 *
 * Special cases
 *   theta = 0, tau = 0: independence. tau = -1 and 1 are not reached.
 *
 * Accuracy
 *   tau and theta to 1e-14 relative.
 */
#include "families.h"
#include "../archimedean.h"
#include "../elementary.h"
#include "../frailty.h"
#include "../power_sums.h"
#include "../root.h"

#include <math.h>

static const double PI_SQUARED_OVER_6 = 1.64493406684822643647;
static const double TWICE_ZETA_3 = 2.40411380631918857080;

/* tau for theta up to 2.1, to rounding */
static double tau_by_series(double theta)
{
    static const double c[] = {
        0.1111111111111111, -0.0011111111111111111, 1.889644746787604e-05, -3.6743092298647856e-07,
        7.5915479955884e-09, -1.6259046580576902e-10, 3.568676408182581e-12, -7.97571834428843e-14,
        1.8075920118479673e-15, -4.142607044872499e-17, 9.580874484104748e-19,
        -2.2327143497300036e-20, 5.236603021673285e-22, -1.2349679209706961e-23,
        2.926390261080881e-25, -6.963382628936004e-27, 1.66305425784556e-28
    };
    double sum = 0;
    for (size_t k = sizeof c / sizeof *c; k-- > 0;) sum = sum * (theta * theta) + c[k];
    return sum * theta;
}

/* 1 - tau for theta from 1.8, to rounding */
static double one_minus_tau(double theta)
{
    double rest = 0;
    for (int k = 24; k >= 1; k--) rest += exp(-k * theta) * (theta / k + 1.0 / (k * k));
    return 4 / theta * (1 - (PI_SQUARED_OVER_6 - rest) / theta);
}

static status tau_from_theta(double theta, double *tau)
{
    double size = fabs(theta);
    if (!isfinite(theta)) return OUT_OF_DOMAIN;
    *tau = size < 2 ? tau_by_series(theta) : copysign(1 - one_minus_tau(size), theta);
    return OK;
}

/* rho = 1 - 12 (D1 - D2) / theta with the Debye functions (Nelsen 2006), by the same two ways as
 * tau; the coefficients are 24 k B_2k / ((2k+1) (2k+2) (2k)!). */
static double rho_by_series(double theta)
{
    static const double c[] = {
        0.16666666666666666, -0.0022222222222222222, 4.2517006802721085e-05,
        -8.818342151675485e-07, 1.8978869988970998e-08, -4.1808976921483464e-10,
        9.367775571479276e-12, -2.1268582251435814e-13, 4.880498431989512e-15,
        -1.1298019213288633e-16, 2.6347404831288053e-18, -6.182901276175395e-20,
        1.4587679846089866e-21, -3.457910178717949e-23, 8.2304726092899785e-25,
        -1.9661315658172245e-26, 4.711987063895753e-28
    };
    double sum = 0;
    for (size_t k = sizeof c / sizeof *c; k-- > 0;) sum = sum * (theta * theta) + c[k];
    return sum * theta;
}

static double one_minus_rho(double theta)
{
    double rest1 = 0, rest2 = 0;
    for (int k = 24; k >= 1; k--) {
        double small = exp(-k * theta), x = theta, over = 1.0 / k;
        rest1 += small * over * (x + over);
        rest2 += small * over * (x * x + 2 * over * (x + over));
    }
    double d1 = (PI_SQUARED_OVER_6 - rest1) / theta;
    double d2 = 2 * (TWICE_ZETA_3 - rest2) / (theta * theta);
    return 12 / theta * (d1 - d2);
}

static status rho_from_theta(double theta, double df, double *rho)
{
    (void)df;
    double size = fabs(theta);
    if (!isfinite(theta)) return OUT_OF_DOMAIN;
    *rho = size < 2 ? rho_by_series(theta) : copysign(1 - one_minus_rho(size), theta);
    return OK;
}

static double tail(double theta, double df, enum corner corner)
{
    (void)theta;
    (void)df;
    (void)corner;
    return 0;
}

static double over_by_series(double theta, const void *tau)
{
    return tau_by_series(theta) - *(const double *)tau;
}

static double over(double theta, const void *tau)
{
    return (1 - *(const double *)tau) - one_minus_tau(theta);
}

/* tau / theta falls from 1/9 to 0.1018 at 2.1, and 1 - tau < 4 / theta: these bracket the root. */
static status theta_from_tau(double tau, double *theta)
{
    double size = fabs(tau);
    if (!(size < 1)) return OUT_OF_DOMAIN;
    if (size < 1e-9) {
        *theta = 9 * tau;
        return OK;
    }
    status s = size < 0.2 ? root_between(over_by_series, &size, 8.9 * size, 10.4 * size, theta)
                          : root_between(over, &size, 1.8, 4 / (1 - size), theta);
    *theta = copysign(*theta, tau);
    return s;
}

static double positive(double theta)
{
    return fmax(theta, 1e-16);               /* which nothing can tell from independence */
}

/* log(1 - z) with z = (1 - exp(-theta)) exp(-t), theta > 0; near z = 1 from its positive parts */
static double log_rest_of(double log_t, double theta)
{
    double t = exp(log_t), z = -expm1(-theta) * exp(-t);
    return z < 0.5 ? log1p(-z) : log_added(log_one_minus_exp(log_t), -theta - t);
}

/* For theta > 0. Where z might be below the range of doubles psi = z / theta. */
static double psi(double log_t, double theta)
{
    double a = positive(theta), t = exp(log_t);
    return t < 600 ? -log_rest_of(log_t, a) / a : exp(portable_log1mexp(-a) - log(a) - t);
}

/* psi^-1(u) = -log(1 - q), where q falls from 1 at u = 0 to 0 */
static double log_inverse(double u, double theta)
{
    double a = positive(theta), y = a * u;
    double one_minus = y < 1e-12 ? u * (a / -expm1(-a)) : expm1(-y) / expm1(-a);
    double log_q = a < 1 ? log(expm1(a * (1 - u)) / expm1(a))
                         : portable_log1mexp(-a * (1 - u)) - a * u - portable_log1mexp(-a);
    if (log_q < -40) return log_q;
    return log(log_q < -0.7 ? -log1p(-exp(log_q)) : -log(one_minus));
}

/* At 1 - u it is q = (exp(theta u) - 1) / (exp(theta) - 1), at most 1/2 for u below it. */
static double log_inverse_turned(double u, double theta)
{
    if (u >= 0.5) return log_inverse(1 - u, theta);
    double a = positive(theta), log_q = log(expm1(-a * u) / expm1(-a)) - a * (1 - u);
    return log_q < -40 ? log_q : log(-log1p(-exp(log_q)));
}

/* -log z is t and -log(1 - exp(-theta)), which is exp(-theta) where that is small. */
static status prepare(double theta, size_t highest, pool *p, void **prepared)
{
    struct power_sums *sums;
    double a = positive(theta), shift = -portable_log1mexp(-a);
    status s = power_sums_of(0, 1, shift, a > 40 ? -a : log(shift), highest, p, &sums);
    *prepared = sums;
    return s;
}

static double log_derivative(void *prepared, size_t order, double log_t, double theta)
{
    return log_power_sum(prepared, order, log_t) - log(positive(theta));
}

/* A pair with theta = -s < 0: with E(x) = (exp(s x) - 1) / s, E(C) = E(u) E(v) / E(1). */
static double log_e(double x, double s)
{
    double y = s * x;
    if (y > 1) return y + log1p(-exp(-y)) - log(s);
    return y < 1e-16 ? log(x) : log(expm1(y) / s);
}

/* x from log E(x) */
static double of_log_e(double log_e, double s)
{
    double log_y = log(s) + log_e;
    return log_y < -40 ? exp(log_e) : portable_log1pexp(log_y) / s;
}

static double pair_cdf(double u, double v, double theta)
{
    double s = positive(-theta);
    return of_log_e(log_e(u, s) + log_e(v, s) - log_e(1, s), s);
}

/* log(E(1) + s E(u) E(v)) */
static double log_bottom(double u, double v, double s)
{
    return log_added(log_e(1, s), log(s) + log_e(u, s) + log_e(v, s));
}

static double pair_log_density(double u, double v, double theta)
{
    double s = positive(-theta);
    return log_e(1, s) + s * u + s * v - 2 * log_bottom(u, v, s);
}

static double pair_conditional(double u, double v, double theta)
{
    double s = positive(-theta);
    return fmin(1, exp(s * u + log_e(v, s) - log_bottom(u, v, s)));
}

/* E(v) = w E(1) / (exp(s u) (1-w) + w) */
static double pair_quantile(double u, double w, double theta)
{
    double s = positive(-theta), bottom = log_added(s * u + log1p(-w), log(w));
    return of_log_e(log(w) + log_e(1, s) - bottom, s);
}

/* With (U, V) from theta (1-U, V) is from -theta, and (1-U, 1-V) again from theta. */
static double cdf(double u, double v, double theta)
{
    return theta < 0 ? pair_cdf(u, v, theta)
                     : psi(log_added(log_inverse(u, theta), log_inverse(v, theta)), theta);
}

static double one_turned(double u, double v, double theta)
{
    return theta < 0 ? cdf(u, v, -theta) : pair_cdf(u, v, -positive(theta));
}

/* E(1) - E(v) = exp(s v) E(1-v) over the bottom of the conditional probability */
static double pair_beyond(double u, double v, double theta)
{
    double s = positive(-theta);
    return fmin(1, exp(s * v + log_e(1 - v, s) - log_bottom(u, v, s)));
}

/* For theta > 0, where the conditional probability is to this as exp(-theta u) (1 - exp(-theta v))
 * to exp(-theta v) (1 - exp(-theta (1-v))). */
static double positive_beyond(double u, double v, double theta)
{
    double a = positive(theta);
    return 1 / (1 + exp(a * (v - u)) * (expm1(-a * v) / expm1(-a * (1 - v))));
}

static const struct generator generator = {
    .log_inverse = log_inverse,
    .log_inverse_turned = log_inverse_turned,
    .prepare = prepare,
    .log_derivative = log_derivative,
    .derivative_seconds = power_sum_seconds,
    .beyond = positive_beyond,
    .turned = { one_turned, cdf },
};

static const struct pair_functions pair = {
    .cdf = pair_cdf,
    .log_density = pair_log_density,
    .conditional = pair_conditional,
    .beyond = pair_beyond,
    .conditional_quantile = pair_quantile,
    .turned = { one_turned, cdf },
};

/* The draw for -theta with its second column turned round. */
static status draw_negative(const copula *c, const struct draw_rows *where, pool *p)
{
    copula positive = *c;
    positive.theta = -c->theta;
    status s = draw_by_frailty(&positive, where, p);
    if (s != OK) return s;
    for (size_t i = 0; i < where->rows; i++) {
        double *v = &where->u[where->stride + i];
        *v = 1 - *v;
    }
    return OK;
}

/* Below 1e-20 no draw can be told from independence. */
static status draw_frank(const copula *c, const struct draw_rows *where, pool *p)
{
    if (fabs(c->theta) < 1e-20) return draw_independent(c, where, p);
    return c->theta < 0 ? draw_negative(c, where, p) : draw_by_frailty(c, where, p);
}

const family frank_family = {
    .word = "frank",
    .has_theta = true,
    .theta_low = -HUGE_VAL, .theta_high = HUGE_VAL, .theta_low_beyond_pairs = 0, .theta_open = 3,
    .tau_low = -1, .tau_high = 1, .tau_open = 3,
    .theta_from_tau = theta_from_tau,
    .tau_from_theta = tau_from_theta,
    .rho_from_theta = rho_from_theta,
    .one_minus_rho = one_minus_rho,
    .tail = tail,
    .draw = draw_frank,
    .frailty = &log_series_frailty,
    .psi = psi,
    .evaluator = &archimedean_evaluator,
    .generator = &generator,
    .pair = &pair,
    .use = "dependence alike for small and large losses and weak among the extremes",
    .source = "Frank (1979)",
};
