/* correlation.h - looking at correlation matrices.
 *
 * A matrix is d x d, matrix[i * d + j] in row i and column j. Functions that need a symmetric
 * matrix read one triangle only: matrix_defect() says whether a square is one, and
 * tidy_matrix() makes it one to the bit.
 */
#ifndef CORRELATION_H
#define CORRELATION_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>
#include <stddef.h>

/* The lowest eigenvalue. Errors: NO_MEMORY; OUT_OF_DOMAIN for d = 0 or beyond 30,000; NOT_SETTLED
 * when LAPACK gives up or an entry is not finite. */
status lowest_eigenvalue(const double *matrix, size_t d, double *lowest, pool *p);

/* All d eigenvalues, largest first. Errors as above. */
status all_eigenvalues(const double *matrix, size_t d, double *eigenvalues, pool *p);

/* Whether the lowest eigenvalue is at least floor - 1e-12 d, which is what feasible means
 * everywhere in Jointsheet: rounding alone cannot make a singular matrix infeasible. Errors as
 * above. */
status matrix_feasible(const double *matrix, size_t d, double floor, bool *feasible, pool *p);

/* Whether matrix - floor I has a Cholesky factor: true only when the matrix is feasible at floor,
 * but rounding may make it false for one that is. Several times faster. Error: NO_MEMORY. */
status lies_above(const double *matrix, size_t d, double floor, bool *above, pool *p);

/* Whether each entry of the diagonal is exactly 1. */
bool unit_diagonal(const double *matrix, size_t d);

/* What keeps a square from being a table of correlations, feasible or not. */
typedef struct {
    enum { NO_DEFECT, NOT_SYMMETRIC, DIAGONAL_NOT_ONE, OUTSIDE_UNIT } what;
    size_t row, column;      /* where, counted from 0 */
} defect;

/* The first defect, going row by row: a diagonal that is not 1, an entry outside [-1;1], or one
 * that differs from its mirror image; all beyond 1e-9, which is what rounding in a sheet can leave
 * behind. */
defect matrix_defect(const double *matrix, size_t d);

/* A matrix without defect made symmetric to the bit (the mean of both entries), with a diagonal of
 * exactly 1 and nothing outside [-1;1]. Returns whether any entry had to change. In place. */
bool tidy_matrix(double *matrix, size_t d);

#endif
