/* clayton_points.c - density and conditional distributions of a Clayton copula.
 *
 * Method
 *   With S_j = u_1^-theta + ... + u_j^-theta - (j-1) the copula is S_d^(-1/theta), its conditional
 *   distributions (S_j / S_(j-1))^-(1/theta + j - 1), and the density follows (Cook & Johnson
 *   1981). S is kept as m^-theta (1 + s) with the smallest u so far, m: then s is the sum of
 *   (m/u)^theta (1 - u^theta) over the other columns, all positive, and only ratios of u are raised
 *   to powers. The logarithm of S would lose as many digits as theta log u has before the point.
 *
 * Special cases
 *   theta below 1e-20 is taken as this, which nothing can tell from independence.
 *
 * Accuracy
 *   Logarithms to a few 1e-16 times their size, whatever theta.
 */
#include "clayton_points.h"

#include <float.h>
#include <math.h>

static const double LEAST = 1e-20;

struct powers {
    double theta, least, more;        /* m and s */
};

double log_ratio(double u, double v)
{
    double apart = (u - v) / v;
    return fabs(apart) < 0.5 ? log1p(apart) : log(u / v);
}

static struct powers powers_of(const struct evaluation *e, double first)
{
    return (struct powers){ fmax(e->c->theta, LEAST), first, 0 };
}

/* S rises by u^-theta - 1; returns by what part of itself. */
static double add_column(struct powers *p, double u)
{
    double missing = -expm1(p->theta * log(u)), before = 1 + p->more;
    if (u < p->least) {
        double down = exp(p->theta * log_ratio(u, p->least));
        p->more = down * (p->more - expm1(p->theta * log(p->least)));
        p->least = u;
        return missing / (down * before);
    }
    double more = exp(p->theta * log_ratio(p->least, u)) * missing;
    p->more += more;
    return more / before;
}

static status cdf(const struct evaluation *e, const double *u, double *value, double *error)
{
    (void)error;
    struct powers p = powers_of(e, u[0]);
    for (size_t j = 1; j < e->c->dimension; j++) add_column(&p, u[j]);
    *value = p.least * exp(-log1p(p.more) / p.theta);
    return OK;
}

static status log_density(const struct evaluation *e, const double *u, double *value)
{
    size_t d = e->c->dimension;
    struct powers p = powers_of(e, u[0]);
    double sum = 0;
    for (size_t j = 1; j < d; j++) {
        add_column(&p, u[j]);
        sum += log1p((double)j * p.theta);
    }
    for (size_t j = 0; j < d; j++) sum += (1 + p.theta) * log_ratio(p.least, u[j]);
    *value = sum - ((double)d - 1) * log(p.least) - (1 / p.theta + (double)d) * log1p(p.more);
    return OK;
}

/* The logarithms of the conditional probabilities. */
static void log_conditional(const struct evaluation *e, const double *u, double *w)
{
    struct powers p = powers_of(e, u[0]);
    for (size_t j = 1; j < e->c->dimension; j++) {
        double least = p.least, more = p.more, rise = add_column(&p, u[j]);
        double log_rise = rise < HUGE_VAL ? log1p(rise)
                        : log1p(p.more) - log1p(more) + p.theta * log_ratio(least, p.least);
        w[j] = -(1 / p.theta + (double)j) * log_rise;
    }
}

static status conditional(const struct evaluation *e, const double *u, double *w)
{
    log_conditional(e, u, w);
    w[0] = u[0];
    for (size_t j = 1; j < e->c->dimension; j++) w[j] = exp(w[j]);
    return OK;
}

static status beyond(const struct evaluation *e, const double *u, double *w)
{
    log_conditional(e, u, w);
    w[0] = u[0];
    for (size_t j = 1; j < e->c->dimension; j++) w[j] = -expm1(w[j]);
    return OK;
}

/* u with u^-theta = 1 + (w^(-1/(1/theta + j)) - 1) S */
static double next_column(const struct powers *p, size_t j, double w)
{
    double rise = expm1(-log(w) / (1 / p->theta + (double)j)) * (1 + p->more);
    double log_power = p->theta * log(p->least), less = expm1(log_power);
    double log_rest = rise + less > -0.5 ? log1p(rise + less) : log(rise + exp(log_power));
    double u = p->least * exp(-log_rest / p->theta);
    return fmax(DBL_MIN, fmin(u, 1 - 0x1p-53));
}

static status from_conditional(const struct evaluation *e, const double *w, double *u)
{
    struct powers p = powers_of(e, w[0]);
    u[0] = w[0];
    for (size_t j = 1; j < e->c->dimension; j++) {
        u[j] = next_column(&p, j, w[j]);
        add_column(&p, u[j]);
    }
    return OK;
}

/* w times the sum over k < d of (1/theta)(1/theta + 1)...(1/theta + k-1) / k! (1 - w^theta)^k
 * (Barbe, Genest, Ghoudi & Remillard 1996) */
static double kendall(const struct evaluation *e, double w)
{
    double theta = fmax(e->c->theta, LEAST), missing = -expm1(theta * log(w)), term = w, sum = w;
    for (size_t k = 1; k < e->c->dimension; k++)
        sum += term *= (1 / theta + (double)(k - 1)) / (double)k * missing;
    return fmin(1, sum);
}

const struct evaluator clayton_evaluator = {
    .cdf = cdf,
    .log_density = log_density,
    .conditional = conditional,
    .beyond = beyond,
    .from_conditional = from_conditional,
    .kendall = kendall,
};
