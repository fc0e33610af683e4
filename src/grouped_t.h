/* grouped_t.h - dependence between two columns of a t copula that differ in their degrees of
 * freedom, one uniform driving both chi-squares.
 */
#ifndef GROUPED_T_H
#define GROUPED_T_H

#include "memory.h"
#include "status.h"

/* Kendall's tau and Spearman's rho, to 1e-10, for df > 0 up to 1e300, else OUT_OF_DOMAIN;
 * NO_MEMORY. */
status tau_of_grouped(double correlation, double df1, double df2, double *tau, pool *p);
status rho_of_grouped(double correlation, double df1, double df2, double *rho, pool *p);

/* Tail dependence, alike in both corners, to 1e-10. */
double tail_of_grouped(double correlation, double df1, double df2);

#endif
