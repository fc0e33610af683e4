/* pair_measures.h - what dependence there is between two columns of a copula. */
#ifndef PAIR_MEASURES_H
#define PAIR_MEASURES_H

#include "family.h"

/* Kendall's tau and Spearman's rho of columns i and j, with rotation and grouped degrees of freedom
 * taken into account. tau to 1e-12 relative; rho as its family has it; both to 1e-9 for a grouped
 * t. NO_MEMORY; OUT_OF_DOMAIN when there is no number (df too extreme for a table). */
status tau_of_pair(const copula *c, size_t i, size_t j, double *tau, pool *p);
status rho_of_pair(const copula *c, size_t i, size_t j, double *rho, pool *p);

/* Tail dependence of columns i and j in the corner LOWER or UPPER. */
status tail_of_pair(const copula *c, size_t i, size_t j, enum corner corner, double *lambda);

/* About how long each takes, in seconds of one core near 3 GHz, off by up to a factor of 3. */
double tau_seconds(const copula *c, size_t i, size_t j);
double rho_seconds(const copula *c, size_t i, size_t j);
double tail_seconds(const copula *c, size_t i, size_t j);

/* Whether all pairs of columns are alike, so that one number describes them. */
bool one_for_all_pairs(const copula *c);

/* The degrees of freedom at which a t copula with this correlation has this tail dependence.
 * OUT_OF_DOMAIN unless 0 < lambda < highest, what it tends to at df = 0, and for results outside
 * [1e-6;1e9]. */
status df_from_tail(double correlation, double lambda, double *df, double *highest);

#endif
