/* elliptical_box.c - the distribution function of elliptical copulas beyond pairs.
 *
 * Method
 *   Genz (1992): with X = L Y the probability is an integral over the unit cube, column by column
 *   of the conditional probability given those drawn before; for t one more coordinate drives the
 *   chi-squares (Genz & Bretz 2002). Scrambled Sobol' points under eight seeds: the mean, and its
 *   standard error from how the eight differ. The seeds are fixed, so that the same question has
 *   the same answer.
 *
 * Special cases
 *   Where a pivot is zero the column is decided by those before it.
 */
#include "elliptical_points.h"
#include "normal.h"
#include "sobol.h"

#include <math.h>

enum { SEEDS = 8, BLOCKS = 16 };

struct box {
    const struct elliptical_points *m;
    const double *x;
    double scale[MOST_IN_BOX], y[MOST_IN_BOX];
    double (*u)[ROWS_AT_ONCE];
};

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

static double at_point(struct box *b, int row)
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

static double mean_under_seed(struct box *b, const struct sobol *points)
{
    double sum = 0;
    for (int block = 0; block < BLOCKS; block++) {
        for (size_t j = 0; j < points->dimensions; j++)
            sobol_of_rows(points, j, (uint64_t)block * ROWS_AT_ONCE, b->u[j]);
        for (int row = 0; row < ROWS_AT_ONCE; row++) sum += at_point(b, row);
    }
    return sum / (BLOCKS * ROWS_AT_ONCE);
}

static status mean_and_error(struct box *b, pool *p, double *value, double *error)
{
    double mean[SEEDS], sum = 0, squares = 0;
    for (int k = 0; k < SEEDS; k++) {
        struct sobol points;
        struct block *mark = p->last;
        status s = sobol_prepare(&points, b->m->d, (uint64_t)k, p);
        if (s == OK) mean[k] = mean_under_seed(b, &points);
        pool_back_to(p, mark);
        if (s != OK) return s;
        sum += mean[k];
    }
    *value = sum / SEEDS;
    for (int k = 0; k < SEEDS; k++) squares += (mean[k] - *value) * (mean[k] - *value);
    *error = sqrt(squares / (SEEDS * (SEEDS - 1)));
    return OK;
}

status elliptical_box(const struct elliptical_points *m, const double *x, double *value,
                      double *error)
{
    struct box b = { .m = m, .x = x };
    struct block *mark = m->pool->last;
    if (m->d > MOST_IN_BOX) return OUT_OF_DOMAIN;
    b.u = pool_take(m->pool, m->d, sizeof *b.u);
    status s = b.u ? mean_and_error(&b, m->pool, value, error) : NO_MEMORY;
    pool_back_to(m->pool, mark);
    return s;
}
