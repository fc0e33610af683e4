/* kendall_curve.c - the empirical Kendall distribution
 *
 * Method
 *   Take the rows by x, those that tie together, and count in a tree those not above each in y.
 *   O(n log n).
 *
 * Special cases
 *   Rows with a gap in either column do not count.
 *
 * Accuracy
 *   Counts are exact; w is count/n, correctly rounded.
 */
#include "kendall_curve.h"
#include "counting_tree.h"
#include "gaps.h"
#include "ranks.h"

#include <string.h>

/* How many rows have each count, into tally[0 .. n]. */
static void tally_counts(const ranking *x, const ranking *y, uint32_t *tree, uint32_t *tally)
{
    for (size_t from = 0, to = 0; from < x->rows; from = to) {
        uint32_t rank = x->rank[x->order[from]];
        for (; to < x->rows && x->rank[x->order[to]] == rank; to++)
            tree_add(tree, y->distinct, y->rank[x->order[to]]);
        for (size_t k = from; k < to; k++)
            tally[tree_below(tree, (size_t)y->rank[x->order[k]] + 1)]++;
    }
}

static status values_of_complete(const double *x, const double *y, size_t n, double *w, pool *p)
{
    struct rank_room *sorting;
    ranking *r;
    uint32_t *counts = pool_take_zeroed(p, n + 1, 2 * sizeof *counts);
    status s = counts ? new_rankings(n, 2, &r, p) : NO_MEMORY;
    if (!s) s = new_rank_room(n, &sorting, p);
    if (s) return s;
    rank_values(x, n, &r[0], sorting);
    rank_values(y, n, &r[1], sorting);
    uint32_t *tally = counts + n + 1;
    tally_counts(&r[0], &r[1], counts, tally);
    for (size_t count = 1; count <= n; count++)
        for (size_t k = 0; k < tally[count]; k++) *w++ = (double)count / (double)n;
    return OK;
}

status kendall_values(const double *x, const double *y, size_t n, double *w, size_t *used, pool *p)
{
    struct block *mark = p->last;
    double *copies = pool_take(p, n, 2 * sizeof *copies);
    if (!copies) return NO_MEMORY;
    *used = complete_pairs(x, y, NULL, n, copies, copies + n, NULL);
    status s = *used ? values_of_complete(copies, copies + n, *used, w, p) : TOO_FEW;
    pool_back_to(p, mark);
    return s;
}

double share_at_most(const double *sorted, size_t n, double v)
{
    size_t low = 0, high = n;
    while (low < high) {
        size_t middle = low + (high - low) / 2;
        if (sorted[middle] <= v * (1 + 0x1p-50)) low = middle + 1;
        else high = middle;
    }
    return (double)low / (double)n;
}
