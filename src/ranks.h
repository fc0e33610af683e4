/* ranks.h - the order of a column of observations.
 *
 * A ranking is what every measure of dependence here starts from. Rank a column
 * once, then use it for all the pairs it stands in.
 */
#ifndef RANKS_H
#define RANKS_H

#include "memory.h"
#include "samples.h"
#include "status.h"

#include <stdint.h>

/* the rank of a gap */
#define NO_RANK UINT32_MAX

typedef struct {
    size_t rows;            /* of the column, gaps included */
    size_t observed;        /* rows that are no gaps */
    size_t distinct;        /* how many different values there are */
    uint64_t tied_pairs;    /* pairs of rows with the same value */
    uint32_t *order;        /* the observed rows, lowest value first, ties in row order */
    uint32_t *rank;         /* of each row: 0 to distinct - 1, ties alike; NO_RANK in a gap */
    uint32_t *tied;         /* the rows of `order` that share their value with another */
    size_t n_tied;
} ranking;

/* What sorting needs beside the result; one serves any number of columns. */
struct rank_room;

/* Room for rankings of columns with up to `rows` rows. OUT_OF_DOMAIN beyond 2^32 - 2 rows. */
status new_rank_room(size_t rows, struct rank_room **room, pool *p);

/* Room for `columns` rankings of `rows` rows each. */
status new_rankings(size_t rows, size_t columns, ranking **r, pool *p);

/* Ranks n values, n no more than both rooms were made for. -0 and 0 tie. */
void rank_values(const double *x, size_t n, ranking *r, struct rank_room *room);

/* What tied rows get: the mean, the lowest or the highest of the ranks they share, or these ranks
 * in an order that the seed draws. */
typedef enum { TIES_AVERAGE, TIES_LOW, TIES_HIGH, TIES_RANDOM } tie_rule;

/* Scaled ranks of each column into u, laid out as the samples are: rank/(observed + 1), ranks
 * counted from 1; gaps stay NaN. The seed matters for TIES_RANDOM only. With average ties these are
 * the pseudo-observations of Genest, Ghoudi & Rivest (1995). OK, NO_MEMORY, or OUT_OF_DOMAIN beyond
 * 2^32 - 2 rows. */
status scaled_ranks(const samples *s, tie_rule how, uint64_t seed, double *u, pool *p);

/* Mid-ranks from 1 to observed, for each row of a ranking; a gap gets NaN. */
void mid_ranks(const ranking *r, double *mid);

/* pairs among k things */
static inline uint64_t pairs_among(uint64_t k) { return k ? k * (k - 1) / 2 : 0; }

#endif
