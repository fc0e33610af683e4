/* cube.c - points that fill a unit cube of any dimension */
#include "cube.h"

#include <stdbool.h>

status cube_prepare(struct cube_points *c, size_t dimensions, uint64_t seed, pool *p)
{
    c->seed = seed;
    size_t within = dimensions < SOBOL_DIMENSIONS ? dimensions : SOBOL_DIMENSIONS;
    return sobol_prepare(&c->sobol, within, seed, p);
}

/* Random numbers come in twos. */
void cube_of_rows(const struct cube_points *c, size_t dimension, uint64_t first, double *u)
{
    double other[ROWS_AT_ONCE];
    if (dimension < c->sobol.dimensions) {
        sobol_of_rows(&c->sobol, dimension, first, u);
        return;
    }
    bool odd = dimension % 2;
    uniforms_of_rows(c->seed, FOR_CUBE, first, (uint32_t)(dimension / 2), odd ? other : u,
                     odd ? u : other);
}
