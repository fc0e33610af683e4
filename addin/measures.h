/* measures.h - what the adaptors for measures of dependence share: the sentences, and
 * filling a symmetric grid.
 */
#ifndef MEASURES_H
#define MEASURES_H

#include "function.h"
#include "../src/gaps.h"

/* Tells how many of the rows up to the last filled one were used. */
void remark_rows(size_t used, size_t filled, const char *dropped_for, report *r);

/* The same for a grid, whose pairs may each use their own rows. */
void remark_grid_rows(bool by_rows, size_t used, size_t filled, report *r);

/* The rows up to the last in which one of both columns is filled. */
size_t filled_in_either(const argument *x, const argument *y);

/* Refuses with the reason that a measure of x and y (`what`) gave in `s` for `used` common rows;
 * hands OK and NO_MEMORY back. */
status refuse_measure(status s, size_t used, size_t least, const argument *x, const argument *y,
                      const char *what, report *r);

/* A d x d table of figure(i, j), taken for j <= i. A status other than OK goes into the pair's own
 * cells, except for NO_MEMORY. */
status symmetric_grid(size_t d, status (*figure)(void *with, size_t i, size_t j, double *x),
                      void *with, value *out, report *r);

#endif
