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

    /* log of |psi^(order)|, order >= 1, at exp(log_t) */
    double (*log_derivative)(size_t order, double log_t, double theta);

    bool by_sums;             /* each derivative costs its order squared: see evaluation_limit() */
    double (*beyond)(double u, double v, double theta);   /* of a pair as in evaluate.h, or NULL */
};

/* Works for every row with a generator and a psi. */
extern const struct evaluator archimedean_evaluator;

/* log(exp a + exp b) */
double log_added(double a, double b);

/* log(1 - exp(-t)) from log t */
double log_one_minus_exp(double log_t);

enum { MOST_TERMS = 1024 };   /* the highest order of the sums; NAN beyond */

/* The log of the sum over k of r_k, from r_1 = x = exp(log_x) and order - 1 steps of
 *     r_k <- k r_k + (k - 2 + rest) x r_(k-1)
 * where rest is in [0;1]. Derivatives of frank (rest = 1) and joe (rest = 1 - 1/theta). */
double log_sum_rising(size_t order, double log_x, double rest);

/* The same from r_1 = part x, and in step n = 1 ... order - 1
 *     r_k <- (n - k + k rest) r_k + part x r_(k-1),    rest = 1 - part.
 * Derivatives of gumbel (part = 1/theta). */
double log_sum_of_powers(size_t order, double log_x, double part, double rest);

#endif
