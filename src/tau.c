/* tau.c - Kendall's rank correlation of a pair
 *
 * Method
 *   Knight (1966): with the rows in the order of x, and of y where x ties, the discordant
 *   pairs are the inversions of y. Here both columns are ranked first, so that the rankings
 *   can serve other pairs; the order by x then y is that of x when x has no ties, else a
 *   counting sort by x of the rows in the order of y. All in O(n log n).
 *
 * Special cases
 *   Rows with a gap in either column do not count. Fewer than two rows are TOO_FEW, a constant
 *   column is NO_VARIATION.
 *
 * Accuracy
 *   The counts are exact, and so is every step up to the product of the two numbers of untied
 *   pairs; tau is right to 2 units in the last place. As sqrt(a a) is a in floating point, perfect
 *   dependence gives exactly 1 or -1; as rounding is monotone, nothing lies outside [-1;1].
 */
#include "tau.h"
#include "tau_inversions.h"

#include <math.h>

status new_pair_room(size_t rows, struct pair_room *room, pool *p)
{
    uint32_t *numbers = pool_take(p, 3 * rows + 1, sizeof *numbers);
    if (!numbers) return NO_MEMORY;
    *room = (struct pair_room){ numbers, numbers + rows, numbers + 2 * rows };
    return OK;
}

/* The ranks in y of the shared rows in the order of x, which has no ties; returns how many. */
static size_t in_order_of(const ranking *x, const ranking *y, uint32_t *sequence)
{
    size_t n = 0;
    for (size_t k = 0; k < x->observed; k++) {
        uint32_t rank = y->rank[x->order[k]];
        sequence[n] = rank;
        n += rank != NO_RANK;
    }
    return n;
}

/* The same where x has ties: by x, then by y. Leaves in places[r] where the rows of rank r in x
 * end. */
static size_t in_order_of_tied(const ranking *x, const ranking *y, uint32_t *sequence,
                               uint32_t *places)
{
    size_t n = 0, rank = 0;
    for (size_t k = 0; k < x->observed; k++) {
        uint32_t row = x->order[k];
        while (rank <= x->rank[row]) places[rank++] = (uint32_t)n;
        n += y->rank[row] != NO_RANK;
    }
    for (size_t k = 0; k < y->observed; k++) {
        uint32_t row = y->order[k];
        if (x->rank[row] != NO_RANK) sequence[places[x->rank[row]]++] = y->rank[row];
    }
    return n;
}

/* pairs tied in both columns, of the sequence by x then y */
static uint64_t tied_in_both(const uint32_t *sequence, const uint32_t *ends, size_t ranks)
{
    uint64_t count = 0;
    size_t from = 0;
    for (size_t r = 0; r < ranks; r++) {
        for (size_t k = from; k < ends[r]; k++) {
            if (sequence[k] == sequence[from]) continue;
            count += pairs_among(k - from);
            from = k;
        }
        count += pairs_among(ends[r] - from);
        from = ends[r];
    }
    return count;
}

uint64_t tied_pairs_shared(const ranking *x, const ranking *y)
{
    if (x->tied_pairs == 0 || y->observed == y->rows) return x->tied_pairs;
    uint64_t count = 0, run = 0;            /* run: shared rows before this of its value */
    uint32_t rank = 0;
    for (size_t k = 0; k < x->n_tied; k++) {    /* no branches: they would be hard to foresee */
        uint32_t row = x->tied[k];
        bool shared = y->rank[row] != NO_RANK;
        run = x->rank[row] == rank ? run : 0;
        rank = x->rank[row];
        count += shared ? run : 0;
        run += shared;
    }
    return count;
}

void tau_count_ranked(const ranking *x, const ranking *y, struct tau_counts *c,
                      struct pair_room *room)
{
    uint64_t tied_x = tied_pairs_shared(x, y), tied_y = tied_pairs_shared(y, x), tied_both = 0;
    bool swap = tied_x && !tied_y;              /* the counts do not mind, and it is faster */
    const ranking *first = swap ? y : x, *second = swap ? x : y;
    size_t n;
    if (first->tied_pairs) {
        n = in_order_of_tied(first, second, room->sequence, room->places);
        tied_both = tied_in_both(room->sequence, room->places, first->distinct);
    } else {
        n = in_order_of(first, second, room->sequence);
    }
    uint64_t discordant = count_inversions(room->sequence, n, second->distinct, room->spare);
    *c = (struct tau_counts){
        .rows = n, .pairs = pairs_among(n), .discordant = discordant,
        .tied_x = tied_x, .tied_y = tied_y, .tied_both = tied_both
    };
    c->concordant = c->pairs + tied_both - tied_x - tied_y - discordant;
}

/* Ranks both columns and gives back what sorting needed. */
static status rank_pair(const double *x, const double *y, size_t n, ranking **r, pool *p)
{
    status s = new_rankings(n, 2, r, p);
    struct block *mark = p->last;
    struct rank_room *room;
    if (!s) s = new_rank_room(n, &room, p);
    if (!s) {
        rank_values(x, n, *r, room);
        rank_values(y, n, *r + 1, room);
    }
    pool_back_to(p, mark);
    return s;
}

status tau_count(const double *x, const double *y, size_t n, struct tau_counts *c, pool *p)
{
    struct block *mark = p->last;
    ranking *r;
    status s = rank_pair(x, y, n, &r, p);
    struct pair_room room;
    if (!s) s = new_pair_room(n, &room, p);
    if (!s) tau_count_ranked(&r[0], &r[1], c, &room);
    pool_back_to(p, mark);
    return s;
}

status tau_b(const struct tau_counts *c, double *tau)
{
    if (c->rows < 2) return TOO_FEW;
    double differ_x = (double)(c->pairs - c->tied_x), differ_y = (double)(c->pairs - c->tied_y);
    if (differ_x == 0 || differ_y == 0) return NO_VARIATION;
    *tau = tau_score(c) / sqrt(differ_x * differ_y);
    return OK;
}
