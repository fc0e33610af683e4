/* rho.h - Spearman's rho and the correlation of normal scores, of pairs of ranked columns. */
#ifndef RHO_H
#define RHO_H

#include "memory.h"
#include "ranks.h"
#include "status.h"

/* What a pair needs beside its rankings; one serves any number of pairs. */
struct rho_room;

/* Room for columns of up to `rows` rows. OUT_OF_DOMAIN beyond 2^21 rows. */
status new_rho_room(size_t rows, struct rho_room **room, pool *p);

/* Spearman's (1904) rho: the correlation of the mid-ranks that the rows have among those that both
 * columns have, *used rows. Exactly 1 or -1 for perfect dependence; the columns may change places
 * without changing a bit. TOO_FEW under two rows, NO_VARIATION if a column is constant. */
status spearman_rho(const ranking *x, const ranking *y, double *rho, size_t *used,
                    struct rho_room *room);

/* The correlation of the normal quantiles of mid-rank/(used + 1) (van der Waerden 1952),
 * likewise. */
status normal_score_correlation(const ranking *x, const ranking *y, double *correlation,
                                size_t *used, struct rho_room *room);

#endif
