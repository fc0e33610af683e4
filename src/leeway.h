/* leeway.h - what one entry of a correlation matrix may be, the others being as they are.
 *
 * A matrix is d x d and symmetric, matrix[i * d + j], with unit diagonal.
 */
#ifndef LEEWAY_H
#define LEEWAY_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>
#include <stddef.h>

/* The lowest and highest value of entry (row, column), counted from 0, that leaves the matrix
 * without a negative eigenvalue. The entry's own value does not matter. OUT_OF_DOMAIN when row =
 * column, when either is not below d, or when no value does, because the matrix without row or
 * without column is not feasible itself; NO_MEMORY; NOT_SETTLED when LAPACK gives up or an entry is
 * not finite. */
status entry_leeway(const double *matrix, size_t d, size_t row, size_t column, double *low,
                    double *high, pool *p);

/* The same for three lines: r_ac between these limits goes with r_ab and r_bc, both in [-1;1]
 * (Stanley & Wang 1969; Olkin 1981). */
void third_correlation(double r_ab, double r_bc, double *low, double *high);

/* Three lines, counted from 0, that cannot stand together: the lowest eigenvalue of their
 * correlations, and what the correlation of the last two may be if the other two stay. */
typedef struct {
    size_t line[3];
    double lowest, low, high;
} clash;

/* The triples whose lowest eigenvalue is below -3e-12, lowest first and at most `most` of them, and
 * how many there are in all. *found is room of the pool's; entries of the matrix must lie in
 * [-1;1]. NO_MEMORY. */
status clashing_triples(const double *matrix, size_t d, size_t most, clash **found, size_t *n_found,
                        size_t *n_all, pool *p);

#endif
