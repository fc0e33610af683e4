/* evaluation_work.c - about how long questions about a copula take.
 *
 * Method
 *   The loops of elliptical_box.c, grouped_points.c, archimedean.c, frailty_mean.c and
 *   kendall_rays.c, counted, times seconds measured for one turn of each, and those that a
 *   generator says its derivatives take. How many nodes an integral of a grouped t takes depends on
 *   the point: counted are those that rows of the model took.
 *
 * Special cases
 *   What is made once for all points does not count: the stable density of rotated gumbel takes
 *   some milliseconds, near independence some ten.
 *
 * Accuracy
 *   A factor of 3, for deciding whether to begin.
 */
#include "evaluation_work.h"
#include "archimedean.h"
#include "elliptical_points.h"
#include "kendall_rays.h"

#include <math.h>

static const double LONG_ENOUGH = 1;          /* seconds for probabilities by quasi-Monte Carlo */
static const double ENOUGH_FOR_RAYS = 2;      /* seconds for those of one Kendall distribution */
static const double LOWEST_DF_ON_CURVE = 0.25;   /* of kendall_distribution.c */
enum { MOST_RAYS = 4096, FEWEST_RAYS = 64, POINTS_FOR_A_RAY = 16 };

static struct elliptical_points *elliptical_of(const struct evaluation *e)
{
    return e->by == &gaussian_evaluator || e->by == &t_evaluator ? e->prepared : NULL;
}

/* A derivative of this order, beside what is always to do. */
static double derivative_seconds(const struct evaluation *e, size_t order, bool next)
{
    bool derived = e->by == &archimedean_evaluator;
    return derived ? e->c->family->generator->derivative_seconds(order, next) : 0;
}

/* Derivatives of every order below the dimension, at the same t or each at its own. */
static double derivatives_seconds(const struct evaluation *e, bool next)
{
    double sum = 0;
    for (size_t n = 1; n < e->c->dimension; n++) sum += derivative_seconds(e, n, next);
    return sum;
}

size_t box_points(const struct evaluation *e)
{
    const struct elliptical_points *m = elliptical_of(e);
    return m && m->box ? elliptical_box_points(m) : 0;
}

double with_fewer_box_points(const struct evaluation *e, size_t n)
{
    bool halved = box_points(e) > 0;
    while (halved && (double)n * cdf_seconds(e) > LONG_ENOUGH)
        halved = elliptical_box_halve(elliptical_of(e));
    return (double)n * cdf_seconds(e);
}

/* Nodes of all steps that place the last ones, for a density of a grouped t. Log chi-square bends
 * the more sharply the fewer the degrees of freedom. */
static double grouped_nodes(const struct elliptical_points *m)
{
    double lowest = m->df[0];
    for (size_t j = 1; j < m->d; j++) lowest = fmin(lowest, m->df[j]);
    return 400 * fmax(1, fmin(3, pow(lowest, -0.4)));
}

/* Of columns with next to no degrees of freedom, whose quantiles take longer than all else. */
static double slow_quantiles(const struct elliptical_points *m)
{
    double sum = 0;
    for (size_t j = 0; m->df && j < m->d; j++)
        if (m->df[j] < 0.1) sum += 3e-4;
    return sum;
}

/* Of a box, the points and where they are drawn. */
static double elliptical_cdf_seconds(const struct evaluation *e, const struct elliptical_points *m)
{
    double d = (double)m->d, turn = (m->grouped ? 4.5e-8 : 3.5e-8) + 4e-11 * d;
    double tilt = m->df ? 1e-7 * d * d + 1e-9 * d * d * d : 1e-8 * d * d + 3e-10 * d * d * d;
    if (m->d > 2) return (double)box_points(e) * d * turn + tilt + slow_quantiles(m);
    return slow_quantiles(m)
           + (m->grouped ? 2.5e-6 * grouped_nodes(m) : m->df ? 4e-5 : 5e-6);
}

double cdf_seconds(const struct evaluation *e)
{
    const struct elliptical_points *m = elliptical_of(e);
    double d = (double)e->c->dimension;
    if (m) return elliptical_cdf_seconds(e, m);
    if (e->rotation == 0) return 1e-7 * d;
    return d > 2 ? 5e-5 + 1e-5 * d : e->rotation == 180 ? 1e-5 : 5e-7;
}

/* Once through the columns at the nodes of a grouped t, or through a Cholesky factor. */
static double elliptical_seconds(const struct elliptical_points *m)
{
    double d = (double)m->d;
    return slow_quantiles(m) + (m->grouped ? grouped_nodes(m) * d * (3e-8 + 4e-10 * d)
                                           : d * ((m->df ? 1e-5 : 1e-7) + 1e-9 * d));
}

double density_seconds(const struct evaluation *e)
{
    size_t d = e->c->dimension;
    return elliptical_of(e) ? elliptical_seconds(elliptical_of(e))
                            : 1.2e-7 * (double)d + derivative_seconds(e, d, false);
}

double conditional_seconds(const struct evaluation *e)
{
    const struct elliptical_points *m = elliptical_of(e);
    if (m) return elliptical_seconds(m) * (m->grouped ? 1.4 : 1);
    return 2e-7 * (double)e->c->dimension + derivatives_seconds(e, false)
           + derivatives_seconds(e, true);
}

double from_conditional_seconds(const struct evaluation *e)
{
    const struct elliptical_points *m = elliptical_of(e);
    double once = conditional_seconds(e);
    return e->by == &archimedean_evaluator ? 12 * once : m && m->grouped ? 1.5 * once : once;
}

double seconds_spent(const struct evaluation *e)
{
    const struct elliptical_points *m = elliptical_of(e);
    return m && m->grouped ? grouped_seconds(m) : 0;
}

/* The Kendall distribution by the generator. */
static double formula_seconds(const struct evaluation *e)
{
    return 5e-7 + 1e-9 * (double)e->c->dimension + derivatives_seconds(e, true);
}

/* 30 places on each ray, at which C is a mean over 256 points or one probability. */
static double ray_seconds(const struct evaluation *e)
{
    const struct elliptical_points *m = elliptical_of(e);
    double d = (double)e->c->dimension, places = 30;
    if (m) return places * ROWS_AT_ONCE * d * (1.3e-8 + 2e-10 * d);
    double cdf = d > FEW_FOR_SUBSETS ? cdf_seconds(e) : 4e-6 + 4e-8 * exp2(d);
    return places * (cdf + formula_seconds(e) + 2e-7 * d);
}

size_t kendall_rays(const struct evaluation *e)
{
    const struct elliptical_points *m = elliptical_of(e);
    size_t rays = MOST_RAYS;
    bool beyond_pairs = e->c->dimension > 2;
    bool steep = m && m->df && m->df[0] < LOWEST_DF_ON_CURVE && !m->singular;
    if (m ? !(beyond_pairs || m->grouped || steep) : !(beyond_pairs && e->rotation)) return 0;
    while (rays > FEWEST_RAYS && (double)rays * ray_seconds(e) > ENOUGH_FOR_RAYS) rays /= 2;
    return m && !elliptical_rises(e) ? POINTS_FOR_A_RAY * rays : rays;
}

/* Without a formula the rule for a pair has 99 points or 253, each the root of a probability. */
double kendall_seconds(const struct evaluation *e, size_t n)
{
    const struct elliptical_points *m = elliptical_of(e);
    double rays = (double)kendall_rays(e), values = (double)n;
    if (rays > 0) return fmin(rays, MOST_RAYS) * ray_seconds(e) + rays * 5e-8 * values;
    if (e->rotation == 0 && e->by->kendall) return values * formula_seconds(e);
    return values * (!m ? 2e-4 : !m->df ? 4e-3 : m->df[0] < 2 ? 7e-2 : 2.5e-2);
}
