/* evaluate.c - what a copula says at points: the rotation, and the kinds without parameters.
 *
 * Method
 *   The columns that the rotation turns are replaced by 1 - u before, and where the answer is about
 *   that column after, asking the unrotated copula. For the probability of a pair
 *     90: v - C(1-u, v),  180: u + v - 1 + C(1-u, 1-v),  270: u - C(u, 1-v),
 *   and where these cancel, the integral over a column of a conditional probability, which is
 *   positive: the one of these with the smallest bound on its error. Beyond pairs rotation 180 is a
 *   sum over all subsets of the columns.
 *
 * Accuracy
 *   A double 1 - u has lost what u had below 1e-16, so that near 0 the answer for a turned column
 *   is off by about 1e-16 / u relative whatever the method; the bound says so.
 *
 * Special cases
 *   A probability with some u = 0 is 0; with one u below 1 it is that u.
 */
#include "evaluate.h"
#include "quadrature.h"
#include "root.h"

#include <float.h>
#include <math.h>

enum { MOST_IN_SUBSETS = 16 };

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
    return e->by->prepare ? e->by->prepare(e, p) : OK;
}

/* ---- probabilities of rotated pairs ---- */

/* A value and a bound on its error. */
struct bounded {
    double value, error;
};

/* The conditional probability that one column is at most something, given that the other is x. All
 * families with a rotation here are exchangeable, so that either column may be the first, and it
 * rises or falls in x (Nelsen 2006, section 5.2.3). */
struct strip {
    const struct evaluation *e;
    double asked;             /* the second argument of the unrotated copula */
    double end;               /* x is from 0 to here */
    bool turn_x, turn_w;      /* whether 1 - x is the first argument, and 1 - w the answer */
};

static const double
    TURNED = 0x1p-53,         /* 1 - u in a double is so far from 1 - u */
    CANCELLED = 4e-16,        /* a sum of numbers up to 1 is so far from what it stands for */
    NEAR_ONE = 4e-15,         /* a conditional probability near 1 is so far from it */
    WANTED = 1e-10;           /* relative */

static double strip_at(double x, const void *with)
{
    const struct strip *s = with;
    const double u[2] = { s->turn_x ? turned(x) : x, s->asked };
    double w[2];
    if (s->e->by->conditional(s->e, u, w) != OK || isnan(w[1])) return NAN;
    double within = fmin(1, fmax(0, w[1]));
    return s->turn_w ? 1 - within : within;
}

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

/* As it stands; what cancels leaves 1e-16. */
static status cancelling_cdf(const struct evaluation *e, double u, double v, double *value)
{
    double x = turns(e->rotation, 0) ? 1 - u : u, y = turns(e->rotation, 1) ? 1 - v : v, c = 0;
    status s = x > 0 && y > 0 ? unrotated_cdf(e, x, y, &c) : OK;
    if (e->rotation == 180) *value = (u - y) + c;
    else *value = (e->rotation == 90 ? v : u) - c;
    *value = within_bounds(u, v, *value);
    return s;
}

/* What rounding may cost the integral along a strip: a monotone integrand whose argument is off by
 * TURNED changes it by that times its range, 1 - w by NEAR_ONE everywhere; then `asked` was
 * turned too, where the slope is the conditional probability along the other column. */
static double strip_rounding(const struct strip *s, const struct strip *other, double highest)
{
    double rounding = s->turn_w ? NEAR_ONE * s->end : 0;
    if (s->turn_x) rounding += TURNED * highest;
    if (s->turn_w) rounding += TURNED * strip_at(other->end, other);
    return rounding;
}

/* From the middle of an interval to its end, over panels that shrink towards the end, until what is
 * left is known: it is its length times something between its ends. */
static void add_half(const struct strip *s, double from, double end, double rounding,
                     struct bounded *sum)
{
    double at_end = strip_at(fmax(end, 1e-300), s);
    for (;;) {
        double rest = fabs(end - from), at = strip_at(from, s);
        double apart = rest * fabs(at_end - at) / 2, little = 1e-13 * sum->value;
        if (!(apart > fmax(0.1 * rounding, little))) {
            sum->value += rest * (at_end + at) / 2;
            sum->error += apart;
            return;
        }
        double to = end + (from - end) / 8, enough = fmax(rounding, little);
        sum->value += fabs(adapted_integral(strip_at, s, from, to, enough, &sum->error));
        from = to;
    }
}

/* Intervals between 0, the end, and where the columns agree or are opposite, near which strong
 * dependence has its mass. */
static struct bounded strip_integral(const struct strip *s, const struct strip *other)
{
    double highest = fmax(strip_at(1e-300, s), strip_at(s->end, s));
    double rounding = strip_rounding(s, other, highest);
    double low = fmin(s->asked, 1 - s->asked), high = fmax(s->asked, 1 - s->asked);
    const double cuts[] = { 0, fmin(low, s->end), fmin(high, s->end), s->end };
    struct bounded sum = { 0, rounding };
    for (int k = 3; k > 0; k--) {
        if (cuts[k] <= cuts[k - 1]) continue;
        double middle = cuts[k - 1] + (cuts[k] - cuts[k - 1]) / 2;
        add_half(s, middle, cuts[k], rounding, &sum);
        add_half(s, middle, cuts[k - 1], rounding, &sum);
    }
    return sum;
}

/* The two strips of which each makes up the probability, the shorter one first. Rotation 270 is 90
 * of exchanged columns. */
static void strips_of(const struct evaluation *e, double u, double v, struct strip two[2])
{
    bool both = e->rotation == 180;
    if (e->rotation == 270) {
        double exchanged = u;
        u = v, v = exchanged;
    }
    struct strip along_u = { e, both ? turned(v) : v, u, true, both };
    struct strip along_v = { e, turned(u), v, both, true };
    two[u < v ? 0 : 1] = along_u;
    two[u < v ? 1 : 0] = along_v;
}

/* What cancelled, unless an integral of a conditional probability, which is positive, has the
 * smaller bound and agrees with it. Without a density what cancelled stands. */
static status rotated_pair_cdf(const struct evaluation *e, double u, double v, double *value,
                               double *error)
{
    status s = cancelling_cdf(e, u, v, value);
    if (s != OK) return s;
    struct bounded best = { *value, CANCELLED };
    struct strip two[2];
    strips_of(e, u, v, two);
    for (int i = 0; i < 2 && best.error > WANTED * best.value; i++) {
        struct bounded sum = strip_integral(&two[i], &two[1 - i]);
        bool agrees = fabs(sum.value - *value) <= sum.error + CANCELLED;
        if (agrees && sum.error < best.error) best = sum;
    }
    *value = best.value;
    *error = best.error > WANTED * best.value ? best.error : 0;
    return OK;
}

/* ---- beyond pairs, rotation 180: over all subsets of the columns ---- */

static status subsets_cdf(const struct evaluation *e, const double *u, double *value, double *error)
{
    size_t d = e->c->dimension;
    if (d > MOST_IN_SUBSETS) return OUT_OF_DOMAIN;
    double sum = 0, sizes = 0;
    for (unsigned long set = 0; set < 1ul << d; set++) {
        double part = 1, ignored, sign = 1;
        bool none = true;
        for (size_t j = 0; j < d; j++) {
            bool in = set >> j & 1;
            e->turned[j] = in ? 1 - u[j] : 1;
            sign = in ? -sign : sign;
            none = none && !in;
            if (e->turned[j] == 0) part = 0;
        }
        status s = none || part == 0 ? OK : e->by->cdf(e, e->turned, &part, &ignored);
        if (s != OK) return s;
        sum += sign * part;
        sizes += part;
    }
    *value = sum < 0 ? 0 : sum;
    *error = 2e-16 * sizes;
    return *error > 1e-3 * *value ? NOT_SETTLED : OK;
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
    status s = e->rotation == 0 ? e->by->cdf(e, u, value, error)
             : d == 2 ? rotated_pair_cdf(e, u[0], u[1], value, error)
                      : subsets_cdf(e, u, value, error);
    if (s == OK && d == 2 && !isnan(*value)) *value = within_bounds(u[0], u[1], *value);
    return s;
}

status pair_cdf_roughly_at(const struct evaluation *e, const double *u, double *value)
{
    return e->rotation == 0 ? unrotated_cdf(e, u[0], u[1], value)
                            : cancelling_cdf(e, u[0], u[1], value);
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
    size_t d = e->c->dimension;
    if (q == ASK_CDF && e->rotation && d > MOST_IN_SUBSETS)
        return "is rotated, so that its distribution function is a sum over all subsets of "
               "columns: there can be at most 16";
    if (q == ASK_KENDALL && d > 2 && (e->rotation || !e->by->kendall))
        return "has more than two columns, where its Kendall distribution has no formula";
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
