/* evaluation_work.c - about how long questions about a copula take.
 *
 * Method
 *   The loops of elliptical_box.c, grouped_points.c, archimedean.c and frailty_mean.c, counted,
 *   times seconds measured for one turn of each, and those that a generator says its derivatives
 *   take.
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

#include <math.h>

static const double LONG_ENOUGH = 3;          /* seconds for probabilities by quasi-Monte Carlo */

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

double with_fewer_box_points(const struct evaluation *e, double seconds)
{
    if (box_points(e) == 0) return seconds;
    while (seconds > LONG_ENOUGH && elliptical_box_halve(elliptical_of(e))) seconds /= 2;
    return seconds;
}

static double elliptical_cdf_seconds(const struct evaluation *e, const struct elliptical_points *m)
{
    double d = (double)m->d, turn = 6.5e-8 + 1.5e-10 * d;
    if (m->d > 2) return (double)box_points(e) * d * (m->grouped ? turn + 1e-8 : turn);
    return m->grouped ? 3e-6 * (double)grouped_nodes(m) : m->df ? 4e-5 : 5e-6;
}

double cdf_seconds_at(const struct evaluation *e, const double *u)
{
    (void)u;
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
    return m->grouped ? (double)grouped_nodes(m) * d * (3e-8 + 4e-10 * d)
                      : d * ((m->df ? 5e-6 : 1e-7) + 1e-9 * d);
}

double density_seconds_at(const struct evaluation *e, const double *u)
{
    (void)u;
    size_t d = e->c->dimension;
    return elliptical_of(e) ? elliptical_seconds(elliptical_of(e))
                            : 1.2e-7 * (double)d + derivative_seconds(e, d, false);
}

double conditional_seconds_at(const struct evaluation *e, const double *u)
{
    (void)u;
    if (elliptical_of(e)) return elliptical_seconds(elliptical_of(e));
    return 2e-7 * (double)e->c->dimension + derivatives_seconds(e, false)
           + derivatives_seconds(e, true);
}

double from_conditional_seconds_at(const struct evaluation *e, const double *u)
{
    const struct elliptical_points *m = elliptical_of(e);
    double once = conditional_seconds_at(e, u);
    return m && !m->grouped ? once : 12 * once;
}

/* Without a formula the rule has 61 points, each the root of a probability of a pair. */
double kendall_seconds(const struct evaluation *e)
{
    const struct elliptical_points *m = elliptical_of(e);
    bool formula = e->rotation == 0 && e->by->kendall;
    if (formula) return 5e-7 + 1e-9 * (double)e->c->dimension + derivatives_seconds(e, true);
    return !m ? 2e-4 : m->df ? 2e-2 : 6e-3;
}
