/* duality.h - how far a repaired matrix can at most be from the best one. */
#ifndef DUALITY_H
#define DUALITY_H

#include "memory.h"
#include "status.h"

#include <stddef.h>

/* For a correlation matrix `x` with eigenvalues >= floor, meant to be the one with the least sum of
 * firmness x change^2 over all entries of `given` (both triangles): no other has a sum that is
 * lower than that of x by more than *gap, which is >= 0 and, for the best, as small as rounding
 * allows.
 *
 * firmness is NULL when all entries count 1; INFINITY where an entry is held, and then `proof` has
 * the multiplier of that entry, as nearest_firm() gives it (firm_repair.h); else proof may be NULL.
 * Matrices are d x d, symmetric. NO_MEMORY; NOT_SETTLED when LAPACK gives up. */
status duality_gap(const double *given, const double *firmness, const double *proof,
                   const double *x, size_t d, double floor, double *gap, pool *p);

#endif
