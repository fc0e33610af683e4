/* grouped_points.c - what a t copula with several degrees of freedom says at points.
 *
 * Method
 *   Given the normal score z of the uniform that drives all chi-squares (Daul, De Giorgi, Lindskog
 *   & McNeil 2003) the columns times sqrt(chi-square/df) are normal. So density, conditional
 *   probabilities and the distribution function of a pair are integrals over z of those of normal
 *   columns, by the trapezoid rule, which converges exponentially for such integrands (Trefethen &
 *   Weideman 2014). The inverse is a root in asinh(x/sqrt(df)).
 *
 * Special cases
 *   z runs from -8 to 8, as far as the chi-squares are tabulated: what is within 1e-13 of 0 or 1 is
 *   refused, and columns that z given them may lie beyond. One column may do: with 3 and 8 degrees
 *   of freedom (1e-9, 0.3) is refused.
 *
 * Accuracy
 *   Absolute 1e-10 for probabilities of pairs, 1e-8 for log-densities and conditional ones;
 *   tests/core/elliptical_points.c.
 */
#include "elliptical_points.h"
#include "normal.h"
#include "root.h"
#include "student.h"
#include "student_tail.h"

#include <math.h>

enum { FEWEST_NODES = 321, MOST_NODES = 8001 };
static const double FARTHEST = 8, NEAREST_U = 1e-13;

struct grouped_points {
    size_t nodes;
    struct student **table;       /* of each column; columns with the same df share */
    double **log_scale;           /* of each column, at the nodes: log sqrt(chi-square/df) */
    double *log_weight;           /* normal weights, then those given the columns before */
    double *given;                /* as many numbers of work */
    double *y;                    /* columns at the nodes, d x nodes */
    double *x;                    /* d */
};

static double step_of(const struct grouped_points *g)
{
    return 2 * FARTHEST / (double)(g->nodes - 1);
}

static double score_at(const struct grouped_points *g, size_t k)
{
    return (double)k * step_of(g) - FARTHEST;
}

/* Steps of 0.05, shorter for less than 2.5 degrees of freedom: at the low end log chi-square rises
 * by 16/df for each unit of z, and must not move by more than about 0.4 in a step. */
static size_t nodes_for(const struct elliptical_points *m)
{
    double lowest = m->df[0];
    for (size_t j = 1; j < m->d; j++) lowest = fmin(lowest, m->df[j]);
    double nodes = 2 * FARTHEST / (0.02 * lowest);
    nodes = fmax(FEWEST_NODES, fmin(MOST_NODES, nodes));
    return 2 * (size_t)(nodes / 2) + 1;
}

static status table_of_column(struct elliptical_points *m, size_t j, pool *p)
{
    struct grouped_points *g = m->groups;
    for (size_t i = 0; i < j; i++)
        if (m->df[i] == m->df[j]) {
            g->table[j] = g->table[i];
            g->log_scale[j] = g->log_scale[i];
            return OK;
        }
    g->table[j] = pool_take(p, 1, sizeof **g->table);
    g->log_scale[j] = pool_take(p, g->nodes, sizeof **g->log_scale);
    if (!g->table[j] || !g->log_scale[j]) return NO_MEMORY;
    status s = chi_square_table(g->table[j], m->df[j], p);
    for (size_t k = 0; s == OK && k < g->nodes; k++)
        g->log_scale[j][k] = (log_chi_square(g->table[j], score_at(g, k)) - log(m->df[j])) / 2;
    return s;
}

status grouped_prepare(struct elliptical_points *m, pool *p)
{
    struct grouped_points *g = m->groups = pool_take_zeroed(p, 1, sizeof *g);
    if (!g) return NO_MEMORY;
    g->nodes = nodes_for(m);
    g->table = pool_take(p, m->d, sizeof *g->table);
    g->log_scale = pool_take(p, m->d, sizeof *g->log_scale);
    g->log_weight = pool_take(p, g->nodes, sizeof *g->log_weight);
    g->given = pool_take(p, g->nodes, sizeof *g->given);
    g->y = pool_take(p, m->d, g->nodes * sizeof *g->y);
    g->x = pool_take(p, m->d, sizeof *g->x);
    if (!g->table || !g->log_scale || !g->log_weight || !g->given || !g->y || !g->x)
        return NO_MEMORY;
    for (size_t k = 0; k < g->nodes; k++) {
        double z = score_at(g, k);
        g->log_weight[k] = -z * z / 2 + log(step_of(g)) - 0.918938533204672742;
    }
    status s = OK;
    for (size_t j = 0; s == OK && j < m->d; j++) s = table_of_column(m, j, p);
    return s;
}

size_t grouped_nodes(const struct elliptical_points *m)
{
    return m->groups->nodes;
}

void grouped_scales(const struct elliptical_points *m, double v, double *scale)
{
    double z = fmax(-8.2, fmin(8.2, normal_quantile(v)));
    for (size_t j = 0; j < m->d; j++)
        scale[j] = exp((log_chi_square(m->groups->table[j], z) - log(m->df[j])) / 2);
}

static double quantile_of(double u, double df)
{
    return sqrt(df) * sinh(student_quantile(u, df));
}

void grouped_scores(const struct elliptical_points *m, const double *u, double *x)
{
    for (size_t j = 0; j < m->d; j++) x[j] = u[j] < 1 ? quantile_of(u[j], m->df[j]) : HUGE_VAL;
}

/* Of u, or of where its quantile overflows. */
static bool too_near(double u, double df)
{
    return !(u >= NEAREST_U && u <= 1 - NEAREST_U) || !isfinite(quantile_of(u, df));
}

status grouped_pair_cdf(const struct elliptical_points *m, const double *u, double *value)
{
    const struct grouped_points *g = m->groups;
    double sum = 0;
    if (too_near(u[0], m->df[0]) || too_near(u[1], m->df[1])) return OUT_OF_DOMAIN;
    grouped_scores(m, u, g->x);
    for (size_t k = 0; k < g->nodes; k += 2)
        sum += 2 * exp(g->log_weight[k])
               * normal_pair_probability(g->x[0] * exp(g->log_scale[0][k]),
                                         g->x[1] * exp(g->log_scale[1][k]), m->matrix[1]);
    *value = sum;
    return OK;
}

/* Column j at every node, where its quantile is x. */
static void column_at_nodes(const struct elliptical_points *m, size_t j, double x)
{
    const struct grouped_points *g = m->groups;
    const double *row = m->factor + j * m->d;
    double *y = g->y + j * g->nodes;
    for (size_t k = 0; k < g->nodes; k++) y[k] = x * exp(g->log_scale[j][k]);
    for (size_t i = 0; i < j; i++)
        for (size_t k = 0; k < g->nodes; k++) y[k] -= row[i] * g->y[i * g->nodes + k];
    for (size_t k = 0; k < g->nodes; k++) y[k] /= row[j];
}

/* Adds what column j says about the nodes to the log-weights in `given`. */
static void learn_from(const struct elliptical_points *m, size_t j)
{
    const struct grouped_points *g = m->groups;
    const double *y = g->y + j * g->nodes;
    for (size_t k = 0; k < g->nodes; k++) g->given[k] += g->log_scale[j][k] - y[k] * y[k] / 2;
}

static void start_from_prior(const struct grouped_points *g)
{
    for (size_t k = 0; k < g->nodes; k++) g->given[k] = g->log_weight[k];
}

static double largest_given(const struct grouped_points *g)
{
    double most = -HUGE_VAL;
    for (size_t k = 0; k < g->nodes; k++) most = fmax(most, g->given[k]);
    return most;
}

/* Whether what has been learnt lies well within the nodes. */
static bool within_nodes(const struct grouped_points *g)
{
    return fmax(g->given[0], g->given[g->nodes - 1]) < largest_given(g) - 20;
}

status grouped_log_density(const struct elliptical_points *m, const double *u, double *value)
{
    const struct grouped_points *g = m->groups;
    double margins = 0, sum = 0;
    start_from_prior(g);
    for (size_t j = 0; j < m->d; j++) {
        double df = m->df[j];
        if (too_near(u[j], df)) return OUT_OF_DOMAIN;
        double a = student_quantile(u[j], df);
        column_at_nodes(m, j, sqrt(df) * sinh(a));
        learn_from(m, j);
        margins += student_log_peak(df) - log(df) / 2 - (df + 1) * log_cosh_of(a)
                   + log(m->factor[j * m->d + j]) + 0.918938533204672742;
    }
    if (!within_nodes(g)) return OUT_OF_DOMAIN;
    double most = largest_given(g);
    for (size_t k = 0; k < g->nodes; k++) sum += exp(g->given[k] - most);
    *value = most + log(sum) - margins;
    return OK;
}

/* P(column j is below | those before), with the column at the nodes */
static double probability_below(const struct elliptical_points *m, size_t j)
{
    const struct grouped_points *g = m->groups;
    double most = largest_given(g), sum = 0, weights = 0;
    for (size_t k = 0; k < g->nodes; k++) {
        double weight = exp(g->given[k] - most);
        weights += weight;
        if (weight > 0) sum += weight * normal_probability(g->y[j * g->nodes + k]);
    }
    return sum / weights;
}

status grouped_conditional(const struct elliptical_points *m, const double *u, double *w)
{
    start_from_prior(m->groups);
    for (size_t j = 0; j < m->d; j++) {
        if (too_near(u[j], m->df[j])) return OUT_OF_DOMAIN;
        column_at_nodes(m, j, quantile_of(u[j], m->df[j]));
        if (!within_nodes(m->groups)) return OUT_OF_DOMAIN;
        w[j] = j == 0 ? u[0] : probability_below(m, j);
        learn_from(m, j);
    }
    return OK;
}

struct wanted {
    const struct elliptical_points *m;
    size_t column;
    double w;
};

static double over(double a, const void *with)
{
    const struct wanted *k = with;
    column_at_nodes(k->m, k->column, sqrt(k->m->df[k->column]) * sinh(a));
    return probability_below(k->m, k->column) - k->w;
}

status grouped_from_conditional(const struct elliptical_points *m, const double *w, double *u)
{
    start_from_prior(m->groups);
    for (size_t j = 0; j < m->d; j++) {
        double df = m->df[j], a = 0;
        struct wanted k = { m, j, w[j] };
        if (too_near(w[j], df) || !within_nodes(m->groups)) return OUT_OF_DOMAIN;
        double far = student_quantile(1 - NEAREST_U, df);
        status s = j == 0 ? OK : root_between(over, &k, -far, far, &a);
        if (s != OK) return s;
        if (j == 0) a = student_quantile(w[0], df);
        u[j] = j == 0 ? w[0] : student_below(a, df);
        column_at_nodes(m, j, sqrt(df) * sinh(a));
        learn_from(m, j);
    }
    return OK;
}
