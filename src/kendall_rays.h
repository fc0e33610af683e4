/* kendall_rays.h - the distribution of C(U) where it has neither a formula nor a curve.
 *
 * A ray is a line through the unit cube along which every column rises, and U lies on a random one
 * of them, at a place whose distribution is known. So P(C(U) <= w) is the mean, over rays, of the
 * probability that U lies before the place where C reaches w.
 */
#ifndef KENDALL_RAYS_H
#define KENDALL_RAYS_H

#include "evaluate.h"
#include "cube.h"

enum { RAY_SEEDS = 8 };

/* How a kind of copula is cut into rays. A place on a ray is a number from `low` to `high`; they
 * are the same where there are no rays, but points. */
struct rays {
    const struct evaluation *e;
    size_t dimensions;                        /* of uniforms that a ray is chosen by */
    double low, high;
    void *own;

    /* ray number `index` under one of the seeds */
    void (*choose)(const struct rays *r, const double *u, int seed, size_t index);

    /* C at a place of the ray chosen; unbiased, and independent from ray to ray where it is not
     * exact */
    status (*cdf)(const struct rays *r, double place, double *c);

    /* the normal score of the probability that U lies at or before a place */
    double (*score)(const struct rays *r, double place);
};

/* Gaussian and t copulas, of one or several degrees of freedom, singular ones too. NO_MEMORY. */
status elliptical_rays(const struct evaluation *e, struct rays *r, pool *p);

/* Whether these are rays, not points. */
bool elliptical_rises(const struct evaluation *e);

/* Archimedean copulas with rotation 180. NO_MEMORY. Up to this many columns C is mostly a sum over
 * all subsets of them. */
enum { FEW_FOR_SUBSETS = 10 };
status survival_rays(const struct evaluation *e, struct rays *r, pool *p);

/* By a number of rays under each seed, P(C(U) <= w) for n numbers w from 0 to 1, and the largest of
 * their standard errors: a value does not depend on what else is asked. NO_MEMORY, or what C
 * answers, OUT_OF_DOMAIN where that is NaN. */
status kendall_by_rays(const struct rays *r, size_t rays, const double *w, size_t n, double *k,
                       double *error, pool *p);

#endif
