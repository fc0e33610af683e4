/* elliptical_pair.c - the distribution function of a normal and of a t pair.
 *
 * Method
 *   The integral over the first column up to its limit of density times conditional probability,
 *   both positive, so that relative accuracy holds in the tails and for any df. The column with the
 *   smaller limit is integrated over: then the integrand falls from that limit, or from 0,
 *   outwards, and bends at that limit if it bends sharply anywhere near its peak. t: with x =
 *   sqrt(df) sinh(a) the density in a is K cosh(a)^-df, and given x the other column is t with df
 *   + 1 degrees of freedom and spread as cosh(a).
 *
 * Special cases
 *   Correlations -1 and 1 are the caller's.
 */
#include "elliptical_points.h"
#include "normal.h"
#include "quadrature.h"
#include "student_tail.h"

#include <math.h>

struct pair {
    double other, correlation, spread, df, log_peak;
    const struct student *given;
};

static struct pair pair_of(double other, double correlation)
{
    return (struct pair){ .other = other, .correlation = correlation,
                          .spread = sqrt((1 - correlation) * (1 + correlation)) };
}

/* The integral up to `limit`. With a correlation near -1 or 1 what happens there happens within
 * `spread` of it. */
static double up_to(double (*f)(double x, const void *with), const struct pair *p, double limit,
                    double length)
{
    return outward_integral(f, p, limit, -fmin(length, 4 * p->spread));
}

static double normal_strip(double x, const void *with)
{
    const struct pair *p = with;
    double log_density = -x * x / 2 - 0.918938533204672742;
    return exp(log_density) * normal_probability((p->other - p->correlation * x) / p->spread);
}

double normal_pair_probability(double x, double y, double correlation)
{
    struct pair p = pair_of(fmax(x, y), correlation);
    double limit = fmin(9, fmin(x, y));            /* beyond 9 lies 1e-19 */
    return up_to(normal_strip, &p, limit, 4 / (1 + fabs(limit)));
}

/* P(T <= sqrt(df + 1) s): by the table as far as it is accurate */
static double below(double s, const struct pair *p)
{
    double quick = student_probability(p->given, s * sqrt(p->df + 1));
    return quick > 1e-14 ? quick : student_below(asinh(s), p->df + 1);
}

/* sinh(b) / cosh(a) */
static double sinh_over_cosh(double b, double a)
{
    double size_a = fabs(a), size_b = fabs(b);
    double ratio = exp(size_b - size_a) * -expm1(-2 * size_b) / (1 + exp(-2 * size_a));
    return copysign(ratio, b);
}

static double student_strip(double a, const void *with)
{
    const struct pair *p = with;
    double log_density = p->log_peak - p->df * log_cosh_of(a);
    if (log_density < -745) return 0;
    double other = (sinh_over_cosh(p->other, a) - p->correlation * tanh(a)) / p->spread;
    return exp(log_density) * below(other, p);
}

double student_pair_probability(double a, double b, double correlation, double df,
                                const struct student *given)
{
    struct pair p = pair_of(fmax(a, b), correlation);
    double limit = fmin(a, b), outwards = df * tanh(fabs(limit));
    p.df = df;
    p.given = given;
    p.log_peak = student_log_peak(df);
    return up_to(student_strip, &p, limit, 4 / (outwards + sqrt(df)));
}
