/* evaluate.c - what a copula says at points: the rotation, and the kinds without parameters.
 *
 * Method
 *   The columns that the rotation turns are replaced by 1 - u before, and where the answer is about
 *   that column after, asking the unrotated copula. For probabilities, where
 *     90: v - C(1-u, v),  180: u + v - 1 + C(1-u, 1-v),  270: u - C(u, 1-v)
 *   and the sum over all subsets of more columns cancel, each family has forms of pairs that do
 *   not, and Archimedean ones the mean over their frailty (frailty_mean.c).
 *
 * Accuracy
 *   A double 1 - u has lost what u had below 1e-16, so that near 0 densities and conditional
 *   distributions of a turned column are off by about 1e-16 / u relative; probabilities are not.
 *
 * Special cases
 *   A probability with some u = 0 is 0; with one u below 1 it is that u.
 */
#include "evaluate.h"
#include "archimedean.h"
#include "frailty.h"
#include "root.h"

#include <float.h>
#include <math.h>

static bool turns(int rotation, size_t column)
{
    return rotation == 180 || (rotation == 90 && column == 0) || (rotation == 270 && column == 1);
}

static double turned(double u)
{
    return u < 0x1p-53 ? 1 - 0x1p-53 : 1 - u;
}

/* the point for the unrotated copula */
static const double *turn_all(const struct evaluation *e, const double *u)
{
    if (e->rotation == 0) return u;
    for (size_t j = 0; j < e->c->dimension; j++)
        e->turned[j] = turns(e->rotation, j) ? turned(u[j]) : u[j];
    return e->turned;
}

status evaluation_of(const copula *c, struct evaluation *e, pool *p)
{
    const family *f = c->family;
    bool only_pair = !f->generator || c->theta < f->theta_low_beyond_pairs;
    *e = (struct evaluation){ .c = c, .by = f->evaluator };
    if (f->pair && only_pair) e->by = &pair_evaluator;
    e->rotation = e->by->takes_rotation ? 0 : c->rotation;
    e->turned = pool_take(p, c->dimension, sizeof *e->turned);
    e->room = pool_take(p, c->dimension, 4 * sizeof *e->room);
    if (!e->turned || !e->room) return NO_MEMORY;
    if (e->rotation && c->dimension > 2) {
        e->mean = pool_take(p, 1, sizeof *e->mean);
        if (!e->mean) return NO_MEMORY;
        *e->mean = (struct frailty_mean){ .theta = c->theta };
    }
    return e->by->prepare ? e->by->prepare(e, p) : OK;
}

/* ---- rotated probabilities ---- */

static status unrotated_cdf(const struct evaluation *e, double u, double v, double *value)
{
    double error;
    const double point[2] = { u, v };
    return e->by->cdf(e, point, value, &error);
}

/* Between the bounds of Frechet and Hoeffding. */
static double within_bounds(double u, double v, double value)
{
    double least = u < v ? u - (1 - v) : v - (1 - u);         /* exact where it is positive */
    return fmin(fmin(u, v), fmax(fmax(0, least), value));
}

/* Rotation 180 of a pair as the sum that it is; what cancels leaves 4e-16. */
static status cancelling_cdf(const struct evaluation *e, double u, double v, double *value)
{
    double c = 0;
    status s = unrotated_cdf(e, 1 - u, 1 - v, &c);
    *value = within_bounds(u, v, (u - (1 - v)) + c);
    return s;
}

/* Rotation 180 of an Archimedean copula. */
static double mean_over_frailty(const struct evaluation *e, const double *u)
{
    const family *f = e->c->family;
    double least = 1;
    e->mean->n = e->c->dimension;
    e->mean->log_t = e->turned;
    for (size_t j = 0; j < e->mean->n; j++) {
        e->turned[j] = f->generator->log_inverse_turned(u[j], e->c->theta);
        least = fmin(least, u[j]);
    }
    return fmin(least, exp(f->frailty->log_mean(e->mean)));
}

static const struct turned_pair *turned_pair_of(const struct evaluation *e)
{
    const family *f = e->c->family;
    return e->by == &pair_evaluator ? &f->pair->turned : &f->generator->turned;
}

static double rotated_pair_cdf(const struct evaluation *e, double u, double v)
{
    const struct turned_pair *by = turned_pair_of(e);
    double theta = e->c->theta;
    if (e->rotation == 180) return by->both(u, v, theta);
    return e->rotation == 90 ? by->one(u, v, theta) : by->one(v, u, theta);
}

status cdf_at(const struct evaluation *e, const double *u, double *value, double *error)
{
    size_t below_one = 0, one = 0, d = e->c->dimension;
    *error = 0;
    *value = 0;
    for (size_t j = 0; j < d; j++) {
        if (u[j] == 0) return OK;
        if (u[j] < 1) below_one++, one = j;
    }
    *value = below_one ? u[one] : 1;
    if (below_one < 2) return OK;
    status s = OK;
    if (e->rotation == 0) s = e->by->cdf(e, u, value, error);
    else *value = d == 2 ? rotated_pair_cdf(e, u[0], u[1]) : mean_over_frailty(e, u);
    if (s == OK && d == 2 && !isnan(*value)) *value = within_bounds(u[0], u[1], *value);
    return s;
}

status pair_cdf_roughly_at(const struct evaluation *e, const double *u, double *value)
{
    if (e->rotation == 0) return unrotated_cdf(e, u[0], u[1], value);
    if (e->rotation == 180) return cancelling_cdf(e, u[0], u[1], value);
    *value = rotated_pair_cdf(e, u[0], u[1]);
    return OK;
}

status log_density_at(const struct evaluation *e, const double *u, double *value)
{
    return e->by->log_density(e, turn_all(e, u), value);
}

/* Within (0;1), so that it may be asked again; NaN stays. */
static double inside(double u)
{
    return u < DBL_MIN ? DBL_MIN : u > 1 - 0x1p-53 ? 1 - 0x1p-53 : u;
}

status conditional_at(const struct evaluation *e, const double *u, double *w)
{
    double first = u[0];
    bool turned_all = turns(e->rotation, 1), beyond = turned_all && e->by->beyond;
    status s = (beyond ? e->by->beyond : e->by->conditional)(e, turn_all(e, u), w);
    for (size_t j = 1; s == OK && j < e->c->dimension; j++)
        w[j] = inside(turned_all && !beyond ? 1 - w[j] : w[j]);
    w[0] = first;
    return s;
}

/* The first column of an unrotated pair, and what is to lie beyond the second. */
struct beyond_wanted {
    const struct evaluation *e;
    double u, w;
};

static double over_beyond(double log_rest, const void *with)
{
    const struct beyond_wanted *k = with;
    double point[2] = { k->u, turned(exp(log_rest)) }, w[2];
    if (k->e->by->beyond(k->e, point, w) != OK) return NAN;
    return log(fmax(w[1], DBL_MIN) / k->w);
}

/* The second column of a pair that a rotation turns, v, where 1 - w would lose the digits of w;
 * what it was where the root lies beyond 2^-53. */
static void refine_turned(const struct evaluation *e, double w, double *v)
{
    struct beyond_wanted k = { e, e->turned[0], w };
    double log_v;
    if (root_between(over_beyond, &k, log(0x1p-53), log1p(-0x1p-53), &log_v) == OK)
        *v = exp(log_v);
}

status from_conditional_at(const struct evaluation *e, const double *w, double *u)
{
    double first = w[0], asked = w[1];
    status s = e->by->from_conditional(e, turn_all(e, w), u);
    for (size_t j = 1; s == OK && j < e->c->dimension; j++)
        u[j] = inside(turns(e->rotation, j) ? 1 - u[j] : u[j]);
    if (s == OK && turns(e->rotation, 1) && e->c->dimension == 2 && asked < 1e-3 && e->by->beyond)
        refine_turned(e, asked, &u[1]);
    u[0] = first;
    return s;
}

/* ---- what has no answer ---- */

const char *evaluation_limit(const struct evaluation *e, enum question q)
{
    return e->by->limit ? e->by->limit(e, q) : NULL;
}

/* ---- independence ---- */

static status product_of_all(const struct evaluation *e, const double *u, double *value,
                             double *error)
{
    (void)error;
    *value = 1;
    for (size_t j = 0; j < e->c->dimension; j++) *value *= u[j];
    return OK;
}

static status no_log_density(const struct evaluation *e, const double *u, double *value)
{
    (void)e;
    (void)u;
    *value = 0;
    return OK;
}

static status unchanged(const struct evaluation *e, const double *u, double *w)
{
    for (size_t j = 0; j < e->c->dimension; j++) w[j] = u[j];
    return OK;
}

/* -log of the product is gamma with shape d: w times the first d terms of exp(-log w). */
static double kendall_of_product(const struct evaluation *e, double w)
{
    double term = w, sum = w;
    for (size_t k = 1; k < e->c->dimension; k++) sum += term *= -log(w) / (double)k;
    return sum;
}

const struct evaluator independent_evaluator = {
    .takes_rotation = true,
    .cdf = product_of_all,
    .log_density = no_log_density,
    .conditional = unchanged,
    .from_conditional = unchanged,
    .kendall = kendall_of_product,
};

/* ---- pairs by their own functions ---- */

static status pair_cdf(const struct evaluation *e, const double *u, double *value, double *error)
{
    (void)error;
    *value = e->c->family->pair->cdf(u[0], u[1], e->c->theta);
    return OK;
}

static status pair_log_density(const struct evaluation *e, const double *u, double *value)
{
    *value = e->c->family->pair->log_density(u[0], u[1], e->c->theta);
    return isnan(*value) ? OUT_OF_DOMAIN : OK;
}

static status pair_conditional(const struct evaluation *e, const double *u, double *w)
{
    w[0] = u[0];
    w[1] = e->c->family->pair->conditional(u[0], u[1], e->c->theta);
    return isnan(w[1]) ? OUT_OF_DOMAIN : OK;
}

static status pair_beyond(const struct evaluation *e, const double *u, double *w)
{
    w[0] = u[0];
    w[1] = e->c->family->pair->beyond(u[0], u[1], e->c->theta);
    return isnan(w[1]) ? OUT_OF_DOMAIN : OK;
}

static status pair_from_conditional(const struct evaluation *e, const double *w, double *u)
{
    u[0] = w[0];
    u[1] = e->c->family->pair->conditional_quantile(w[0], w[1], e->c->theta);
    return isnan(u[1]) ? OUT_OF_DOMAIN : OK;
}

/* The parameter at which a family has perfect dependence has no density. */
static const char *pair_limit(const struct evaluation *e, enum question q)
{
    bool perfect = isnan(e->c->family->pair->conditional(0.5, 0.5, e->c->theta));
    if (!perfect || q == ASK_CDF || q == ASK_KENDALL) return NULL;
    return "has perfect dependence: it has no density and its columns no conditional distribution";
}

const struct evaluator pair_evaluator = {
    .cdf = pair_cdf,
    .log_density = pair_log_density,
    .conditional = pair_conditional,
    .beyond = pair_beyond,
    .from_conditional = pair_from_conditional,
    .limit = pair_limit,
};
