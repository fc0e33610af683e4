/* frailty_mean.h - what all columns of an Archimedean copula do together, as a mean over the
 * frailty.
 *
 * Given V the columns are independent, and column j is above psi(t_j) with probability
 * 1 - exp(-V t_j) (Marshall & Olkin 1988). The mean of the product of these, in any number of
 * columns and however small, to 1e-10 relative, for theta to 1e4: a positive sum or integral, in
 * which nothing cancels.
 */
#ifndef FRAILTY_MEAN_H
#define FRAILTY_MEAN_H

#include "stable_density.h"

#include <stdbool.h>
#include <stddef.h>

/* For one theta, any number of points, one thread at a time. The rest is the means' own. */
struct frailty_mean {
    double theta;
    const double *log_t;               /* n of them, each finite or infinity */
    size_t n;
    bool has_density;                  /* made when first asked for */
    struct stable_density density;
};

/* log of the mean over V of prod_j (1 - exp(-V t_j)), one t_j at least being finite */
typedef double log_mean_of_product(struct frailty_mean *m);

/* for the frailties of frailty.h */
log_mean_of_product gamma_mean, stable_mean, log_series_mean, sibuya_mean;

#endif
