/* elliptical_tilt.h - from where to draw the points that a normal or t box is made of.
 *
 * With X = L Y the integrand of Genz (1992) is, for the normal score z of what drives the
 * chi-squares and columns y of Y each below its limit c_k given those before,
 *     exp(eta^2/2 - eta z + sum over k of mu_k^2/2 - mu_k y_k) prod_k Phi(c_k - mu_k)
 * when z is drawn about eta and y_k about mu_k instead of 0. Any eta and mu are right; those of
 * Botev (2017) and, for t, Botev & L'Ecuyer (2015) keep it below its value at one point, however
 * small the probability.
 */
#ifndef ELLIPTICAL_TILT_H
#define ELLIPTICAL_TILT_H

#include "chi_square_score.h"
#include "elliptical_points.h"

/* For one matrix, whose factor has no zero pivot, and any number of boxes. */
struct tilt {
    size_t d, kinds;
    const double *factor;
    struct chi_square_score *score;   /* of each kind of df; NULL for normal columns */
    const size_t *kind_of;            /* of each column */
    const struct signed_log *x;       /* the limits */
    double *product;                  /* N N', N the factor with its rows divided by its pivots */
    double *room;                     /* d x d */
    double *limit, *a, *rate, *step;  /* of each column: see elliptical_tilt.c */
    double *mu, eta, log_peak;        /* the answer; log of the integrand at its highest */
};

/* Room from the pool and the product. NO_MEMORY. */
status tilt_prepare(struct tilt *t, pool *p);

/* Sets mu, eta and log_peak for the limits x; 0 all of them where they are not found. */
void tilt_towards(struct tilt *t, const struct signed_log *x);

#endif
