/* margin_fit.h - margins fitted to losses by maximum likelihood. */
#ifndef MARGIN_FIT_H
#define MARGIN_FIT_H

#include "distribution.h"

typedef struct {
    margin margin;
    double error[MARGIN_PARAMETERS];     /* of a, b, c; NaN for those that are not used */
    double log_likelihood, aic;
} margin_fit;

/* Fits a distribution that has a `fit` to n finite losses, each observed in full: none
 * censored, none cut off. Errors are those of large samples, from the expected information.
 * TOO_FEW for fewer than two losses; OUT_OF_DOMAIN with *row the first loss that the
 * distribution does not take, or with *row = n when no member has the highest likelihood;
 * NO_VARIATION when all are alike; NOT_SETTLED. */
status fit_margin(const distribution *d, const double *loss, size_t n, margin_fit *fit,
                  size_t *row);

/* for the rows: means of the losses and of their logarithms */
double mean_loss(const double *loss, size_t n);
double mean_log_loss(const double *loss, size_t n);

#endif
