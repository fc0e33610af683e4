/* student_tail.c - Student's t by integrals of its density.
 *
 * Method
 *   With t = sqrt(df) sinh(y) the density is K cosh(y)^-df, K from Stirling's series. Up to t about
 *   1.2 the probability is 1/2 less the integral from 0; beyond, the tail is the density times an
 *   integral of (cosh(y + s)/cosh(y))^-df = (cosh s + tanh(y) sinh(s))^-df over s > 0, all of
 *   whose parts are positive. Both by Gauss and Legendre's rule.
 *   The quantile is found by Newton's steps on the logarithm of the tail, which is concave, so that
 *   from the second on they come down to the root from the right.
 *
 * Accuracy
 *   As in student_tail.h; tests/core/student_tail.c.
 */
#include "student_tail.h"
#include "normal.h"
#include "quadrature.h"
#include "stirling.h"

#include <math.h>

static const double LOG_2 = 0.69314718055994530942, LOG_PI = 1.14472988584940017414;

double log_cosh_of(double y)
{
    double size = fabs(y), half = sinh(fmin(size, 20) / 2);
    return size < 20 ? log1p(2 * half * half) : size - LOG_2;
}

double student_log_peak(double df)
{
    double a = df / 2;
    return 0.5 * (log(a) - LOG_PI) + a * log1p(0.5 / a) - 0.5
           + log_stirling_factor(a + 0.5) - log_stirling_factor(a);
}

static double density_over_peak(double y, double df)
{
    return exp(-df * log_cosh_of(y));
}

struct beyond {
    double df, slope;            /* slope: tanh y */
};

/* (cosh s + slope sinh s)^-df */
static double fall(double s, const void *with)
{
    const struct beyond *b = with;
    double half = sinh(fmin(s, 20) / 2);
    double log_ratio = s < 20 ? log1p(2 * half * half + b->slope * sinh(s))
                              : s + log((1 + b->slope) / 2);
    return exp(-b->df * log_ratio);
}

/* The integral of fall() in panels: short ones first, since the poles of cosh are near. */
static double integrated_fall(double y, double df)
{
    struct beyond b = { df, tanh(y) };
    double scale = 1 / (df * b.slope), sum = 0, from = 0, to = fmin(12 * scale, 1.5);
    while (from < 40 * scale) {
        sum += integral_of(fall, &b, from, to);
        from = to;
        to += fmin(28 * scale, 1.5 + from);
    }
    return sum;
}

static double positive_log_tail(double y, double df)
{
    double log_peak = student_log_peak(df);
    if (y * sqrt(df) < 1.2 && y < 1)
        return log(0.5 - exp(log_peak) * integral_over(density_over_peak, df, 0, y));
    return log_peak - df * log_cosh_of(y) + log(integrated_fall(y, df));
}

double student_log_tail(double y, double df)
{
    return y >= 0 ? positive_log_tail(y, df) : log1p(-exp(positive_log_tail(-y, df)));
}

double student_below(double y, double df)
{
    if (isnan(y)) return y;
    return y <= 0 ? exp(positive_log_tail(-y, df)) : 1 - exp(positive_log_tail(y, df));
}

/* y >= 0 beyond which lies the probability p <= 1/2 */
static double upper_quantile(double p, double df)
{
    double log_p = log(p), log_peak = student_log_peak(df), z = -normal_quantile(p);
    double y = asinh((z + z * (z * z + 1) / (4 * fmax(df, 1))) / sqrt(df));
    for (int i = 0; i < 100; i++) {
        double log_tail = positive_log_tail(y, df);
        double hazard = exp(log_peak - df * log_cosh_of(y) - log_tail);
        double step = (log_tail - log_p) / hazard;
        y = fmax(0, y + step);
        if (fabs(step) <= 1e-15 + 4e-16 * y) break;
    }
    return y;
}

double student_quantile(double u, double df)
{
    if (u == 0.5) return 0;
    return u < 0.5 ? -upper_quantile(u, df) : upper_quantile(1 - u, df);
}
