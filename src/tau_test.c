/* tau_test.c - Kendall's test of independence
 *
 * Method
 *   Without ties every order of y is equally likely, and the number of discordant pairs of n rows
 *   is that of n - 1 rows plus one of 0 .. n - 1, each with chance 1/n (Kendall 1938): a running
 *   sum over the distribution for n - 1. With ties or many rows S is nearly normal; its variance
 *   with ties in both columns is that of Kendall (1970), Rank Correlation Methods.
 *
 * Special cases
 *   The distribution is symmetric, so that only its lower half is ever summed.
 *
 * Accuracy
 *   Running sums in long double rise in their lower half, so that what is taken away is never
 *   nearly all: 1e-14 relative. The normal tail is that of normal_probability(): at 200
 *   rows it gives 0.00103 where the exact tail is 0.00100.
 */
#include "tau_test.h"
#include "gaps.h"
#include "normal.h"
#include "tau.h"

#include <math.h>
#include <string.h>

enum { MOST_EXACT_ROWS = 200 };

/* From the chances of 0 .. d discordant pairs of n - 1 rows to those of n. */
static void add_row(const long double *before, long double *after, size_t n, size_t d)
{
    long double window = 0;
    for (size_t k = 0; k <= d; k++) {
        window += before[k];
        if (k >= n) window -= before[k - n];
        after[k] = window / (long double)n;
    }
}

/* d in the lower half */
static status lower_tail(size_t n, size_t d, double *probability, pool *p)
{
    struct block *mark = p->last;
    long double *chances = pool_take_zeroed(p, d + 1, 2 * sizeof *chances), sum = 0;
    if (!chances) return NO_MEMORY;
    long double *before = chances, *after = chances + d + 1;
    before[0] = 1;
    for (size_t rows = 2; rows <= n; rows++) {
        add_row(before, after, rows, d);
        long double *swap = before;
        before = after;
        after = swap;
    }
    for (size_t k = 0; k <= d; k++) sum += before[k];
    *probability = (double)sum;
    pool_back_to(p, mark);
    return OK;
}

status tau_null_probability(size_t n, uint64_t d, double *probability, pool *p)
{
    uint64_t pairs = pairs_among(n);
    *probability = 1;
    if (d >= pairs) return OK;
    if (d <= (pairs - 1) / 2) return lower_tail(n, (size_t)d, probability, p);
    status s = lower_tail(n, (size_t)(pairs - d - 1), probability, p);
    *probability = 1 - *probability;
    return s;
}

static status exact(const struct tau_counts *c, side which, double *p_value, pool *p)
{
    size_t n = (size_t)c->rows;
    uint64_t fewer = c->concordant < c->discordant ? c->concordant : c->discordant;
    uint64_t most = which == SIDE_ABOVE ? c->discordant
                  : which == SIDE_BELOW ? c->concordant : fewer;
    status s = tau_null_probability(n, most, p_value, p);
    if (which == SIDE_BOTH) *p_value = fmin(1, 2 * *p_value);
    return s;
}

/* Sums over groups of t tied rows: of t(t-1), t(t-1)(t-2) and t(t-1)(2t+5). */
struct tie_sums {
    double two, three, variance;
};

static void add_group(struct tie_sums *sums, double t)
{
    sums->two += t * (t - 1);
    sums->three += t * (t - 1) * (t - 2);
    sums->variance += t * (t - 1) * (2 * t + 5);
}

static struct tie_sums sums_of_ties(const ranking *r)
{
    struct tie_sums sums = { 0, 0, 0 };
    for (size_t from = 0, k = 1; k <= r->n_tied; k++) {
        if (k < r->n_tied && r->rank[r->tied[k]] == r->rank[r->tied[from]]) continue;
        add_group(&sums, (double)(k - from));
        from = k;
    }
    return sums;
}

static double score_variance(const ranking *x, const ranking *y)
{
    double n = (double)x->observed;
    struct tie_sums t = sums_of_ties(x), u = sums_of_ties(y);
    double variance = (n * (n - 1) * (2 * n + 5) - t.variance - u.variance) / 18
                    + t.two * u.two / (2 * n * (n - 1));
    return n < 3 ? variance : variance + t.three * u.three / (9 * n * (n - 1) * (n - 2));
}

static double by_normal(double score, double variance, side which)
{
    double z = score / sqrt(variance);
    if (which == SIDE_ABOVE) return normal_probability(-z);
    if (which == SIDE_BELOW) return normal_probability(z);
    return 2 * normal_probability(-fabs(z));
}

/* x and y complete */
static status test_complete(const double *x, const double *y, size_t n, side which,
                            double *p_value, pool *p)
{
    struct rank_room *sorting;
    struct pair_room counting;
    struct tau_counts c;
    ranking *r;
    double tau;
    status s = new_rankings(n, 2, &r, p);
    if (!s) s = new_rank_room(n, &sorting, p);
    if (!s) s = new_pair_room(n, &counting, p);
    if (s) return s;
    rank_values(x, n, &r[0], sorting);
    rank_values(y, n, &r[1], sorting);
    tau_count_ranked(&r[0], &r[1], &c, &counting);
    s = tau_b(&c, &tau);
    if (s) return s;
    if (n <= MOST_EXACT_ROWS && !c.tied_x && !c.tied_y) s = exact(&c, which, p_value, p);
    else *p_value = by_normal(tau_score(&c), score_variance(&r[0], &r[1]), which);
    if (*p_value < 1e-308) *p_value = 0;
    return s;
}

status tau_test(const double *x, const double *y, size_t n, side which, double *p_value,
                size_t *used, pool *p)
{
    struct block *mark = p->last;
    double *copies = pool_take(p, n, 2 * sizeof *copies);
    if (!copies) return NO_MEMORY;
    *used = complete_pairs(x, y, NULL, n, copies, copies + n, NULL);
    status s = *used < 2 ? TOO_FEW
                         : test_complete(copies, copies + n, *used, which, p_value, p);
    pool_back_to(p, mark);
    return s;
}
