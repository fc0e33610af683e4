/* elliptical_points.c - density and conditional distributions of the normal and the t copula.
 *
 * Method
 *   With the Cholesky factor L and x the normal or t quantiles of u, y = L^-1 x has independent
 *   columns, or for t such that y_j given those before is t with more degrees of freedom, scaled
 *   (Kotz & Nadarajah 2004). t quantiles are kept as asinh(x/sqrt(df)), and powers of 10 taken out
 *   where their squares would overflow.
 *   Probabilities: elliptical_pair.c, elliptical_box.c.
 *
 * Special cases
 *   Rotation by 180 changes nothing, by 90 or 270 the sign of the correlation. A singular matrix
 *   has no density: OUT_OF_DOMAIN.
 *
 * Accuracy
 *   Logarithms to 1e-13 times their size and the condition of the matrix.
 */
#include "elliptical_points.h"
#include "factor.h"
#include "normal.h"
#include "student_tail.h"

#include <math.h>

static const double FARTHEST = 300;           /* sinh of more is taken apart */
static const double LOWEST_DF = 1e-3;         /* of student_tail.h */
static const double LOWEST_DF_IN_BOX = 0.05;  /* less overflows for u not even near 0 and 1 */

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
    if (!m->singular) set_constant(m);
    e->prepared = m;
    if (d > 2) s = elliptical_box_prepare(m, p);
    if (s != OK) return s;
    if (m->grouped) return grouped_prepare(m, p);
    if (!m->df) return OK;
    m->table = pool_take(p, 1, sizeof *m->table);
    if (!m->table) return NO_MEMORY;
    return d == 2 ? student_tables(m->table, m->df[0] + 1, p)
                  : chi_square_table(m->table, m->df[0], p);
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

/* ---- the normal copula ---- */

static status gaussian_cdf(const struct evaluation *e, const double *u, double *value,
                           double *error)
{
    const struct elliptical_points *m = e->prepared;
    if (m->d == 2) return pair_by_limits(m, u, value);
    for (size_t j = 0; j < m->d; j++) e->room[j] = u[j] < 1 ? normal_quantile(u[j]) : HUGE_VAL;
    return elliptical_box(m, e->room, value, error);
}

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

/* A point in y = L^-1 x/sqrt(df), divided by e^scale. */
struct t_point {
    double *asinh_x, *x, *y, scale;
};

static struct t_point t_point_of(const struct evaluation *e, const double *u)
{
    const struct elliptical_points *m = e->prepared;
    struct t_point t = { e->room, e->room + m->d, e->room + 2 * m->d, 0 };
    for (size_t j = 0; j < m->d; j++) {
        t.asinh_x[j] = student_quantile(u[j], m->df[0]);
        t.scale = fmax(t.scale, fabs(t.asinh_x[j]) - FARTHEST);
    }
    for (size_t j = 0; j < m->d; j++) {
        double a = t.asinh_x[j], size = fabs(a);
        t.x[j] = t.scale == 0 ? sinh(a)
                              : copysign(exp(size - t.scale) * -expm1(-2 * size) / 2, a);
        t.y[j] = (t.x[j] - mean_of(m->factor, m->d, j, t.y)) / m->factor[j * m->d + j];
    }
    return t;
}

/* log(1 + e^(2 scale) sum) */
static double log_one_plus(double sum, double scale)
{
    return scale == 0 ? log1p(sum) : 2 * scale + log(exp(-2 * scale) + sum);
}

static status t_cdf(const struct evaluation *e, const double *u, double *value, double *error)
{
    const struct elliptical_points *m = e->prepared;
    double *x = e->room;
    if (m->d == 2) return pair_by_limits(m, u, value);
    if (m->grouped) grouped_scores(m, u, x);
    for (size_t j = 0; j < m->d && !m->grouped; j++)
        x[j] = u[j] < 1 ? sqrt(m->df[0]) * sinh(student_quantile(u[j], m->df[0])) : HUGE_VAL;
    return elliptical_box(m, x, value, error);
}

static status t_log_density(const struct evaluation *e, const double *u, double *value)
{
    const struct elliptical_points *m = e->prepared;
    if (m->singular) return OUT_OF_DOMAIN;
    if (m->grouped) return grouped_log_density(m, u, value);
    struct t_point t = t_point_of(e, u);
    double squares = 0, margins = 0, df = m->df[0];
    for (size_t j = 0; j < m->d; j++) {
        squares += t.y[j] * t.y[j];
        margins += (df + 1) * log_cosh_of(t.asinh_x[j]);
    }
    *value = m->log_constant + margins - (df + (double)m->d) / 2 * log_one_plus(squares, t.scale);
    return OK;
}

static status t_conditional(const struct evaluation *e, const double *u, double *w)
{
    const struct elliptical_points *m = e->prepared;
    if (m->singular) return OUT_OF_DOMAIN;
    if (m->grouped) return grouped_conditional(m, u, w);
    struct t_point t = t_point_of(e, u);
    double one = exp(-2 * t.scale), squares = 0;
    for (size_t j = 0; j < m->d; j++) {
        double sinh_j = t.y[j] / sqrt(one + squares);
        w[j] = student_below(asinh(sinh_j), m->df[0] + (double)j);
        squares += t.y[j] * t.y[j];
    }
    return OK;
}

/* NaN where a number of degrees of freedom is so low that a column overflows. */
static status t_from_conditional(const struct evaluation *e, const double *w, double *u)
{
    const struct elliptical_points *m = e->prepared;
    if (m->singular) return OUT_OF_DOMAIN;
    if (m->grouped) return grouped_from_conditional(m, w, u);
    double *y = e->room, squares = 0, df = m->df[0];
    for (size_t j = 0; j < m->d; j++) {
        y[j] = sinh(student_quantile(w[j], df + (double)j)) * sqrt(1 + squares);
        double x = mean_of(m->factor, m->d, j, y) + m->factor[j * m->d + j] * y[j];
        u[j] = student_below(asinh(x), df);
        squares += y[j] * y[j];
        if (!isfinite(squares)) return OUT_OF_DOMAIN;
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
    for (size_t j = 0; q == ASK_CDF && m->d > 2 && m->df && j < m->d; j++)
        if (m->df[j] < LOWEST_DF_IN_BOX)
            return "has less than 0.05 degrees of freedom, too few for its distribution function "
                   "beyond pairs";
    if ((q == ASK_DENSITY || q == ASK_CONDITIONAL) && m->singular)
        return "has a singular matrix: it has no density and some columns no conditional "
               "distribution";
    return NULL;
}

const struct evaluator gaussian_evaluator = {
    .takes_rotation = true,
    .prepare = prepare,
    .cdf = gaussian_cdf,
    .log_density = gaussian_log_density,
    .conditional = gaussian_conditional,
    .from_conditional = gaussian_from_conditional,
    .limit = limit,
};

const struct evaluator t_evaluator = {
    .takes_rotation = true,
    .prepare = prepare,
    .cdf = t_cdf,
    .log_density = t_log_density,
    .conditional = t_conditional,
    .from_conditional = t_from_conditional,
    .limit = limit,
};
