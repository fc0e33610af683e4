/* stable_density.h - the density of the positive stable frailty of gumbel. */
#ifndef STABLE_DENSITY_H
#define STABLE_DENSITY_H

enum { STABLE_PANELS = 30, STABLE_ORDER = 20, STABLE_TERMS = 16 };

/* For one theta: V has the Laplace transform exp(-t^(1/theta)), and x = log V / (theta - 1). */
struct stable_density {
    double theta, start, lowest;       /* B(0); least x: below it the log-density is under -45 */
    int panels;
    double centre, first, panel;       /* panels of asinh(x - centre) */
    double at[STABLE_PANELS][STABLE_ORDER], power[STABLE_TERMS];
    double farthest;                   /* x from which the series holds */
};

/* theta > 1, at least 1 + 2^-52; some milliseconds. */
void stable_density_prepare(struct stable_density *s, double theta);

/* The log of the density of x >= lowest, to 1e-11. */
double stable_log_density(const struct stable_density *s, double x);

#endif
