/* shape.h - results in the shape of the range that they come from. */
#ifndef SHAPE_H
#define SHAPE_H

#include "function.h"

/* A result table from column-wise numbers as many as those of the argument, below the
 * argument's own header row when it had one. A gap stays empty. */
status table_like(const argument *a, const samples *s, value *out, report *r);

/* row of the argument's range, counted from 1, in which row i of its data stands */
static inline size_t row_in_range(const argument *a, size_t i)
{
    return i + 1 + a->header;
}

#endif
