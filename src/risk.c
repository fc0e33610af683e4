/* risk.c - value at risk, expected shortfall, layers and exceedance curves of a sample.
 *
 * Method
 *   Order statistics by selection. The error of the value at risk is sqrt(level (1 - level) /
 *   n) over the density, which the spacing of order statistics around it estimates (Siddiqui
 *   1960; Bloch & Gastwirth 1968). The error of the expected shortfall is the standard
 *   deviation of the influence values max(loss - VaR, 0) / (1 - level) over sqrt(n) (Manistre &
 *   Hancock 2005).
 *
 * Special cases
 *   Errors are left open while there are too few losses beyond the measure to tell: the window
 *   around it must lie inside the sample, which needs about four losses in the tail.
 *
 * Accuracy
 *   Sums are taken of differences from the value at risk or from a mean, long ones with what
 *   rounding loses beside them (running_sum.h): 1e-14 relative, for millions of rows too.
 */
#include "risk.h"
#include "moments.h"
#include "order_statistics.h"
#include "running_sum.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static bool all_add_up(const double *x, size_t n)
{
    size_t without = 0;
    for (size_t i = 0; i < n; i++) without += !adds_up(x[i]);
    return without == 0;
}

status row_sums(const samples *s, pool *p, const double **sums)
{
    *sums = s->at;
    if (!all_add_up(s->at, s->rows * s->cols)) return OUT_OF_DOMAIN;
    if (s->cols == 1) return OK;
    double *sum = pool_take_zeroed(p, s->rows, sizeof *sum);
    if (!sum) return NO_MEMORY;
    for (size_t j = 0; j < s->cols; j++) {
        const double *x = s->at + j * s->rows;
        for (size_t i = 0; i < s->rows; i++) sum[i] += x[i];
    }
    *sums = sum;
    return all_add_up(sum, s->rows) ? OK : OUT_OF_DOMAIN;
}

static double spread(size_t n, double level)
{
    return sqrt((double)n * level * (1 - level));
}

struct order_window window_around(size_t n, double level)
{
    size_t k = order_of(n, level), half = (size_t)ceil(2 * spread(n, level));
    bool known = half > 0 && k > half && k + half <= n;
    return (struct order_window){ k, k > half ? k - half : 1, k + half <= n ? k + half : n, known };
}

double tail_weight(size_t n, double level)
{
    double weight = (double)n - whole_if_near((double)n * level);
    return weight > 0 ? weight : (double)n * (1 - level);
}

double value_at_risk_error(size_t n, double level, struct order_window w, double low, double high)
{
    return w.known ? spread(n, level) * (high - low) / (double)(w.high - w.low) : NAN;
}

double shortfall_error(double variance, size_t n, double weight)
{
    double rows = (double)n;
    return isfinite(variance) ? sqrt(fmax(variance, 0) / (rows - 1)) * rows / weight : NAN;
}

static int rising(const void *a, const void *b)
{
    size_t x = *(const size_t *)a, y = *(const size_t *)b;
    return (x > y) - (x < y);
}

/* A copy of the losses with the orders that all the levels need in their places. */
static status arrange(const double *loss, size_t n, const double *level, size_t count, pool *p,
                      double **arranged)
{
    if (n == 0) return TOO_FEW;
    size_t *wanted = pool_take(p, 3 * count, sizeof *wanted);
    double *copy = *arranged = pool_take(p, n, sizeof *copy);
    if (!wanted || !copy) return NO_MEMORY;
    memcpy(copy, loss, n * sizeof *copy);
    for (size_t i = 0; i < count; i++) {
        struct order_window w = window_around(n, level[i]);
        wanted[3 * i] = w.low;
        wanted[3 * i + 1] = w.k;
        wanted[3 * i + 2] = w.high;
    }
    qsort(wanted, 3 * count, sizeof *wanted, rising);
    select_orders(copy, n, wanted, 3 * count);
    return OK;
}

status values_at_risk(const double *loss, size_t n, const double *level, size_t count, pool *p,
                      estimate *out)
{
    double *x;
    status s = arrange(loss, n, level, count, p, &x);
    for (size_t i = 0; i < count && s == OK; i++) {
        struct order_window w = window_around(n, level[i]);
        double error = value_at_risk_error(n, level[i], w, x[w.low - 1], x[w.high - 1]);
        out[i] = (estimate){ x[w.k - 1], error };
    }
    return s;
}

/* x holds the k-th smallest in its place and nothing smaller behind it */
static estimate shortfall(const double *x, size_t n, double level)
{
    struct order_window w = window_around(n, level);
    double v = x[w.k - 1], tail = tail_weight(n, level), squares = 0;
    running_sum sum = { 0 };
    for (size_t i = w.k; i < n; i++) {
        double beyond = x[i] - v;
        sum_add(&sum, beyond);
        squares += beyond * beyond;
    }
    double rows = (double)n, mean = sum_total(&sum) / rows;
    double error = w.known ? shortfall_error(squares / rows - mean * mean, n, tail) : NAN;
    return (estimate){ v + sum_total(&sum) / tail, error };
}

status tail_values_at_risk(const double *loss, size_t n, const double *level, size_t count, pool *p,
                           estimate *out)
{
    double *x;
    status s = arrange(loss, n, level, count, p, &x);
    for (size_t i = 0; i < count && s == OK; i++) out[i] = shortfall(x, n, level[i]);
    return s;
}

static double to_layer(double loss, double excess, double limit)
{
    return fmin(fmax(loss - excess, 0), limit);
}

status layer_cost_of(const double *loss, size_t n, double excess, double limit,
                     struct layer_cost *cost)
{
    enum { AT_ONCE = 2048 };
    double paid[AT_ONCE], rows = (double)n;
    size_t attached = 0, exhausted = 0, held = 0;
    running_moments m = { 0 };
    if (n == 0) return TOO_FEW;
    for (size_t i = 0; i < n; i++) {
        paid[held++] = to_layer(loss[i], excess, limit);
        attached += loss[i] > excess;
        exhausted += loss[i] >= excess + limit;
        if (held < AT_ONCE && i + 1 < n) continue;
        moments_add(&m, paid, held);
        held = 0;
    }
    estimate mean = moments_mean(&m);
    *cost = (struct layer_cost){ mean.value, mean.error, moments_sd(&m).value,
                                 (double)attached / rows,
                                 isfinite(limit) ? (double)exhausted / rows : NAN };
    return OK;
}

size_t exceedance_points(size_t n, size_t points)
{
    return n < points ? n : points;
}

/* how many of n losses lie at or above each point, the largest loss first */
static void spaced_counts(size_t n, size_t points, size_t *count)
{
    for (size_t i = 0; i < points; i++) {
        double spaced = points > 1 ? pow((double)n, (double)i / (double)(points - 1)) : 1;
        size_t c = (size_t)round(spaced), most = n - (points - 1 - i);
        if (i > 0 && c <= count[i - 1]) c = count[i - 1] + 1;
        count[i] = c > most ? most : c;
    }
}

/* Turns the counts that ties may cut through into shares at or above each point. x holds the order
 * wanted[i] of n numbers in its place, and between two of these nothing outside them. */
static void shares_at_or_above(const double *x, size_t n, const size_t *wanted, size_t points,
                               double *share)
{
    for (size_t i = 0; i < points; i++) {
        double loss = x[wanted[i] - 1];
        if (i > 0 && loss == x[wanted[i - 1] - 1]) {
            share[i] = share[i - 1];
            continue;
        }
        size_t count = n + 1 - wanted[i];
        for (size_t k = i > 0 ? wanted[i - 1] : 0; k < wanted[i] - 1; k++) count += x[k] == loss;
        share[i] = (double)count / (double)n;
    }
}

status exceedance_curve(const double *loss, size_t n, size_t points, pool *p, double *at,
                        double *probability)
{
    points = exceedance_points(n, points);
    size_t *count = pool_take(p, points, sizeof *count);
    size_t *wanted = pool_take(p, points, sizeof *wanted);
    double *copy = pool_take(p, n, sizeof *copy);
    if (!count || !wanted || !copy) return NO_MEMORY;
    memcpy(copy, loss, n * sizeof *copy);
    spaced_counts(n, points, count);
    for (size_t i = 0; i < points; i++) wanted[i] = n + 1 - count[points - 1 - i];
    select_orders(copy, n, wanted, points);
    for (size_t i = 0; i < points; i++) at[i] = copy[wanted[i] - 1];
    shares_at_or_above(copy, n, wanted, points, probability);
    return OK;
}
