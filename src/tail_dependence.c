/* tail_dependence.c - empirical tail dependence
 *
 * Method
 *   Mid-ranks among the rows that have both, then counting. Schmidt & Stadtmueller (2006) give the
 *   limit of the variance of sqrt(k) (lambda^ - lambda) for ranked data as lambda + a^2 + b^2 + 2
 *   lambda ((a - 1)(b - 1) - 1), a and b the partial derivatives of the tail copula at (1;1). They
 *   add up to lambda; halves are exact for exchangeable pairs, and make lambda (1 - lambda)(1 -
 *   lambda/2) of it.
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

status new_joint_ranks(const double *x, const double *y, size_t n, struct joint_ranks *ranks,
                       pool *p)
{
    struct rank_room *sorting;
    ranking *r;
    double *kept = pool_take(p, n, 2 * sizeof *kept);
    if (!kept) return NO_MEMORY;
    *ranks = (struct joint_ranks){ 0, kept, kept + n };
    ranks->rows = complete_pairs(x, y, NULL, n, kept, kept + n, NULL);
    if (ranks->rows < 2) return TOO_FEW;
    status s = new_rankings(ranks->rows, 1, &r, p);
    if (!s) s = new_rank_room(ranks->rows, &sorting, p);
    if (s) return s;
    rank_values(ranks->in_x, ranks->rows, r, sorting);
    mid_ranks(r, ranks->in_x);
    rank_values(ranks->in_y, ranks->rows, r, sorting);
    mid_ranks(r, ranks->in_y);
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
    double edge = (double)(ranks->rows - k);
    size_t joint = 0;
    for (size_t i = 0; i < ranks->rows; i++)
        joint += ranks->in_x[i] > edge && ranks->in_y[i] > edge;
    estimate(joint, k, t);
}

void lower_tail(const struct joint_ranks *ranks, size_t k, struct tail_estimate *t)
{
    double edge = (double)k;
    size_t joint = 0;
    for (size_t i = 0; i < ranks->rows; i++)
        joint += ranks->in_x[i] <= edge && ranks->in_y[i] <= edge;
    estimate(joint, k, t);
}
