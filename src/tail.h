/* tail.h - the worst rows of a long run of losses, kept while it runs, so that risk measures and
 * their parts by line need memory for the tail alone.
 */
#ifndef TAIL_H
#define TAIL_H

#include "memory.h"
#include "risk.h"
#include "running_sum.h"
#include "status.h"

#include <stddef.h>

/* One line in the rows equal to the cut: how far they lie from the first of them. */
struct ties {
    double first, squares;
    running_sum away;
};

/* Every row above `cut` is kept; of those equal to it only count and sums; the rest is gone. */
typedef struct {
    size_t lines, rows;          /* how many rows there will be in all */
    double level;
    size_t wanted;               /* how many of the worst rows have to be told apart */
    size_t room, kept;
    double *total;               /* of each row kept */
    double *parts;               /* lines numbers a row */
    double *spare;               /* room for a copy of total */
    double cut;
    size_t tied;
    struct ties *ties;           /* of each line; unset while none is tied */
} tail;

/* Room for a run of `rows` rows (1 or more); the level is in (0;1). NO_MEMORY. */
status tail_prepare(tail *t, size_t lines, size_t rows, double level, pool *p);

/* how many numbers tail_prepare() takes room for */
double tail_numbers(size_t lines, size_t rows, double level);

/* Takes in n more rows: line j of row i is at part[j * stride + i] and adds to total[i]. */
void tail_add(tail *t, const double *total, const double *part, size_t n, size_t stride);

/* When all rows are in: value at risk and expected shortfall as in risk.h, and the part of each
 * line in the shortfall, the mean of its losses over the same rows with the same weights
 * (Tasche 1999), so that the parts add up to it. Rows equal to the value at risk share their
 * weight equally. Errors by influence values. NO_MEMORY. */
status tail_measure(const tail *t, pool *p, estimate *value_at_risk, estimate *shortfall,
                    estimate *part);

#endif
