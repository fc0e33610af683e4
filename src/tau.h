/* tau.h - Kendall's tau of a pair of columns. */
#ifndef TAU_H
#define TAU_H

#include "memory.h"
#include "ranks.h"
#include "status.h"

/* What Kendall's measures are made of. Each pair of rows is concordant, discordant or tied:
 * pairs = concordant + discordant + tied_x + tied_y - tied_both. */
struct tau_counts {
    uint64_t rows;           /* rows with both observations */
    uint64_t pairs;          /* rows (rows - 1) / 2 */
    uint64_t concordant, discordant;
    uint64_t tied_x, tied_y; /* those tied in both are in either */
    uint64_t tied_both;
};

/* Counts the pairs of rows of x and y, n values each; rows with a gap in either are left out. Exact
 * for every n. OK or NO_MEMORY, or OUT_OF_DOMAIN beyond 2^32 - 2 rows. */
status tau_count(const double *x, const double *y, size_t n, struct tau_counts *c, pool *p);

/* Kendall's tau-b, (C - D)/sqrt((P - Tx)(P - Ty)) (Kendall 1945), without ties the same as tau-a.
 * In [-1;1]; exactly 1 or -1 for perfect dependence; x and y may change places without changing a
 * bit. TOO_FEW under two rows, NO_VARIATION if a column is constant. */
status tau_b(const struct tau_counts *c, double *tau);

/* concordant minus discordant pairs */
static inline double tau_score(const struct tau_counts *c)
{
    return (double)((int64_t)c->concordant - (int64_t)c->discordant);
}

/* What counting pairs of rankings needs beside them; one serves any number of pairs. */
struct pair_room {
    uint32_t *sequence, *spare, *places;
};

status new_pair_room(size_t rows, struct pair_room *room, pool *p);

/* The counts of two ranked columns of the same length, over the rows that both have. */
void tau_count_ranked(const ranking *x, const ranking *y, struct tau_counts *c,
                      struct pair_room *room);

/* The pairs of rows tied in x, over the rows that y has too. */
uint64_t tied_pairs_shared(const ranking *x, const ranking *y);

#endif
