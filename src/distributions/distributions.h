/* distributions.h - the rows that the files of this directory define. */
#ifndef DISTRIBUTIONS_H
#define DISTRIBUTIONS_H

#include "../distribution.h"

extern const distribution normal_distribution, lognormal_distribution, gamma_distribution;
extern const distribution exponential_distribution, weibull_distribution;
extern const distribution pareto_distribution, lomax_distribution, sample_distribution;

#endif
