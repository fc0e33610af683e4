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

enum { MOST_PAIR_NODES = 385 };
static const double LOG_SQRT_2_PI = 0.918938533204672742, LARGEST = 1e100;

struct grouped_pair {
    struct chi_square_score *score[2];
    struct signed_log x[2];
    double correlation, highest;
    double turn, *seconds;            /* about what the integrand takes once, and in all */
};

/* Measured; the probability of a normal pair bends where the correlation is strong. */
static double seconds_of_turn(double correlation)
{
    double size = fabs(correlation);
    return size == 1 ? 5e-7 : size < 0.99 ? 1e-5 : 2.5e-5;
}

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

/* log P(low < Z <= high); where that is empty something below what a double holds, higher the
 * nearer the limits, so that the way to where it is not can be found. */
static double log_between(double low, double high)
{
    if (!(low < high)) return -800 - log1p(low - high);
    if (high - low < 1) return log(integral_of(normal_density, NULL, low, high));
    double outer = normal_log_probability(low > 0 ? -high : low);
    double inner = normal_log_probability(low > 0 ? -low : high);
    return inner + log1p(-exp(outer - inner));
}

/* log P(X <= x, Y <= y), by its leading term where it is next to nothing. */
static double log_normal_pair(double x, double y, double correlation)
{
    double value = normal_pair_probability(x, y, correlation);
    if (value > 1e-300) return log(value);
    double low = fmin(x, y), high = fmax(x, y), rest = high - correlation * low;
    double spread = (1 - correlation) * (1 + correlation);
    return -low * low / 2 - (rest < 0 ? rest * rest / spread / 2 : 0);
}

static double log_probability_given(const struct grouped_pair *p, double z)
{
    double x = column_at(p, 0, z), y = column_at(p, 1, z);
    if (p->correlation == 1) return normal_log_probability(fmin(x, y));
    if (p->correlation == -1) return log_between(-y, x);
    return log_normal_pair(x, y, p->correlation);
}

static double log_integrand(const struct grouped_pair *p, double z)
{
    *p->seconds += p->turn;
    return log_probability_given(p, z) - z * z / 2;
}

static void terms_at(struct placed_nodes *nodes, void *with)
{
    size_t known = nodes->halved;
    for (size_t k = known; k < nodes->n; k += 1 + known)
        nodes->log_term[k] = log_integrand(with, node_at(nodes, k));
    double first = node_at(nodes, 0), last = node_at(nodes, nodes->n - 1);
    nodes->below = first < 0 ? -first * first / 2 : HUGE_VAL;
    nodes->above = last > 0 ? -last * last / 2 : HUGE_VAL;
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

/* `about` is roughly what it comes to. */
static double integral_by_halves(const struct grouped_pair *p, double from, double to, double about)
{
    double meet = from, ignored = 0, sum = 0;
    if (root_between(apart, p, from, to, &meet) != OK) meet = from + (to - from) / 2;
    const double ends[] = { from, meet, to };
    for (int k = 0; k < 2; k++)
        if (ends[k] < ends[k + 1])
            sum += adapted_integral(integrand, p, ends[k], ends[k + 1], 1e-13 * about, &ignored);
    return sum;
}

status grouped_pair_cdf(const struct elliptical_points *m, const double *u, double *value)
{
    struct placed_nodes placed = { .log_term = m->groups->nodes.log_term }, *nodes = &placed;
    struct grouped_pair p = { .correlation = m->matrix[1], .turn = seconds_of_turn(m->matrix[1]),
                              .seconds = &m->groups->seconds };
    for (int j = 0; j < 2; j++) {
        p.score[j] = m->groups->score[j];
        p.x[j] = signed_log_of(student_quantile(u[j], m->df[j]), m->df[j]);
    }
    bool perfect = fabs(p.correlation) == 1;
    struct placed_sum s = perfect ? span_nodes(nodes, terms_at, &p)
                                  : place_nodes(nodes, terms_at, &p, MOST_PAIR_NODES);
    *value = exp(s.log_integral - LOG_SQRT_2_PI);
    if (s.settled && !perfect) return OK;
    p.highest = s.highest;
    double about = exp(s.log_integral - s.highest), last = node_at(nodes, nodes->n - 1);
    *value = exp(p.highest - LOG_SQRT_2_PI)
             * integral_by_halves(&p, node_at(nodes, 0), last, about);
    return OK;
}
