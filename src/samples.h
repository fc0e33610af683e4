/* samples.h - a table of observations, the shape in which data reaches the core.
 *
 * Column by column: observation i of line j is at[j * rows + i]. A gap, where
 * the observation is missing, is any NaN.
 */
#ifndef SAMPLES_H
#define SAMPLES_H

#include <stdbool.h>
#include <stddef.h>

typedef struct {
    size_t rows, cols;
    double *at;
    const char **names;      /* one for each column, or NULL when there were none */
} samples;

static inline bool is_gap(double x) { return x != x; }

static inline double *column(const samples *s, size_t j) { return s->at + j * s->rows; }

#endif
