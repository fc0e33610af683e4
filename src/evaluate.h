/* evaluate.h - what a copula says at points: probability, density, conditional distributions.
 *
 * A point is `dimension` numbers, all strictly between 0 and 1 unless it says otherwise; everything
 * is about the rotated copula. For densities and conditional distributions a point is turned by
 * 1 - u, kept at or below 1 - 2^-53, so that near 0 of a column that a rotation turns they are good
 * to about 1e-16 / u relative.
 */
#ifndef EVALUATE_H
#define EVALUATE_H

#include "family.h"

/* What can be asked. */
enum question { ASK_CDF, ASK_DENSITY, ASK_CONDITIONAL, ASK_KENDALL };

/* A copula made ready for any number of points. One thread at a time. */
struct evaluation {
    const copula *c;
    const struct evaluator *by;
    int rotation;             /* what the evaluator did not take in */
    void *prepared;           /* the evaluator's own */
    double *turned, *room;    /* dimension and 4 x dimension numbers */
    struct frailty_mean *mean;          /* where that is not 0, beyond pairs */
};

/* The kinds of copula; each for the unrotated one unless it takes the rotation in. beyond() is
 * 1 - conditional() of all columns but the first, to 1e-10 relative where it has two columns. */
struct evaluator {
    bool takes_rotation;
    status (*prepare)(struct evaluation *e, pool *p);                 /* or NULL */
    status (*cdf)(const struct evaluation *e, const double *u, double *value, double *error);
    status (*log_density)(const struct evaluation *e, const double *u, double *value);
    status (*conditional)(const struct evaluation *e, const double *u, double *w);
    status (*beyond)(const struct evaluation *e, const double *u, double *w);     /* or NULL */
    status (*from_conditional)(const struct evaluation *e, const double *w, double *u);
    double (*kendall)(const struct evaluation *e, double w);          /* or NULL; 0 < w < 1 */
    const char *(*limit)(const struct evaluation *e, enum question q);
};

extern const struct evaluator independent_evaluator, pair_evaluator;

/* Probabilities of a rotated pair, 0 < u, v < 1, by forms in which nothing cancels. All families
 * with a rotation here are exchangeable, so that 270 is 90 of exchanged columns. */
struct turned_pair {
    double (*one)(double u, double v, double theta);                  /* rotation 90 */
    double (*both)(double u, double v, double theta);                 /* 180 */
};

/* A pair without rotation, 0 < u, v < 1, theta in the family's range. */
struct pair_functions {
    double (*cdf)(double u, double v, double theta);
    double (*log_density)(double u, double v, double theta);          /* -infinity where it is 0 */
    double (*conditional)(double u, double v, double theta);          /* P(V <= v | U = u) */
    double (*beyond)(double u, double v, double theta);               /* P(V > v | U = u) */
    double (*conditional_quantile)(double u, double w, double theta); /* v at which that is w */
    struct turned_pair turned;
};

/* From the pool, which must stay until the last question. NO_MEMORY; OUT_OF_DOMAIN when a matrix is
 * none of correlations. */
status evaluation_of(const copula *c, struct evaluation *e, pool *p);

/* Why a question has no answer for this copula whatever the point, as the end of a sentence that
 * begins with "model"; NULL when it has. */
const char *evaluation_limit(const struct evaluation *e, enum question q);

/* P(U_1 <= u_1, ..., U_d <= u_d), 0 and 1 allowed. *error is 0, or the standard error of a value by
 * quasi-Monte Carlo; what is not by that to 1e-10 relative, in the tails and rotated too.
 * OUT_OF_DOMAIN as evaluation_limit() says. */
status cdf_at(const struct evaluation *e, const double *u, double *value, double *error);

/* The same of a pair, 0 < u < 1, to 1e-15 absolute: without the integral that rotation 180 may
 * take. */
status pair_cdf_roughly_at(const struct evaluation *e, const double *u, double *value);

/* The log of the density, -infinity where that is 0. OUT_OF_DOMAIN where there is none: a singular
 * matrix, perfect dependence. */
status log_density_at(const struct evaluation *e, const double *u, double *value);

/* w_1 = u_1, w_j = P(U_j <= u_j | U_1 = u_1, ..., U_(j-1) = u_(j-1)): independent uniforms when u
 * is from the copula (Rosenblatt 1952), from the smallest normal double to 1 - 2^-53; to 1e-10
 * relative for rotated pairs as well. OUT_OF_DOMAIN likewise. */
status conditional_at(const struct evaluation *e, const double *u, double *w);

/* Its inverse, from w to u, kept within the same bounds. Beyond pairs, where a column that a
 * rotation turns has a small w, it is good to about 1e-16 / w relative. */
status from_conditional_at(const struct evaluation *e, const double *w, double *u);

/* K(w) = P(C(U) <= w) for n numbers w from 0 to 1; each value is the same whatever else is asked.
 * Barbe, Genest, Ghoudi & Remillard (1996) for Archimedean copulas in any dimension; for other
 * pairs an integral along the curve where C is w, to 1e-9, for tau beyond 0.95 or -0.95 to 1e-7,
 * for t with less than 0.3 degrees of freedom to 1e-8, NaN where a point of that curve is not
 * found; *error is 0. Else by quasi-Monte Carlo, see kendall_rays.h, where *error is the largest
 * standard error of the n. OUT_OF_DOMAIN as evaluation_limit() says. NO_MEMORY. */
status kendall_at(const struct evaluation *e, const double *w, size_t n, double *k, double *error,
                  pool *p);

#endif
