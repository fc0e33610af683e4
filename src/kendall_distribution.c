/* kendall_distribution.c - the distribution of C(U): formulas, and the curve of a pair.
 *
 * Method
 *   A pair has C(U, V) <= w when U <= w, or when V is below the curve v(u) with C(u, v(u)) = w:
 *     K(w) = w + int from w to 1 of P(V <= v(u) | U = u) du,
 *   by the double exponential rule (Takahasi & Mori 1974), since the integrand may be steep at both
 *   ends. v(u) is a root of C, by Newton's steps where the columns are exchangeable, so that its
 *   slope is a conditional probability. With few degrees of freedom the columns of a t are nearly
 *   the same up to their signs, and the integrand rises in steps: there the rule is finer.
 *
 * Special cases
 *   Perfect dependence: w, or 1 when it is negative. A w below 1e-30 may not settle. Beyond pairs,
 *   a grouped t, and a t with less than 0.25 degrees of freedom: kendall_rays.c.
 *
 * Accuracy
 *   1e-9 for tau up to 0.95 and down to -0.95, 1e-7 beyond, 1e-8 for t with less than 0.3 degrees
 *   of freedom.
 */
#include "evaluation_work.h"
#include "kendall_rays.h"
#include "root.h"

#include <float.h>
#include <math.h>

static const double HALF_PI = 1.57079632679489661923;
static const double HIGHEST = 1 - 1e-12;      /* what lies beyond adds less than 1e-12 */
static const double CLOSE = 1e-9;             /* after so short a Newton step none is needed */
static const double NEAR = 1e-6;
enum { MOST_STEPS = 200 };

/* A place on the curve. With x = log((u - w)/(1 - u)) and y likewise of v, x + y is log w all along
 * the curve of independence, and elsewhere hardly changes from one place to the next. */
struct level {
    const struct evaluation *e;
    double u, w, x, sum;      /* sum: of x and y at the place before */
};

static double over(double v, const void *with)
{
    const struct level *l = with;
    double c;
    const double point[2] = { l->u, v };
    return pair_cdf_roughly_at(l->e, point, &c) == OK ? c - l->w : NAN;
}

/* P(U <= u | V = v), the slope of C in v, of exchangeable columns */
static double slope_at(const struct level *l, double v)
{
    double w[2];
    const double point[2] = { v, l->u };
    return conditional_at(l->e, point, w) == OK ? w[1] : NAN;
}

/* Newton's steps from v, halving the bracket where they leave it or do not become half as long. */
static status newton_root(const struct level *l, double *v)
{
    double low = l->w, high = HIGHEST, least, step = 1;
    for (int i = 0; i < MOST_STEPS; i++) {
        if (!(*v > low && *v < high)) *v = low + (high - low) / 2;
        double rest = over(*v, l), before = fabs(step);
        if (rest > 0) high = *v;
        else low = *v;
        step = rest / slope_at(l, *v);
        if (isnan(step)) return NOT_SETTLED;
        least = CLOSE * fmin(*v - l->w, 1 - *v) + 8 * DBL_EPSILON * *v;
        bool outside = !(*v - step > low && *v - step < high);
        if (fabs(step) > least && (outside || fabs(step) > before / 2))
            step = *v - (low + (high - low) / 2);
        *v -= step;
        if (fabs(step) <= least || high - low <= least) return OK;
    }
    return NOT_SETTLED;
}

/* v(u), from where the place before leads to. Near w rounding may leave C(u, w) at w or above. */
static status curve_at(const struct level *l, double *v)
{
    bool exchangeable = l->e->rotation % 180 == 0;
    *v = l->w + (1 - l->w) / (1 + exp(l->x - l->sum));
    if ((!exchangeable || *v - l->w < NEAR) && over(l->w, l) >= 0) {
        *v = l->w;
        return OK;
    }
    return exchangeable ? newton_root(l, v) : root_between(over, l, l->w, HIGHEST, v);
}

/* P(V <= v(u) | U = u) */
static status below_curve(struct level *l, double *probability)
{
    double v, w[2];
    bool far_left = l->u - l->w < 2 * (1 - HIGHEST);      /* else C(u, HIGHEST) is above w */
    if (far_left && over(HIGHEST, l) <= 0) {
        *probability = 1;
        return OK;
    }
    status s = curve_at(l, &v);
    const double point[2] = { l->u, v };
    if (s == OK) s = conditional_at(l->e, point, w);
    *probability = w[1];
    if (v > l->w && v < 1) l->sum = l->x + log((v - l->w) / (1 - v));
    return s;
}

static status along_curve(const struct evaluation *e, double w, double *sum)
{
    int nodes = e->c->df && e->c->df[0] < 2 ? 126 : 49;
    const double step = 3.5 / nodes;
    struct level l = { .e = e, .w = w, .sum = log(w) };
    *sum = 0;
    for (int k = -nodes; k <= nodes; k++) {
        double t = k * step, s = HALF_PI * sinh(t), share = 1 / (1 + exp(-2 * s)), probability;
        double slope = HALF_PI * cosh(t) * 2 / ((1 + exp(2 * s)) * (1 + exp(-2 * s)));
        l.u = w + (1 - w) * share;
        l.x = 2 * s;
        if (!(l.u > w && l.u < HIGHEST)) continue;
        status found = below_curve(&l, &probability);
        if (found != OK) return found;
        *sum += slope * step * probability;
    }
    *sum *= 1 - w;
    return OK;
}

/* Where the columns have no conditional distribution they depend perfectly. */
static bool perfect(const struct evaluation *e, bool *positive)
{
    double c = 0, error, w[2];
    const double middle[2] = { 0.5, 0.5 };
    if (e->c->dimension != 2 || conditional_at(e, middle, w) == OK) return false;
    *positive = cdf_at(e, middle, &c, &error) == OK && c > 0.25;
    return true;
}

/* of a pair, or by a formula */
static status kendall_of_one(const struct evaluation *e, double w, double *k)
{
    double rest;
    *k = w;
    if (w == 0 || w == 1) return OK;
    if (e->rotation == 0 && e->by->kendall) {
        *k = e->by->kendall(e, w);
        return OK;
    }
    status s = along_curve(e, w, &rest);
    *k = s == OK ? fmin(1, w + rest) : NAN;
    return s == NOT_SETTLED ? OK : s;
}

static status by_rays(const struct evaluation *e, size_t rays, const double *w, size_t n, double *k,
                      double *error, pool *p)
{
    struct rays r;
    status s = e->rotation ? survival_rays(e, &r, p) : elliptical_rays(e, &r, p);
    return s == OK ? kendall_by_rays(&r, rays / RAY_SEEDS, w, n, k, error, p) : s;
}

status kendall_at(const struct evaluation *e, const double *w, size_t n, double *k, double *error,
                  pool *p)
{
    bool positive;
    size_t rays = kendall_rays(e);
    status s = OK;
    *error = 0;
    if (evaluation_limit(e, ASK_KENDALL)) return OUT_OF_DOMAIN;
    if (rays) return by_rays(e, rays, w, n, k, error, p);
    bool depends = perfect(e, &positive);
    for (size_t i = 0; s == OK && i < n; i++) {
        if (depends) k[i] = positive ? w[i] : 1;
        else s = kendall_of_one(e, w[i], &k[i]);
    }
    return s;
}
