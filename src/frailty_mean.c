/* frailty_mean.c - means over the frailties of Archimedean copulas.
 *
 * Method
 *   gamma       an integral in x = log(theta V), with log-density -a (e^x - 1 - x), a = 1/theta,
 *               but for a constant.
 *   stable      an integral in log V over the density of stable_density.c.
 *   log-series, Sibuya
 *               the terms of V = 1 ... TERMS one by one; those beyond by the midpoint form of Euler
 *               and Maclaurin's formula, an integral in log V and two derivatives at TERMS + 1/2 by
 *               differences of the terms about it. Sibuya's probability there is
 *               a Gamma(V - a) / (Gamma(1 - a) V!), of which Stirling's series at V - a/2 has even
 *               powers only (Abramowitz & Stegun 6.1.41 and 23.1).
 *   Each of these integrands but that of stable has one peak: the logarithm of the product is
 *   concave in log V, and that of the density is, or nearly so.
 *
 * Special cases
 *   theta = 1 of stable and Sibuya: V = 1. theta near 0 of gamma and log-series: theta 1e-20 and
 *   1e-16, which nothing can tell from it.
 *
 * Accuracy
 *   As in frailty_mean.h. With theta above 1e4 the logarithms of t have lost what that has.
 */
#include "frailty_mean.h"
#include "archimedean.h"
#include "elementary.h"
#include "peak.h"
#include "quadrature.h"
#include "stirling.h"

#include <math.h>

enum { TERMS = 128 };

static const double TWO_PI = 6.28318530717958647693;
static const double LEVEL = 40;           /* exp(-exp(x)) is 1 to rounding as far below x = 0 */

static double log_product(double log_v, const struct frailty_mean *m)
{
    double logarithms = 0, product = 1;
    for (size_t j = 0; j < m->n; j++) {
        double z = log_v + m->log_t[j];
        if (z > 3.7) continue;                             /* 1 to rounding */
        if (z < -37) logarithms += z;
        else product *= -expm1(-exp(z));
        if (product < 1e-280) {
            logarithms += log(product);
            product = 1;
        }
    }
    return logarithms + log(product);
}

/* log V from which the product is 1 to rounding; 45 below it is below 1e-17 */
static double log_high(const struct frailty_mean *m)
{
    double least = HUGE_VAL;
    for (size_t j = 0; j < m->n; j++) least = fmin(least, m->log_t[j]);
    return 4 - least + 1e-15 * fabs(least);
}

typedef double log_integrand(double x, const void *with);

/* The log of the integral from `low` on, in parts between which the integrand may bend: up to where
 * the product becomes 1, and then, if there is room, up to `level`, where what has been level until
 * then begins to fall. Without the product the peak is at `mode`. */
static double log_integral(log_integrand *f, const struct frailty_mean *m, double low,
                           double mode, double product_is_1, double level)
{
    double sum = -HUGE_VAL, from = low;
    if (product_is_1 > low) {
        double least = 1 + 1e-15 * fabs(product_is_1);
        double start = fmax(low, fmin(mode, product_is_1) - least);
        sum = log_integral_of_peak(f, m, low, product_is_1, start, product_is_1);
        from = product_is_1;
        if (mode <= from && f(from, m) < sum - 100) return sum;
    }
    if (level > from) {
        sum = log_added(sum, log_integral_of_peak(f, m, from, level, from, level));
        from = level;
    }
    double to = fmax(mode, from) + 1 + 1e-15 * fabs(from);
    return log_added(sum, log_integral_of_peak(f, m, from, HUGE_VAL, from, to));
}

/* ---- gamma ---- */

static double log_with_gamma(double x, const void *with)
{
    const struct frailty_mean *m = with;
    return log_product(x - log(m->theta), m) - portable_exp_beyond_line(x) / m->theta;
}

double gamma_mean(struct frailty_mean *m)
{
    m->theta = fmax(m->theta, 1e-20);
    double a = 1 / m->theta, scale = log(m->theta), top = log_high(m) + scale;
    return log_integral(log_with_gamma, m, -HUGE_VAL, 0, top, scale - LEVEL)
           + log(a / TWO_PI) / 2 - log_stirling_factor(a);
}

/* ---- stable ---- */

static double log_with_stable(double x, const void *with)
{
    const struct frailty_mean *m = with;
    return log_product((m->theta - 1) * x, m) + stable_log_density(&m->density, x);
}

/* The same in y, x = centre + sinh(y). */
static double stretched(double y, const void *with)
{
    const struct frailty_mean *m = with;
    return exp(log_with_stable(m->density.centre + sinh(y), m)) * cosh(y);
}

/* Between cuts next to which the product may bend. */
static double over_panel(const struct frailty_mean *m, double from, double to, const double *cuts,
                         double enough)
{
    double sum = 0, ignored = 0;
    for (int k = 0; k < 2; k++) {
        if (!(cuts[k] > from && cuts[k] < to)) continue;
        sum += adapted_integral(stretched, m, from, cuts[k], enough, &ignored);
        from = cuts[k];
    }
    return sum + adapted_integral(stretched, m, from, to, enough, &ignored);
}

/* Near theta = 1 there are two peaks, at V = 1 and where V is large enough for all columns: the
 * panels of the density see both. */
double stable_mean(struct frailty_mean *m)
{
    if (m->theta == 1) return log_product(0, m);
    if (!m->has_density) stable_density_prepare(&m->density, m->theta);
    m->has_density = true;
    const struct stable_density *s = &m->density;
    double far = s->farthest, beyond = m->theta - 1, high = log_high(m) / beyond;
    double cuts[2] = { asinh(high - 45 / beyond - s->centre), asinh(high - s->centre) };
    double sum = exp(log_integral(log_with_stable, m, far, far, high, -HUGE_VAL));
    for (int k = s->panels - 1; k >= 0; k--) {
        double from = s->first + k * s->panel;
        sum += over_panel(m, from, from + s->panel, cuts, 1e-13 * sum);
    }
    return log(sum);
}

/* ---- those of whole numbers ---- */

/* What Euler and Maclaurin add to the integral from TERMS + 1/2 for the sum beyond TERMS; the terms
 * are those at TERMS - 1 ... TERMS + 2. */
static double beyond_integral(const double *f)
{
    double slope = (27 * (f[2] - f[1]) - (f[3] - f[0])) / 24;
    double third = (f[3] - f[0]) - 3 * (f[2] - f[1]);
    return slope / 24 - 7 * third / 5760;
}

/* The sum of the products times probabilities; log_rest is that of an integral beyond TERMS. */
static double log_of_sum(const struct frailty_mean *m, const double *probability, double log_rest)
{
    double sum = 0, last[4];
    for (int k = 1; k <= TERMS + 2; k++) {
        double term = probability[k] * exp(log_product(log((double)k), m));
        if (k <= TERMS) sum += term;
        if (k >= TERMS - 1) last[k - TERMS + 1] = term;
    }
    return log(sum + exp(log_rest) + beyond_integral(last));
}

/* log of -log(1 - exp(-theta)) */
static double log_fall(double theta)
{
    return theta > 40 ? -theta : log(-portable_log1mexp(-theta));
}

static double log_with_log_series(double log_k, const void *with)
{
    const struct frailty_mean *m = with;
    return log_product(log_k, m) - exp(log_k + log_fall(m->theta));
}

/* P(V = k) = (1 - exp(-theta))^k / (k theta) */
double log_series_mean(struct frailty_mean *m)
{
    double theta = m->theta = fmax(m->theta, 1e-16), probability[TERMS + 3];
    double log_base = portable_log1mexp(-theta), from = log(TERMS + 0.5);
    for (int k = 1; k <= TERMS + 2; k++) probability[k] = exp(k * log_base) / (k * theta);
    double level = -log_fall(theta) - LEVEL;
    double rest = log_integral(log_with_log_series, m, from, from, log_high(m), level) - log(theta);
    return log_of_sum(m, probability, rest);
}

static double log_with_sibuya(double log_k, const void *with)
{
    const struct frailty_mean *m = with;
    double a = 1 / m->theta, h = (1 + a) / 2, s = h * h;
    double shift = log_k < 40 ? log1p(-a / 2 * exp(-log_k)) : 0;           /* log w - log k */
    double c2 = (s - 0.25) / 3, c4 = ((s - 5.0 / 6) * s + 7.0 / 48) / 10;
    double z = exp(-2 * (log_k + shift));
    return log_product(log_k, m) - a * log_k - 2 * h * shift + h * z * (c2 + z * c4);
}

/* P(V = 1) = a = 1/theta, P(V = k + 1) = P(V = k) (k - a) / (k + 1) */
double sibuya_mean(struct frailty_mean *m)
{
    double a = 1 / m->theta, rest = (m->theta - 1) / m->theta, probability[TERMS + 3];
    probability[1] = a;
    for (int k = 1; k < TERMS + 2; k++)
        probability[k + 1] = probability[k] * ((k - 1) + rest) / (k + 1);
    double from = log(TERMS + 0.5), log_rest = -HUGE_VAL;
    if (rest > 0)
        log_rest = log_integral(log_with_sibuya, m, from, from, log_high(m), -HUGE_VAL)
                   + log(a * rest) - portable_log_gamma(1 + rest);
    return log_of_sum(m, probability, log_rest);
}
