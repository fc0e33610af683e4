/* gaps.h - leaving out the rows in which something is missing. */
#ifndef GAPS_H
#define GAPS_H

#include "memory.h"
#include "samples.h"
#include "status.h"

/* How a table with gaps is used: each pair of columns with the rows that both have, or all columns
 * with the complete rows only. */
typedef enum { GAPS_BY_PAIRS, GAPS_BY_ROWS } gap_rule;

/* Copies the rows in which neither x nor y is a gap; returns how many. With weights (else NULL),
 * rows whose weight is 0 or a gap are left out too. The copies may lie where the originals are. */
size_t complete_pairs(const double *x, const double *y, const double *weight, size_t n,
                      double *x_out, double *y_out, double *weight_out);

/* The rows without a gap in any column, the samples themselves when all are. OK or NO_MEMORY. */
status complete_rows(const samples *s, samples *complete, pool *p);

#endif
