/* theta_band.c - the band of tau, mapped.
 *
 * Method
 *   Each limit by theta_from_tau(). The standard error is that of tau times the slope of theta,
 *   which is a difference over tau that has its steps on both sides where there is room for them
 *   and else on one.
 */
#include "theta_band.h"

#include <math.h>

/* f'(0) h from f at 0, h, 2h, 3h, 4h: Abramowitz & Stegun 25.2 */
static status slope_to_one_side(const family *f, double tau, double step, double *slope)
{
    static const double weight[] = { -25.0 / 12, 4, -3, 4.0 / 3, -1.0 / 4 };
    double sum = 0, theta;
    for (int k = 0; k < 5; k++) {
        status s = f->theta_from_tau(tau + k * step, &theta);
        if (s != OK) return s;
        sum += weight[k] * theta;
    }
    *slope = sum / step;
    return OK;
}

/* Towards an open end theta grows without bound, so that steps are parts of the way to it. */
status theta_slope(const family *f, double tau, double *slope)
{
    static const double weight[] = { 1.0 / 12, -2.0 / 3, 0, 2.0 / 3, -1.0 / 12 };
    double to_low = tau - f->tau_low, to_high = f->tau_high - tau, sum = 0, theta;
    bool low_nearer = to_low < to_high;
    double near = fmin(to_low, to_high), far = fmax(to_low, to_high), step = 0.002 * near;
    if (near < 1e-3 && !(f->tau_open & (low_nearer ? 1 : 2)))
        return slope_to_one_side(f, tau, (low_nearer ? 1e-3 : -1e-3) * far, slope);
    for (int k = -2; k <= 2; k++) {
        status s = f->theta_from_tau(tau + k * step, &theta);
        if (s != OK) return s;
        sum += weight[k + 2] * theta;
    }
    *slope = sum / step;
    return OK;
}

/* theta at a limit; NaN where tau is at or beyond an end that does not belong to the family. */
static status limit_of(const family *f, double tau, double *theta, bool *cut)
{
    double held = fmax(f->tau_low, fmin(f->tau_high, tau));
    bool at_open_end = (held == f->tau_low && f->tau_open & 1)
                    || (held == f->tau_high && f->tau_open & 2);
    *cut = held != tau || at_open_end;
    *theta = NAN;
    return at_open_end ? OK : f->theta_from_tau(held, theta);
}

status theta_band(const family *f, const double *x, const double *y, size_t n, double coverage,
                  band_method method, uint64_t seed, struct theta_band *b, pool *p)
{
    double slope;
    status s = tau_band(x, y, n, coverage, method, seed, &b->tau, p);
    if (s != OK) return s;
    s = f->theta_from_tau(b->tau.tau, &b->theta);
    if (s == OK) s = limit_of(f, b->tau.low, &b->low, &b->low_cut);
    if (s == OK) s = limit_of(f, b->tau.high, &b->high, &b->high_cut);
    if (s == OK) s = theta_slope(f, b->tau.tau, &slope);
    if (s == OK) b->error = slope * b->tau.error;
    return s;
}
