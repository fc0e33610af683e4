/* tau_band.h - how far Kendall's tau may be from its true value. */
#ifndef TAU_BAND_H
#define TAU_BAND_H

#include "memory.h"
#include "status.h"

#include <stddef.h>
#include <stdint.h>

typedef enum { BAND_FREE, BAND_BINORMAL, BAND_FISHERZ, BAND_JACKKNIFE, BAND_BOOTSTRAP } band_method;

struct tau_band {
    double tau, low, high;       /* limits within [-1;1] */
    double error;                /* standard error */
    size_t used;                 /* rows that have both observations */
};

/* Tau-b with a confidence interval of this coverage, in (0;1).
 *
 *   free        tau -/+ z error with the error of tau_error_free(), which assumes nothing
 *   binormal    the same with the exact variance for a normal pair (Esscher 1924) whose
 *               correlation is sin(pi tau/2)
 *   fisherz     tanh(atanh(tau) -/+ z sqrt(0.437/(n - 4))) (Fieller, Hartley & Pearson 1957),
 *               the error by the delta method
 *   jackknife   tau -/+ z error with the error of tau_error_jackknife()
 *   bootstrap   percentiles and standard deviation of tau in 2,000 resamples (Efron 1979) drawn
 *               by the seed, those without variation left out
 *
 * TOO_FEW under three rows, for fisherz under five. NO_VARIATION as tau_b(), or when leaving out a
 * row leaves none, or half of the resamples have none. `used` is set unless the status is
 * NO_MEMORY. */
status tau_band(const double *x, const double *y, size_t n, double coverage, band_method method,
                uint64_t seed, struct tau_band *band, pool *p);

/* Variance of tau of n rows of a normal pair with this correlation (Esscher 1924), n >= 2. */
double tau_variance_binormal(double correlation, size_t n);

#endif
