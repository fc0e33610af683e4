/* tally.h - the running account of a pricing: what is taken down of each block of losses. */
#ifndef TALLY_H
#define TALLY_H

#include "moments.h"
#include "price.h"
#include "tail.h"

/* Columns lie a little more than a block apart: at a power of two they would fall on each other in
 * the processor's cache. */
enum { TALLY_BLOCK = 2048, TALLY_STRIDE = TALLY_BLOCK + 8 };

/* The amounts of a block: line j of row i at [j * TALLY_STRIDE + i]; and each row's sums. */
struct block_amounts {
    double *line[VIEWS];
    double *total[VIEWS];
    double *before;              /* the ceded sum before the aggregate */
};

typedef struct {
    size_t lines, rows, attached, exhausted;
    double level;
    running_moments total[VIEWS];
    running_moments *line[VIEWS];
    tail tail[VIEWS];
} tally;

/* NO_MEMORY */
status block_prepare(struct block_amounts *b, size_t lines, pool *p);
status tally_prepare(tally *t, size_t lines, size_t rows, double level, pool *p);

/* Fills what is ceded and retained of the n gross losses in the block, at most TALLY_BLOCK.
 * Returns 0, or 1 + the first line with a loss that does not add up (risk.h), or 1 + the number of
 * lines when only a sum of a row does not. */
size_t block_fill(struct block_amounts *b, const cover *c, size_t n);

/* Takes down n rows of a filled block. */
void tally_add(tally *t, const cover *c, const struct block_amounts *b, size_t n);

/* The account, when all rows are in; out->of takes price_rows(lines) * VIEWS estimates.
 * NO_MEMORY. */
status tally_close(const tally *t, const cover *c, pool *p, pricing *out);

#endif
