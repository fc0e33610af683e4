/* tail.c - the worst rows of a run, and the risk measures that rest on them.
 *
 * Method
 *   Rows above a cut are kept until the room is full; then the cut rises to the wanted-th
 *   largest of them and what lies below goes. Rows equal to the cut, however many, are only counted
 *   and summed. Since the cut never exceeds the order statistics that are needed in the
 *   end, nothing needed is lost. Measures as in risk.c. The part of a line is
 *   E[X | S > v]; with m = E[X | S = v] its influence values are (X - m) 1(S > v) / (1 - level)
 *   less their mean (Tasche 1999; Gribkova, Su & Zitikis 2022), m being taken from the
 *   window of order statistics that the error of v is taken from.
 *
 * Special cases
 *   Many equal rows, as under a limit or where seldom anything is ceded: they share what
 *   weight the shortfall needs of them equally.
 *
 * Accuracy
 *   Does not depend on how the rows came in blocks, to the bit. Parts add up to the shortfall
 *   to 1e-14.
 */
#include "tail.h"
#include "order_statistics.h"

#include <math.h>
#include <string.h>

static size_t rows_wanted(size_t rows, double level)
{
    return rows - window_around(rows, level).low + 1;
}

static size_t room_for(size_t rows, size_t wanted)
{
    size_t extra = wanted / 4 > 256 ? wanted / 4 : 256;
    return rows - wanted < extra ? rows : wanted + extra;
}

double tail_numbers(size_t lines, size_t rows, double level)
{
    return (double)room_for(rows, rows_wanted(rows, level)) * (double)(lines + 2);
}

status tail_prepare(tail *t, size_t lines, size_t rows, double level, pool *p)
{
    size_t wanted = rows_wanted(rows, level), room = room_for(rows, wanted);
    *t = (tail){ .lines = lines, .rows = rows, .level = level, .wanted = wanted, .room = room,
                 .cut = -INFINITY };
    t->total = pool_take(p, room, sizeof *t->total);
    t->spare = pool_take(p, room, sizeof *t->spare);
    t->parts = pool_take(p, room, lines * sizeof *t->parts);
    t->ties = pool_take(p, lines, sizeof *t->ties);
    return t->total && t->spare && t->parts && t->ties ? OK : NO_MEMORY;
}

static void tie(tail *t, const double *part, size_t stride)
{
    for (size_t j = 0; j < t->lines; j++) {
        struct ties *line = t->ties + j;
        double x = part[j * stride];
        if (t->tied == 0) *line = (struct ties){ .first = x };
        sum_add(&line->away, x - line->first);
        line->squares += (x - line->first) * (x - line->first);
    }
    t->tied++;
}

/* Raises the cut. The room holds more rows above the old one than are wanted. */
static void raise_cut(tail *t)
{
    memcpy(t->spare, t->total, t->kept * sizeof *t->spare);
    t->cut = select_order(t->spare, t->kept, t->kept - t->wanted + 1);
    t->tied = 0;
    size_t kept = 0;
    for (size_t i = 0; i < t->kept; i++) {
        const double *row = t->parts + i * t->lines;
        if (t->total[i] == t->cut) tie(t, row, 1);
        if (!(t->total[i] > t->cut)) continue;
        t->total[kept] = t->total[i];
        memmove(t->parts + kept * t->lines, row, t->lines * sizeof *row);
        kept++;
    }
    t->kept = kept;
}

static void keep(tail *t, double total, const double *part, size_t stride)
{
    if (t->kept == t->room) raise_cut(t);
    if (total < t->cut) return;
    if (total == t->cut) {
        tie(t, part, stride);
        return;
    }
    double *row = t->parts + t->kept * t->lines;
    for (size_t j = 0; j < t->lines; j++) row[j] = part[j * stride];
    t->total[t->kept++] = total;
}

void tail_add(tail *t, const double *total, const double *part, size_t n, size_t stride)
{
    for (size_t i = 0; i < n; i++)
        if (total[i] >= t->cut) keep(t, total[i], part + i, stride);
}

/* ---- measures ---- */

/* The order statistics around the value at risk, and the weights that follow from it. */
struct edge {
    double low, at, high;        /* the losses at window.low, window.k and window.high */
    bool known;                  /* errors can be told */
    double weight;               /* n (1 - level) */
    double share;                /* of that weight, what each row equal to `at` counts */
};

/* The r-th smallest of all rows, with spare holding the kept ones in order where it matters. */
static double order_among_all(const tail *t, size_t r)
{
    size_t gone = t->rows - t->kept;
    return r > gone ? t->spare[r - gone - 1] : t->cut;
}

static void select_edge(const tail *t, struct order_window w)
{
    size_t wanted[3], count = 0, gone = t->rows - t->kept;
    const size_t orders[] = { w.low, w.k, w.high };
    for (size_t i = 0; i < 3; i++)
        if (orders[i] > gone) wanted[count++] = orders[i] - gone;
    memcpy(t->spare, t->total, t->kept * sizeof *t->spare);
    select_orders(t->spare, t->kept, wanted, count);
}

static struct edge find_edge(const tail *t)
{
    struct order_window w = window_around(t->rows, t->level);
    select_edge(t, w);
    struct edge e = { .low = order_among_all(t, w.low), .at = order_among_all(t, w.k),
                      .high = order_among_all(t, w.high), .known = w.known,
                      .weight = tail_weight(t->rows, t->level) };
    size_t beyond = 0, equal = e.at == t->cut ? t->tied : 0;
    for (size_t i = 0; i < t->kept; i++) {
        beyond += t->total[i] > e.at;
        equal += t->total[i] == e.at;
    }
    e.share = (e.weight - (double)beyond) / (double)equal;
    return e;
}

/* What a row counts in the shortfall: 1 beyond the value at risk, its share at it. */
static double weight_of(const struct edge *e, double total)
{
    return total > e->at ? 1 : total == e->at ? e->share : 0;
}

/* An error from the sums over the tail of influence values times (1 - level), and of their
 * squares. */
static double error_from(const tail *t, const struct edge *e, double sum, double squares)
{
    double n = (double)t->rows, mean = sum / n;
    return e->known ? shortfall_error(squares / n - mean * mean, t->rows, e->weight) : NAN;
}

static estimate measure_total(const tail *t, const struct edge *e)
{
    double squares = 0;
    running_sum sum = { 0 };
    for (size_t i = 0; i < t->kept; i++) {
        double beyond = fmax(t->total[i] - e->at, 0);
        sum_add(&sum, beyond);
        squares += beyond * beyond;
    }
    double whole = sum_total(&sum);
    return (estimate){ e->at + whole / e->weight, error_from(t, e, whole, squares) };
}

/* the sum over the ties of a line's distances from `from` */
static double tied_away(const tail *t, size_t line, double from)
{
    const struct ties *of = t->ties + line;
    return (double)t->tied * (of->first - from) + sum_total(&of->away);
}

/* the same of their squares */
static double tied_squares(const tail *t, size_t line, double from)
{
    const struct ties *of = t->ties + line;
    double shift = of->first - from;
    return of->squares + shift * (tied_away(t, line, from) + sum_total(&of->away));
}

/* The mean of each line over the rows whose total lies in the window. */
static void means_at_edge(const tail *t, const struct edge *e, double *mean)
{
    bool ties = t->tied > 0 && t->cut >= e->low && t->cut <= e->high;
    double count = ties ? (double)t->tied : 0;
    for (size_t j = 0; j < t->lines; j++) mean[j] = ties ? tied_away(t, j, 0) : 0;
    for (size_t i = 0; i < t->kept; i++) {
        if (t->total[i] < e->low || t->total[i] > e->high) continue;
        const double *row = t->parts + i * t->lines;
        count++;
        for (size_t j = 0; j < t->lines; j++) mean[j] += row[j];
    }
    for (size_t j = 0; j < t->lines; j++) mean[j] /= count;
}

/* `mean` is that of the line at the edge */
static estimate measure_part(const tail *t, const struct edge *e, size_t line, double mean)
{
    double away = 0, squares = 0;
    running_sum sum = { 0 };
    for (size_t i = 0; i < t->kept; i++) {
        double weight = weight_of(e, t->total[i]), x = t->parts[i * t->lines + line];
        double influence = weight * (x - mean);
        sum_add(&sum, weight * x);
        away += influence;
        squares += influence * influence;
    }
    if (t->tied > 0 && t->cut == e->at) {
        sum_add(&sum, e->share * tied_away(t, line, 0));
        away += e->share * tied_away(t, line, mean);
        squares += e->share * e->share * fmax(tied_squares(t, line, mean), 0);
    }
    return (estimate){ sum_total(&sum) / e->weight, error_from(t, e, away, squares) };
}

status tail_measure(const tail *t, pool *p, estimate *value_at_risk, estimate *shortfall,
                    estimate *part)
{
    double *mean = pool_take(p, t->lines, sizeof *mean);
    if (!mean) return NO_MEMORY;
    struct edge e = find_edge(t);
    struct order_window w = window_around(t->rows, t->level);
    *value_at_risk = (estimate){ e.at, value_at_risk_error(t->rows, t->level, w, e.low, e.high) };
    *shortfall = measure_total(t, &e);
    means_at_edge(t, &e, mean);
    for (size_t j = 0; j < t->lines; j++) part[j] = measure_part(t, &e, j, mean[j]);
    return OK;
}
