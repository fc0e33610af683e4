/* elliptical_rays.c - the normal and the t copula cut into rays along which C rises.
 *
 * Method
 *   With a direction v = S a / sqrt(a' S a) that is positive in every column, and a factor G of the
 *   matrix S whose first column is v, normal columns are X = v T + (the rest of G) M with T and M
 *   independent: M chooses the ray, T is the place on it. G is the Cholesky factor times the
 *   Householder reflection that brings v to the front. Of the directions nearly the one whose
 *   smallest column is largest: that is S a with a >= 0 that minimises a' S a / 2 - sum(a), found
 *   column by column, from equal a. For t the chi-squares belong to the ray.
 *   C on a ray is the integrand of Genz (1992), as in elliptical_box.c but for 256 points of
 *   scrambled Sobol' sequences at a time: those that follow the ones of the ray before, so that
 *   their errors average out. For t they are weighted so that most have small chi-squares, which
 *   make up the tails.
 *
 * Special cases
 *   Where no direction is positive, as between opposite columns, C is asked at points instead. For
 *   one number of degrees of freedom it then is 0; for several, what lies below w = 0.01 may be off
 *   by more than the error tells, since 256 points do not find so small a C.
 */
#include "elliptical_points.h"
#include "kendall_rays.h"
#include "normal.h"

#include <math.h>
#include <string.h>

static const double FARTHEST = 8, FARTHEST_LOG = 700, SMALLEST = 0x1p-53;
enum { SWEEPS = 1000 };

struct elliptical_cut {
    const struct elliptical_points *m;
    double *direction;                        /* G, whose first column is the direction */
    double *base;                             /* columns where T = 0 */
    size_t kinds, *kind_of;                   /* of degrees of freedom, and of each column */
    struct student *table;                    /* of each kind */
    double *log_chi;                          /* of each kind, on the ray */
    struct cube_points inner[RAY_SEEDS];
    double (*u)[ROWS_AT_ONCE], (*y)[ROWS_AT_ONCE];
    double (*ratio)[ROWS_AT_ONCE];            /* of the roots of chi-squares to those of the ray */
    double weight[ROWS_AT_ONCE], rest[ROWS_AT_ONCE], product[ROWS_AT_ONCE];
};

/* ---- the direction ---- */

static double row_times(const double *matrix, size_t d, size_t row, const double *a)
{
    double sum = 0;
    for (size_t j = 0; j < d; j++) sum += matrix[row * d + j] * a[j];
    return sum;
}

/* a >= 0 with S a >= 1 or nearly, times what makes a' S a one; false where there is none */
static bool positive_direction(const double *matrix, size_t d, double *a)
{
    double least = 0, square = 0, sum = 0;
    for (size_t k = 0; k < d * d; k++) sum += matrix[k];
    for (size_t j = 0; j < d; j++) a[j] = sum > 1e-9 ? (double)d / sum : 0;
    for (int sweep = 0; sweep < SWEEPS && least < 0.9; sweep++) {
        for (size_t j = 0; j < d; j++)
            a[j] = fmax(0, a[j] + 1 - row_times(matrix, d, j, a));
        least = HUGE_VAL;
        for (size_t j = 0; j < d; j++) least = fmin(least, row_times(matrix, d, j, a));
    }
    for (size_t j = 0; j < d; j++) square += a[j] * row_times(matrix, d, j, a);
    for (size_t j = 0; j < d; j++) a[j] /= sqrt(square);
    return least > 1e-6 * sqrt(square);
}

/* G = L (I - 2 q q'/q'q), q = (1, 0, ..., 0) - L' a; a is overwritten by q */
static void reflect(const double *factor, size_t d, double *a, double *g)
{
    double squares = 0;
    for (size_t j = 0; j < d; j++) {          /* row j of L' needs a from j on */
        double sum = 0;
        for (size_t i = j; i < d; i++) sum += factor[i * d + j] * a[i];
        a[j] = (j == 0) - sum;
        squares += a[j] * a[j];
    }
    for (size_t i = 0; i < d; i++) {
        double along = squares > 0 ? 2 * row_times(factor, d, i, a) / squares : 0;
        for (size_t j = 0; j < d; j++) g[i * d + j] = factor[i * d + j] - along * a[j];
    }
}

/* ---- what a ray is ---- */

static void choose_columns(const struct elliptical_cut *c, const double *u, size_t first)
{
    size_t d = c->m->d;
    for (size_t i = 0; i < d; i++) c->base[i] = 0;
    for (size_t k = first; k < d; k++) {
        double score = normal_quantile(u[k - first]);
        for (size_t i = 0; i < d; i++) c->base[i] += c->direction[i * d + k] * score;
    }
}

/* Chi-squares of the ray, and of the points that C is made of by those: at the cube of a uniform,
 * which weighs as its derivative. */
static void choose_chi_squares(struct elliptical_cut *c, double u, double *inner)
{
    double z = held(normal_quantile(u), -8.2, 8.2);
    for (size_t i = 0; i < ROWS_AT_ONCE; i++) {
        c->weight[i] = 3 * inner[i] * inner[i];
        inner[i] = held(inner[i] * inner[i] * inner[i], SMALLEST, 1 - SMALLEST);
    }
    normal_scores_of_rows(inner);
    for (size_t i = 0; i < ROWS_AT_ONCE; i++) inner[i] = held(inner[i], -8.2, 8.2);
    for (size_t k = 0; k < c->kinds; k++) {
        double *ratio = c->ratio[k], log_chi = log_chi_square(&c->table[k], z);
        log_chi_squares_of_rows(&c->table[k], inner, ratio);
        for (size_t i = 0; i < ROWS_AT_ONCE; i++)
            ratio[i] = exp_within(held((ratio[i] - log_chi) / 2, -FARTHEST_LOG, FARTHEST_LOG));
    }
}

static void choose(const struct rays *r, const double *u, int seed, size_t index)
{
    struct elliptical_cut *c = r->own;
    size_t d = c->m->d, needed = c->m->df ? d : d - 1;
    for (size_t j = 0; j < needed; j++)
        cube_of_rows(&c->inner[seed], j, index * ROWS_AT_ONCE, c->u[j]);
    choose_columns(c, u, r->low < r->high);
    if (c->m->df) choose_chi_squares(c, u[r->dimensions - 1], c->u[d - 1]);
}

/* ---- C on it ---- */

/* rest / pivot becomes the probability below it; without a pivot 1 or 0 */
static void probabilities_below(double *rest, double pivot)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++)
        rest[i] = pivot > 0 ? rest[i] / pivot : rest[i] >= 0 ? 1 : 0;
    if (pivot > 0) normal_probabilities_of_rows(rest);
}

/* Column j below its limit x, given those before. */
static void take_column(struct elliptical_cut *c, size_t j, double x)
{
    const double *factor = c->m->factor + j * c->m->d;
    double *below = c->rest, *y = c->y[j];
    for (int i = 0; i < ROWS_AT_ONCE; i++)
        below[i] = c->m->df ? x * c->ratio[c->kind_of[j]][i] : x;
    for (size_t k = 0; k < j; k++) subtract_rows(below, factor[k], c->y[k]);
    probabilities_below(below, factor[j]);
    for (int i = 0; i < ROWS_AT_ONCE; i++) c->product[i] *= below[i];
    if (j + 1 == c->m->d) return;
    for (int i = 0; i < ROWS_AT_ONCE; i++)
        y[i] = held(c->u[j][i] * below[i], SMALLEST, 1 - SMALLEST);
    normal_scores_of_rows(y);
}

static status cdf(const struct rays *r, double place, double *value)
{
    struct elliptical_cut *c = r->own;
    size_t d = c->m->d;
    double sum = 0;
    memcpy(c->product, c->weight, sizeof c->product);
    for (size_t j = 0; j < d; j++)
        take_column(c, j, c->base[j] + place * c->direction[j * d]);
    for (int i = 0; i < ROWS_AT_ONCE; i++) sum += c->product[i];
    *value = sum / ROWS_AT_ONCE;
    if (r->low == r->high && *value < 1e-15) *value = 0;      /* what rounding leaves of it */
    return OK;
}

static double score(const struct rays *r, double place)
{
    (void)r;
    return place;
}

/* ---- getting ready ---- */

static status tables_of_kinds(struct elliptical_cut *c, pool *p)
{
    size_t d = c->m->d;
    const double *df = c->m->df;
    c->kind_of = pool_take(p, d, sizeof *c->kind_of);
    c->table = pool_take(p, d, sizeof *c->table);
    if (!c->kind_of || !c->table) return NO_MEMORY;
    for (size_t j = 0; j < d; j++) {
        size_t same = 0;
        while (df[same] != df[j]) same++;
        c->kind_of[j] = same < j ? c->kind_of[same] : c->kinds++;
        status s = same < j ? OK : chi_square_table(&c->table[c->kind_of[j]], df[j], p);
        if (s != OK) return s;
    }
    c->ratio = pool_take(p, c->kinds, sizeof *c->ratio);
    return c->ratio ? OK : NO_MEMORY;
}

bool elliptical_rises(const struct evaluation *e)
{
    const struct elliptical_points *m = e->prepared;
    return positive_direction(m->matrix, m->d, e->room);
}

status elliptical_rays(const struct evaluation *e, struct rays *r, pool *p)
{
    const struct elliptical_points *m = e->prepared;
    size_t d = m->d;
    struct elliptical_cut *c = pool_take_zeroed(p, 1, sizeof *c);
    double *a = pool_take(p, d, sizeof *a);
    if (!c || !a) return NO_MEMORY;
    c->m = m;
    for (size_t i = 0; i < ROWS_AT_ONCE; i++) c->weight[i] = 1;
    c->direction = pool_take(p, d * d, sizeof *c->direction);
    c->base = pool_take(p, d, sizeof *c->base);
    c->u = pool_take(p, d, sizeof *c->u);
    c->y = pool_take(p, d, sizeof *c->y);
    if (!c->direction || !c->base || !c->u || !c->y) return NO_MEMORY;
    bool found = positive_direction(m->matrix, d, a);
    *r = (struct rays){ .e = e, .own = c, .choose = choose, .cdf = cdf, .score = score };
    if (found) reflect(m->factor, d, a, c->direction);
    for (size_t k = 0; !found && k < d * d; k++) c->direction[k] = m->factor[k];
    if (found) r->low = -FARTHEST, r->high = FARTHEST;
    r->dimensions = d - found + (m->df != NULL);
    status s = m->df ? tables_of_kinds(c, p) : OK;
    for (int k = 0; s == OK && k < RAY_SEEDS; k++)
        s = cube_prepare(&c->inner[k], d, (uint64_t)(RAY_SEEDS + k), p);
    return s;
}
