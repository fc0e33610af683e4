/* rho.c - Spearman's rho and the correlation of normal scores
 *
 * Method
 *   The rankings say the order; mid-ranks among the rows that both columns have follow from a
 *   walk through it. A row's deviation is twice its mid-rank less n + 1, a whole number, so
 *   that Spearman's three sums of products are exact. Normal scores go by the size of the
 *   deviation, from a table that is kept while n stays the same.
 *
 * Special cases
 *   Rows with a gap in either column do not count. The score of -d is minus that of d, so that
 *   turning a column round turns the sign of the correlation and nothing else.
 *
 * Accuracy
 *   Spearman's rho is right to 2 units in the last place, the other to a few n. sqrt(a b) of two
 *   sums that are the same is that sum, so perfect dependence is exact.
 */
#include "rho.h"
#include "normal.h"

#include <math.h>
#include <stdlib.h>

enum { MOST_ROWS = 1 << 21 };            /* up to which the sums stay below 2^63 */

struct rho_room {
    int64_t *in_x, *in_y;                /* deviations by row */
    double *score;                       /* by size of the deviation, for `rows` rows */
    size_t rows;
};

status new_rho_room(size_t rows, struct rho_room **room, pool *p)
{
    if (rows > MOST_ROWS) return OUT_OF_DOMAIN;
    struct rho_room *made = pool_take_zeroed(p, 1, sizeof *made);
    int64_t *deviations = pool_take(p, rows, 2 * sizeof *deviations);
    double *score = pool_take(p, rows + 1, sizeof *score);
    if (!made || !deviations || !score) return NO_MEMORY;
    *made = (struct rho_room){ deviations, deviations + rows, score, 0 };
    *room = made;
    return OK;
}

static size_t count_shared(const ranking *x, const ranking *y)
{
    size_t n = 0;
    for (size_t k = 0; k < x->observed; k++) n += y->rank[x->order[k]] != NO_RANK;
    return n;
}

/* The deviations in x of the rows that y has too, n of them; false when x is constant there. */
static bool find_deviations(const ranking *x, const ranking *y, size_t n, int64_t *deviation)
{
    int64_t passed = 0, all = (int64_t)n;
    for (size_t from = 0, to; from < x->observed; from = to) {
        uint32_t rank = x->rank[x->order[from]];
        int64_t tied = 0;
        for (to = from; to < x->observed && x->rank[x->order[to]] == rank; to++)
            tied += y->rank[x->order[to]] != NO_RANK;
        if (tied == all) return false;
        for (size_t k = from; k < to; k++)           /* 2 (passed + (tied + 1)/2) - (n + 1) */
            deviation[x->order[k]] = 2 * passed + tied - all;
        passed += tied;
    }
    return true;
}

static status prepare(const ranking *x, const ranking *y, size_t *used, struct rho_room *room)
{
    *used = count_shared(x, y);
    if (*used < 2) return TOO_FEW;
    return find_deviations(x, y, *used, room->in_x) && find_deviations(y, x, *used, room->in_y)
         ? OK : NO_VARIATION;
}

status spearman_rho(const ranking *x, const ranking *y, double *rho, size_t *used,
                    struct rho_room *room)
{
    status s = prepare(x, y, used, room);
    if (s) return s;
    int64_t xx = 0, yy = 0, xy = 0;
    for (size_t i = 0; i < x->rows; i++) {
        if (x->rank[i] == NO_RANK || y->rank[i] == NO_RANK) continue;
        int64_t a = room->in_x[i], b = room->in_y[i];
        xx += a * a;
        yy += b * b;
        xy += a * b;
    }
    *rho = (double)xy / sqrt((double)xx * (double)yy);
    return OK;
}

static void fill_scores(struct rho_room *room, size_t n)
{
    if (room->rows == n) return;
    for (size_t size = 0; size < n; size++)
        room->score[size] = -normal_quantile((double)(n + 1 - size) / (2 * ((double)n + 1)));
    room->score[0] = 0;
    room->rows = n;
}

static double score(const struct rho_room *room, int64_t deviation)
{
    return deviation < 0 ? -room->score[-deviation] : room->score[deviation];
}

static double clamp(double x)
{
    return x > 1 ? 1 : x < -1 ? -1 : x;
}

status normal_score_correlation(const ranking *x, const ranking *y, double *correlation,
                                size_t *used, struct rho_room *room)
{
    status s = prepare(x, y, used, room);
    if (s) return s;
    fill_scores(room, *used);
    double mean_x = 0, mean_y = 0, xx = 0, yy = 0, xy = 0, n = (double)*used;
    for (size_t i = 0; i < x->rows; i++) {
        if (x->rank[i] == NO_RANK || y->rank[i] == NO_RANK) continue;
        mean_x += score(room, room->in_x[i]) / n;    /* 0 but for ties and rounding */
        mean_y += score(room, room->in_y[i]) / n;
    }
    for (size_t i = 0; i < x->rows; i++) {
        if (x->rank[i] == NO_RANK || y->rank[i] == NO_RANK) continue;
        double a = score(room, room->in_x[i]) - mean_x, b = score(room, room->in_y[i]) - mean_y;
        xx += a * a;
        yy += b * b;
        xy += a * b;
    }
    *correlation = clamp(xy / sqrt(xx * yy));
    return OK;
}
