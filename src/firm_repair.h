/* firm_repair.h - the nearest correlation matrix when some entries are firmer than others.
 *
 * Shapes: matrices are d x d and symmetric, matrix[i * d + j]; one triangle of what is given is
 * read.
 */
#ifndef FIRM_REPAIR_H
#define FIRM_REPAIR_H

#include "repair.h"

/* Of all symmetric matrices with unit diagonal and eigenvalues >= floor, the one with the least sum
 * of firmness x change^2. A firmness is positive and finite, or INFINITY for an entry that is held:
 * it keeps its value to the bit. The diagonals of `given` and `firmness` do not matter. A matrix
 * with unit diagonal that is feasible at floor comes back bit for bit. The result is symmetric to
 * the bit, has a diagonal of exactly 1 and no eigenvalue below floor - 1e-12 d.
 *
 * `proof`, unless NULL, receives a matrix S without negative eigenvalues that proves the answer.
 * For a result X, S = firmness x (X - given) off the diagonal where nothing is held, and S (X -
 * floor I) = 0. When the entries held cannot be met, S shows it: for each matrix X that meets them
 * <S, X - floor I> < 0; the rows in which S is not zero are those that clash.
 *
 * Errors: OUT_OF_DOMAIN for a floor outside [0;1), a firmness that is not positive, d = 0 or d >
 * 30,000, and for entries held that cannot be met together, in which case *clash is true;
 * NOT_SETTLED; NO_MEMORY. `how`, `clash` and `proof` may be NULL. */
status nearest_firm(const double *given, const double *firmness, size_t d, double floor,
                    double *nearest, double *proof, bool *clash, course *how, pool *p);

#endif
