/* tau_weighted.c - Kendall's tau-b with weights
 *
 * Method
 *   Knight's (1966) order of the rows, with running sums of weights for his counts: take the rows
 *   by x; a tree (Fenwick 1994) keeps the weight met so far of the rows below each rank in y, a
 *   second one of those above. Pairs tied in x are summed within each value of x in the order of y.
 *   O(n log n).
 *
 * Special cases
 *   Weights are first divided by a power of two, which changes no digit, so that no product
 *   overflows and whole weights stay whole.
 *
 * Accuracy
 *   Concordant and discordant weight, and the weights of pairs tied in one column only, are each
 *   sums of products without any subtraction: relative accuracy about log2(n) n units at worst,
 *   usually a few. What is nothing is exactly 0, so that perfect dependence is exact. For symmetry
 *   to the bit the column to go by is chosen from the data, not from the order of arguments.
 */
#include "tau_weighted.h"
#include "gaps.h"
#include "ranks.h"

#include <math.h>
#include <string.h>

/* weight of pairs of rows */
struct pair_weights {
    double concordant, discordant, tied_x_only, tied_y_only;
};

struct weight_room {
    double *weight;              /* of each row */
    double *below, *above;       /* trees of the weight met so far, from either end of y */
    double *beside;              /* the weight met so far of each rank in y */
    uint32_t *sorted, *places;   /* rows by x, then by y */
};

static double tree_sum(const double *tree, size_t rank)
{
    double sum = 0;
    for (size_t k = rank; k > 0; k &= k - 1) sum += tree[k];
    return sum;
}

static void tree_add(double *tree, size_t ranks, size_t rank, double weight)
{
    for (size_t k = rank + 1; k <= ranks; k += k & -k) tree[k] += weight;
}

/* A counting sort by x of the rows in the order of y. */
static void sort_by_both(const ranking *x, const ranking *y, struct weight_room *room)
{
    size_t n = x->rows, rank = 0;
    for (size_t k = 0; k < n; k++)
        while (rank <= x->rank[x->order[k]]) room->places[rank++] = (uint32_t)k;
    for (size_t k = 0; k < n; k++)
        room->sorted[room->places[x->rank[y->order[k]]]++] = y->order[k];
}

/* The pairs within one value of x, whose rows come in the order of y. */
static double weight_within(const uint32_t *rows, size_t size, const ranking *y,
                            const double *weight)
{
    double sum = 0, lower = 0, level = 0;
    for (size_t k = 0; k < size; k++) {
        if (k > 0 && y->rank[rows[k]] != y->rank[rows[k - 1]]) {
            lower += level;
            level = 0;
        }
        sum += weight[rows[k]] * lower;
        level += weight[rows[k]];
    }
    return sum;
}

static void weigh_pairs(const ranking *x, const ranking *y, struct weight_room *room,
                        struct pair_weights *w)
{
    size_t n = x->rows, ranks = y->distinct;
    sort_by_both(x, y, room);
    for (size_t from = 0, to; from < n; from = to) {
        for (to = from; to < n && x->rank[room->sorted[to]] == x->rank[room->sorted[from]]; to++) {
            uint32_t row = room->sorted[to], r = y->rank[row];
            w->concordant += room->weight[row] * tree_sum(room->below, r);
            w->discordant += room->weight[row] * tree_sum(room->above, ranks - 1 - r);
            w->tied_y_only += room->weight[row] * room->beside[r];
        }
        w->tied_x_only += weight_within(room->sorted + from, to - from, y, room->weight);
        for (size_t k = from; k < to; k++) {
            uint32_t row = room->sorted[k], r = y->rank[row];
            tree_add(room->below, ranks, r, room->weight[row]);
            tree_add(room->above, ranks, ranks - 1 - r, room->weight[row]);
            room->beside[r] += room->weight[row];
        }
    }
}

/* Whether to go by x: by the column that ranks lower the first row that they rank differently. */
static bool goes_first(const ranking *x, const ranking *y)
{
    for (size_t i = 0; i < x->rows; i++)
        if (x->rank[i] != y->rank[i]) return x->rank[i] < y->rank[i];
    return true;
}

static status new_weight_room(size_t n, struct weight_room *room, pool *p)
{
    double *sums = pool_take_zeroed(p, n + 1, 3 * sizeof *sums);
    uint32_t *rows = pool_take(p, n + 1, 2 * sizeof *rows);
    if (!sums || !rows) return NO_MEMORY;
    *room = (struct weight_room){ .below = sums, .above = sums + n + 1,
                                  .beside = sums + 2 * (n + 1),
                                  .sorted = rows, .places = rows + n + 1 };
    return OK;
}

/* Divides by a power of two that brings the largest below 1. */
static status scale_weights(double *weight, size_t n)
{
    double most = 0;
    for (size_t i = 0; i < n; i++) most = fmax(most, weight[i]);
    if (isinf(most)) return OUT_OF_DOMAIN;
    int exponent;
    frexp(most, &exponent);
    for (size_t i = 0; i < n; i++) weight[i] = ldexp(weight[i], -exponent);
    return OK;
}

static status rank_both(const double *x, const double *y, size_t n, ranking **r, pool *p)
{
    struct rank_room *sorting;
    status s = new_rankings(n, 2, r, p);
    if (!s) s = new_rank_room(n, &sorting, p);
    if (s) return s;
    rank_values(x, n, *r, sorting);
    rank_values(y, n, *r + 1, sorting);
    return OK;
}

/* x, y and weight complete, weight above 0 */
static status tau_of_complete(const double *x, const double *y, double *weight, size_t n,
                              double *tau, pool *p)
{
    ranking *r;
    struct weight_room room;
    status s = rank_both(x, y, n, &r, p);
    if (!s) s = new_weight_room(n, &room, p);
    if (!s) s = scale_weights(weight, n);
    if (s) return s;
    if (r[0].distinct < 2 || r[1].distinct < 2) return NO_VARIATION;

    bool x_first = goes_first(&r[0], &r[1]);
    struct pair_weights w = { 0, 0, 0, 0 };
    room.weight = weight;
    weigh_pairs(&r[!x_first], &r[x_first], &room, &w);
    double both = w.concordant + w.discordant;
    double differ = (both + w.tied_x_only) * (both + w.tied_y_only);
    if (differ == 0) return NO_VARIATION;            /* all weight but a trace on one value */
    *tau = (w.concordant - w.discordant) / sqrt(differ);
    return OK;
}

status tau_weighted(const double *x, const double *y, const double *weight, size_t n,
                    double *tau, size_t *used, pool *p)
{
    for (size_t i = 0; i < n; i++)
        if (weight[i] < 0) return OUT_OF_DOMAIN;
    struct block *mark = p->last;
    double *copies = pool_take(p, n, 3 * sizeof *copies);
    if (!copies) return NO_MEMORY;
    double *x_used = copies, *y_used = copies + n, *weight_used = copies + 2 * n;
    *used = complete_pairs(x, y, weight, n, x_used, y_used, weight_used);
    status s = *used < 2 ? TOO_FEW : tau_of_complete(x_used, y_used, weight_used, *used, tau, p);
    pool_back_to(p, mark);
    return s;
}
