/* plackett.c - the pairs whose odds ratio C (1-u-v+C) / ((u-C)(v-C)) is theta everywhere, theta > 0
 * (Plackett 1965).
 *
 * Method
 *   With eta = theta - 1, q = u(1-v) + v(1-u), S^2 = 1 + 2 eta q + eta^2 (u-v)^2 the copula is
 *   (1 + eta (u+v) - S) / (2 eta); all of what follows is written so that nothing cancels. The
 *   conditional quantile is Johnson's (1987).
 *   1/theta has (1-U, V), hence the opposite tau and rho. Spearman's rho is
 *   (theta+1)/(theta-1) - 2 theta log(theta)/(theta-1)^2 = (sinh x - x)/(cosh x - 1), x = log theta
 *   (Mardia 1970).
 *   tau: with d = u - v, m = u + v - 1 the integrand of 1 - tau = 4 int C_u C_v is rational. Up to
 *   theta = 2 tau is eta times an integral over the triangle d + m < 1 of a positive function;
 *   above, the integral over m is done in closed form and 1 - tau is one over d.
 *
 * Special cases
 *   theta = 1: independence. tau = -1 and 1 are not reached. At points theta beyond 1e-300 and
 *   1e300 is taken as these.
 *
 * Accuracy
 *   tau, rho and theta to 1e-14 relative, also near independence.
 */
#include "families.h"
#include "../evaluate.h"
#include "../quadrature.h"
#include "../root.h"

#include <math.h>

static double held(double theta)
{
    return fmax(1e-300, fmin(theta, 1e300));
}

/* ---- tau, of eta >= 0 ---- */

/* The point of the triangle with p = d + m, at q = (d - m)/p. */
struct ray {
    double eta, p;
};

static double over_triangle(double q, const void *with)
{
    const struct ray *r = with;
    double eta = r->eta, theta = 1 + eta, d = r->p * (1 + q) / 2, m = r->p * (1 - q) / 2;
    double d2 = d * d, m2 = m * m;
    double top = theta * (d2 * (1 - d2) + m2 * (1 - m2)) + 2 * (theta * eta + 1) * d2 * m2;
    return top / ((theta + eta * theta * d2 - eta * m2) * (theta + eta * theta * m2 - eta * d2));
}

static double along_ray(double p, double eta)
{
    struct ray r = { eta, p };
    return p * integral_of(over_triangle, &r, 0, 1);
}

/* atanh(y)/y - 1 with y^2 = eta (1-d)^2 / (theta (1 + eta d^2)) */
static double beyond_one(double d, double eta)
{
    double below = (1 + eta) * (1 + eta * d * d), y = (1 - d) * sqrt(eta / below), sum = 0;
    if (y > 0.5) return log((1 + y) * sqrt(below) / (1 + eta * d)) / y - 1;
    for (int k = 27; k >= 1; k--) sum = (sum + 1.0 / (2 * k + 1)) * (y * y);
    return sum;
}

static double over_d(double d, double eta)
{
    double bend = eta * d * d;
    return (1 - d) / (1 + bend) * ((1 - d) * (1 + d) + (1 / eta - bend) * beyond_one(d, eta));
}

/* for eta >= 1; panels grow from 1/eta, since singularities lie that far from 0 */
static double one_minus_tau(double eta)
{
    double sum = 0, from = 0, to = 0.5 / eta;
    while (from < 1) {
        sum += integral_over(over_d, eta, from, to);
        from = to;
        to = fmin(1, 2 * to);
    }
    return 2 * sum;
}

static double positive_tau(double eta)
{
    return eta < 1 ? eta * (2 + eta) * integral_over(along_ray, eta, 0, 1)
                   : 1 - one_minus_tau(eta);
}

static status tau_from_theta(double theta, double *tau)
{
    if (!(theta > 0 && theta < HUGE_VAL)) return OUT_OF_DOMAIN;
    theta = fmax(1e-100, fmin(theta, 1e100));      /* tau is 1 or -1 to rounding before */
    *tau = theta >= 1 ? positive_tau(theta - 1) : -positive_tau((1 - theta) / theta);
    return OK;
}

static double over_small(double x, const void *tau)
{
    return positive_tau(expm1(x)) - *(const double *)tau;
}

static double over_large(double x, const void *tau)
{
    return (1 - *(const double *)tau) - one_minus_tau(expm1(x));
}

/* x = log theta: tau is near 2 x/9 for small x, and 1 - tau falls like exp(-x/2). tau is 0.153 at
 * theta = 2. */
static status theta_from_tau(double tau, double *theta)
{
    double size = fabs(tau), x;
    if (!(size < 1)) return OUT_OF_DOMAIN;
    if (size < 1e-300) {
        *theta = 1;
        return OK;
    }
    status s = size < 0.153 ? root_between(over_small, &size, 4.4 * size, 4.6 * size, &x)
                            : root_between(over_large, &size, 0.69, 4 - 2.2 * log(1 - size), &x);
    *theta = exp(copysign(x, tau));
    return s;
}

/* ---- Spearman's rho ---- */

static double rho_of_log(double x)
{
    double half = sinh(x / 2), over = sinh(x) - x;
    if (fabs(x) > 600) return copysign(1, x) * (1 - 2 * (fabs(x) - 1) * exp(-fabs(x)));
    if (fabs(x) < 1) {
        double sum = 0;
        for (int k = 9; k >= 1; k--) sum = (sum + 1) * (x * x) / ((2 * k) * (2 * k + 1));
        over = x * sum;
    }
    return x == 0 ? 0 : over / (2 * half * half);
}

static double log_of(double theta)
{
    return fabs(theta - 1) < 0.5 ? log1p(theta - 1) : log(theta);
}

static status rho_from_theta(double theta, double df, double *rho)
{
    (void)df;
    if (!(theta > 0 && theta < HUGE_VAL)) return OUT_OF_DOMAIN;
    *rho = rho_of_log(log_of(theta));
    return OK;
}

static double rho_over(double x, const void *rho)
{
    return rho_of_log(x) - *(const double *)rho;
}

/* 1 - rho = (x + exp(-x) - 1) / (cosh x - 1) */
static double rho_over_strong(double x, const void *rho)
{
    double half = sinh(x / 2);
    return (1 - *(const double *)rho) - (x + expm1(-x)) / (2 * half * half);
}

/* rho is near x/3 for small x, and 1 - rho below 2 x exp(-x) for large. */
static status theta_from_spearman(double rho, double *theta)
{
    double size = fabs(rho), x = 0;
    if (!(size < 1)) return OUT_OF_DOMAIN;
    double far = fmin(700, 3 * size + 8 * size - 1.5 * log(1 - size));
    status s = size < 1e-300 ? OK : root_between(size < 0.9 ? rho_over : rho_over_strong, &size,
                                                 2.9 * size, far, &x);
    *theta = exp(copysign(x, rho));
    return s;
}

static double tail(double theta, double df, enum corner corner)
{
    (void)theta;
    (void)df;
    (void)corner;
    return 0;
}

/* ---- at points ---- */

/* u + v - 1, to rounding also where one is near 1 and the other near 0 */
static double beyond_diagonal(double u, double v)
{
    return u > v ? (u - 1) + v : (v - 1) + u;
}

/* S; for theta < 1 with d and m as above */
static double root_of(double u, double v, double theta)
{
    double eta = theta - 1, d = u - v, m = beyond_diagonal(u, v);
    if (eta >= 0) return hypot(sqrt(1 + 2 * eta * (u * (1 - v) + v * (1 - u))), eta * d);
    double apart = ((1 - u) + v) * ((1 - v) + u) + theta * d * d;
    return hypot(sqrt(theta) * sqrt(apart), sqrt(-eta) * m);
}

static double cdf(double u, double v, double theta)
{
    theta = held(theta);
    double eta = theta - 1, root = root_of(u, v, theta);
    double b = eta >= 0 ? 1 + eta * (u + v) : theta * (u + v) - beyond_diagonal(u, v);
    return b > 0 ? 2 * theta / (b + root) * u * v : (root - b) / (-2 * eta);
}

static double log_density(double u, double v, double theta)
{
    theta = held(theta);
    double q = u * (1 - v) + v * (1 - u), rest = u * v + (1 - u) * (1 - v);
    return log(theta) + log(rest + theta * q) - 3 * log(root_of(u, v, theta));
}

static double conditional(double u, double v, double theta)
{
    theta = held(theta);
    double root = root_of(u, v, theta), a = theta * (u - v) - beyond_diagonal(u, v);
    return a > 0 ? 2 * theta / (root + a) * v * (1 - v) / root : (root - a) / (2 * root);
}

static double beyond(double u, double v, double theta)
{
    theta = held(theta);
    double root = root_of(u, v, theta), a = theta * (u - v) - beyond_diagonal(u, v);
    return a < 0 ? 2 * theta / (root - a) * v * (1 - v) / root : (root + a) / (2 * root);
}

/* Johnson's parts, divided by the power of 2 below theta: the square of theta might overflow. */
static double conditional_quantile(double u, double w, double theta)
{
    int exponent;
    theta = held(theta);
    double near = ldexp(frexp(theta, &exponent), 1), scale = ldexp(1, 1 - exponent);
    double eta = theta - 1, little = eta * scale, a = w * (1 - w), b = near + a * eta * little;
    double c = 2 * a * (u * theta * near + (1 - u) * scale) + near * (1 - 2 * a);
    double d = sqrt(near * (near + 4 * a * u * (1 - u) * eta * little)), e = (1 - u) + theta * u;
    return w < 0.5 ? 2 * a * e * (e * scale) / (c + (1 - 2 * w) * d)
                   : (c + (2 * w - 1) * d) / (2 * b);
}

static status draw_plackett(const copula *c, const struct draw_rows *where, pool *p)
{
    (void)p;
    return draw_by_conditional(c, where, conditional_quantile);
}

/* With (U, V) from theta (1-U, V) is from 1/theta. */
static double one_turned(double u, double v, double theta)
{
    return cdf(u, v, 1 / held(theta));
}

static const struct pair_functions pair = {
    .cdf = cdf,
    .log_density = log_density,
    .conditional = conditional,
    .beyond = beyond,
    .conditional_quantile = conditional_quantile,
    .turned = { one_turned, cdf },
};

const family plackett_family = {
    .word = "plackett",
    .has_theta = true,
    .theta_low = 0, .theta_high = HUGE_VAL, .theta_low_beyond_pairs = 0, .theta_open = 3,
    .tau_low = -1, .tau_high = 1, .tau_open = 3,
    .most_dimensions = 2,
    .use = "a pair known by an odds ratio, from a table of claims above and below thresholds",
    .source = "Plackett (1965)",
    .theta_from_tau = theta_from_tau,
    .tau_from_theta = tau_from_theta,
    .rho_from_theta = rho_from_theta,
    .theta_from_spearman = theta_from_spearman,
    .tail = tail,
    .draw = draw_plackett,
    .evaluator = &pair_evaluator,
    .pair = &pair,
};
