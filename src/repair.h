/* repair.h - the nearest correlation matrix.
 *
 * Shapes: matrices are d x d and symmetric, matrix[i * d + j].
 */
#ifndef REPAIR_H
#define REPAIR_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>
#include <stddef.h>

/* How an iteration went. */
typedef struct {
    size_t iterations;          /* steps taken; 0 when the given matrix was fine already */
    size_t decompositions;      /* eigendecompositions, which is where the time goes */
} course;

/* Of all symmetric matrices with unit diagonal and eigenvalues >= floor, the one nearest to `given`
 * in the sum of squared changes (Higham 2002), by the method of Qi & Sun (2006). floor is in [0;1).
 * The diagonal of `given` does not matter and its entries may lie outside [-1;1]; one triangle is
 * read. A matrix with unit diagonal that is feasible at floor (correlation.h) comes back bit for
 * bit. The result is symmetric to the bit, its diagonal is exactly 1, its lowest eigenvalue is >=
 * floor to rounding. `nearest` may be `given`; `how` may be NULL.
 * Errors: OUT_OF_DOMAIN for a floor outside [0;1), d = 0 or d > 30,000; NOT_SETTLED when the
 * iteration does not settle, which takes entries that are far off and a floor above 0.9999, or when
 * an entry is not finite; NO_MEMORY.
 */
status nearest_correlation(const double *given, size_t d, double floor, double *nearest,
                           course *how, pool *p);

#endif
