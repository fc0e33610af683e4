/* family_texts.h - what there is to say of a copula family in words. */
#ifndef FAMILY_TEXTS_H
#define FAMILY_TEXTS_H

#include "../src/family.h"

/* Each is NULL when there is no memory. */

/* "theta [1;inf)", "matrix, df", "none" */
const char *parameter_text(const family *f, pool *p);

/* "[0;1)": what a pair reaches of Kendall's tau and of Spearman's rho */
const char *tau_range(const family *f, pool *p);
const char *rho_range(const family *f, pool *p);

/* "[1;inf)": theta in this dimension */
const char *theta_range(const family *f, size_t dimension, pool *p);

/* "2", "2 or more" */
const char *dimensions_text(const family *f, pool *p);

/* "0 90 180 270, beyond pairs 0 180" */
const char *rotations_text(const family *f);

/* The corners in which the unrotated copula has tail dependence: none, lower, upper, both; looked
 * up at tau = 0.3 and four degrees of freedom. */
const char *tails_text(const family *f);

#endif
