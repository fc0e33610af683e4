/* tau_grid.h - Kendall's tau of every pair of columns of a table. */
#ifndef TAU_GRID_H
#define TAU_GRID_H

#include "samples.h"
#include "tau.h"

/* Columns made ready, each once, for any of their pairs. */
struct tau_grid;

/* How pairs are counted: by what suits the size, or, for tests, always in one way. All agree
 * exactly. */
typedef enum { COUNT_AS_SUITS, COUNT_BY_PLANES, COUNT_BY_RANKS } counting;

/* Makes ready. Each pair later uses the rows that both columns have; for complete rows only, hand
 * in complete_rows() (gaps.h). OK, NO_MEMORY, or OUT_OF_DOMAIN beyond 2^32 - 2 rows. */
status new_tau_grid(const samples *s, counting how, struct tau_grid **grid, pool *p);

/* The counts of columns i and j. */
void tau_grid_counts(struct tau_grid *grid, size_t i, size_t j, struct tau_counts *c);

/* The ranking of column j. */
const ranking *tau_grid_ranking(const struct tau_grid *grid, size_t j);

#endif
