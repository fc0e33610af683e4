/* archimedean.c - densities and conditional distributions by the generator's derivatives.
 *
 * Method
 *   With T_j = psi^-1(u_1) + ... + psi^-1(u_j) the log-density is log |psi^(d)(T_d)| less the sum
 *   of log |psi'(psi^-1(u_j))|, and P(U_j <= u_j | the columns before) is psi^(j-1)(T_j) /
 *   psi^(j-1)(T_(j-1)) (Hofert, Maechler & McNeil 2012). The derivatives are the family's, by
 *   sums of positive terms. The inverse is a root in log t.
 *
 * Special cases
 *   Dependence so strong that log w is lost beside the derivative (theta from about 1e10): the
 *   inverse leaves the column as those before.
 *
 * Accuracy
 *   Logarithms to about 1e-15 times their size and the order.
 */
#include "archimedean.h"
#include "elementary.h"
#include "root.h"

#include <float.h>
#include <math.h>

static const double FAR_FROM_ONE = 1e10;      /* a logarithm only theta can bring about */

double log_added(double a, double b)
{
    double larger = fmax(a, b), apart = fabs(a - b);
    return isinf(larger) ? larger : larger + log1p(exp(-apart));
}

double log_one_minus_exp(double log_t)
{
    return log_t < -40 ? log_t : portable_log1mexp(-exp(log_t));
}

static status prepare(struct evaluation *e, pool *p)
{
    const copula *c = e->c;
    return c->family->generator->prepare(c->theta, c->dimension, p, &e->prepared);
}

/* log of |psi^(order)| at exp(log_t) */
static double log_derivative(const struct evaluation *e, size_t order, double log_t)
{
    return e->c->family->generator->log_derivative(e->prepared, order, log_t, e->c->theta);
}

static status cdf(const struct evaluation *e, const double *u, double *value, double *error)
{
    (void)error;
    const struct generator *g = e->c->family->generator;
    double theta = e->c->theta, log_sum = -HUGE_VAL;
    for (size_t j = 0; j < e->c->dimension; j++)
        log_sum = log_added(log_sum, g->log_inverse(u[j], theta));
    *value = e->c->family->psi(log_sum, theta);
    return OK;
}

static status log_density(const struct evaluation *e, const double *u, double *value)
{
    const struct generator *g = e->c->family->generator;
    double theta = e->c->theta, log_sum = -HUGE_VAL, log_slopes = 0;
    for (size_t j = 0; j < e->c->dimension; j++) {
        double log_t = g->log_inverse(u[j], theta);
        log_sum = log_added(log_sum, log_t);
        log_slopes += log_derivative(e, 1, log_t);
    }
    *value = log_derivative(e, e->c->dimension, log_sum) - log_slopes;
    return isnan(*value) ? OUT_OF_DOMAIN : OK;
}

static status conditional(const struct evaluation *e, const double *u, double *w)
{
    const struct generator *g = e->c->family->generator;
    double theta = e->c->theta, log_sum = g->log_inverse(u[0], theta);
    w[0] = u[0];
    for (size_t j = 1; j < e->c->dimension; j++) {
        double next = log_added(log_sum, g->log_inverse(u[j], theta));
        double log_all = log_derivative(e, j, log_sum);
        w[j] = exp(log_derivative(e, j, next) - log_all);
        if (isnan(w[j])) return OUT_OF_DOMAIN;
        if (w[j] > 1) w[j] = 1;
        log_sum = next;
    }
    return OK;
}

static status beyond(const struct evaluation *e, const double *u, double *w)
{
    const struct generator *g = e->c->family->generator;
    bool pair = e->c->dimension == 2;
    status s = pair ? OK : conditional(e, u, w);
    for (size_t j = 1; s == OK && j < e->c->dimension; j++)
        w[j] = pair ? g->beyond(u[0], u[1], e->c->theta) : 1 - w[j];
    return s;
}

struct wanted {
    const struct evaluation *e;
    double log_sum, log_goal;
    size_t order;
};

static double over(double log_t, const void *with)
{
    const struct wanted *k = with;
    return log_derivative(k->e, k->order, log_added(k->log_sum, log_t)) - k->log_goal;
}

/* log t of the next column; an end of the bracket where the answer lies beyond it. */
static status solve(const struct wanted *k, double *log_t)
{
    const struct generator *g = k->e->c->family->generator;
    double low = g->log_inverse(1 - 0x1p-53, k->e->c->theta);
    double high = g->log_inverse(DBL_MIN, k->e->c->theta);
    if (over(low, k) <= 0) {
        *log_t = low;
        return OK;
    }
    if (over(high, k) >= 0) {
        *log_t = high;
        return OK;
    }
    return root_between(over, k, low, high, log_t);
}

static status from_conditional(const struct evaluation *e, const double *w, double *u)
{
    double theta = e->c->theta;
    struct wanted k = { .e = e, .log_sum = e->c->family->generator->log_inverse(w[0], theta) };
    u[0] = w[0];
    for (size_t j = 1; j < e->c->dimension; j++) {
        double before = log_derivative(e, j, k.log_sum), log_t = k.log_sum;
        k.order = j;
        k.log_goal = before + log(w[j]);
        bool lost = k.log_goal == before && fabs(before) > FAR_FROM_ONE;
        status s = lost ? OK : solve(&k, &log_t);
        if (s != OK) return s;
        u[j] = e->c->family->psi(log_t, theta);
        k.log_sum = log_added(k.log_sum, log_t);
    }
    return OK;
}

/* The sum over k < d of |psi^(k)(t)| t^k / k!, t = psi^-1(w) (Barbe, Genest, Ghoudi & Remillard
 * 1996). */
static double kendall(const struct evaluation *e, double w)
{
    double log_t = e->c->family->generator->log_inverse(w, e->c->theta), sum = w, log_factorial = 0;
    for (size_t k = 1; k < e->c->dimension; k++) {
        log_factorial += log((double)k);
        sum += exp(log_derivative(e, k, log_t) + (double)k * log_t - log_factorial);
    }
    return fmin(1, sum);
}

const struct evaluator archimedean_evaluator = {
    .prepare = prepare,
    .cdf = cdf,
    .log_density = log_density,
    .conditional = conditional,
    .beyond = beyond,
    .from_conditional = from_conditional,
    .kendall = kendall,
};
