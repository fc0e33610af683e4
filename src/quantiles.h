/* quantiles.h - the losses of a margin at many uniforms. */
#ifndef QUANTILES_H
#define QUANTILES_H

#include "distribution.h"
#include "samples.h"

/* A margin made ready: its table, or its sorted sample. */
typedef struct quantiles quantiles;

/* Makes a margin that margin_check() passed ready for `wanted` quantiles. Where a quantile is
 * costly and more than a few thousand are wanted, it is tabulated; the losses then differ from
 * the direct ones by less than 1e-12 relative. `given` holds the samples for the distribution
 * `sample`, without gaps; else it may be NULL. BAD_KIND: there is no such column in it;
 * NO_MEMORY. */
status quantiles_prepare(const margin *m, const samples *given, size_t wanted, pool *p,
                         const quantiles **ready);

/* The loss at each of n uniforms in (0;1), in any order; u and loss may be the same. For a
 * sample of size n: the k-th smallest, k = ceil(n u). */
void losses_at(const quantiles *q, const double *u, size_t n, double *loss);

#endif
