/* square.h - squares of cells that need not be full: firmness, and triangles to be mirrored. */
#ifndef SQUARE_H
#define SQUARE_H

#include "report.h"

/* The part of a range that is the square, behind a header row and a name column where there are
 * any. */
typedef struct {
    const char *name;        /* of the parameter */
    const table *cells;
    size_t row, column, d;   /* its first row and column, its size */
} square;

/* Finds a square of d x d cells. A range one row higher has a header, one column wider has names.
 * BAD_KIND for any other size. */
status square_of_size(const char *name, const value *v, size_t d, square *found, report *r);

/* Finds a square of any size. One row more than columns is a header, one column more are names; a
 * square range has both when its first row and column hold text and no number and the rest holds a
 * number. */
status square_of_any_size(const char *name, const value *v, square *found, report *r);

/* Names around the square must be those of another argument; empty ones are no names. */
status check_names(const square *s, const char **names, const char *other, report *r);

/* The cell that counts for row i and column j: itself, or the opposite one when it is empty. A gap
 * when both are. BAD_KIND when both are filled and differ. */
status cell_or_opposite(const square *s, size_t i, size_t j, value *cell, report *r);

#endif
