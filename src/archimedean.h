/* archimedean.h - what Archimedean copulas of any dimension say at points.
 *
 * C(u) = psi(psi^-1(u_1) + ... + psi^-1(u_d)) with a generator psi whose derivatives alternate in
 * sign. Arguments t = psi^-1(u) are handed about as log t, so that strong dependence neither
 * overflows nor underflows.
 */
#ifndef ARCHIMEDEAN_H
#define ARCHIMEDEAN_H

#include "evaluate.h"

struct generator {
    /* log of psi^-1(u), -infinity at u = 1 */
    double (*log_inverse)(double u, double theta);

    /* log of psi^-1(1 - u), as good for small u, infinity at u = 1 */
    double (*log_inverse_turned)(double u, double theta);

    /* The next four are NULL where the family has an evaluator of its own. What log_derivative()
     * takes, for orders up to `highest`, from the pool; NO_MEMORY. */
    status (*prepare)(double theta, size_t highest, pool *p, void **prepared);

    /* log of |psi^(order)|, order >= 1, at exp(log_t) */
    double (*log_derivative)(void *prepared, size_t order, double log_t, double theta);

    /* About how long that takes; `next`: where the order before was asked at the same t. */
    double (*derivative_seconds)(size_t order, bool next);

    /* Of a pair, theta in the range beyond pairs, as in evaluate.h. */
    double (*beyond)(double u, double v, double theta);
    struct turned_pair turned;
};

/* Works for every row with a psi and a generator with derivatives. */
extern const struct evaluator archimedean_evaluator;

/* log(exp a + exp b) */
double log_added(double a, double b);

/* log(1 - exp(-t)) from log t */
double log_one_minus_exp(double log_t);

#endif
