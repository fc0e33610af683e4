/* tally.c - a block of losses, what is ceded of it, and the account of all blocks.
 *
 * Method
 *   Terms by terms.c, moments by moments.c, order statistics by tail.c.
 *
 * Special cases
 *   Without an aggregate a cover is exhausted when every line with terms of its own is;
 *   followers have none. With an open limit it never is, and the probability is undefined.
 *
 * Accuracy
 *   Sums of a row are taken line by line in order, so that simulated and given losses agree.
 */
#include "tally.h"
#include "random.h"

#include <math.h>

status block_prepare(struct block_amounts *b, size_t lines, pool *p)
{
    bool fine = true;
    for (int v = 0; v < VIEWS; v++) {
        b->line[v] = pool_take(p, lines * TALLY_STRIDE, sizeof(double));
        b->total[v] = pool_take(p, TALLY_BLOCK, sizeof(double));
        fine = fine && b->line[v] && b->total[v];
    }
    b->before = pool_take(p, TALLY_BLOCK, sizeof(double));
    return fine && b->before ? OK : NO_MEMORY;
}

status tally_prepare(tally *t, size_t lines, size_t rows, double level, pool *p)
{
    *t = (tally){ .lines = lines, .rows = rows, .level = level };
    for (int v = 0; v < VIEWS; v++) {
        t->line[v] = pool_take_zeroed(p, lines, sizeof *t->line[v]);
        if (!t->line[v]) return NO_MEMORY;
        status s = tail_prepare(t->tail + v, lines, rows, level, p);
        if (s != OK) return s;
    }
    return OK;
}

/* ---- a block ---- */

static void add_lines(const double *line, size_t lines, size_t n, double *restrict total)
{
    for (size_t i = 0; i < n; i++) total[i] = line[i];
    for (size_t j = 1; j < lines; j++) {
        const double *restrict x = line + j * TALLY_STRIDE;
        for (size_t i = 0; i < n; i++) total[i] += x[i];
    }
}

/* The first of some columns with an amount that does not add up (risk.h), or their number. */
FOR_EACH_PROCESSOR
static size_t first_too_large(const double *column, size_t columns, size_t n)
{
    for (size_t j = 0; j < columns; j++) {
        size_t without = 0;
        for (size_t i = 0; i < n; i++) without += !adds_up(column[j * TALLY_STRIDE + i]);
        if (without) return j;
    }
    return columns;
}

static bool sums_too_large(const struct block_amounts *b, size_t n)
{
    bool fine = first_too_large(b->before, 1, n) == 1;
    for (int v = 0; v < VIEWS; v++) fine = fine && first_too_large(b->total[v], 1, n) == 1;
    return !fine;
}

size_t block_fill(struct block_amounts *b, const cover *c, size_t n)
{
    size_t large = first_too_large(b->line[GROSS], c->lines, n);
    if (large < c->lines) return 1 + large;
    cede(c, b->line[GROSS], n, TALLY_STRIDE, b->line[CEDED], b->before);
    for (size_t j = 0; j < c->lines; j++) {
        const double *gross = b->line[GROSS] + j * TALLY_STRIDE;
        const double *ceded = b->line[CEDED] + j * TALLY_STRIDE;
        double *restrict retained = b->line[RETAINED] + j * TALLY_STRIDE;
        for (size_t i = 0; i < n; i++) retained[i] = gross[i] - ceded[i];
    }
    for (int v = 0; v < VIEWS; v++) add_lines(b->line[v], c->lines, n, b->total[v]);
    return sums_too_large(b, n) ? 1 + c->lines : 0;
}

/* ---- attaching and exhausting ---- */

static bool own_terms(const cover *c, size_t line)
{
    return c->leader[line] == line;
}

/* whether it can be said when the cover is exhausted */
static bool limited(const cover *c)
{
    if (c->aggregate) return isfinite(c->aggregate->limit);
    for (size_t j = 0; c->of && j < c->lines; j++)
        if (own_terms(c, j) && !isfinite(c->of[j].limit)) return false;
    return c->of != NULL;
}

static size_t count_attached(const cover *c, const struct block_amounts *b, size_t n)
{
    size_t count = 0;
    for (size_t i = 0; i < n; i++) {
        bool attached = c->aggregate && b->before[i] > c->aggregate->excess;
        for (size_t j = 0; !c->aggregate && !attached && j < c->lines; j++)
            attached = b->line[CEDED][j * TALLY_STRIDE + i] > 0;
        count += attached;
    }
    return count;
}

static bool lines_exhausted(const cover *c, const struct block_amounts *b, size_t i)
{
    for (size_t j = 0; j < c->lines; j++) {
        double loss = b->line[GROSS][j * TALLY_STRIDE + i];
        if (own_terms(c, j) && !(loss >= c->of[j].excess + c->of[j].limit)) return false;
    }
    return true;
}

static size_t count_exhausted(const cover *c, const struct block_amounts *b, size_t n)
{
    if (!limited(c)) return 0;
    size_t count = 0;
    for (size_t i = 0; i < n; i++)
        count += c->aggregate ? b->before[i] >= c->aggregate->excess + c->aggregate->limit
                              : lines_exhausted(c, b, i);
    return count;
}

/* ---- the account ---- */

void tally_add(tally *t, const cover *c, const struct block_amounts *b, size_t n)
{
    for (int v = 0; v < VIEWS; v++) {
        moments_add(t->total + v, b->total[v], n);
        for (size_t j = 0; j < t->lines; j++)
            moments_add(t->line[v] + j, b->line[v] + j * TALLY_STRIDE, n);
        tail_add(t->tail + v, b->total[v], b->line[v], n, TALLY_STRIDE);
    }
    t->attached += count_attached(c, b, n);
    t->exhausted += count_exhausted(c, b, n);
}

static estimate share_of_rows(size_t count, size_t rows)
{
    double n = (double)rows, p = (double)count / n;
    return (estimate){ p, rows > 1 ? sqrt(p * (1 - p) / (n - 1)) : NAN };
}

static status close_view(const tally *t, enum view v, pool *p, pricing *out)
{
    estimate *part = pool_take(p, t->lines, sizeof *part), *of = out->of + v;
    if (!part) return NO_MEMORY;
    status s = tail_measure(t->tail + v, p, of + PRICE_VALUE_AT_RISK * VIEWS,
                            of + PRICE_SHORTFALL * VIEWS, part);
    if (s != OK) return s;
    of[PRICE_MEAN * VIEWS] = moments_mean(t->total + v);
    of[PRICE_SD * VIEWS] = moments_sd(t->total + v);
    for (size_t j = 0; j < t->lines; j++) {
        of[(PRICE_LINES + j) * VIEWS] = moments_mean(t->line[v] + j);
        of[(PRICE_LINES + t->lines + j) * VIEWS] = part[j];
    }
    return OK;
}

status tally_close(const tally *t, const cover *c, pool *p, pricing *out)
{
    for (size_t i = 0; i < price_rows(t->lines) * VIEWS; i++) out->of[i] = (estimate){ NAN, NAN };
    out->of[PRICE_ATTACHING * VIEWS + CEDED] = share_of_rows(t->attached, t->rows);
    if (limited(c))
        out->of[PRICE_EXHAUSTING * VIEWS + CEDED] = share_of_rows(t->exhausted, t->rows);
    status s = OK;
    for (int v = 0; v < VIEWS && s == OK; v++) s = close_view(t, (enum view)v, p, out);
    return s;
}
