/* grouped_pair.c - the distribution function of a pair of a grouped t.
 *
 * Method
 *   The integral over the normal score z of the uniform that drives both chi-squares, of the
 *   probability of a normal pair given z: both positive, so that relative accuracy holds in the
 *   tails. By the trapezoid rule (placed_nodes.c); where the correlation is so strong that the
 *   probability of the pair all but bends where both columns meet, by Gauss and Legendre's rule on
 *   intervals that are halved towards there. They meet once at most, for log chi-square of fewer
 *   degrees of freedom is more dispersed.
 *
 * Special cases
 *   Correlation 1: given z the smaller limit counts. Correlation -1: the probability between them.
 */
#include "grouped_points.h"
#include "normal.h"
#include "quadrature.h"
#include "root.h"
#include "student_tail.h"

#include <math.h>

static const double LOG_SQRT_2_PI = 0.918938533204672742, LARGEST = 1e100;
static const double DEEPEST = 39;             /* exp(-z^2/2) is 0 in a double from here on */

struct grouped_pair {
    struct chi_square_score *score[2];
    struct signed_log x[2];
    double correlation, highest;
};

static double column_at(const struct grouped_pair *p, int j, double z)
{
    double y = times_scale(p->x[j], log_chi_square_scale(p->score[j], z));
    return fmax(-LARGEST, fmin(LARGEST, y));
}

static double normal_density(double x, const void *with)
{
    (void)with;
    return exp(-x * x / 2 - LOG_SQRT_2_PI);
}

/* P(low < Z <= high) */
static double between(double low, double high)
{
    if (!(low < high)) return 0;
    if (high - low < 1) return integral_of(normal_density, NULL, low, high);
    return low > 0 ? normal_probability(-low) - normal_probability(-high)
                   : normal_probability(high) - normal_probability(low);
}

static double probability_given(const struct grouped_pair *p, double z)
{
    double x = column_at(p, 0, z), y = column_at(p, 1, z);
    if (p->correlation == 1) return normal_probability(fmin(x, y));
    if (p->correlation == -1) return between(-y, x);
    return normal_pair_probability(x, y, p->correlation);
}

static double log_integrand(const struct grouped_pair *p, double z)
{
    double given = fabs(z) < DEEPEST ? probability_given(p, z) : 0;
    return log(given) - z * z / 2;
}

static void terms_at(struct placed_nodes *nodes, void *with)
{
    for (size_t k = 0; k < nodes->n; k++)
        nodes->log_term[k] = log_integrand(with, node_at(nodes, k));
    double first = nodes->first, last = node_at(nodes, nodes->n - 1);
    nodes->below = first < -DEEPEST ? -HUGE_VAL : -first * first / 2;
    nodes->above = last > DEEPEST ? -HUGE_VAL : -last * last / 2;
}

/* ---- a strong correlation ---- */

static double integrand(double z, const void *with)
{
    const struct grouped_pair *p = with;
    return exp(log_integrand(p, z) - p->highest);
}

static double apart(double z, const void *with)
{
    const struct grouped_pair *p = with;
    return p->x[0].log_size + log_chi_square_scale(p->score[0], z)
           - p->x[1].log_size - log_chi_square_scale(p->score[1], z);
}

static double integral_by_halves(const struct grouped_pair *p, double from, double to)
{
    double meet = from, ignored = 0, sum = 0;
    if (root_between(apart, p, from, to, &meet) != OK) meet = from + (to - from) / 2;
    const double ends[] = { from, meet, to };
    for (int k = 0; k < 2; k++)
        if (ends[k] < ends[k + 1])
            sum += adapted_integral(integrand, p, ends[k], ends[k + 1], 1e-15 * sum, &ignored);
    return sum;
}

status grouped_pair_cdf(const struct elliptical_points *m, const double *u, double *value)
{
    struct grouped_points *g = m->groups;
    struct grouped_pair p = { .correlation = m->matrix[1] };
    for (int j = 0; j < 2; j++) {
        p.score[j] = g->score[j];
        p.x[j] = signed_log_of(student_quantile(u[j], m->df[j]), m->df[j]);
    }
    bool perfect = fabs(p.correlation) == 1;
    struct placed_sum s = place_nodes(&g->nodes, terms_at, &p);
    *value = 0;
    if (!isfinite(s.highest)) return OK;
    *value = exp(s.log_integral - LOG_SQRT_2_PI);
    if (s.settled && !perfect) return OK;
    p.highest = s.highest;
    double last = node_at(&g->nodes, g->nodes.n - 1);
    *value = exp(p.highest - LOG_SQRT_2_PI) * integral_by_halves(&p, g->nodes.first, last);
    return OK;
}
