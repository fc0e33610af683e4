/* t_rho.h - Spearman's rho of a pair of the t copula. */
#ifndef T_RHO_H
#define T_RHO_H

/* rho for a correlation in [-1;1] and any df > 0, to 1e-13; a bounded number of steps whatever the
 * df. Source: Spearman's rho as the concordance of three rows, see t_rho.c. */
double rho_of_t(double correlation, double df);

#endif
