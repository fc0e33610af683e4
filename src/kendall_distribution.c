/* kendall_distribution.c - the distribution of C(U): formulas, and the curve of a pair.
 *
 * Method
 *   A pair has C(U, V) <= w when U <= w, or when V is below the curve v(u) with C(u, v(u)) = w:
 *     K(w) = w + int from w to 1 of P(V <= v(u) | U = u) du,
 *   by the double exponential rule (Takahasi & Mori 1974), since the integrand may be steep at both
 *   ends. v(u) is a root of C. With few degrees of freedom the columns of a t are nearly the same
 *   up to their signs, and the integrand rises in steps: there the rule is four times as fine.
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

#include <math.h>

static const double HALF_PI = 1.57079632679489661923;
static const double HIGHEST = 1 - 1e-12;      /* what lies beyond adds less than 1e-12 */

struct level {
    const struct evaluation *e;
    double u, w;
};

static double over(double v, const void *with)
{
    const struct level *l = with;
    double c;
    const double point[2] = { l->u, v };
    return pair_cdf_roughly_at(l->e, point, &c) == OK ? c - l->w : NAN;
}

/* P(V <= v(u) | U = u) */
static status below_curve(const struct level *l, double *probability)
{
    double v = l->w, w[2];
    if (over(HIGHEST, l) <= 0) {
        *probability = 1;
        return OK;
    }
    /* near u = 1 rounding may leave C(u, w) at w or above */
    status s = over(v, l) >= 0 ? OK : root_between(over, l, l->w, HIGHEST, &v);
    const double point[2] = { l->u, v };
    if (s == OK) s = conditional_at(l->e, point, w);
    *probability = w[1];
    return s;
}

static status along_curve(const struct evaluation *e, double w, double *sum)
{
    int finer = e->c->df && e->c->df[0] < 2 ? 4 : 1;
    const double step = 1.0 / (9 * finer);
    *sum = 0;
    for (int k = -30 * finer; k <= 30 * finer; k++) {
        double t = k * step, s = HALF_PI * sinh(t), share = 1 / (1 + exp(-2 * s)), probability;
        double slope = HALF_PI * cosh(t) * 2 / ((1 + exp(2 * s)) * (1 + exp(-2 * s)));
        struct level l = { e, w + (1 - w) * share, w };
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
