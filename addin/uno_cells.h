/* uno_cells.h - from what the office passes to values, and back. */
#ifndef UNO_CELLS_H
#define UNO_CELLS_H

#include "uno_c.h"
#include "value.h"
#include "../src/memory.h"

/* An argument of a cell function as a value, in memory of the pool.
 *   void                             left out
 *   double, boolean, any whole type  a number, as it is: also infinite ones
 *   string                           a text, also ""
 *   [][]any, [][]double ... and      a table, row by row; a void and "" are gaps.
 *   []any of []any, as Python has it
 *   []any, []double ...              a table of one row
 * BAD_KIND for every other type, for rows of different length and for a table without a
 * cell; NO_MEMORY. */
status value_from_any(const uno_Any *any, value *v, pool *p);

/* A number as the office passes it: a NaN that carries one of its errors, as inside the array of a
 * nested function, becomes our fault. */
double own_number(double x);

/* Constructs the answer in raw memory: a number, text or table, or the office's error for the
 * status. An answer for which there is no memory becomes the error for that. */
void answer_any(uno_Any *ret, status s, const value *v);

#endif
