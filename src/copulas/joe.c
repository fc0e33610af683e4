/* joe.c - psi(t) = 1 - (1 - exp(-t))^(1/theta), theta >= 1 (Joe 1993).
 *
 * Method
 *   tau = 1 + 2 (psi0(2) - psi0(2/theta + 1)) / (2 - theta) with the digamma function psi0 loses
 *   its digits near theta = 2. With a = 2/theta it is two sums of positive terms, over k >= 1,
 *       1 - tau = a sum 1 / ((k+1)(k+a)),   tau = (2-a) sum k / ((k+1)(k+2)(k+a)),
 *   the first accurate towards 1, the second towards 0. Their tails are summed by Euler and
 *   Maclaurin: the derivatives are Taylor coefficients of the term, its integral is a
 *   Gauss-Legendre sum.
 *   theta from tau is a root, in 1 - 1/theta below tau = 0.5 and in a above.
 *   Spearman's rho is a hypergeometric series at 1; where dependence is strong, strong_rho.c.
 *   The frailty is Sibuya's with 1/theta (Marshall & Olkin 1988; Hofert 2011).
 *
 * Special cases
 *   theta = 1, tau = 0: independence. tau = 1 is not reached.
 *   Beyond theta = 1e17 tau is 1 to rounding; far beyond, the frailty would leave the range of
 *   doubles.
 *
 * Accuracy
 *   tau and theta to 1e-14 relative, tau also near 0; rho to 5e-14 relative, also near 0, from
 *   theta 10 its distance from 1 to 1e-13.
 */
#include "families.h"
#include "../archimedean.h"
#include "../elementary.h"
#include "../frailty.h"
#include "../power_sums.h"
#include "../quadrature.h"
#include "../root.h"
#include "../slow_series.h"
#include "../strong_rho.h"

#include <math.h>

enum { FIRST_OF_TAIL = 16, ORDERS = 12 };

/* A term of either sum: k^power / prod(k + shift). */
struct term {
    int power;
    size_t factors;
    double shift[3];
};

static double term_at(const struct term *t, double k)
{
    double x = t->power ? k : 1;
    for (size_t i = 0; i < t->factors; i++) x /= k + t->shift[i];
    return x;
}

/* The integral of the term from n on: with k = n/u that of a smooth function of u over (0;1). */
static double integral_of_tail(const struct term *t, double n)
{
    static const double node[] = { 0.03376524289842399, 0.16939530676686774, 0.38069040695840155 };
    static const double weight[] = { 0.08566224618958517, 0.1803807865240693, 0.2339569672863455 };
    double sum = 0;
    for (int i = 0; i < 6; i++) {
        double u = i < 3 ? node[i] : 1 - node[i - 3];
        sum += weight[i % 3] * term_at(t, n / u) * n / (u * u);
    }
    return sum;
}

/* Taylor coefficients of the term around n: those of the power, divided by each factor in turn. */
static void taylor(const struct term *t, double n, double c[ORDERS])
{
    for (int i = 0; i < ORDERS; i++) c[i] = 0;
    c[0] = t->power ? n : 1;
    c[1] = t->power ? 1 : 0;
    for (size_t j = 0; j < t->factors; j++)
        for (int i = 0; i < ORDERS; i++)
            c[i] = (c[i] - (i ? c[i - 1] : 0)) / (n + t->shift[j]);
}

/* The sum of the term over k from 1. */
static double sum_of(const struct term *t)
{
    static const double bernoulli[] = { 1.0 / 6, -1.0 / 30, 1.0 / 42, -1.0 / 30, 5.0 / 66,
                                        -691.0 / 2730 };
    double c[ORDERS], sum = 0;
    taylor(t, FIRST_OF_TAIL, c);
    for (int j = ORDERS / 2; j >= 1; j--) sum -= bernoulli[j - 1] / (2 * j) * c[2 * j - 1];
    sum += integral_of_tail(t, FIRST_OF_TAIL) + c[0] / 2;
    for (int k = FIRST_OF_TAIL - 1; k >= 1; k--) sum += term_at(t, k);
    return sum;
}

/* 1 - tau where a = 2/theta */
static double one_minus_tau(double a)
{
    return a * sum_of(&(struct term){ 0, 2, { 1, a, 0 } });
}

/* tau where q = 1 - 1/theta */
static double tau_of(double q)
{
    return 2 * q * sum_of(&(struct term){ 1, 3, { 1, 2, 2 - 2 * q } });
}

static status tau_from_theta(double theta, double *tau)
{
    if (!(theta >= 1 && isfinite(theta))) return OUT_OF_DOMAIN;
    *tau = theta < 3 ? tau_of((theta - 1) / theta) : 1 - one_minus_tau(2 / theta);
    return OK;
}

static double over_in_q(double q, const void *tau)
{
    return tau_of(q) - *(const double *)tau;
}

static double over_in_a(double a, const void *tau)
{
    return (1 - *(const double *)tau) - one_minus_tau(a);
}

/* tau / q rises from 0.5797 at q = 0 to 1, and (1 - tau) / a falls from 1 at a = 0 to 1/2: these
 * bracket the root. */
static status theta_from_tau(double tau, double *theta)
{
    if (!(tau >= 0 && tau < 1)) return OUT_OF_DOMAIN;
    double left = 1 - tau, found;
    status s = tau < 0.5 ? root_between(over_in_q, &tau, tau * 0.99, tau / 0.57, &found)
                         : root_between(over_in_a, &tau, left * 0.99, left / 0.49, &found);
    if (s != OK) return s;
    *theta = tau < 0.5 ? 1 / (1 - found) : 2 / found;
    return OK;
}

/* With b = 1/theta, E(1-U)(1-V) is the sum of -(-b)_n n! / ((b+1)_n)^2 over n >= 1: expand
 * 1 - C = (1 - (1-x)(1-y))^b with x = (1-u)^theta, y = (1-v)^theta, and integrate. Its first term
 * less 1/4 is -((1-b) / (1+b))^2 / 4, and every other has a factor 1 - b. */
static double ratio_of_moment(double n, double b)
{
    n++;
    return (n - 1 - b) * n / ((b + n) * (b + n));
}

static status rho_from_theta(double theta, double df, double *rho)
{
    (void)df;
    if (!(theta >= 1 && theta < HUGE_VAL)) return OUT_OF_DOMAIN;
    if (theta > 10) {
        *rho = 1 - one_minus_rho_of_joe(theta);
        return OK;
    }
    double b = 1 / theta, rest = (theta - 1) / theta, ratio = rest / (1 + b);
    double first = 2 * b * rest / ((b + 1) * (b + 2) * (b + 1) * (b + 2));
    *rho = 12 * sum_of_slow_series(first, ratio_of_moment, b, 3 * b) - 3 * ratio * ratio;
    return OK;
}

/* 2 - 2^(1/theta) */
static double tail(double theta, double df, enum corner corner)
{
    (void)df;
    return corner == UPPER ? -2 * expm1((1 - theta) / theta * log(2)) : 0;
}

/* log(1 - exp(-t)) is log t where t is small. */
static double psi(double log_t, double theta)
{
    double log_rest = log_t < -40 ? log_t : portable_log1mexp(-portable_exp(log_t));
    return -portable_expm1(log_rest / theta);
}

/* log of -log(1 - exp(log_rest)) */
static double log_of_rest(double log_rest)
{
    if (log_rest < -40) return log_rest;
    return log(log_rest < -0.7 ? -log1p(-exp(log_rest)) : -log(-expm1(log_rest)));
}

/* t = -log(1 - (1-u)^theta) */
static double log_inverse(double u, double theta)
{
    return log_of_rest(theta * log1p(-u));
}

static double log_inverse_turned(double u, double theta)
{
    return log_of_rest(theta * log(u));
}

/* v - C(1-u, v) = (1-v) ((1 + r)^(1/theta) - 1), r = (u/(1-v))^theta (1 - (1-v)^theta) */
static double one_turned(double u, double v, double theta)
{
    double log_beside = log1p(-v);
    double log_r = theta * (log(u) - log_beside) + portable_log1mexp(theta * log_beside);
    return (1 - v) * expm1(portable_log1pexp(log_r) / theta);
}

/* The probability that a column is beyond v given that the other is u, of a = (1-u)^theta and
 * b = (1-v)^theta: 1 - (1 - b) (1 + b (1-a) / a)^-(1 - 1/theta). */
static double beyond(double log_a, double log_b, double theta)
{
    double log_rise = portable_log1pexp(log_b - log_a + portable_log1mexp(log_a));
    return -expm1(portable_log1mexp(log_b) - (theta - 1) / theta * log_rise);
}

static double pair_beyond(double u, double v, double theta)
{
    return beyond(theta * log1p(-u), theta * log1p(-v), theta);
}

struct given {
    double theta, log_b;                     /* of the other column */
};

static double above_given(double lost, const void *with)
{
    const struct given *k = with;
    return beyond(k->theta * log(lost), k->log_b, k->theta);
}

/* u + v - 1 + C(1-u, 1-v) */
static double both_turned(double u, double v, double theta)
{
    struct given k = { theta, theta * log(fmax(u, v)) };
    double small = fmin(u, v);
    return integral_to_bend(above_given, &k, small, small / theta);
}

static status prepare(double theta, size_t highest, pool *p, void **prepared)
{
    struct power_sums *sums;
    status s = power_sums_of(1 / theta, (theta - 1) / theta, 0, -HUGE_VAL, highest, p, &sums);
    *prepared = sums;
    return s;
}

static double log_derivative(void *prepared, size_t order, double log_t, double theta)
{
    return log_power_sum(prepared, order, log_t) - log(theta);
}

static const struct generator generator = {
    .log_inverse = log_inverse,
    .log_inverse_turned = log_inverse_turned,
    .prepare = prepare,
    .log_derivative = log_derivative,
    .derivative_seconds = power_sum_seconds,
    .beyond = pair_beyond,
    .turned = { one_turned, both_turned },
};

const family joe_family = {
    .word = "joe",
    .has_theta = true,
    .theta_low = 1, .theta_high = 1e17, .theta_low_beyond_pairs = 1,
    .tau_low = 0, .tau_high = 1, .tau_open = 2,
    .theta_from_tau = theta_from_tau,
    .tau_from_theta = tau_from_theta,
    .rho_from_theta = rho_from_theta,
    .one_minus_rho = one_minus_rho_of_joe,
    .tail = tail,
    .draw = draw_by_frailty,
    .frailty = &sibuya_frailty,
    .psi = psi,
    .evaluator = &archimedean_evaluator,
    .generator = &generator,
    .use = "large losses that come together, with hardly any dependence among small ones",
    .source = "Joe (1993)",
};
