/* evaluation_work.c - about how long questions about a copula take.
 *
 * Method
 *   The loops of elliptical_box.c, grouped_points.c, archimedean.c and evaluate.c, counted, times
 *   seconds measured for one turn of each. How many nodes an integral of a grouped t takes depends
 *   on the point: counted are those that rows of the model took.
 *
 * Special cases
 *   Of a rotated pair the integral is needed only where the value cancels, so it counts only there.
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

/* How many columns' derivatives take their order squared. */
static double columns_by_sums(const struct evaluation *e)
{
    bool sums = e->by == &archimedean_evaluator && e->c->family->generator->by_sums;
    return sums ? (double)e->c->dimension : 0;
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

/* Nodes of all steps that place the last ones, for a density of a grouped t. Log chi-square bends
 * the more sharply the fewer the degrees of freedom. */
static double grouped_nodes(const struct elliptical_points *m)
{
    double lowest = m->df[0];
    for (size_t j = 1; j < m->d; j++) lowest = fmin(lowest, m->df[j]);
    return 400 * fmax(1, fmin(3, pow(lowest, -0.4)));
}

static double elliptical_cdf_seconds(const struct evaluation *e, const struct elliptical_points *m)
{
    double d = (double)m->d, turn = 6.5e-8 + 1.5e-10 * d;
    if (m->d > 2) return (double)box_points(e) * d * (m->grouped ? turn + 1e-8 : turn);
    return m->grouped ? 2.5e-6 * grouped_nodes(m) : m->df ? 4e-5 : 5e-6;
}

/* Next to u or v = 1 the integral of evaluate.c settles late. */
static double rotated_pair_seconds(const struct evaluation *e, const double *u)
{
    double value = 0, most = fmax(u[0], u[1]);
    if (fmin(u[0], u[1]) == 0 || most == 1) return 0;
    if (pair_cdf_roughly_at(e, u, &value) != OK || value > 1e-5) return 1e-6;
    if (e->by == &pair_evaluator) return 4e-4;
    return most > 0.9 ? 5e-3 : 5e-4;
}

double cdf_seconds_at(const struct evaluation *e, const double *u)
{
    const struct elliptical_points *m = elliptical_of(e);
    double d = (double)e->c->dimension;
    if (m) return elliptical_cdf_seconds(e, m);
    if (e->rotation == 0) return 1e-7 * d;
    return d > 2 ? 3.5e-8 * d * exp2(d) : rotated_pair_seconds(e, u);
}

/* Once through the columns at the nodes of a grouped t, or through a Cholesky factor. */
static double elliptical_seconds(const struct elliptical_points *m)
{
    double d = (double)m->d;
    return m->grouped ? grouped_nodes(m) * d * (3e-8 + 4e-10 * d)
                      : d * ((m->df ? 5e-6 : 1e-7) + 1e-9 * d);
}

double density_seconds_at(const struct evaluation *e, const double *u)
{
    (void)u;
    double n = columns_by_sums(e);
    return elliptical_of(e) ? elliptical_seconds(elliptical_of(e))
                            : 2e-7 * (double)e->c->dimension + 1.5e-9 * n * n;
}

double conditional_seconds_at(const struct evaluation *e, const double *u)
{
    (void)u;
    double d = (double)e->c->dimension, n = columns_by_sums(e);
    const struct elliptical_points *m = elliptical_of(e);
    return m ? elliptical_seconds(m) * (m->grouped ? 1.4 : 1)
             : d * (4e-7 + 5e-9 * d) + 1.05e-9 * n * n * n;
}

double from_conditional_seconds_at(const struct evaluation *e, const double *u)
{
    const struct elliptical_points *m = elliptical_of(e);
    double once = conditional_seconds_at(e, u);
    return !m ? 12 * once : m->grouped ? 1.5 * once : once;
}

/* Without a formula the rule has 61 points, each the root of a probability of a pair. */
double kendall_seconds(const struct evaluation *e)
{
    const struct elliptical_points *m = elliptical_of(e);
    double d = (double)e->c->dimension, n = columns_by_sums(e);
    if (e->rotation == 0 && e->by->kendall) return 5e-7 + 2.5e-9 * d * d + 5e-10 * n * n * n;
    return !m ? 2e-4 : m->df ? 2e-2 : 6e-3;
}
