/* tail_dependence.c - empirical tail dependence
 *
 * Method
 *   Mid-ranks R, S among the rows that have both. A row is in the lower tail of k rows when
 *   max(R, S) <= k, in the upper when min(R, S) > n - k: rows are counted by max and min, rounded
 *   up to whole ranks, and the counts accumulated, which gives the tails of every size at once.
 *   Schmidt & Stadtmueller (2006) give the limit of the variance of sqrt(k) (lambda^ - lambda) for
 *   ranked data as lambda + a^2 + b^2 + 2 lambda ((a - 1)(b - 1) - 1), a and b the partial
 *   derivatives of the tail copula at (1;1). They add up to lambda; halves are exact for
 *   exchangeable pairs, and make lambda (1 - lambda)(1 - lambda/2) of it.
 *
 * Special cases
 *   Ties across the edge of the tail are all in it or all outside, by their mid-rank.
 *
 * Accuracy
 *   Counts are exact. The standard error is asymptotic, and useless for a handful of rows: NaN
 *   under ten.
 */
#include "tail_dependence.h"
#include "gaps.h"
#include "ranks.h"

#include <math.h>

enum { FEWEST_FOR_ERROR = 10 };

/* Mid-ranks of the rows that have both, one column after the other. */
static status pair_ranks(const double *x, const double *y, size_t n, double *in_x, double *in_y,
                         size_t *rows, pool *p)
{
    struct rank_room *sorting;
    ranking *r;
    *rows = complete_pairs(x, y, NULL, n, in_x, in_y, NULL);
    if (*rows < 2) return TOO_FEW;
    status s = new_rankings(*rows, 1, &r, p);
    if (!s) s = new_rank_room(*rows, &sorting, p);
    if (s) return s;
    rank_values(in_x, *rows, r, sorting);
    mid_ranks(r, in_x);
    rank_values(in_y, *rows, r, sorting);
    mid_ranks(r, in_y);
    return OK;
}

/* Rounding up keeps mid-ranks, which are whole or halves, on their side of a whole edge. */
static void count_joint(const double *in_x, const double *in_y, struct joint_ranks *ranks)
{
    size_t n = ranks->rows;
    for (size_t k = 0; k <= n; k++) ranks->lower[k] = ranks->upper[k] = 0;
    for (size_t i = 0; i < n; i++) {
        ranks->lower[(size_t)ceil(fmax(in_x[i], in_y[i]))]++;
        ranks->upper[n + 1 - (size_t)ceil(fmin(in_x[i], in_y[i]))]++;
    }
    for (size_t k = 1; k <= n; k++) {
        ranks->lower[k] += ranks->lower[k - 1];
        ranks->upper[k] += ranks->upper[k - 1];
    }
}

status new_joint_ranks(const double *x, const double *y, size_t n, struct joint_ranks *ranks,
                       pool *p)
{
    double *in_x = pool_take(p, n, 2 * sizeof *in_x);
    *ranks = (struct joint_ranks){ 0 };
    if (!in_x) return NO_MEMORY;
    status s = pair_ranks(x, y, n, in_x, in_x + n, &ranks->rows, p);
    if (s) return s;
    ranks->lower = pool_take(p, ranks->rows + 1, 2 * sizeof *ranks->lower);
    if (!ranks->lower) return NO_MEMORY;
    ranks->upper = ranks->lower + ranks->rows + 1;
    count_joint(in_x, in_x + n, ranks);
    return OK;
}

size_t rows_in_tail(const struct joint_ranks *ranks, double fraction)
{
    double k = floor(fraction * (double)ranks->rows + 0.5);
    return k < 1 ? 1 : k > (double)ranks->rows ? ranks->rows : (size_t)k;
}

static void estimate(size_t joint, size_t k, struct tail_estimate *t)
{
    double lambda = (double)joint / (double)k;
    t->joint = joint;
    t->lambda = lambda;
    t->error = joint < FEWEST_FOR_ERROR
             ? NAN : sqrt(lambda * (1 - lambda) * (1 - lambda / 2) / (double)k);
}

void upper_tail(const struct joint_ranks *ranks, size_t k, struct tail_estimate *t)
{
    estimate(ranks->upper[k], k, t);
}

void lower_tail(const struct joint_ranks *ranks, size_t k, struct tail_estimate *t)
{
    estimate(ranks->lower[k], k, t);
}
