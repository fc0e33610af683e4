/* price.h - what a cover costs: gross, ceded and retained losses of simulated or given periods.
 *
 * One row is one period. Rows are worked on in blocks and then forgotten, but for the worst of
 * them.
 */
#ifndef PRICE_H
#define PRICE_H

#include "copula.h"
#include "distribution.h"
#include "memory.h"
#include "risk.h"
#include "samples.h"
#include "scheme.h"
#include "status.h"
#include "terms.h"

#include <stdint.h>

/* The three sides of a cover. Everything is computed for each. */
enum view { GROSS, CEDED, RETAINED, VIEWS };

/* What is computed, in this order; from PRICE_LINES on there is the mean of each line and then
 * the part of each line in the shortfall of that view. Attaching and exhausting belong to CEDED
 * alone. */
enum price_row {
    PRICE_MEAN, PRICE_SD, PRICE_ATTACHING, PRICE_EXHAUSTING, PRICE_VALUE_AT_RISK, PRICE_SHORTFALL,
    PRICE_LINES
};

/* Estimate of row r in view v: of[r * VIEWS + v]. A value that is undefined is NaN, such as
 * exhausting where there is no limit, and so is an error that the rows are too few to tell. */
typedef struct {
    size_t lines, rows;
    double level;
    estimate *of;
    size_t overflowed;           /* when the status is OUT_OF_DOMAIN: 1 + the line with a loss too
                                    large to add up (risk.h), 1 + lines when that is a sum of a
                                    row, or 0 */
} pricing;

/* how many rows there are: price_rows(lines) */
size_t price_rows(size_t lines);

/* how many numbers a pricing keeps while it runs, so that a caller can refuse too many: the
 * tail, and under SCHEME_LATIN a whole part of the draw */
double price_numbers(size_t lines, size_t rows, double level, scheme how);

/* Losses that are there already, without gaps. The level is in (0;1). Attaching: with an
 * aggregate, the share of rows in which the ceded sum before it is larger than its excess, else
 * in which anything is ceded. Exhausting: with an aggregate, the ceded sum before it reaches
 * excess + limit; else every line that follows no other reaches its own excess + limit;
 * undefined when a limit is open. Errors are those of independent rows. TOO_FEW without a row;
 * OUT_OF_DOMAIN; NO_MEMORY. */
status price_losses(const samples *losses, const cover *c, double level, pool *p, pricing *out);

struct simulation {
    const copula *model;
    const struct margins *margins;        /* as many as the model has columns */
    const samples *given;                 /* for the distribution `sample`, or NULL */
    const cover *cover;
    uint64_t seed;
    size_t rows;
    scheme how;
    double level;
};

/* The same for losses drawn from a model: under SCHEME_PLAIN what price_losses() gives for the
 * losses at the uniforms of draw(), to the last bits. Under the other schemes rows depend on
 * each other: they are drawn in PRICE_REPLICATES parts with seeds of their own (one row each
 * when there are fewer rows), and errors come from the spread of the parts; those of tail
 * figures are NaN while a part has too few rows in its tail (window_around()). Also whatever
 * draw_by_scheme() and quantiles_prepare() answer. */
enum { PRICE_REPLICATES = 16 };
status price_model(const struct simulation *s, pool *p, pricing *out);

#endif
