/* copula.h - what a copula is, and the families there are.
 *
 * A family is one file and one row of facts and functions. Nothing outside
 * that file asks which family it has before it.
 */
#ifndef COPULA_H
#define COPULA_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>
#include <stddef.h>

typedef struct family family;

/* A copula in `dimension` columns. Fields that the family has no use for are
 * zero or NULL. With rotation 90 the columns are (1-U, V), with 180 all are 1-U,
 * with 270 (U, 1-V), where U, V come from the unrotated copula. */
typedef struct {
    const family *family;
    size_t dimension;
    int rotation;              /* 0, 90, 180, 270; beyond pairs 0 or 180 */
    double theta;              /* one-parameter families */
    const double *matrix;      /* elliptical: dimension x dimension, row by row */
    const double *df;          /* t: dimension values, all alike unless grouped */
    const char **lines;        /* names of the columns, or NULL */
} copula;

#endif
