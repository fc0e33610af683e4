/* stable_sums.c - the polynomials that gumbel's derivatives are
 *
 * Method
 *   With y = a x the polynomial of order n is n! times the sum over k of b_k y^k / k!, where
 *   b_k is what s^n has in ((1 - (1-s)^a) / a)^k. Differentiation gives
 *       (n + 1) b_k <- (n - k a) b_k + k b_(k-1),
 *   all positive. b_n = 1, and none is above 1.59^n (the sum of all b_k is what s^n has in a
 *   function without a pole within 1 - 1/e), nor, for k = 1 ... n, below (1-a) n^-3, so that with
 *   n/3 halvings up to order 2048 they are doubles. The y^k / k! are largest where k is y: the sum
 *   goes from there both ways, as far as they count.
 *   Beyond that order P(N = n) by the recurrence of Panjer (1981) for its generating function
 *   exp(-x (1-s)^a), also of positive terms.
 *
 * Special cases
 *   a = 1: the polynomial is x^n.
 *
 * Accuracy
 *   As in stable_sums.h.
 */
#include "stable_sums.h"

#include <math.h>

enum { KEPT = 2048 };

static const double LN2 = 0.693147180559945309417, NEGLIGIBLE = 1e-18;

struct stable_sums {
    double part, rest, log_part;
    size_t kept, built;       /* orders */
    double *b;                /* order n: b_1 ... b_n from n(n-1)/2 on, halved n/3 times */
    double *most;             /* the largest of them */
    double *log_factorial, *inverse;          /* of 0 ... kept, 1 ... kept */

    /* Beyond: P(N = n) exp(x - log_scale) of order n at [highest - n], for the latest x. */
    size_t highest, known;
    double *weights, *probabilities, log_x, log_scale;
};

static double *row_of(const struct stable_sums *s, size_t order)
{
    return s->b + order * (order - 1) / 2;
}

static status keep(struct stable_sums *s, pool *p)
{
    s->b = pool_take(p, s->kept * (s->kept + 1) / 2, sizeof *s->b);
    s->most = pool_take(p, s->kept + 1, 3 * sizeof *s->most);
    if (!s->b || !s->most) return NO_MEMORY;
    s->log_factorial = s->most + s->kept + 1;
    s->inverse = s->log_factorial + s->kept + 1;
    s->log_factorial[0] = 0;
    for (size_t k = 1; k <= s->kept; k++) {
        s->log_factorial[k] = lgamma((double)k + 1);
        s->inverse[k] = 1 / (double)k;
    }
    s->b[0] = s->most[1] = 1;
    s->built = 1;
    return OK;
}

/* (1 - s)^(a-1), whose coefficients are positive */
static status prepare_beyond(struct stable_sums *s, pool *p)
{
    s->weights = pool_take(p, s->highest + 1, 2 * sizeof *s->weights);
    if (!s->weights) return NO_MEMORY;
    s->probabilities = s->weights + s->highest + 1;
    s->weights[0] = 1;
    for (size_t i = 1; i <= s->highest; i++)
        s->weights[i] = s->weights[i - 1] * ((double)(i - 1) + s->rest) / (double)i;
    s->log_x = NAN;
    return OK;
}

status stable_sums_of(double part, double rest, size_t highest, pool *p,
                      struct stable_sums **sums)
{
    struct stable_sums *s = *sums = pool_take_zeroed(p, 1, sizeof *s);
    if (!s) return NO_MEMORY;
    s->part = part, s->rest = rest, s->log_part = log(part), s->highest = highest;
    s->kept = highest < KEPT ? highest : KEPT;
    status done = keep(s, p);
    return done != OK || highest == s->kept ? done : prepare_beyond(s, p);
}

static void build_next(struct stable_sums *s)
{
    size_t n = s->built;
    const double *b = row_of(s, n);
    double *next = row_of(s, n + 1), most = 0;
    double over = ((n + 1) % 3 ? 1 : 0.5) / (double)(n + 1);
    for (size_t k = 1; k <= n; k++) {
        double stay = (double)(n - k) + (double)k * s->rest;
        next[k - 1] = (stay * b[k - 1] + (k > 1 ? (double)k * b[k - 2] : 0)) * over;
        most = fmax(most, next[k - 1]);
    }
    next[n] = (double)(n + 1) * b[n - 1] * over;
    s->most[n + 1] = fmax(most, next[n]);
    s->built = n + 1;
}

static double by_coefficients(struct stable_sums *s, size_t order, double log_y)
{
    while (s->built < order) build_next(s);
    const double *b = row_of(s, order) - 1;
    double y = exp(log_y), over = 1 / y, enough = NEGLIGIBLE / s->most[order], w = 1;
    size_t middle = (size_t)fmin(fmax(1, y), (double)order);
    double sum = b[middle];
    for (size_t k = middle + 1; k <= order && w > enough * sum; k++)
        sum += (w *= y * s->inverse[k]) * b[k];
    w = 1;
    for (size_t k = middle; k > 1 && w > enough * sum; k--)
        sum += (w *= (double)k * over) * b[k - 1];
    return s->log_factorial[order] - s->log_factorial[middle] + (double)middle * log_y + log(sum)
           + (double)(order / 3) * LN2;
}

/* the sum over i < n of weights[i] P(N = n-1-i), in four that need not wait for each other */
static double convolved(const struct stable_sums *s, size_t n)
{
    const double *c = s->weights, *q = s->probabilities + (s->highest - n + 1);
    double sum[4] = { 0 };
    size_t i = 0;
    for (; i + 4 <= n; i += 4)
        for (size_t lane = 0; lane < 4; lane++) sum[lane] += c[i + lane] * q[i + lane];
    for (; i < n; i++) sum[0] += c[i] * q[i];
    return (sum[0] + sum[1]) + (sum[2] + sum[3]);
}

/* What has become too small for a double no longer counts. */
static void scale_down(struct stable_sums *s)
{
    for (size_t n = 0; n <= s->known; n++) s->probabilities[s->highest - n] *= 0x1p-500;
    s->log_scale += 500 * LN2;
}

static double by_recurrence(struct stable_sums *s, size_t order, double log_x)
{
    double y = exp(log_x + s->log_part);
    double *newest = &s->probabilities[s->highest];
    if (log_x != s->log_x || order < s->known) {
        *newest = 1;
        s->log_x = log_x, s->log_scale = 0, s->known = 0;
    }
    while (s->known < order) {
        size_t n = s->known + 1;
        newest[-(ptrdiff_t)n] = y / (double)n * convolved(s, n);
        s->known = n;
        if (newest[-(ptrdiff_t)n] > 0x1p500) scale_down(s);
    }
    return lgamma((double)order + 1) + log(newest[-(ptrdiff_t)order]) + s->log_scale;
}

double log_stable_sum(struct stable_sums *s, size_t order, double log_x)
{
    double log_y = log_x + s->log_part;
    if (order == 1 || s->rest == 0) return (double)order * log_y;
    return order <= s->kept ? by_coefficients(s, order, log_y) : by_recurrence(s, order, log_x);
}

double stable_sum_seconds(size_t order, bool next)
{
    double n = (double)order;
    return order <= KEPT ? 7e-8 + 4e-10 * n : 5e-10 * n * (next ? 1 : n / 2);
}
