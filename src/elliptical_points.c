/* elliptical_points.c - density and conditional distributions of the normal and the t copula.
 *
 * Method
 *   With the Cholesky factor L and x the normal or t quantiles of u, y = L^-1 x has independent
 *   columns, or for t such that y_j given those before is t with more degrees of freedom, scaled
 *   (Kotz & Nadarajah 2004). t quantiles are kept as asinh(x/sqrt(df)), and powers of e taken out
 *   where their squares would overflow.
 *   Probabilities: elliptical_pair.c, elliptical_box.c.
 *
 * Special cases
 *   Rotation by 180 changes nothing, by 90 or 270 the sign of the correlation. A singular matrix
 *   has no density: OUT_OF_DOMAIN.
 *
 * Accuracy
 *   Logarithms to 1e-13 times their size and the condition of the matrix. A pair's conditional
 *   probability at x, y is good to about 1e-16 y (y - r x) / (1 - r^2): the quantiles are doubles.
 */
#include "elliptical_points.h"
#include "factor.h"
#include "normal.h"
#include "student_tail.h"

#include <math.h>

static const double FARTHEST = 300;           /* sinh of more is taken apart */
static const double LOWEST_DF = 1e-3;         /* of student_tail.h */

/* ---- numbers beyond what a double holds ---- */

struct signed_log signed_log_of(double a, double df)
{
    double size = fabs(a), log_sinh = size + log(-expm1(-2 * size) / 2);
    return (struct signed_log){ copysign(1, a), log(df) / 2 + log_sinh };
}

double times_scale(struct signed_log x, double log_scale)
{
    return x.sign * exp(fmin(x.log_size + log_scale, FARTHEST));
}

/* ---- getting ready ---- */

static bool are_grouped(const copula *c)
{
    for (size_t j = 1; c->family->has_df && j < c->dimension; j++)
        if (c->df[j] != c->df[0]) return true;
    return false;
}

static void rotate_matrix(const copula *c, double *matrix)
{
    size_t d = c->dimension;
    double sign = c->rotation == 90 || c->rotation == 270 ? -1 : 1;
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j < d; j++)
            matrix[i * d + j] = (i == j ? 1 : sign) * c->matrix[i * d + j];
}

static void set_constant(struct elliptical_points *m)
{
    double sum = 0;
    for (size_t j = 0; j < m->d; j++) {
        sum -= log(m->factor[j * m->d + j]);
        if (m->df) sum += student_log_peak(m->df[0] + (double)j) - student_log_peak(m->df[0]);
    }
    m->log_constant = sum;
}

/* 1 - r^2 without cancellation, as the bits of the factor that draws use are kept */
static void sharpen_second_pivot(double *factor, size_t d)
{
    double r = factor[d];
    factor[d + 1] = sqrt((1 - r) * (1 + r));
}

static status prepare(struct evaluation *e, pool *p)
{
    const copula *c = e->c;
    size_t d = c->dimension;
    struct elliptical_points *m = pool_take_zeroed(p, 1, sizeof *m);
    if (!m) return NO_MEMORY;
    *m = (struct elliptical_points){ .d = d, .df = c->family->has_df ? c->df : NULL,
                                     .grouped = are_grouped(c) };
    m->matrix = pool_take(p, d * d, sizeof *m->matrix);
    m->factor = pool_take_zeroed(p, d * d, sizeof *m->factor);
    if (!m->matrix || !m->factor) return NO_MEMORY;
    rotate_matrix(c, m->matrix);
    status s = correlation_factor(m->matrix, d, m->factor);
    if (s != OK) return s;
    m->singular = factor_is_singular(m->factor, d);
    if (!m->singular && d > 1) sharpen_second_pivot(m->factor, d);
    if (!m->singular) set_constant(m);
    e->prepared = m;
    if (d > 2) s = elliptical_box_prepare(m, p);
    if (s != OK) return s;
    if (m->grouped) return grouped_prepare(m, p);
    if (!m->df || d > 2) return OK;
    m->table = pool_take(p, 1, sizeof *m->table);
    return m->table ? student_tables(m->table, m->df[0] + 1, p) : NO_MEMORY;
}

/* What the columns before j contribute to column j. */
static double mean_of(const double *factor, size_t d, size_t j, const double *y)
{
    double sum = 0;
    for (size_t k = 0; k < j; k++) sum += factor[j * d + k] * y[k];
    return sum;
}

static status pair_by_limits(const struct elliptical_points *m, const double *u, double *value)
{
    double correlation = m->matrix[1];
    if (m->grouped) {
        return grouped_pair_cdf(m, u, value);
    } else if (fabs(correlation) == 1) {
        *value = correlation > 0 ? fmin(u[0], u[1]) : fmax(0, u[0] - (1 - u[1]));
    } else if (m->df) {
        double df = m->df[0];
        *value = student_pair_probability(student_quantile(u[0], df), student_quantile(u[1], df),
                                          correlation, df, m->table);
    } else {
        *value = normal_pair_probability(normal_quantile(u[0]), normal_quantile(u[1]),
                                         correlation);
    }
    return OK;
}

static status cdf(const struct evaluation *e, const double *u, double *value, double *error)
{
    const struct elliptical_points *m = e->prepared;
    return m->d == 2 ? pair_by_limits(m, u, value) : elliptical_box(m, u, value, error);
}

/* ---- the normal copula ---- */

static status gaussian_log_density(const struct evaluation *e, const double *u, double *value)
{
    const struct elliptical_points *m = e->prepared;
    double *y = e->room, sum = 0;
    if (m->singular) return OUT_OF_DOMAIN;
    for (size_t j = 0; j < m->d; j++) {
        double x = normal_quantile(u[j]);
        y[j] = (x - mean_of(m->factor, m->d, j, y)) / m->factor[j * m->d + j];
        sum += (x - y[j]) * (x + y[j]) / 2;
    }
    *value = m->log_constant + sum;
    return OK;
}

static status gaussian_conditional(const struct evaluation *e, const double *u, double *w)
{
    const struct elliptical_points *m = e->prepared;
    double *y = e->room;
    if (m->singular) return OUT_OF_DOMAIN;
    for (size_t j = 0; j < m->d; j++) {
        double x = normal_quantile(u[j]);
        y[j] = (x - mean_of(m->factor, m->d, j, y)) / m->factor[j * m->d + j];
        w[j] = normal_probability(y[j]);
    }
    return OK;
}

static status gaussian_from_conditional(const struct evaluation *e, const double *w, double *u)
{
    const struct elliptical_points *m = e->prepared;
    double *y = e->room;
    if (m->singular) return OUT_OF_DOMAIN;
    for (size_t j = 0; j < m->d; j++) {
        y[j] = normal_quantile(w[j]);
        u[j] = normal_probability(mean_of(m->factor, m->d, j, y) + m->factor[j * m->d + j] * y[j]);
    }
    return OK;
}

/* ---- the t copula ---- */

/* Columns of y = L^-1 x/sqrt(df), divided by e^scale, with e^(-2 scale) and the sum of their
 * squares. The scale grows with them, so that columns before the first far one keep theirs. */
struct t_point {
    double *y, scale, one, squares;
};

/* Makes room for e^log_size in column j. */
static void make_room(struct t_point *t, size_t j, double log_size)
{
    double shift = log_size - FARTHEST - t->scale;
    if (!(shift > 0)) return;
    for (size_t k = 0; k < j; k++) t->y[k] *= exp(-shift);
    t->squares = t->squares * exp(-shift) * exp(-shift);
    t->scale += shift;
    t->one = exp(-2 * t->scale);
}

/* sinh(a) e^(more - scale), more >= 0 */
static double scaled_sinh(double a, double more, const struct t_point *t)
{
    double size = fabs(a);
    if (t->scale == 0 && more == 0) return sinh(a);
    return copysign(exp(size + more - t->scale) * -expm1(-2 * size) / 2, a);
}

/* asinh(x e^scale) */
static double scaled_asinh(double x, double scale)
{
    if (scale == 0) return asinh(x);
    double log_size = scale + log(fabs(x));
    return copysign(log_size < FARTHEST ? asinh(exp(log_size)) : log_size + log(2), x);
}

/* Column j with x = sqrt(df) sinh(a); returns y_j over the root of 1 and the squares before. */
static double add_column(const struct elliptical_points *m, struct t_point *t, size_t j, double a)
{
    make_room(t, j, fabs(a));
    double x = scaled_sinh(a, 0, t), before = t->one + t->squares;
    t->y[j] = (x - mean_of(m->factor, m->d, j, t->y)) / m->factor[j * m->d + j];
    t->squares += t->y[j] * t->y[j];
    return t->y[j] / sqrt(before);
}

/* log(1 + the sum of squares) */
static double log_one_plus(const struct t_point *t)
{
    return t->scale == 0 ? log1p(t->squares) : 2 * t->scale + log(t->one + t->squares);
}

static status t_log_density(const struct evaluation *e, const double *u, double *value)
{
    const struct elliptical_points *m = e->prepared;
    if (m->singular) return OUT_OF_DOMAIN;
    if (m->grouped) return grouped_log_density(m, u, value);
    struct t_point t = { e->room, 0, 1, 0 };
    double margins = 0, df = m->df[0];
    for (size_t j = 0; j < m->d; j++) {
        double a = student_quantile(u[j], df);
        add_column(m, &t, j, a);
        margins += (df + 1) * log_cosh_of(a);
    }
    *value = m->log_constant + margins - (df + (double)m->d) / 2 * log_one_plus(&t);
    return OK;
}

static status t_conditional(const struct evaluation *e, const double *u, double *w)
{
    const struct elliptical_points *m = e->prepared;
    if (m->singular) return OUT_OF_DOMAIN;
    if (m->grouped) return grouped_conditional(m, u, w);
    struct t_point t = { e->room, 0, 1, 0 };
    double df = m->df[0];
    for (size_t j = 0; j < m->d; j++) {
        double sinh_j = add_column(m, &t, j, student_quantile(u[j], df));
        w[j] = student_below(asinh(sinh_j), df + (double)j);
    }
    return OK;
}

static status t_from_conditional(const struct evaluation *e, const double *w, double *u)
{
    const struct elliptical_points *m = e->prepared;
    if (m->singular) return OUT_OF_DOMAIN;
    if (m->grouped) return grouped_from_conditional(m, w, u);
    struct t_point t = { e->room, 0, 1, 0 };
    double df = m->df[0];
    for (size_t j = 0; j < m->d; j++) {
        double a = student_quantile(w[j], df + (double)j), log_root = log_one_plus(&t) / 2;
        make_room(&t, j, fabs(a) + log_root);
        t.y[j] = scaled_sinh(a, log_root, &t);
        t.squares += t.y[j] * t.y[j];
        double x = mean_of(m->factor, m->d, j, t.y) + m->factor[j * m->d + j] * t.y[j];
        u[j] = student_below(scaled_asinh(x, t.scale), df);
    }
    return OK;
}

/* ---- both ---- */

static const char *limit(const struct evaluation *e, enum question q)
{
    const struct elliptical_points *m = e->prepared;
    for (size_t j = 0; q != ASK_KENDALL && m->df && j < m->d; j++)
        if (m->df[j] < LOWEST_DF)
            return "has less than 0.001 degrees of freedom, too few to compute with";
    if ((q == ASK_DENSITY || q == ASK_CONDITIONAL) && m->singular)
        return "has a singular matrix: it has no density and some columns no conditional "
               "distribution";
    return NULL;
}

const struct evaluator gaussian_evaluator = {
    .takes_rotation = true,
    .prepare = prepare,
    .cdf = cdf,
    .log_density = gaussian_log_density,
    .conditional = gaussian_conditional,
    .from_conditional = gaussian_from_conditional,
    .limit = limit,
};

const struct evaluator t_evaluator = {
    .takes_rotation = true,
    .prepare = prepare,
    .cdf = cdf,
    .log_density = t_log_density,
    .conditional = t_conditional,
    .from_conditional = t_from_conditional,
    .limit = limit,
};
