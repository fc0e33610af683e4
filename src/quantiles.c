/* quantiles.c - quantile functions, direct or from a table.
 *
 * Method
 *   Normal and lognormal losses follow from normal scores, many at a time. A table holds log x
 *   as a function of the normal score z of u, which is smooth in both tails: a polynomial
 *   through Chebyshev points on each quarter of a unit of z from -8.5 to 8.5. Each stretch is
 *   checked between its points against the direct quantile, and one that misses it, or lies
 *   outside, or holds what is no finite logarithm, is left to the direct quantile. So an error
 *   can only be as large as the checked one.
 *
 * Special cases
 *   u below 2^-53 lies outside the table and goes the direct way. Samples: n u counts as whole
 *   when it is within 1e-9 of a whole number.
 *
 * Accuracy
 *   Within 1e-12 relative of the direct quantile (tested); usually 1e-13.
 */
#include "quantiles.h"
#include "elementary.h"
#include "normal.h"
#include "order_statistics.h"
#include "random.h"

#include <math.h>
#include <string.h>

enum { DEGREE = 10, STRETCHES_EACH_SIDE = 34, STRETCHES = 2 * STRETCHES_EACH_SIDE };
static const double per_unit = 4;                 /* stretches per unit of z */
static const size_t worth_a_table = 3000;
static const double pi = 3.14159265358979323846;

struct stretch {
    double coefficient[DEGREE + 1];               /* of powers of t in [-1;1], lowest first */
};

struct quantiles {
    margin margin;
    const struct stretch *table;                  /* or NULL */
    const bool *direct;                           /* stretches that the table leaves out */
    const double *sorted;                         /* or NULL */
    size_t count;                                 /* of sorted */
};

/* ---- the table ---- */

static double log_loss(const margin *m, double z)
{
    double p = 0.5 * erfc(fabs(z) * 0.70710678118654752440);
    return log(m->distribution->quantile(m, p, z > 0));
}

/* The polynomial through the points (cos(pi k / DEGREE), y[k]), by its Chebyshev series. */
static void through_points(const double *y, double *coefficient)
{
    double before[DEGREE + 1] = { 1 }, now[DEGREE + 1] = { 0, 1 };
    memset(coefficient, 0, (DEGREE + 1) * sizeof *coefficient);
    for (int j = 0; j <= DEGREE; j++) {
        double c = 0;
        for (int k = 0; k <= DEGREE; k++) {
            double weight = k == 0 || k == DEGREE ? 0.5 : 1;
            c += weight * y[k] * cos(pi * j * k / DEGREE);
        }
        c *= (j == 0 || j == DEGREE ? 1.0 : 2.0) / DEGREE;
        for (int i = 0; i <= DEGREE; i++) coefficient[i] += c * before[i];
        double next[DEGREE + 1];
        for (int i = 0; i <= DEGREE; i++) next[i] = (i ? 2 * now[i - 1] : 0) - before[i];
        memcpy(before, now, sizeof now);
        memcpy(now, next, sizeof next);
    }
}

static double polynomial(const double *c, double t)
{
    double y = c[DEGREE];
    for (int i = DEGREE - 1; i >= 0; i--) y = y * t + c[i];
    return y;
}

/* whether the stretch agrees with the direct quantile between its points */
static bool holds(const margin *m, const struct stretch *s, double centre, double half)
{
    static const double between[] = { -0.98, -0.454, 0.156, 0.891 };
    for (size_t i = 0; i < sizeof between / sizeof *between; i++) {
        double wanted = log_loss(m, centre + half * between[i]);
        double allowed = 3e-13 + 1e-15 * fabs(wanted);
        if (!(fabs(polynomial(s->coefficient, between[i]) - wanted) <= allowed)) return false;
    }
    return true;
}

static bool fill_stretch(const margin *m, int place, struct stretch *s)
{
    double half = 0.5 / per_unit, centre = (place - STRETCHES_EACH_SIDE + 0.5) / per_unit;
    double y[DEGREE + 1];
    for (int k = 0; k <= DEGREE; k++) {
        y[k] = log_loss(m, centre + half * cos(pi * k / DEGREE));
        if (!(fabs(y[k]) < 700)) return false;
    }
    through_points(y, s->coefficient);
    return holds(m, s, centre, half);
}

static status make_table(const margin *m, quantiles *q, pool *p)
{
    struct stretch *table = pool_take_zeroed(p, STRETCHES, sizeof *table);
    bool *direct = pool_take(p, STRETCHES, sizeof *direct);
    if (!table || !direct) return NO_MEMORY;
    for (int i = 0; i < STRETCHES; i++) direct[i] = !fill_stretch(m, i, table + i);
    q->table = table;
    q->direct = direct;
    return OK;
}

/* ---- losses ---- */

static status sort_sample(const margin *m, const samples *given, quantiles *q, pool *p)
{
    if (!given || !given->rows || m->a > (double)given->cols) return BAD_KIND;
    double *sorted = pool_take(p, given->rows, sizeof *sorted);
    if (!sorted) return NO_MEMORY;
    memcpy(sorted, column(given, (size_t)m->a - 1), given->rows * sizeof *sorted);
    sort_numbers(sorted, given->rows);
    q->sorted = sorted;
    q->count = given->rows;
    return OK;
}

status quantiles_prepare(const margin *m, const samples *given, size_t wanted, pool *p,
                         const quantiles **ready)
{
    quantiles *q = pool_take_zeroed(p, 1, sizeof *q);
    if (!q) return NO_MEMORY;
    q->margin = *m;
    *ready = q;
    if (!m->distribution->quantile) return sort_sample(m, given, q, p);
    return m->distribution->costly && wanted >= worth_a_table ? make_table(m, q, p) : OK;
}

/* a selection, which loops of vector code can hold, as the library's fmin() cannot */
static inline double kept_between(double x, double low, double high)
{
    double raised = x > low ? x : low;
    return raised < high ? raised : high;
}

FOR_EACH_PROCESSOR
static void exponentials(double *x)
{
    for (size_t i = 0; i < ROWS_AT_ONCE; i++) x[i] = exp_within(kept_between(x[i], -708, 709));
}

/* scores of n uniforms, of 1/2 behind them; those below 2^-53 are taken as that */
static void scores_of(const double *u, size_t n, double *z)
{
    for (size_t i = 0; i < n; i++) z[i] = kept_between(u[i], 0x1p-53, 1 - 0x1p-53);
    for (size_t i = n; i < ROWS_AT_ONCE; i++) z[i] = 0.5;
    normal_scores_of_rows(z);
}

/* Losses of at most ROWS_AT_ONCE uniforms; where done[i] stays false, the direct quantile is
 * wanted. */
static void losses_from_table(const quantiles *q, const double *z, size_t n, double *loss,
                              bool *done)
{
    for (size_t i = 0; i < n; i++) {
        double at = z[i] * per_unit + STRETCHES_EACH_SIDE;
        size_t place = at >= 0 && at < STRETCHES ? (size_t)at : STRETCHES;
        done[i] = place < STRETCHES && !q->direct[place];
        if (done[i])
            loss[i] = polynomial(q->table[place].coefficient, 2 * (at - (double)place) - 1);
    }
    exponentials(loss);
}

static void losses_from_scores(const margin *m, const double *z, size_t n, double *loss, bool *done)
{
    for (size_t i = 0; i < ROWS_AT_ONCE; i++) loss[i] = m->a + m->b * z[i];
    bool logarithm = m->distribution->scores == BY_LOG_SCORE;
    for (size_t i = 0; i < n; i++) done[i] = !logarithm || fabs(loss[i]) < 700;
    if (logarithm) exponentials(loss);
}

static void losses_by_scores(const quantiles *q, const double *u, size_t n, double *loss)
{
    double z[ROWS_AT_ONCE], x[ROWS_AT_ONCE] = { 0 };
    bool done[ROWS_AT_ONCE];
    scores_of(u, n, z);
    if (q->table) losses_from_table(q, z, n, x, done);
    else losses_from_scores(&q->margin, z, n, x, done);
    for (size_t i = 0; i < n; i++)
        loss[i] = done[i] && u[i] >= 0x1p-53 ? x[i] : margin_quantile(&q->margin, u[i]);
}

void losses_at(const quantiles *q, const double *u, size_t n, double *loss)
{
    if (q->sorted) {
        for (size_t i = 0; i < n; i++) loss[i] = q->sorted[order_of(q->count, u[i]) - 1];
    } else if (q->table || q->margin.distribution->scores != NO_SCORES) {
        for (size_t i = 0; i < n; i += ROWS_AT_ONCE)
            losses_by_scores(q, u + i, n - i < ROWS_AT_ONCE ? n - i : ROWS_AT_ONCE, loss + i);
    } else {
        for (size_t i = 0; i < n; i++) loss[i] = margin_quantile(&q->margin, u[i]);
    }
}
