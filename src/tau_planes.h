/* tau_planes.h - counting pairs of rows 64 at a time, for columns that stand in
 * many pairs.
 *
 * A plane holds for each row one bit for each later row: whether the value there is above
 * this row's (or below it). Two planes and a count of bits give the concordant pairs.
 * It takes n^2/64 steps a pair, so it suits up to about 2,000 rows.
 */
#ifndef TAU_PLANES_H
#define TAU_PLANES_H

#include "tau.h"

struct planes {
    uint64_t *above, *below;     /* by row, then by word of 64 later rows; below may be NULL */
    uint64_t *observed;          /* one bit a row */
};

/* the words of one plane, and of the bits of the rows */
size_t plane_words(size_t rows);
size_t row_words(size_t rows);

/* Fills the planes of a column; `passed` is room for row_words(rows) words. */
void fill_planes(const ranking *r, struct planes *planes, uint64_t *passed);

/* The counts of two columns of the same length, over the rows that both have. Unless both columns
 * are without gaps and ties, both planes must be there. */
void tau_count_planes(const ranking *x, const struct planes *in_x,
                      const ranking *y, const struct planes *in_y, struct tau_counts *c);

#endif
