/* elliptical_tilt.c - from where to draw the points that a normal or t box is made of
 *
 * Method
 *   Where the integrand of elliptical_tilt.h is level in eta, mu, z and y: with N = D^-1 L, D the
 *   pivots, b(z) the limits over their pivots, a_k = c_k - mu_k and h_k = phi(a_k)/Phi(a_k) that is
 *       mu = -(N - I)' h,   y = mu - h,   a + h = b(z) + N N' h,   eta = z,
 *       z = sum over k of h_k b_k(z) (log scale of k)'(z).
 *   Given z the third is the gradient of a convex function of h: Newton's steps in a, halved while
 *   that function does not fall. z is the root of the last, of which the right side falls.
 *
 * Special cases
 *   A limit so high that it does not matter counts as HIGHEST.
 *
 * Accuracy
 *   Six digits, which cost the variance of the points nothing.
 */
#include "elliptical_tilt.h"
#include "linear.h"
#include "normal.h"
#include "root.h"

#include <math.h>

static const double HIGHEST = 30, FAR_BELOW = -1e4, LOG_SQRT_2_PI = 0.918938533204672742;
static const double FARTHEST_SCORE = 40, FAR_OUT = -1e3;
static const double LEVEL = 8;                /* h is nothing beyond: a step must stop there */

status tilt_prepare(struct tilt *t, pool *p)
{
    size_t d = t->d;
    double *n = pool_take_zeroed(p, d * d, sizeof *n);
    t->product = pool_take(p, d * d, sizeof *t->product);
    t->limit = pool_take(p, d, 5 * sizeof *t->limit);
    if (!n || !t->product || !t->limit) return NO_MEMORY;
    t->room = n;
    t->a = t->limit + d;
    t->rate = t->a + d;
    t->step = t->rate + d;
    t->mu = t->step + d;
    for (size_t i = 0; i < d; i++)               /* by columns, as linear.h wants it */
        for (size_t j = 0; j <= i; j++) n[j * d + i] = t->factor[i * d + j] / t->factor[i * d + i];
    outer_product(n, d, d, t->product);
    return OK;
}

/* h = phi(a) / Phi(a) */
static double rate_at(double a)
{
    if (a < FAR_BELOW) return -a - 1 / a;
    return exp(-a * a / 2 - LOG_SQRT_2_PI - normal_log_probability(a));
}

static double log_probability_at(double a)
{
    return a < FAR_BELOW ? -a * a / 2 - LOG_SQRT_2_PI - log(-a) : normal_log_probability(a);
}

static double log_scale_at(const struct tilt *t, size_t column, double z)
{
    return t->score ? log_chi_square_scale(&t->score[t->kind_of[column]], z) : 0;
}

/* False where one is so far below that z cannot be near the root, but below it. */
static bool set_limits(struct tilt *t, double z)
{
    bool near = true;
    for (size_t k = 0; k < t->d; k++) {
        double x = times_scale(t->x[k], log_scale_at(t, k, z));
        t->limit[k] = fmin(x / t->factor[k * t->d + k], HIGHEST);
        near = near && x > FAR_OUT;
    }
    return near;
}

/* Row k of N N' - I times the rates. */
static double pulled(const struct tilt *t, size_t k)
{
    double sum = -t->rate[k];
    for (size_t j = 0; j < t->d; j++) sum += t->product[k * t->d + j] * t->rate[j];
    return sum;
}

/* The convex function of h at a. */
static double height(struct tilt *t, const double *a)
{
    double sum = 0;
    for (size_t k = 0; k < t->d; k++) t->rate[k] = rate_at(a[k]);
    for (size_t k = 0; k < t->d; k++)
        sum += t->rate[k] * (pulled(t, k) / 2 + t->limit[k] - a[k]) + log_probability_at(a[k]);
    return sum;
}

/* -da/dh, which is at least 1 */
static double slope_of(const struct tilt *t, size_t k)
{
    return fmax(1, 1 / fmax(1e-100, t->rate[k] * (t->a[k] + t->rate[k])));
}

/* Solves (N N' - I + W) s = r for r in `step`, W being the diagonal of slopes. */
static bool solve(struct tilt *t)
{
    size_t d = t->d;
    double *c = t->room, *r = t->step;
    for (size_t k = 0; k < d * d; k++) c[k] = t->product[k];
    for (size_t k = 0; k < d; k++) c[k * d + k] += slope_of(t, k) - 1;
    if (!cholesky(c, d)) return false;
    for (size_t k = 0; k < d; k++) {
        for (size_t j = 0; j < k; j++) r[k] -= c[j * d + k] * r[j];
        r[k] /= c[k * d + k];
    }
    for (size_t k = d; k-- > 0;) {
        for (size_t j = k + 1; j < d; j++) r[k] -= c[k * d + j] * r[j];
        r[k] /= c[k * d + k];
    }
    return true;
}

/* `step` becomes that of Newton in a; how large the residual is beside a. */
static double newton_step(struct tilt *t)
{
    double largest = 0;
    for (size_t k = 0; k < t->d; k++) {
        t->step[k] = pulled(t, k) + t->limit[k] - t->a[k];
        largest = fmax(largest, fabs(t->step[k]) / (1 + fabs(t->a[k])));
    }
    if (largest < 1e-6) return largest;
    if (!solve(t)) return NAN;
    for (size_t k = 0; k < t->d; k++) t->step[k] *= slope_of(t, k);
    return largest;
}

/* a for the limits, from what it was before; false where it does not settle. */
static bool settle(struct tilt *t)
{
    enum { MOST_STEPS = 60, MOST_HALVINGS = 40 };
    double before = height(t, t->a);
    for (int i = 0; i < MOST_STEPS; i++) {
        double left = newton_step(t), part = 1, *tried = t->room;
        if (!(left >= 1e-6)) return left < 1e-6;
        for (int halving = 0;; halving++, part /= 2) {
            if (halving == MOST_HALVINGS) return false;
            for (size_t k = 0; k < t->d; k++)
                tried[k] = fmin(t->a[k] + part * t->step[k], t->a[k] < LEVEL ? LEVEL : HUGE_VAL);
            double now = height(t, tried);
            if (!(now <= before + 1e-12 * fabs(before))) continue;
            before = now;
            break;
        }
        for (size_t k = 0; k < t->d; k++) t->a[k] = tried[k];
    }
    return false;
}

/* How far the last equation is from holding at z. */
static double off(double z, const void *with)
{
    struct tilt *t = (struct tilt *)with;
    const double apart = 1e-3;
    double sum = -z;
    if (!set_limits(t, z)) return FAR_OUT;
    if (!settle(t)) return NAN;
    for (size_t k = 0; k < t->d; k++) {
        double slope = log_scale_at(t, k, z + apart) - log_scale_at(t, k, z - apart);
        if (t->limit[k] < HIGHEST) sum += t->rate[k] * t->limit[k] * slope / (2 * apart);
    }
    return sum;
}

/* At most where every limit from below is within 1. */
static double first_score(const struct tilt *t)
{
    double z = 0;
    for (size_t k = 0; k < t->d; k++) {
        if (t->x[k].sign > 0) continue;
        while (z > -FARTHEST_SCORE && t->x[k].log_size + log_scale_at(t, k, z) > 0) z -= 1;
    }
    return z;
}

/* eta, and a and the rates there: outwards from where the limits are moderate. */
static bool find(struct tilt *t)
{
    double low = t->score ? first_score(t) : 0, high = low, at_low, at_high;
    for (size_t k = 0; k < t->d; k++) t->a[k] = 0;
    if (!t->score) {
        set_limits(t, 0);
        return settle(t);
    }
    at_low = at_high = off(low, t);
    while (at_low < 0 && low > -FARTHEST_SCORE) {
        high = low, at_high = at_low;
        at_low = off(low -= 1, t);
    }
    while (at_high > 0 && high < FARTHEST_SCORE) {
        low = high, at_low = at_high;
        at_high = off(high += 1, t);
    }
    if (isnan(at_low) || isnan(at_high)) return false;
    t->eta = at_low < 0 ? low : high;
    if (at_low > 0 && at_high < 0 && root_between(off, t, low, high, &t->eta) != OK) return false;
    return !isnan(off(t->eta, t));
}

void tilt_towards(struct tilt *t, const struct signed_log *x)
{
    size_t d = t->d;
    t->x = x;
    t->eta = t->log_peak = 0;
    bool found = find(t);
    if (!found) t->eta = 0;
    double sum = -t->eta * t->eta / 2;
    for (size_t j = 0; j < d; j++) {
        t->mu[j] = 0;
        for (size_t k = j + 1; found && k < d; k++)
            t->mu[j] -= t->rate[k] * t->factor[k * d + j] / t->factor[k * d + k];
        sum += t->mu[j] * (t->rate[j] - t->mu[j] / 2) + log_probability_at(t->a[j]);
    }
    t->log_peak = found ? sum : 0;
}
