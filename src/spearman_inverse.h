/* spearman_inverse.h - the parameter that gives a pair this Spearman's rho. */
#ifndef SPEARMAN_INVERSE_H
#define SPEARMAN_INVERSE_H

#include "family.h"

/* theta, or the correlation of an elliptical family, at which a pair has this rho; df is that of a
 * t. OUT_OF_DOMAIN when the family cannot reach rho: rho_low to rho_high of its row, or where these
 * are 0 those values that it reaches of tau. NOT_SETTLED when the search fails. Accuracy: that of
 * rho_from_theta(), see the families. */
status theta_from_rho(const family *f, double rho, double df, double *theta);

#endif
