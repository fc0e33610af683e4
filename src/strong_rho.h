/* strong_rho.h - Spearman's rho of clayton and joe where dependence is strong. */
#ifndef STRONG_RHO_H
#define STRONG_RHO_H

/* 1 - rho for theta >= 2, to 1e-13 of itself: the distance from rho to 1 keeps its digits. Source:
 * integrals over what the copula lacks of the upper bound, see strong_rho.c. */
double one_minus_rho_of_clayton(double theta);
double one_minus_rho_of_joe(double theta);

#endif
