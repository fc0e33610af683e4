/* frailty.h - the mixing variables V of Archimedean copulas, and their Laplace transforms.
 *
 * With E_1, E_2, ... exponential and psi the Laplace transform of V, the columns
 * psi(E_j / V) follow the copula with generator psi (Marshall & Olkin 1988). V
 * itself overflows for strong dependence, so all of this is in logarithms. A V is
 * made from two uniforms, of which some use only the first. The bits are the same on
 * every machine.
 */
#ifndef FRAILTY_H
#define FRAILTY_H

#include "frailty_mean.h"
#include "random.h"
#include "student.h"

enum { WALK = 8 };

/* What a frailty needs beside its uniforms. */
struct frailty_tables {
    double theta;
    double beyond[WALK + 1];     /* Sibuya: P(V > k) */
    double log_gamma;            /* Sibuya: log Gamma(1 - 1/theta) */
    struct student chi_square;   /* gamma: the chi-square with 2/theta degrees of freedom */
};

struct frailty {
    /* for one theta; NO_MEMORY, or OUT_OF_DOMAIN */
    status (*prepare)(struct frailty_tables *t, double theta, pool *p);

    /* ROWS_AT_ONCE pairs of uniforms a and b; a becomes log V */
    void (*log_frailties)(const struct frailty_tables *t, double *restrict a,
                          const double *restrict b);

    /* log t of ROWS_AT_ONCE rows becomes psi(t), see laplace.h */
    void (*transforms)(double *restrict log_t, double theta);

    log_mean_of_product *log_mean;
};

/* clayton, theta > 0: gamma with shape 1/theta and scale 1, by inversion */
extern const struct frailty gamma_frailty;

/* gumbel, theta >= 1: positive stable with index 1/theta (Kanter 1975; Chambers, Mallows & Stuck
 * 1976) */
extern const struct frailty stable_frailty;

/* frank, theta > 0: logarithmic series with 1 - exp(-theta) (Kemp 1981) */
extern const struct frailty log_series_frailty;

/* joe, theta >= 1: Sibuya with index 1/theta (Devroye 1993), by inversion */
extern const struct frailty sibuya_frailty;

#endif
