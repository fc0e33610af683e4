/* correlations.h - matrix arguments: what is wrong with one, or a tidy copy of it. */
#ifndef CORRELATIONS_H
#define CORRELATIONS_H

#include "function.h"
#include "../src/correlation.h"

/* How far the rows and columns of a MATRIX argument are from those of the range it came in. */
size_t rows_above(const argument *a);
size_t columns_before(const argument *a);

/* The matrix row by row, for the call to change; NULL when there is no memory. */
double *own_matrix(const argument *a, report *r);

/* What is wrong with a d x d matrix that stands in a range below `above` rows and right of `before`
 * columns, as a sentence of the pool's; NULL when there is no memory. */
const char *defect_sentence(const char *name, const double *matrix, size_t d, defect found,
                            size_t above, size_t before, pool *p);

/* BAD_KIND for asymmetry, else OUT_OF_DOMAIN. */
status status_of_defect(defect found);

/* The sentence for a MATRIX argument. */
const char *defect_text(const argument *a, const double *matrix, defect found, report *r);

/* The same as a refusal. */
status refuse_defect(const argument *a, const double *matrix, defect found, report *r);

/* The matrix row by row, symmetric to the bit. Refuses what is no table of correlations. */
status take_correlations(const argument *a, double **matrix, report *r);

#endif
