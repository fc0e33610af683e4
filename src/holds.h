/* holds.h - whether entries held can stand together, as far as groups of lines show it.
 *
 * Shapes: matrices are d x d and symmetric, matrix[i * d + j].
 */
#ifndef HOLDS_H
#define HOLDS_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>
#include <stddef.h>

/* Looks at groups of lines whose entries are all held (firmness INFINITY): each held entry is in
 * one of them. When a group has an eigenvalue below floor - 1e-12 d, *clash is true and proof (d x
 * d, unless NULL) is S = v v' with its eigenvector v, 0 for the other lines, so that <S, X - floor
 * I> < 0 for all X that meet the holds. Holds may clash in ways that no group shows. Errors:
 * NO_MEMORY; NOT_SETTLED when LAPACK gives up. */
status clash_in_groups(const double *given, const double *firmness, size_t d, double floor,
                       bool *clash, double *proof, pool *p);

#endif
