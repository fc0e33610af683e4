/* distribution.h - margins: the loss distributions there are, one file and one
 * row each.
 *
 * src/distributions/ holds a file for each distribution, which defines its row;
 * distributions[] in src/distributions/distributions.c lists them. Nothing
 * outside such a file asks "is this the gamma?".
 */
#ifndef DISTRIBUTION_H
#define DISTRIBUTION_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>
#include <stddef.h>

enum { MARGIN_PARAMETERS = 3 };

typedef struct distribution distribution;

/* The margin of one line: a, b, c as the distribution names them; unused ones are NaN. */
typedef struct {
    const distribution *distribution;
    double a, b, c;
} margin;

struct margins {
    size_t lines;
    margin *of;
    const char **names;          /* or NULL when there were none */
};

/* What one of a, b, c means, and the lowest value it may take; none has an upper bound. */
struct parameter {
    const char *name;            /* NULL when the distribution does not use it */
    double low;
    bool low_open;               /* low itself is excluded */
    bool whole;
};

struct distribution {
    const char *word;            /* as in a margins block */
    struct parameter parameter[MARGIN_PARAMETERS];
    bool costly;                 /* losses are positive, and a quantile costs enough to be worth a
                                    table, see quantiles.h */
    /* With the normal score z of u, a + b z is the loss, or its logarithm. */
    enum { NO_SCORES, BY_SCORE, BY_LOG_SCORE } scores;

    /* The natural logarithm of the density at x; -INFINITY where the density is 0. */
    double (*log_density)(const margin *m, double x);

    /* The probability of a loss up to x, or with `above` of one beyond x. Each is accurate to 1e-12
     * relative however small it is. */
    double (*probability)(const margin *m, double x, bool above);

    /* The loss that is not exceeded with probability p, or with `above` the one that is exceeded
     * with probability p, for p in (0;1): accurate to 1e-12 relative (the normal: to that of the
     * larger of |x| and its sd) down to p = 1e-300. Beyond the largest number: INFINITY. */
    double (*quantile)(const margin *m, double p, bool above);

    /* Mean and standard deviation; INFINITY where there is none. */
    void (*moments)(const margin *m, double *mean, double *sd);

    /* The parameters by the method of moments, for a finite mean and sd > 0. threshold is NaN when
     * not given. OUT_OF_DOMAIN when no member has these moments: moments_need says why. */
    status (*from_moments)(double mean, double sd, double threshold, margin *m);
    const char *moments_need;    /* "mean above 0": what from_moments() asks for */
    bool takes_threshold;        /* in from_moments() */

    /* The parameters of highest likelihood for n losses, two or more and not all alike, of the kind
     * that `fitted_to` says; see margin_fit.h. OUT_OF_DOMAIN when none is highest: fit_needs says
     * when. NOT_SETTLED. */
    status (*fit)(const double *loss, size_t n, margin *m, double error[MARGIN_PARAMETERS]);
    enum { ANY_LOSS, FROM_ZERO, ABOVE_ZERO } fitted_to;
    const char *fit_needs;       /* or NULL */
};

/* All distributions, ended by NULL. Those whose losses are a column of data, such as `sample`, have
 * none of the functions above. */
extern const distribution *const distributions[];

/* the distribution with this word in lower case; NULL if there is none */
const distribution *distribution_named(const char *word);

/* how many of a, b, c the distribution uses */
size_t distribution_parameters(const distribution *d);

/* a, b or c: k from 0 to 2 */
double margin_parameter(const margin *m, size_t k);

/* Whether a, b, c are admissible. When not, *which is the one at fault, 0 to 2, and the status
 * says how: BAD_KIND when it is missing (NaN), or given though the distribution does not use
 * it; OUT_OF_DOMAIN when it is infinite, below distribution->parameter[*which].low (or equal to
 * an open one), or not whole. */
status margin_check(const margin *m, size_t *which);

/* The loss at the uniform u in (0;1): the quantile, taken from the nearer tail. */
double margin_quantile(const margin *m, double u);

#endif
