/* power_sums.c - sums of powers of whole numbers, which the derivatives of frank and joe are
 *
 * Method
 *   Up to order 32 as (1 - exp(-mu))^b times a polynomial in x = 1/(exp(mu) - 1), with coefficients
 *   by the recurrence that differentiation gives, all positive.
 *   Beyond, the terms lie in a heap round k = order/mu, sqrt(order)/mu wide. A narrow one is summed
 *   outwards from its middle. For a wide one the sum is, to exp(-39) relative, what the singularity
 *   at mu = 0 alone contributes (Flajolet & Odlyzko 1990): those at 2 pi i m are down by
 *   |1 + 2 pi i m / mu|^-order. That is the derivative, term by term, of
 *   mu^b (1 + g_1 mu + g_2 mu^2 + ...), the power series of (1 - exp(-mu))^b.
 *
 * Special cases
 *   b = 1: the sum is exp(-mu). Near it the terms beyond k = 1 are small, but may be in the middle
 *   of the heap, so that the one of k = 1 is added on its own.
 *
 * Accuracy
 *   As in power_sums.h: that of order times a logarithm.
 */
#include "power_sums.h"
#include "archimedean.h"
#include "elementary.h"

#include <float.h>
#include <math.h>

enum { BY_POLYNOMIAL = 32, POWERS = 20 };

static const double TWO_PI = 6.28318530717958647693, NEGLIGIBLE = 1e-18;

struct power_sums {
    double part, rest, shift, log_shift;
    double *polynomials;      /* order n: coefficients of x, x^2, ... x^n from n(n-1)/2 on */
    double *log_k, *log_c;    /* of k = 0 ... terms - 1 */
    size_t terms;
    double log_gamma_rest;
    double g[POWERS];
};

static double *polynomial_of(const struct power_sums *s, size_t order)
{
    return s->polynomials + order * (order - 1) / 2;
}

/* a_k <- k a_k + (k - 2 + rest) a_(k-1) from one order to the next */
static void fill_polynomials(struct power_sums *s, size_t highest)
{
    s->polynomials[0] = 1;
    for (size_t n = 1; n < highest; n++) {
        const double *a = polynomial_of(s, n);
        double *next = polynomial_of(s, n + 1);
        next[0] = 1;
        for (size_t k = 2; k <= n; k++)
            next[k - 1] = (double)k * a[k - 1] + ((double)(k - 2) + s->rest) * a[k - 2];
        next[n] = ((double)(n - 1) + s->rest) * a[n - 1];
    }
}

static void fill_terms(struct power_sums *s)
{
    s->log_k[0] = s->log_c[0] = -HUGE_VAL;
    s->log_k[1] = s->log_c[1] = 0;
    for (size_t k = 2; k < s->terms; k++) {
        s->log_k[k] = log((double)k);
        s->log_c[k] = s->log_c[k - 1] + log(((double)(k - 2) + s->rest) / (double)k);
    }
}

/* The power b of f = (1 - exp(-mu))/mu = 1 - mu/2! + mu^2/3! - ..., from f (f^b)' = b f' f^b. */
static void fill_series(struct power_sums *s)
{
    s->g[0] = 1;
    for (int m = 1; m < POWERS; m++) {
        double f = 1, sum = 0;
        for (int i = 1; i <= m; i++) {
            f /= -(i + 1);
            sum += (i * s->part - (m - i)) * f * s->g[m - i];
        }
        s->g[m] = sum / m;
    }
}

/* Where order/mu is largest, at the least mu of a narrow heap, the terms end before 2 sqrt(order)
 * and 64 more. */
status power_sums_of(double part, double rest, double shift, double log_shift, size_t highest,
                     pool *p, struct power_sums **sums)
{
    struct power_sums *s = *sums = pool_take_zeroed(p, 1, sizeof *s);
    size_t most = highest < BY_POLYNOMIAL ? highest : BY_POLYNOMIAL;
    if (!s) return NO_MEMORY;
    s->part = part, s->rest = rest, s->shift = shift, s->log_shift = log_shift;
    s->polynomials = pool_take(p, most * (most + 1) / 2, sizeof(double));
    if (!s->polynomials) return NO_MEMORY;
    fill_polynomials(s, most);
    if (highest <= BY_POLYNOMIAL) return OK;
    s->terms = 64 + 2 * (size_t)sqrt((double)highest);
    s->log_k = pool_take(p, 2 * s->terms, sizeof *s->log_k);
    if (!s->log_k) return NO_MEMORY;
    s->log_c = s->log_k + s->terms;
    s->log_gamma_rest = lgamma(rest);
    fill_terms(s);
    fill_series(s);
    return OK;
}

/* By Horner in whichever of x and 1/x is below 1. */
static double by_polynomial(const struct power_sums *s, size_t order, double mu, double log_mu)
{
    const double *a = polynomial_of(s, order);
    double log_y = mu < 1e-17 ? log_mu : portable_log1mexp(-mu), log_x = -mu - log_y, sum;
    double small = exp(-fabs(log_x)), factor = s->part * log_y;
    if (order == 1) return factor + log_x;
    if (log_x > 0) {
        sum = a[0];
        for (size_t k = 1; k < order; k++) sum = sum * small + a[k];
        return factor + (double)order * log_x + log(sum);
    }
    sum = a[order - 1];
    for (size_t k = order - 1; k > 0; k--) sum = sum * small + a[k - 1];
    return factor + log_x + log(sum);
}

/* The derivative of mu^(b+j) is (b+j)(b+j-1)...(b+j-order+1) mu^(b+j-order). */
static double by_singularity(const struct power_sums *s, size_t order, double mu, double log_mu)
{
    double n = (double)order, term = 1, sum = 1;
    for (int j = 1; j < POWERS && fabs(term) > NEGLIGIBLE; j++) {
        term *= -mu * (s->part + j) / (n - j - s->part);
        sum += s->g[j] * term;
    }
    double power = (n - 1) + s->rest;
    return lgamma(power) - s->log_gamma_rest - power * log_mu + log(sum);
}

/* The log of a term, less that of the one at `middle`. */
static double beside(const struct power_sums *s, double order, double mu, size_t k, size_t middle)
{
    return order * (s->log_k[k] - s->log_k[middle]) + (s->log_c[k] - s->log_c[middle])
           - ((double)k - (double)middle) * mu;
}

static double by_terms(const struct power_sums *s, size_t order, double mu)
{
    double n = (double)order, sum = 1, term = 1;
    size_t middle = (size_t)fmax(2, (n - 1) / mu);
    for (size_t k = middle + 1; k < s->terms && term > NEGLIGIBLE * sum; k++)
        sum += term = exp(beside(s, n, mu, k, middle));
    term = 1;
    for (size_t k = middle - 1; k >= 2 && term > NEGLIGIBLE * sum; k--)
        sum += term = exp(beside(s, n, mu, k, middle));
    double log_middle = n * s->log_k[middle] + s->log_c[middle] - (double)middle * mu;
    return log_added(log_middle + log(sum), -mu);
}

double log_power_sum(const struct power_sums *s, size_t order, double log_t)
{
    double mu = exp(log_t) + s->shift;
    double log_mu = mu < DBL_MIN ? log_added(log_t, s->log_shift) : log(mu);
    if (s->rest == 0) return -mu;
    if (order <= BY_POLYNOMIAL) return by_polynomial(s, order, mu, log_mu);
    double widest = TWO_PI / sqrt(expm1(78 / (double)order));
    return mu < widest ? by_singularity(s, order, mu, log_mu) : by_terms(s, order, mu);
}

double power_sum_seconds(size_t order, bool next)
{
    (void)next;
    return order <= BY_POLYNOMIAL ? 1e-7 : 1.5e-7;
}
