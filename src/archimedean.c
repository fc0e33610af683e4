/* archimedean.c - densities and conditional distributions by the generator's derivatives.
 *
 * Method
 *   With T_j = psi^-1(u_1) + ... + psi^-1(u_j) the log-density is log |psi^(d)(T_d)| less the sum
 *   of log |psi'(psi^-1(u_j))|, and P(U_j <= u_j | the columns before) is psi^(j-1)(T_j) /
 *   psi^(j-1)(T_(j-1)) (Hofert, Maechler & McNeil 2012). Their derivatives are polynomials with
 *   alternating sums for coefficients; here these are built by the recurrence that differentiation
 *   gives, all of whose terms are positive, and scaled in every step. The inverse is a root in log
 *   t.
 *
 * Accuracy
 *   Logarithms to about 1e-15 times their size and the order.
 */
#include "archimedean.h"
#include "elementary.h"
#include "root.h"

#include <float.h>
#include <math.h>

double log_added(double a, double b)
{
    double larger = fmax(a, b), apart = fabs(a - b);
    return isinf(larger) ? larger : larger + log1p(exp(-apart));
}

double log_one_minus_exp(double log_t)
{
    return log_t < -40 ? log_t : portable_log1mexp(-exp(log_t));
}

/* The largest of the terms becomes 1: returns its logarithm. */
static double scale_terms(double *r, size_t n)
{
    double most = 0;
    for (size_t k = 1; k <= n; k++) most = fmax(most, r[k]);
    if (!(most > 0)) return 0;
    for (size_t k = 1; k <= n; k++) r[k] /= most;
    return log(most);
}

static double total(const double *r, size_t n)
{
    double sum = 0;
    for (size_t k = 1; k <= n; k++) sum += r[k];
    return sum;
}

/* One of x and 1 takes part in each step, whichever way it does not overflow. */
double log_sum_rising(size_t order, double log_x, double rest)
{
    double r[MOST_TERMS + 1], rise = exp(fmin(log_x, 0)), stay = exp(fmin(-log_x, 0));
    double log_step = fmax(log_x, 0), log_scale = log_x;
    if (order > MOST_TERMS) return NAN;
    r[1] = 1;
    for (size_t n = 1; n < order; n++) {
        r[n + 1] = 0;
        for (size_t k = n + 1; k >= 1; k--) {
            double from_before = k > 1 ? ((double)k - 2 + rest) * rise * r[k - 1] : 0;
            r[k] = (double)k * stay * r[k] + from_before;
        }
        log_scale += log_step + scale_terms(r, n + 1);
    }
    return log_scale + log(total(r, order));
}

double log_sum_of_powers(size_t order, double log_x, double part, double rest)
{
    double r[MOST_TERMS + 1], rise = part * exp(fmin(log_x, 0)), stay = exp(fmin(-log_x, 0));
    double log_step = fmax(log_x, 0), log_scale = log_x + log(part);
    if (order > MOST_TERMS) return NAN;
    r[1] = 1;
    for (size_t n = 1; n < order; n++) {
        r[n + 1] = 0;
        for (size_t k = n + 1; k >= 1; k--) {
            double from_before = k > 1 ? rise * r[k - 1] : 0;
            r[k] = ((double)(n - k) + (double)k * rest) * stay * r[k] + from_before;
            if (k == n + 1) r[k] = from_before;
        }
        log_scale += log_step + scale_terms(r, n + 1);
    }
    return log_scale + log(total(r, order));
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
        log_slopes += g->log_derivative(1, log_t, theta);
    }
    *value = g->log_derivative(e->c->dimension, log_sum, theta) - log_slopes;
    return isnan(*value) ? OUT_OF_DOMAIN : OK;
}

static status conditional(const struct evaluation *e, const double *u, double *w)
{
    const struct generator *g = e->c->family->generator;
    double theta = e->c->theta, log_sum = g->log_inverse(u[0], theta);
    w[0] = u[0];
    for (size_t j = 1; j < e->c->dimension; j++) {
        double next = log_added(log_sum, g->log_inverse(u[j], theta));
        w[j] = exp(g->log_derivative(j, next, theta) - g->log_derivative(j, log_sum, theta));
        if (isnan(w[j])) return OUT_OF_DOMAIN;
        if (w[j] > 1) w[j] = 1;
        log_sum = next;
    }
    return OK;
}

static status beyond(const struct evaluation *e, const double *u, double *w)
{
    const struct generator *g = e->c->family->generator;
    bool pair = e->c->dimension == 2 && g->beyond;
    status s = pair ? OK : conditional(e, u, w);
    for (size_t j = 1; s == OK && j < e->c->dimension; j++)
        w[j] = pair ? g->beyond(u[0], u[1], e->c->theta) : 1 - w[j];
    return s;
}

struct wanted {
    const struct generator *g;
    double theta, log_sum, log_goal;
    size_t order;
};

static double over(double log_t, const void *with)
{
    const struct wanted *k = with;
    return k->g->log_derivative(k->order, log_added(k->log_sum, log_t), k->theta) - k->log_goal;
}

/* log t of the next column; an end of the bracket where the answer lies beyond it. */
static status solve(const struct wanted *k, double *log_t)
{
    double low = k->g->log_inverse(1 - 0x1p-53, k->theta);
    double high = k->g->log_inverse(DBL_MIN, k->theta);
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
    const struct generator *g = e->c->family->generator;
    struct wanted k = { .g = g, .theta = e->c->theta };
    k.log_sum = g->log_inverse(w[0], k.theta);
    u[0] = w[0];
    for (size_t j = 1; j < e->c->dimension; j++) {
        double log_t;
        k.order = j;
        k.log_goal = g->log_derivative(j, k.log_sum, k.theta) + log(w[j]);
        status s = solve(&k, &log_t);
        if (s != OK) return s;
        u[j] = e->c->family->psi(log_t, k.theta);
        k.log_sum = log_added(k.log_sum, log_t);
    }
    return OK;
}

/* The sum over k < d of |psi^(k)(t)| t^k / k!, t = psi^-1(w) (Barbe, Genest, Ghoudi & Remillard
 * 1996). */
static double kendall(const struct evaluation *e, double w)
{
    const struct generator *g = e->c->family->generator;
    double log_t = g->log_inverse(w, e->c->theta), sum = w, log_factorial = 0;
    for (size_t k = 1; k < e->c->dimension; k++) {
        log_factorial += log((double)k);
        sum += exp(g->log_derivative(k, log_t, e->c->theta) + (double)k * log_t - log_factorial);
    }
    return fmin(1, sum);
}

/* A conditional distribution in column j takes j^2 steps, its inverse fifty times as many. */
enum { MOST_CONDITIONAL = 200 };

static const char *limit(const struct evaluation *e, enum question q)
{
    if (!e->c->family->generator->by_sums) return NULL;
    if ((q == ASK_DENSITY || q == ASK_KENDALL) && e->c->dimension > MOST_TERMS)
        return "has too many columns: the density of its family can have at most 1024";
    if (q == ASK_CONDITIONAL && e->c->dimension > MOST_CONDITIONAL)
        return "has too many columns: conditional distributions of its family can have at most 200";
    return NULL;
}

const struct evaluator archimedean_evaluator = {
    .cdf = cdf,
    .log_density = log_density,
    .conditional = conditional,
    .beyond = beyond,
    .from_conditional = from_conditional,
    .kendall = kendall,
    .limit = limit,
};
