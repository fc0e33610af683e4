/* family.h - one row for each copula family: its facts and what it can do.
 *
 * src/copulas/ holds a file for each family, which defines its row; families[]
 * in src/copulas/families.c lists them.
 */
#ifndef FAMILY_H
#define FAMILY_H

#include "copula.h"

#include <stdint.h>

struct frailty;                       /* frailty.h */
struct sobol;                         /* sobol.h */
struct evaluator;                     /* evaluate.h */
struct generator;                     /* archimedean.h */
struct pair_functions;                /* evaluate.h */

/* Which rows of a draw, and where they go: row first + i of column j into u[j * stride + i]. */
struct draw_rows {
    uint64_t seed;
    size_t first, rows;
    double *u;
    size_t stride;
    bool mirrored;                    /* made from 1 - u for each uniform u, see draw.h */
    const struct sobol *sobol;        /* points to be used for random numbers, or NULL */
};

/* Corners of the unit square: LOWER where both columns are small, UPPER where both are large,
 * CROSSED where the first is large and the second small. */
enum corner { LOWER, UPPER, CROSSED };

struct family {
    const char *word;                 /* as in a model block */
    bool has_theta, has_matrix, has_df;
    double theta_low, theta_high;     /* of a pair */
    double theta_low_beyond_pairs;    /* and in more than two dimensions */
    int theta_open;                   /* 1: low end excluded, 2: high end, 3: both */
    double tau_low, tau_high;         /* what a pair can reach */
    int tau_open;                     /* likewise */
    double rho_low, rho_high;         /* the same of Spearman's rho, both 0 where they are those of
                                         tau; the ends belong to it as those of tau do */
    size_t most_dimensions;           /* 0: any */
    const char *use, *source;         /* for the reference: what for, in a line; who described it */

    /* Kendall's tau of a pair to the parameter and back, to 1e-12 relative. For elliptical families
     * the parameter is the correlation. OUT_OF_DOMAIN when the family cannot reach tau. */
    status (*theta_from_tau)(double tau, double *theta);
    status (*tau_from_theta)(double theta, double *tau);

    /* Spearman's rho of a pair with this theta or correlation; df is that of a t. */
    status (*rho_from_theta)(double theta, double df, double *rho);

    /* 1 - rho to 1e-13 relative where rho is above 0.98, for its inverse; or NULL. */
    double (*one_minus_rho)(double theta);

    /* Its inverse where the family has one of its own; NULL: theta_from_rho() searches by tau. */
    status (*theta_from_spearman)(double rho, double *theta);

    /* Tail dependence of a pair at a corner, for parameters that were checked. */
    double (*tail)(double theta, double df, enum corner corner);

    /* Fills the rows with uniforms strictly inside (0;1), rotation not yet applied. */
    status (*draw)(const copula *c, const struct draw_rows *where, pool *p);

    /* Archimedean families: the frailty that draw_by_frailty() takes, see frailty.h, and the
     * generator psi(exp(log_t)), its Laplace transform. NULL for others. */
    const struct frailty *frailty;
    double (*psi)(double log_t, double theta);

    /* What the copula says at points, see evaluate.h: by the evaluator of its kind, and where there
     * is no generator, or theta is one that only pairs have, by the functions of a pair. */
    const struct evaluator *evaluator;
    const struct generator *generator;
    const struct pair_functions *pair;
};

extern const family *const families[];       /* ended by NULL */

/* their words in the order of families[], separated by blanks */
extern const char family_words[];

/* the family with this word in lower case; NULL if there is none */
const family *family_named(const char *word);

#endif
