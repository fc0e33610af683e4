/* price.c - pricing of given losses and of a model.
 *
 * Method
 *   Rows in blocks through tally.c. A model is drawn many rows at a time (draw.h), each column
 *   through the quantile function of its line (quantiles.h). Where rows are not independent,
 *   the error of every figure is the standard deviation of PRICE_REPLICATES independent parts
 *   over the root of their number, that of a tail figure only where each part has a tail.
 *
 * Special cases
 *   A loss too large to add up, as heavy tails can give, ends the pricing.
 *
 * Accuracy
 *   Given and simulated losses take the same path from the loss on.
 */
#include "price.h"
#include "quantiles.h"
#include "random.h"
#include "tally.h"

#include <math.h>
#include <string.h>

enum { NUMBERS_AT_ONCE = 1 << 19 };

size_t price_rows(size_t lines)
{
    return PRICE_LINES + 2 * lines;
}

/* the rows of part k when `rows` are cut into as even parts as they can be */
static size_t rows_of_part(size_t rows, size_t parts, size_t k)
{
    return rows / parts + (k < rows % parts);
}

static size_t parts_of(scheme how, size_t rows)
{
    if (how == SCHEME_PLAIN) return 1;
    return rows < PRICE_REPLICATES ? rows : PRICE_REPLICATES;
}

double price_numbers(size_t lines, size_t rows, double level, scheme how)
{
    size_t at_once = how == SCHEME_LATIN ? rows_of_part(rows, parts_of(how, rows), 0) : 0;
    return VIEWS * tail_numbers(lines, rows, level) + (double)at_once * (double)lines;
}

static status pricing_prepare(pricing *out, size_t lines, size_t rows, double level, pool *p)
{
    *out = (pricing){ .lines = lines, .rows = rows, .level = level };
    out->of = pool_take(p, price_rows(lines) * VIEWS, sizeof *out->of);
    return out->of ? OK : NO_MEMORY;
}

static size_t smaller(size_t a, size_t b)
{
    return a < b ? a : b;
}

status price_losses(const samples *losses, const cover *c, double level, pool *p, pricing *out)
{
    struct block_amounts block;
    tally t;
    if (losses->rows == 0) return TOO_FEW;
    status s = pricing_prepare(out, c->lines, losses->rows, level, p);
    if (s == OK) s = block_prepare(&block, c->lines, p);
    if (s == OK) s = tally_prepare(&t, c->lines, losses->rows, level, p);
    for (size_t first = 0; s == OK && first < losses->rows; first += TALLY_BLOCK) {
        size_t n = smaller(TALLY_BLOCK, losses->rows - first);
        for (size_t j = 0; j < c->lines; j++)
            memcpy(block.line[GROSS] + j * TALLY_STRIDE, column(losses, j) + first,
                   n * sizeof(double));
        out->overflowed = block_fill(&block, c, n);
        if (out->overflowed) return OUT_OF_DOMAIN;
        tally_add(&t, c, &block, n);
    }
    return s == OK ? tally_close(&t, c, p, out) : s;
}

/* ---- a model ---- */

/* What a simulation needs beside its tallies. */
struct workshop {
    const struct simulation *of;
    const quantiles **margin;
    struct block_amounts block;
    size_t at_once;              /* rows of a draw */
    double *u;
};

static status workshop_prepare(struct workshop *w, const struct simulation *of, pool *p)
{
    size_t lines = of->margins->lines, most = NUMBERS_AT_ONCE / lines / TALLY_BLOCK * TALLY_BLOCK;
    *w = (struct workshop){ .of = of, .at_once = most ? most : TALLY_BLOCK };
    if (of->how == SCHEME_LATIN)
        w->at_once = rows_of_part(of->rows, parts_of(of->how, of->rows), 0);
    w->u = pool_take(p, lines * w->at_once, sizeof *w->u);
    w->margin = pool_take(p, lines, sizeof *w->margin);
    if (!w->u || !w->margin) return NO_MEMORY;
    status s = block_prepare(&w->block, lines, p);
    for (size_t j = 0; j < lines && s == OK; j++)
        s = quantiles_prepare(of->margins->of + j, of->given, of->rows, p, w->margin + j);
    return s;
}

/* Rows of the draw in w->u, from `first` on, into each of the tallies. */
static size_t take_down(struct workshop *w, size_t first, size_t n, tally *const *into,
                        size_t tallies)
{
    const cover *c = w->of->cover;
    for (size_t j = 0; j < c->lines; j++)
        losses_at(w->margin[j], w->u + j * w->at_once + first, n,
                  w->block.line[GROSS] + j * TALLY_STRIDE);
    size_t overflowed = block_fill(&w->block, c, n);
    for (size_t k = 0; k < tallies && !overflowed; k++) tally_add(into[k], c, &w->block, n);
    return overflowed;
}

/* Draws `rows` rows under a seed into the tallies. */
static status simulate(struct workshop *w, uint64_t seed, size_t rows, tally *const *into,
                       size_t tallies, pool *p, pricing *out)
{
    for (size_t drawn = 0; drawn < rows; drawn += w->at_once) {
        size_t n = smaller(w->at_once, rows - drawn);
        status s = draw_by_scheme(w->of->model, w->of->how, seed, drawn, n, w->u, w->at_once, p);
        if (s != OK) return s;
        for (size_t first = 0; first < n; first += TALLY_BLOCK) {
            out->overflowed = take_down(w, first, smaller(TALLY_BLOCK, n - first), into, tallies);
            if (out->overflowed) return OUT_OF_DOMAIN;
        }
    }
    return OK;
}

/* What the parts of a draw give, one after another. */
struct spread { double mean, squares; };

static void take_part(struct spread *to, const pricing *part, size_t k)
{
    for (size_t i = 0; i < price_rows(part->lines) * VIEWS; i++) {
        double away = part->of[i].value - to[i].mean;
        to[i].mean += away / (double)(k + 1);
        to[i].squares += away * (part->of[i].value - to[i].mean);
    }
}

/* The error of the mean of so many parts. */
static double error_of(const struct spread *s, size_t parts)
{
    double n = (double)parts;
    return parts > 1 ? sqrt(s->squares / (n - 1) / n) : NAN;
}

/* whether a figure rests on the tail alone */
static bool of_tail(size_t row, size_t lines)
{
    return row == PRICE_VALUE_AT_RISK || row == PRICE_SHORTFALL || row >= PRICE_LINES + lines;
}

/* Errors from the spread of the parts. A part that is too short to hold a tail answers with
 * about its largest losses, whatever the level: such parts differ, but not as their true
 * figures would. */
static void put_errors(const struct spread *spread, size_t parts, pricing *out)
{
    size_t shortest = rows_of_part(out->rows, parts, parts - 1);
    bool tail_known = window_around(shortest, out->level).known;
    for (size_t i = 0; i < price_rows(out->lines) * VIEWS; i++) {
        bool known = !isnan(out->of[i].value) && (tail_known || !of_tail(i / VIEWS, out->lines));
        out->of[i].error = known ? error_of(spread + i, parts) : NAN;
    }
}

/* Draws part k of the rows into the tally of all of them and into one of its own. */
static status price_part(struct workshop *w, size_t k, size_t parts, tally *all, struct spread *to,
                         pool *p, pricing *out)
{
    const struct simulation *of = w->of;
    size_t rows = rows_of_part(of->rows, parts, k);
    pricing part;
    tally own, *const into[] = { all, &own };
    status s = pricing_prepare(&part, out->lines, rows, of->level, p);
    if (s == OK) s = tally_prepare(&own, out->lines, rows, of->level, p);
    if (s == OK) s = simulate(w, seed_of_replicate(of->seed, k), rows, into, 2, p, out);
    if (s == OK) s = tally_close(&own, of->cover, p, &part);
    if (s == OK) take_part(to, &part, k);
    return s;
}

static status price_in_parts(struct workshop *w, tally *all, pool *p, pricing *out)
{
    const struct simulation *of = w->of;
    size_t figures = price_rows(out->lines) * VIEWS, parts = parts_of(of->how, of->rows);
    struct spread *spread = pool_take_zeroed(p, figures, sizeof *spread);
    status s = spread ? OK : NO_MEMORY;
    for (size_t k = 0; k < parts && s == OK; k++) {
        struct block *mark = p->last;
        s = price_part(w, k, parts, all, spread, p, out);
        pool_back_to(p, mark);
    }
    if (s == OK) s = tally_close(all, of->cover, p, out);
    if (s == OK) put_errors(spread, parts, out);
    return s;
}

static status price_plain(struct workshop *w, tally *all, pool *p, pricing *out)
{
    tally *const into[] = { all };
    status s = simulate(w, w->of->seed, w->of->rows, into, 1, p, out);
    return s == OK ? tally_close(all, w->of->cover, p, out) : s;
}

status price_model(const struct simulation *of, pool *p, pricing *out)
{
    struct workshop w;
    tally all;
    if (of->rows == 0) return TOO_FEW;
    status s = pricing_prepare(out, of->margins->lines, of->rows, of->level, p);
    if (s == OK) s = workshop_prepare(&w, of, p);
    if (s == OK) s = tally_prepare(&all, out->lines, of->rows, of->level, p);
    if (s != OK) return s;
    return of->how == SCHEME_PLAIN ? price_plain(&w, &all, p, out)
                                   : price_in_parts(&w, &all, p, out);
}
