/* elliptical_box.c - the distribution function of elliptical copulas beyond pairs.
 *
 * Method
 *   Genz (1992): with X = L Y the probability is an integral over the unit cube, column by column
 *   of the conditional probability given those drawn before; for t one more coordinate drives the
 *   chi-squares (Genz & Bretz 2002). The points of cube.h under eight seeds: the mean, and its
 *   standard error from how the eight differ. The seeds are fixed, so that the same question has
 *   the same answer.
 *
 * Special cases
 *   Where a pivot is zero the column is decided by those before it.
 */
#include "cube.h"
#include "elliptical_points.h"
#include "normal.h"

#include <math.h>

enum { SEEDS = 8, MOST_ROWS = 4096, FEWEST_ROWS = 64 };

/* What every question shares. */
struct box_points {
    struct cube_points under[SEEDS];
    size_t rows;                              /* under each seed */
    double (*u)[ROWS_AT_ONCE];                /* by column, that of the chi-squares last */
    double *scale, *y;                        /* of the columns at one point */
};

struct box {
    const struct elliptical_points *m;
    const double *x;
    double *scale, *y, (*u)[ROWS_AT_ONCE];
};

status elliptical_box_prepare(struct elliptical_points *m, pool *p)
{
    struct box_points *box = m->box = pool_take(p, 1, sizeof *box);
    if (!box) return NO_MEMORY;
    box->rows = MOST_ROWS;
    box->u = pool_take(p, m->d, sizeof *box->u);
    box->scale = pool_take(p, m->d, sizeof *box->scale);
    box->y = pool_take(p, m->d, sizeof *box->y);
    status s = box->u && box->scale && box->y ? OK : NO_MEMORY;
    for (int k = 0; s == OK && k < SEEDS; k++)
        s = cube_prepare(&box->under[k], m->d, (uint64_t)k, p);
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

/* Weights the limits with sqrt(chi-square/df), by the last coordinate. */
static void take_scales(struct box *b, double v)
{
    const struct elliptical_points *m = b->m;
    if (m->grouped) {
        grouped_scales(m, v, b->scale);
        return;
    }
    double z = fmax(-8.2, fmin(8.2, normal_quantile(v)));
    double s = m->df ? exp((log_chi_square(m->table, z) - log(m->df[0])) / 2) : 1;
    for (size_t j = 0; j < m->d; j++) b->scale[j] = s;
}

static double at_point(struct box *b, size_t row)
{
    const struct elliptical_points *m = b->m;
    double product = 1;
    if (m->df || row == 0) take_scales(b, m->df ? b->u[m->d - 1][row] : 0.5);
    for (size_t j = 0; j < m->d && product > 0; j++) {
        double rest = b->x[j] * b->scale[j], pivot = m->factor[j * m->d + j];
        for (size_t k = 0; k < j; k++) rest -= m->factor[j * m->d + k] * b->y[k];
        double below = pivot > 0 ? normal_probability(rest / pivot) : rest >= 0 ? 1 : 0;
        product *= below;
        if (j + 1 < m->d) {
            double u = below * b->u[j][row];
            b->y[j] = u > 0 && u < 1 ? normal_quantile(u) : u > 0 ? 8.3 : -38;
        }
    }
    return product;
}

/* The chi-squares, which matter to every column, get the last dimension of Sobol's points. */
static size_t dimension_of(size_t column, size_t d)
{
    size_t last = d < SOBOL_DIMENSIONS ? d - 1 : SOBOL_DIMENSIONS - 1;
    return column < last ? column : column + 1 == d ? last : column + 1;
}

static void take_points(const struct box *b, size_t seed, size_t first)
{
    size_t d = b->m->d;
    for (size_t j = 0; j < d; j++)
        cube_of_rows(&b->m->box->under[seed], dimension_of(j, d), first, b->u[j]);
}

static double mean_under_seed(struct box *b, size_t seed)
{
    double sum = 0;
    size_t rows = b->m->box->rows;
    for (size_t first = 0; first < rows; first += ROWS_AT_ONCE) {
        take_points(b, seed, first);
        for (size_t i = 0; i < ROWS_AT_ONCE && first + i < rows; i++) sum += at_point(b, i);
    }
    return sum / (double)rows;
}

status elliptical_box(const struct elliptical_points *m, const double *x, double *value,
                      double *error)
{
    if (!m->box) return OUT_OF_DOMAIN;
    struct box b = { m, x, m->box->scale, m->box->y, m->box->u };
    double mean[SEEDS], sum = 0, squares = 0;
    for (size_t k = 0; k < SEEDS; k++) sum += mean[k] = mean_under_seed(&b, k);
    *value = sum / SEEDS;
    for (size_t k = 0; k < SEEDS; k++) squares += (mean[k] - *value) * (mean[k] - *value);
    *error = sqrt(squares / (SEEDS * (SEEDS - 1)));
    return OK;
}
