/* tau_scores.c - what each row contributes to Kendall's tau
 *
 * Method
 *   Take the rows in the order of x and keep in a tree (Fenwick 1994) how many of those so
 *   far have each rank in y. When the rows of one value of x come, ask for each how many lie
 *   below it in y, without and with the rows of its own value; the rest follows from
 *   how many rows lie below and beside it in each column alone.
 *
 *   With s, a, b one for each pair of rows (s: 1 concordant, -1 discordant, else 0; a, b: 1 when x,
 *   y differ), tau-b is S/sqrt(A B) with their sums. Its linear part in s, a, b is h = (s - p a - q
 *   b) P/sqrt(A B), p = tau/2 sqrt(B/A), q = tau/2 sqrt(A/B), P the number of pairs, which is s -
 *   tau when nothing ties. The variance of a U-statistic of degree two (Hoeffding 1948), 2/(n(n-1))
 *   (2(n-2) zeta1 + zeta2), takes for zeta1 the mean square of the rows' means of h and for zeta2
 *   the mean square of h.
 *
 * Special cases
 *   Perfect dependence gives an error of 0.
 *
 * Accuracy
 *   Scores are whole numbers below 2^53 and exact. The errors are sums of squares: relative
 *   accuracy a few n units in the last place at worst.
 */
#include "tau_scores.h"
#include "counting_tree.h"

#include <math.h>
#include <string.h>

struct score_room {
    double *numbers;                                 /* three for each row */
    uint32_t *group;                                 /* the ranks in y of one value of x */
    uint32_t *below_y, *beside_y;                    /* rows below and beside each rank in y, */
    uint32_t *tree, *beside;                         /* and the same of those met so far */
};

status new_score_room(size_t rows, struct score_room **room, pool *p)
{
    struct score_room *made = pool_take(p, 1, sizeof *made);
    double *numbers = pool_take(p, rows, 3 * sizeof *numbers);
    uint32_t *counts = pool_take(p, rows + 1, 5 * sizeof *counts);
    if (!made || !numbers || !counts) return NO_MEMORY;
    size_t each = rows + 1;
    *made = (struct score_room){ numbers, counts, counts + each, counts + 2 * each,
                                 counts + 3 * each, counts + 4 * each };
    *room = made;
    return OK;
}

/* For each rank in y, how many of the rows that x has too lie below it and beside it; returns how
 * many rows that is in all. */
static size_t count_shared(const ranking *x, const ranking *y, struct score_room *room)
{
    memset(room->beside_y, 0, y->distinct * sizeof *room->beside_y);
    for (size_t k = 0; k < y->observed; k++)
        room->beside_y[y->rank[y->order[k]]] += x->rank[y->order[k]] != NO_RANK;
    uint32_t n = 0;
    for (size_t r = 0; r < y->distinct; r++) {
        room->below_y[r] = n;
        n += room->beside_y[r];
    }
    return n;
}

/* The shared rows from order[k] on that have one value in x: their ranks in y into `group`, and k
 * moves on. */
static size_t next_group(const ranking *x, const ranking *y, size_t *k, uint32_t *group)
{
    size_t size = 0;
    uint32_t rank = x->rank[x->order[*k]];
    for (; *k < x->observed && x->rank[x->order[*k]] == rank; ++*k) {
        uint32_t in_y = y->rank[x->order[*k]];
        group[size] = in_y;
        size += in_y != NO_RANK;
    }
    return size;
}

/* Scores the rows of one value of x, `before` shared rows having a lower one, and adds up the
 * concordant and discordant partners. */
static void score_group(const uint32_t *group, size_t size, size_t before, size_t ranks,
                        struct tau_scores *s, struct score_room *room)
{
    double *score = s->score + before;
    for (size_t k = 0; k < size; k++) {              /* with the rows lower in x */
        uint32_t r = group[k], lower = tree_below(room->tree, r);
        size_t higher = before - lower - room->beside[r];
        score[k] = (double)lower - (double)higher;
        s->counts.concordant += lower;
        s->counts.discordant += higher;
    }
    for (size_t k = 0; k < size; k++) {
        tree_add(room->tree, ranks, group[k]);
        room->beside[group[k]]++;
    }
    for (size_t k = 0; k < size; k++) {              /* with the rows higher in x */
        uint32_t r = group[k];
        size_t lower = room->below_y[r] - tree_below(room->tree, r);
        size_t level = room->beside_y[r] - room->beside[r];
        size_t higher = s->rows - before - size - level - lower;
        score[k] += (double)higher - (double)lower;
        s->counts.concordant += higher;
        s->counts.discordant += lower;
        s->differ_x[before + k] = (double)(s->rows - size);
        s->differ_y[before + k] = (double)(s->rows - room->beside_y[r]);
        s->counts.tied_x += size - 1;
        s->counts.tied_y += room->beside_y[r] - 1;
    }
}

void tau_scores_ranked(const ranking *x, const ranking *y, struct tau_scores *scores,
                       struct score_room *room)
{
    size_t n = count_shared(x, y, room), before = 0;
    *scores = (struct tau_scores){ n, room->numbers, room->numbers + n, room->numbers + 2 * n,
                                   { .rows = n, .pairs = pairs_among(n) } };
    memset(room->tree, 0, (y->distinct + 1) * sizeof *room->tree);
    memset(room->beside, 0, y->distinct * sizeof *room->beside);
    for (size_t k = 0; k < x->observed;) {
        size_t size = next_group(x, y, &k, room->group);
        score_group(room->group, size, before, y->distinct, scores, room);
        before += size;
    }
    struct tau_counts *c = &scores->counts;          /* each pair was met from both its rows */
    c->concordant /= 2;
    c->discordant /= 2;
    c->tied_x /= 2;
    c->tied_y /= 2;
    c->tied_both = c->concordant + c->discordant + c->tied_x + c->tied_y - c->pairs;
}

/* p, q and P/sqrt(A B) of the linear part of tau-b */
struct linear {
    double tau, p, q, scale;
};

static status linear_part(const struct tau_counts *c, struct linear *l)
{
    status s = tau_b(c, &l->tau);
    if (s) return s;
    double a = (double)(c->pairs - c->tied_x), b = (double)(c->pairs - c->tied_y);
    l->p = l->tau / 2 * sqrt(b / a);
    l->q = l->tau / 2 * sqrt(a / b);
    l->scale = (double)c->pairs / sqrt(a * b);
    return OK;
}

status tau_influence(struct tau_scores *scores)
{
    struct linear l;
    status s = linear_part(&scores->counts, &l);
    if (s) return s;
    for (size_t k = 0; k < scores->rows; k++)
        scores->score[k] = l.scale * (scores->score[k] - l.p * scores->differ_x[k]
                                      - l.q * scores->differ_y[k]);
    return OK;
}

static double sum_of_squares(const double *x, size_t n)
{
    double sum = 0;
    for (size_t i = 0; i < n; i++) sum += x[i] * x[i];
    return sum;
}

/* the mean square of h over the pairs of rows */
static double mean_square(const struct tau_counts *c, const struct linear *l)
{
    double differ = (double)(c->concordant + c->discordant), pairs = (double)c->pairs;
    double a = pairs - (double)c->tied_x, b = pairs - (double)c->tied_y;
    double sum = differ + l->p * l->p * a + l->q * l->q * b
               - 2 * (l->p + l->q) * tau_score(c) + 2 * l->p * l->q * differ;
    return fmax(0, sum / pairs) * l->scale * l->scale;
}

status tau_error_free(struct tau_scores *scores, double *error)
{
    struct linear l;
    status s = scores->rows < 3 ? TOO_FEW : linear_part(&scores->counts, &l);
    if (!s) s = tau_influence(scores);
    if (s) return s;
    double n = (double)scores->rows;
    double first = sum_of_squares(scores->score, scores->rows) / (n * (n - 1) * (n - 1));
    double variance = 2 / (n * (n - 1))
                    * (2 * (n - 2) * first + mean_square(&scores->counts, &l));
    *error = fabs(l.tau) == 1 ? 0 : sqrt(variance);
    return OK;
}

/* tau-b without row k */
static status tau_without(const struct tau_scores *s, size_t k, double *tau)
{
    const struct tau_counts *c = &s->counts;
    double a = (double)(c->pairs - c->tied_x) - s->differ_x[k];
    double b = (double)(c->pairs - c->tied_y) - s->differ_y[k];
    if (a == 0 || b == 0) return NO_VARIATION;
    *tau = (tau_score(c) - s->score[k]) / sqrt(a * b);
    return OK;
}

status tau_error_jackknife(const struct tau_scores *scores, double *error)
{
    size_t n = scores->rows;
    if (n < 3) return TOO_FEW;
    double mean = 0, squares = 0, tau;
    for (size_t k = 0; k < n; k++) {                 /* running mean and squares (Welford 1962) */
        status s = tau_without(scores, k, &tau);
        if (s) return s;
        double apart = tau - mean;
        mean += apart / (double)(k + 1);
        squares += apart * (tau - mean);
    }
    *error = sqrt((double)(n - 1) / (double)n * squares);
    return OK;
}
