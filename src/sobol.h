/* sobol.h - scrambled Sobol' points: numbers that fill the unit cube more evenly than
 * independent ones.
 */
#ifndef SOBOL_H
#define SOBOL_H

#include "memory.h"
#include "random.h"
#include "status.h"

enum { SOBOL_DIMENSIONS = 130, SOBOL_BITS = 52 };

struct sobol_direction {
    uint16_t polynomial, initial[10];
};

extern const struct sobol_direction sobol_directions[SOBOL_DIMENSIONS - 1];

/* the direction numbers of a dimension from 0, unscrambled: the bits of a point after the binary
 * point are the sum without carry of those numbers v[k] whose bit k is set in the point's index */
void sobol_columns(size_t dimension, uint64_t v[SOBOL_BITS]);

/* The scrambled direction numbers of some dimensions under a seed. */
struct sobol {
    size_t dimensions;
    uint64_t (*column)[SOBOL_BITS];
    uint64_t *shift;
};

/* OUT_OF_DOMAIN for more than SOBOL_DIMENSIONS; NO_MEMORY */
status sobol_prepare(struct sobol *s, size_t dimensions, uint64_t seed, pool *p);

/* the coordinates in one dimension of ROWS_AT_ONCE points from `first`, within
 * [2^-53; 1 - 2^-53] */
void sobol_of_rows(const struct sobol *s, size_t dimension, uint64_t first, double *u);

#endif
