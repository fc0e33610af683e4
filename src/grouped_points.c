/* grouped_points.c - what a t copula with several degrees of freedom says at points.
 *
 * Method
 *   Given the normal score z of the uniform that drives all chi-squares (Daul, De Giorgi, Lindskog
 *   & McNeil 2003) the columns times sqrt(chi-square/df) are normal. So densities and conditional
 *   probabilities are integrals over z of those of normal columns, by the trapezoid rule with its
 *   nodes where the columns so far put z (placed_nodes.c), and where they do together with the
 *   event where that is in a tail. Nodes are placed anew when a column moves z away from them. All
 *   in logarithms. What z says may have several peaks, where columns of different df conflict:
 *   between them a column grows by orders of magnitude, and there peaks are looked for. The inverse
 *   is found by Newton's steps on the logarithm of the smaller tail in asinh(x/sqrt(df)).
 *
 * Special cases
 *   Correlations near -1 and 1 make narrow peaks, whose integrals may need more nodes than there
 *   are: NOT_SETTLED. Points far from what the model makes, of many columns with few degrees of
 *   freedom, may take hundreds of times as many nodes as others: nodes are counted, and where that
 *   comes to too long nothing settles any more.
 *
 * Accuracy
 *   1e-10 for log-densities, or relative where they are large; 1e-10 relative for conditional
 *   probabilities; tests/core/grouped_points.c.
 */
#include "grouped_points.h"
#include "normal.h"
#include "student_tail.h"

#include <float.h>
#include <math.h>

static const double LOG_SQRT_2_PI = 0.918938533204672742, FARTHEST = 300;
static const double LEFT_OUT = 44, LEAST_LEFT = 30;      /* in logarithms, of placed_nodes.h */
static const double STEEP = 1.2;                         /* growth from a node to the next */
static const double MOVED = 8;                           /* a sum by so much: place nodes anew */
static const double TOO_LONG = 30;                       /* seconds */

static status score_of_column(struct elliptical_points *m, size_t j, pool *p)
{
    struct grouped_points *g = m->groups;
    for (g->like[j] = 0; m->df[g->like[j]] != m->df[j];) g->like[j]++;
    if (g->like[j] < j) {
        g->score[j] = g->score[g->like[j]];
        g->log_scale[j] = g->log_scale[g->like[j]];
        return OK;
    }
    g->score[j] = pool_take(p, 1, sizeof **g->score);
    g->log_scale[j] = pool_take(p, MOST_NODES, sizeof **g->log_scale);
    if (!g->score[j] || !g->log_scale[j]) return NO_MEMORY;
    return chi_square_score_prepare(g->score[j], m->df[j], p);
}

status grouped_prepare(struct elliptical_points *m, pool *p)
{
    struct grouped_points *g = m->groups = pool_take_zeroed(p, 1, sizeof *g);
    if (!g) return NO_MEMORY;
    g->score = pool_take(p, m->d, sizeof *g->score);
    g->like = pool_take(p, m->d, sizeof *g->like);
    g->log_scale = pool_take(p, m->d, sizeof *g->log_scale);
    g->nodes.log_term = pool_take(p, MOST_NODES, sizeof *g->nodes.log_term);
    g->nodes.hidden = pool_take(p, MOST_NODES, sizeof *g->nodes.hidden);
    g->given = pool_take(p, MOST_NODES, sizeof *g->given);
    g->y = pool_take(p, m->d, MOST_NODES * sizeof *g->y);
    g->x = pool_take(p, m->d, sizeof *g->x);
    if (!g->score || !g->like || !g->log_scale || !g->nodes.log_term || !g->nodes.hidden
        || !g->given || !g->y || !g->x)
        return NO_MEMORY;
    status s = OK;
    g->least_pivot = 1;
    for (size_t j = 0; j < m->d; j++)
        g->least_pivot = fmin(g->least_pivot, m->factor[j * m->d + j]);
    for (size_t j = 0; s == OK && j < m->d; j++) s = score_of_column(m, j, p);
    return s;
}

/* ---- what the columns say about z ---- */

/* Column j at every node. */
static void column_at_nodes(const struct elliptical_points *m, size_t j)
{
    const struct grouped_points *g = m->groups;
    const double *row = m->factor + j * m->d, *log_scale = g->log_scale[j];
    double *y = g->y + j * MOST_NODES;
    size_t n = g->nodes.n;
    for (size_t k = 0; k < n; k++) y[k] = times_scale(g->x[j], log_scale[k]);
    for (size_t i = 0; i < j; i++)
        for (size_t k = 0; k < n; k++) y[k] -= row[i] * g->y[i * MOST_NODES + k];
    for (size_t k = 0; k < n; k++) y[k] /= row[j];
}

/* Adds what column j says. */
static void learn_at_nodes(const struct elliptical_points *m, size_t j)
{
    const struct grouped_points *g = m->groups;
    const double *y = g->y + j * MOST_NODES;
    for (size_t k = 0; k < g->nodes.n; k++) g->given[k] += g->log_scale[j][k] - y[k] * y[k] / 2;
}

static void scale_at_nodes(const struct elliptical_points *m, size_t j)
{
    struct grouped_points *g = m->groups;
    if (j >= m->d || g->like[j] < j) return;
    for (size_t k = 0; k < g->nodes.n; k++)
        g->log_scale[j][k] = log_chi_square_scale(g->score[j], node_at(&g->nodes, k));
}

/* The log-terms from what is given, times the probability of the event asked for. */
static void take_event(const struct elliptical_points *m)
{
    struct grouped_points *g = m->groups;
    const double *y = g->y + g->learnt * MOST_NODES;
    for (size_t k = 0; k < g->nodes.n; k++)
        g->nodes.log_term[k] = g->given[k]
                               + (g->event ? normal_log_probability(g->event * y[k]) : 0);
}

/* Of the prior and the chi-squares alone, which is concave and bounds the log-terms from above. */
static double bound_at(const struct grouped_points *g, size_t k)
{
    double z = node_at(&g->nodes, k), sum = -z * z / 2;
    for (size_t j = 0; j < g->learnt; j++) sum += g->log_scale[j][k];
    return sum;
}

/* Below the nodes the bound falls further if it does at the first. Above them it does at the last,
 * or the largest column keeps the log-terms down: with d columns their squares in the normal
 * density are at least its own over d, the largest eigenvalue of a correlation matrix. */
static void set_bounds(const struct elliptical_points *m)
{
    struct grouped_points *g = m->groups;
    size_t last = g->nodes.n - 1;
    double largest = 0, d = (double)g->learnt;
    for (size_t j = 0; j < g->learnt; j++)
        largest = fmax(largest, fabs(times_scale(g->x[j], g->log_scale[j][last])));
    double above = bound_at(g, last), below = bound_at(g, 0), square = largest * largest;
    bool falls = above < bound_at(g, last - 1) || square > 100 * d * d;
    g->nodes.below = below < bound_at(g, 1) ? below : HUGE_VAL;
    g->nodes.above = falls ? above - square / (2 * d) : HUGE_VAL;
}

/* How much column j grows from a node to the next, in logarithms, if that matters: before, it may
 * be next to nothing, and of the event's column both may lie on the same side, far out. */
static double growth_after(const struct elliptical_points *m, size_t j, size_t k)
{
    const struct grouped_points *g = m->groups;
    const double *y = g->y + j * MOST_NODES + k, far = 40;
    double next = g->log_scale[j][k + 1];
    if (fabs(times_scale(g->x[j], next)) < g->least_pivot / 50) return 0;
    if (j == g->learnt && fmin(fabs(y[0]), fabs(y[1])) > far && y[0] * y[1] > 0) return 0;
    return next - g->log_scale[j][k];
}

/* Where a column grows by much from a node to the next, peaks may hide between them, below what the
 * prior and the largest column at the first node allow. */
static double hidden_after(const struct elliptical_points *m, size_t k)
{
    const struct grouped_points *g = m->groups;
    double largest = 0, growth = 0, d = (double)g->learnt;
    for (size_t j = 0; j < g->learnt; j++) {
        growth = fmax(growth, growth_after(m, j, k));
        largest = fmax(largest, fabs(times_scale(g->x[j], g->log_scale[j][k])));
    }
    if (g->event) growth = fmax(growth, growth_after(m, g->learnt, k));
    if (growth < STEEP) return -HUGE_VAL;
    return fmax(bound_at(g, k), bound_at(g, k + 1)) + 1 - largest * largest / (2 * d);
}

/* A chi-square of each kind, and rows of the Cholesky factor, at every node. */
static void count_seconds(struct grouped_points *g, size_t first, size_t end)
{
    double columns = (double)(end - first), mean = (double)(first + end) / 2;
    g->seconds += (double)g->nodes.n * columns * (3e-8 + 8e-10 * mean);
}

double grouped_seconds(const struct elliptical_points *m)
{
    return m->groups->seconds;
}

static void nothing_at(struct placed_nodes *nodes)
{
    for (size_t k = 0; k < nodes->n; k++) nodes->log_term[k] = nodes->hidden[k] = -HUGE_VAL;
}

static void terms_at(struct placed_nodes *nodes, void *with)
{
    const struct elliptical_points *m = with;
    struct grouped_points *g = m->groups;
    count_seconds(g, 0, g->learnt + 1);
    if (g->seconds > TOO_LONG) {
        nothing_at(nodes);
        return;
    }
    for (size_t j = 0; j <= g->learnt; j++) scale_at_nodes(m, j);
    for (size_t k = 0; k < nodes->n; k++) {
        double z = node_at(nodes, k);
        g->given[k] = -z * z / 2;
    }
    for (size_t j = 0; j < g->learnt; j++) {
        column_at_nodes(m, j);
        learn_at_nodes(m, j);
    }
    if (g->event) column_at_nodes(m, g->learnt);
    take_event(m);
    set_bounds(m);
    for (size_t k = 0; k + 1 < nodes->n; k++) nodes->hidden[k] = hidden_after(m, k);
}

static status place(const struct elliptical_points *m, int event)
{
    struct grouped_points *g = m->groups;
    g->event = event;
    g->sum = place_nodes(&g->nodes, terms_at, (void *)m, MOST_NODES);
    g->log_placed = g->sum.log_integral;
    g->for_event = event;
    g->outside = g->sum.highest - LEFT_OUT;
    return g->sum.roughly ? OK : NOT_SETTLED;
}

/* Learns column j, of which x is known; only ends of the nodes where little was may be passed over
 * for what the column says. */
static status learn(const struct elliptical_points *m)
{
    struct grouped_points *g = m->groups;
    size_t j = g->learnt++;
    g->event = 0;
    if (j > 0 && !g->for_event) {
        count_seconds(g, j, j + 1);
        column_at_nodes(m, j);
        learn_at_nodes(m, j);
        scale_at_nodes(m, j + 1);
        take_event(m);
        g->sum = sum_over_nodes(&g->nodes);
        g->outside += fmax(g->log_scale[j][0], g->log_scale[j][g->nodes.n - 1]);
    }
    bool stays = j > 0 && !g->for_event && g->sum.settled
                 && g->outside < g->sum.highest - LEAST_LEFT;
    status s = stays ? OK : place(m, 0);
    g->log_mass = g->log_placed = g->sum.log_integral;
    return s;
}

static void start(const struct elliptical_points *m)
{
    m->groups->learnt = 0;
    m->groups->for_event = 0;
}

/* ---- densities ---- */

status grouped_log_density(const struct elliptical_points *m, const double *u, double *value)
{
    struct grouped_points *g = m->groups;
    double margins = LOG_SQRT_2_PI;
    for (size_t j = 0; j < m->d; j++) {
        double df = m->df[j], a = student_quantile(u[j], df);
        g->x[j] = signed_log_of(a, df);
        margins += student_log_peak(df) - log(df) / 2 - (df + 1) * log_cosh_of(a)
                   + log(m->factor[j * m->d + j]) + LOG_SQRT_2_PI;
    }
    g->learnt = m->d;
    status s = place(m, 0);
    *value = g->sum.log_integral - margins;
    return s;
}

/* ---- conditional probabilities ---- */

/* log P(the next column is below | those before), or above where event is -1. Nodes placed for what
 * is given see where any event is that is not far out; those placed for an event elsewhere may all
 * lie where this one is certain, and miss where most of it is. */
static status log_probability(const struct elliptical_points *m, int event, double *value)
{
    struct grouped_points *g = m->groups;
    g->event = event;
    count_seconds(g, g->learnt, g->learnt + 1);
    column_at_nodes(m, g->learnt);
    take_event(m);
    g->sum = sum_over_nodes(&g->nodes);
    bool seen = !g->for_event && fabs(g->sum.log_integral - g->log_placed) < MOVED;
    if (seen && !g->sum.settled)
        g->sum = settle_nodes(&g->nodes, terms_at, (void *)m, MOST_NODES);
    status s = seen && g->sum.roughly ? OK : place(m, event);
    *value = g->sum.log_integral - g->log_mass;
    return s;
}

status grouped_conditional(const struct elliptical_points *m, const double *u, double *w)
{
    struct grouped_points *g = m->groups;
    start(m);
    for (size_t j = 0; j < m->d; j++) {
        double log_p;
        g->x[j] = signed_log_of(student_quantile(u[j], m->df[j]), m->df[j]);
        status s = j > 0 ? log_probability(m, 1, &log_p) : OK;
        w[j] = j > 0 ? exp(log_p) : u[0];
        if (s == OK && w[j] > 0.99 && j > 0) {
            s = log_probability(m, -1, &log_p);
            w[j] = -expm1(log_p);
        }
        if (s == OK && j + 1 < m->d) s = learn(m);
        if (s != OK) return s;
    }
    return OK;
}

/* ---- and back ---- */

/* The derivative of log_probability() by a = asinh(x/sqrt(df)). */
static double slope_of(const struct elliptical_points *m, double a)
{
    const struct grouped_points *g = m->groups;
    size_t j = g->learnt;
    const double *y = g->y + j * MOST_NODES;
    double along = log(m->df[j]) / 2 + log_cosh_of(a) - log(m->factor[j * m->d + j]), sum = 0;
    for (size_t k = 0; k < g->nodes.n; k++) {
        double log_density = g->given[k] - y[k] * y[k] / 2 - LOG_SQRT_2_PI;
        sum += node_weight(&g->nodes, k)
               * exp(log_density + along + g->log_scale[j][k] - g->sum.highest);
    }
    return g->event * sum * exp(g->sum.highest - g->sum.log_integral);
}

/* Where the column would be were z where the columns before have it most likely. */
static double first_guess(const struct elliptical_points *m, double w)
{
    const struct grouped_points *g = m->groups;
    size_t j = g->learnt, at = 0;
    const double *row = m->factor + j * m->d;
    for (size_t k = 0; k < g->nodes.n; k++)
        if (g->given[k] > g->given[at]) at = k;
    double normal = row[j] * normal_quantile(w);
    for (size_t i = 0; i < j; i++) normal += row[i] * g->y[i * MOST_NODES + at];
    double log_sinh = log(fabs(normal)) - log(m->df[j]) / 2 - g->log_scale[j][at];
    double size = log_sinh < FARTHEST ? asinh(exp(log_sinh)) : log_sinh + log(2);
    return copysign(size, normal);
}

/* The a with probability w below: logarithms of tails are about concave, so that Newton's steps
 * come in from the far side; where one leaves what is known to hold the root, half of it. */
static status conditional_quantile(const struct elliptical_points *m, double w, double *root)
{
    struct grouped_points *g = m->groups;
    size_t j = g->learnt;
    int event = w < 0.5 ? 1 : -1;
    double wanted = w < 0.5 ? log(w) : log1p(-w), low = -HUGE_VAL, high = HUGE_VAL;
    double a = first_guess(m, w);
    for (int i = 0; i < 200; i++) {
        double found, step;
        g->x[j] = signed_log_of(a, m->df[j]);
        status s = log_probability(m, event, &found);
        if (s != OK) return s;
        if ((found > wanted) == (event > 0)) high = a;
        else low = a;
        step = fmax(-1 - fabs(a), fmin(1 + fabs(a), (wanted - found) / slope_of(m, a)));
        *root = a + step;
        if (fabs(found - wanted) < 1e-8 || fabs(step) <= DBL_EPSILON * fabs(a)) return OK;
        a = *root > low && *root < high ? *root : low + (high - low) / 2;
    }
    return NOT_SETTLED;
}

/* Where rounding u, or keeping it within (0;1), moves the column, the next ones are given what u
 * came to. */
static double rounded_quantile(double *u, double a, double df)
{
    *u = fmin(1 - DBL_EPSILON / 2, fmax(DBL_MIN, student_below(a, df)));
    return *u > DBL_MIN && *u < 1 - 1e-6 ? a : student_quantile(*u, df);
}

status grouped_from_conditional(const struct elliptical_points *m, const double *w, double *u)
{
    struct grouped_points *g = m->groups;
    start(m);
    for (size_t j = 0; j < m->d; j++) {
        double df = m->df[j], a = 0;
        status s = j > 0 ? conditional_quantile(m, w[j], &a) : OK;
        if (s != OK) return s;
        u[j] = w[0];
        a = j > 0 ? rounded_quantile(&u[j], a, df) : student_quantile(w[0], df);
        g->x[j] = signed_log_of(a, df);
        if (j + 1 < m->d) s = learn(m);
        if (s != OK) return s;
    }
    return OK;
}
