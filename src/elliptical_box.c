/* elliptical_box.c - the distribution function of elliptical copulas beyond pairs.
 *
 * Method
 *   Genz (1992): with X = L Y the probability is an integral over the unit cube, column by column
 *   of the conditional probability given those drawn before; for t one more coordinate drives the
 *   chi-squares (Genz & Bretz 2002). All of them are drawn about where the mass of the box lies
 *   (elliptical_tilt.h), which keeps the error in proportion to the probability. The points of
 *   cube.h under eight seeds: the mean, and its standard error from how the eight differ. The
 *   seeds are fixed, so that the same question has the same answer.
 *
 * Special cases
 *   Where a pivot is zero the column is decided by those before it, and nothing is moved.
 */
#include "cube.h"
#include "elliptical_tilt.h"
#include "normal.h"
#include "student_tail.h"

#include <math.h>

enum { SEEDS = 8, MOST_ROWS = 4096, FEWEST_ROWS = ROWS_AT_ONCE };

static const double SMALLEST = 0x1p-53, LOW_PROBABILITY = 1e-200;
static const double ACCURATE = -7;            /* down to where probabilities of rows are relative */

/* What every question shares. */
struct box_points {
    struct cube_points under[SEEDS];
    size_t rows;                              /* under each seed */
    struct signed_log *x;                     /* the limits */
    struct tilt tilt;
    double (*u)[ROWS_AT_ONCE];                /* by column, that of the chi-squares last */
    double (*y)[ROWS_AT_ONCE], (*log_scale)[ROWS_AT_ONCE];   /* by column, by kind of df */
    double below[ROWS_AT_ONCE], product[ROWS_AT_ONCE], exponent[ROWS_AT_ONCE];
};

static status prepare_kinds(const struct elliptical_points *m, struct tilt *t, pool *p)
{
    size_t *kind_of = pool_take(p, m->d, sizeof *kind_of);
    t->kind_of = kind_of;
    t->kinds = 0;
    t->score = pool_take(p, m->d, sizeof *t->score);
    if (!kind_of || !t->score) return NO_MEMORY;
    for (size_t j = 0; j < m->d; j++) {
        size_t same = 0;
        while (m->df[same] != m->df[j]) same++;
        kind_of[j] = same < j ? kind_of[same] : t->kinds++;
        status s = same < j ? OK : chi_square_score_prepare(&t->score[kind_of[j]], m->df[j], p);
        if (s != OK) return s;
    }
    return OK;
}

status elliptical_box_prepare(struct elliptical_points *m, pool *p)
{
    struct box_points *b = m->box = pool_take_zeroed(p, 1, sizeof *b);
    if (!b) return NO_MEMORY;
    b->rows = MOST_ROWS;
    b->tilt = (struct tilt){ .d = m->d, .factor = m->factor };
    b->x = pool_take(p, m->d, sizeof *b->x);
    b->u = pool_take(p, m->d, sizeof *b->u);
    b->y = pool_take(p, m->d, sizeof *b->y);
    status s = b->x && b->u && b->y ? OK : NO_MEMORY;
    if (s == OK && !m->singular) s = tilt_prepare(&b->tilt, p);
    if (s == OK && m->df) s = prepare_kinds(m, &b->tilt, p);
    if (s == OK) b->log_scale = pool_take_zeroed(p, b->tilt.kinds + 1, sizeof *b->log_scale);
    if (s == OK && !b->log_scale) s = NO_MEMORY;
    for (int k = 0; s == OK && k < SEEDS; k++)
        s = cube_prepare(&b->under[k], m->d, (uint64_t)k, p);
    return s;
}

size_t elliptical_box_points(const struct elliptical_points *m)
{
    return SEEDS * m->box->rows;
}

bool elliptical_box_halve(struct elliptical_points *m)
{
    if (m->box->rows == FEWEST_ROWS) return false;
    m->box->rows /= 2;
    return true;
}

/* ---- ROWS_AT_ONCE points ---- */

/* The chi-squares, which matter to every column, get the last dimension of Sobol's points. */
static size_t dimension_of(size_t column, size_t d)
{
    size_t last = d < SOBOL_DIMENSIONS ? d - 1 : SOBOL_DIMENSIONS - 1;
    return column < last ? column : column + 1 == d ? last : column + 1;
}

/* The chi-squares, at a normal score about eta. */
static void take_scales(struct box_points *b, double *u)
{
    const struct tilt *t = &b->tilt;
    normal_scores_of_rows(u);
    for (size_t i = 0; i < ROWS_AT_ONCE; i++) {
        double z = t->eta + u[i];
        b->exponent[i] = t->eta * (t->eta / 2 - z);
        for (size_t k = 0; k < t->kinds; k++)
            b->log_scale[k][i] = log_chi_square_scale(&t->score[k], z);
    }
}

FOR_EACH_PROCESSOR
void subtract_rows(double *restrict rest, double times, const double *restrict y)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) rest[i] -= times * y[i];
}

/* Where a limit a is far below, in logarithms: y is beyond it by an exponential number over its
 * size. */
static double far_below(double a, double u, double *exponent)
{
    *exponent += normal_log_probability(a);
    return a + log(u) / -a;
}

/* `below` holds limits less mu; the probabilities below them, and y about mu below them too. */
static void draw_below(struct box_points *b, const double *u, double mu, double *y)
{
    double a[ROWS_AT_ONCE];
    for (int i = 0; i < ROWS_AT_ONCE; i++) a[i] = b->below[i];
    normal_probabilities_of_rows(b->below);
    for (int i = 0; i < ROWS_AT_ONCE; i++) y[i] = held(u[i] * b->below[i], SMALLEST, 1 - SMALLEST);
    normal_scores_of_rows(y);
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        if (a[i] < ACCURATE) y[i] = far_below(a[i], u[i], &b->exponent[i]);
        else b->product[i] *= b->below[i];
        y[i] += mu;
        b->exponent[i] += mu * (mu / 2 - y[i]);
    }
}

/* The last column is not drawn. */
static void multiply_by_last(struct box_points *b)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) b->exponent[i] += normal_log_probability(b->below[i]);
}

/* Without a pivot. */
static void decide(struct box_points *b, double *y)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        if (b->below[i] < 0) b->product[i] = 0;
        y[i] = 0;
    }
}

static void take_column(const struct elliptical_points *m, size_t j)
{
    struct box_points *b = m->box;
    const double *factor = m->factor + j * m->d, mu = m->singular ? 0 : b->tilt.mu[j];
    double *y = b->y[j], *rest = b->below;
    for (int i = 0; i < ROWS_AT_ONCE; i++)
        rest[i] = times_scale(b->x[j], b->log_scale[m->df ? b->tilt.kind_of[j] : 0][i]);
    for (size_t k = 0; k < j; k++) subtract_rows(rest, factor[k], b->y[k]);
    if (!(factor[j] > 0)) {
        decide(b, y);
        return;
    }
    for (int i = 0; i < ROWS_AT_ONCE; i++) rest[i] = rest[i] / factor[j] - mu;
    if (j + 1 == m->d) {
        multiply_by_last(b);
        return;
    }
    draw_below(b, b->u[j], mu, y);
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        if (b->product[i] > LOW_PROBABILITY) continue;
        b->exponent[i] += log(b->product[i]);
        b->product[i] = 1;
    }
}

static void take_points(const struct elliptical_points *m, size_t seed, size_t first)
{
    struct box_points *b = m->box;
    for (size_t j = 0; j < m->d; j++)
        cube_of_rows(&b->under[seed], dimension_of(j, m->d), first, b->u[j]);
    for (int i = 0; i < ROWS_AT_ONCE; i++) b->product[i] = 1, b->exponent[i] = 0;
    if (m->df) take_scales(b, b->u[m->d - 1]);
    for (size_t j = 0; j < m->d; j++) take_column(m, j);
}

/* ---- all of them ---- */

/* Over the integrand at its highest. */
static double mean_under_seed(const struct elliptical_points *m, size_t seed)
{
    const struct box_points *b = m->box;
    double sum = 0;
    for (size_t first = 0; first < b->rows; first += ROWS_AT_ONCE) {
        take_points(m, seed, first);
        for (size_t i = 0; i < ROWS_AT_ONCE; i++)
            sum += b->product[i] * exp(b->exponent[i] - b->tilt.log_peak);
    }
    return sum / (double)b->rows;
}

static struct signed_log limit_of(const struct elliptical_points *m, size_t j, double u)
{
    if (u >= 1) return (struct signed_log){ 1, HUGE_VAL };
    if (m->df) return signed_log_of(student_quantile(u, m->df[j]), m->df[j]);
    double x = normal_quantile(u);
    return (struct signed_log){ copysign(1, x), log(fabs(x)) };
}

status elliptical_box(const struct elliptical_points *m, const double *u, double *value,
                      double *error)
{
    struct box_points *b = m->box;
    double mean[SEEDS], sum = 0, squares = 0;
    for (size_t j = 0; j < m->d; j++) b->x[j] = limit_of(m, j, u[j]);
    b->tilt.eta = b->tilt.log_peak = 0;
    if (!m->singular) tilt_towards(&b->tilt, b->x);
    for (size_t k = 0; k < SEEDS; k++) sum += mean[k] = mean_under_seed(m, k) / SEEDS;
    for (size_t k = 0; k < SEEDS; k++) squares += (mean[k] * SEEDS - sum) * (mean[k] * SEEDS - sum);
    *value = exp(b->tilt.log_peak) * sum;
    *error = exp(b->tilt.log_peak) * sqrt(squares / (SEEDS * (SEEDS - 1)));
    return OK;
}
