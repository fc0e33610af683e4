/* theta_band.h - a copula's parameter and how far it may be from its true value, from tau. */
#ifndef THETA_BAND_H
#define THETA_BAND_H

#include "family.h"
#include "tau_band.h"

/* theta, or the correlation of an elliptical family, at tau and at its limits. */
struct theta_band {
    struct tau_band tau;         /* what it was made from */
    double theta, low, high;     /* a limit that is open is NaN */
    double error;                /* standard error by the delta method */
    bool low_cut, high_cut;      /* that limit of tau is beyond what the family reaches */
};

/* Maps tau_band(), see there for the methods and errors. theta grows with tau in every family, so
 * the limits of theta have the coverage of those of tau; a limit beyond what the family reaches
 * becomes the end of what it reaches, NaN where that end does not belong to it. OUT_OF_DOMAIN when
 * the family cannot reach tau itself: then only b->tau is set. Source: Genest & Favre (2007). */
status theta_band(const family *f, const double *x, const double *y, size_t n, double coverage,
                  band_method method, uint64_t seed, struct theta_band *b, pool *p);

/* d theta / d tau at a tau that the family reaches, to about 1e-9 relative, 1e-7 at an end of it
 * and where 1 - |tau| is 1e-8; for amh, whose tau bends there, 1e-3 towards theta = 1. */
status theta_slope(const family *f, double tau, double *slope);

#endif
