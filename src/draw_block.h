/* draw_block.h - what the ways of drawing share: a block of rows, column by column.
 */
#ifndef DRAW_BLOCK_H
#define DRAW_BLOCK_H

#include "elementary.h"
#include "family.h"
#include "random.h"

#include <string.h>

/* the uniforms that the columns of rows first + start and following are made from */
void uniforms_of_block(const struct draw_rows *where, size_t start, size_t columns,
                       double (*u)[ROWS_AT_ONCE]);

/* the two uniforms that a row's chi-square or frailty is made from, which all its columns share */
void mixing_of_block(const struct draw_rows *where, size_t start, double *a, double *b);

/* moves those rows of the block that were asked for to where they go */
void store_block(const struct draw_rows *where, size_t start, size_t columns,
                 double (*u)[ROWS_AT_ONCE]);

static inline size_t rows_in_block(const struct draw_rows *where, size_t start)
{
    return where->rows - start < ROWS_AT_ONCE ? where->rows - start : ROWS_AT_ONCE;
}

/* u within [2^-53; 1 - 2^-53] */
IN_LOOPS double kept_inside(double u)
{
    double above = chosen(u > 0x1p-53, u, 0x1p-53);
    return chosen(above < 1.0 - 0x1p-53, above, 1.0 - 0x1p-53);
}

#endif
