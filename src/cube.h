/* cube.h - points that fill a unit cube of any dimension: scrambled Sobol' points, with random
 * numbers in the dimensions that those do not have.
 */
#ifndef CUBE_H
#define CUBE_H

#include "sobol.h"

struct cube_points {
    struct sobol sobol;
    uint64_t seed;
};

/* NO_MEMORY */
status cube_prepare(struct cube_points *c, size_t dimensions, uint64_t seed, pool *p);

/* the coordinates in one dimension of ROWS_AT_ONCE points from `first`, within
 * [2^-53; 1 - 2^-53] */
void cube_of_rows(const struct cube_points *c, size_t dimension, uint64_t first, double *u);

#endif
