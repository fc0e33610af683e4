/* chi_square_score.c - the chi-square whose probability has a given normal score, at any depth.
 *
 * Method
 *   Within |z| <= 8 the table of student.h. Beyond, with a = df/2 and chi-square = df exp(t) the
 *   tail is the density at t times an integral whose integrand is 1 at 0 and falls:
 *     P or Q = K exp(-a (exp(t) - 1 - t)) times the integral over r > 0 of
 *              exp(-a ((exp(t) - 1) (exp(r) - 1) + exp(r) - 1 - r)), with -r for r below,
 *   all of whose parts are positive. Its logarithm is concave in t, so that Newton's steps from
 *   further out come in to the root from one side. Between scores 8 2^(k/4) and the next, t is the
 *   polynomial through 12 Chebyshev points, found when first asked: log chi-square behaves as z^2
 *   or log z there, whose singularity at 0 lies 11 half-lengths away.
 *
 * Special cases
 *   The logarithm alone exists where the chi-square of a small df underflows.
 *
 * Accuracy
 *   As in chi_square_score.h; tests/core/chi_square_score.c.
 */
#include "chi_square_score.h"

#include "elementary.h"
#include "normal.h"
#include "quadrature.h"
#include "stirling.h"

#include <math.h>

enum { TERMS = STUDENT_TERMS, PER_DOUBLING = 4 };
static const double NEAR = 8, FARTHEST = 1e12, PI = 3.14159265358979323846;

/* side: -1 for the lower tail, 1 for the upper one. */
struct falling {
    double a, slope, side;
};

static double fall(double r, const void *with)
{
    const struct falling *f = with;
    double out = f->side * r;
    return exp(-f->a * (f->slope * expm1(out) + portable_exp_beyond_line(out)));
}

static double integrated_fall(double t, double a, double side)
{
    struct falling f = { a, expm1(t), side };
    double scale = 1 / (a * fabs(f.slope));
    return integral_of(fall, &f, 0, 12 * scale) + integral_of(fall, &f, 12 * scale, 40 * scale);
}

/* t beyond which the tail has the probability Phi(-z), z >= NEAR */
static double log_ratio_at(const struct chi_square_score *s, double z, double side)
{
    double a = s->near.df / 2, wanted = normal_log_probability(-z), part = z * z / (2 * a);
    double t = side > 0 ? log1p(part + sqrt(2 * part)) : -part - sqrt(2 * part);
    for (int i = 0; i < 60; i++) {
        double integral = integrated_fall(t, a, side);
        double found = s->log_k - a * portable_exp_beyond_line(t) + log(integral);
        double step = side * (found - wanted) * integral;
        t += step;
        if (fabs(step) <= 1e-15 * fabs(t)) break;
    }
    return t;
}

/* The coefficients in x of the polynomial with these values at these x: Newton's form, multiplied
 * out. */
static void polynomial_through(const double *x, double *values, double *c)
{
    for (int order = 1; order < TERMS; order++)
        for (int i = TERMS - 1; i >= order; i--)
            values[i] = (values[i] - values[i - 1]) / (x[i] - x[i - order]);
    for (int n = 0; n < TERMS; n++) c[n] = 0;
    for (int i = TERMS - 1; i >= 0; i--) {
        for (int n = TERMS - 1; n > 0; n--) c[n] = c[n - 1] - x[i] * c[n];
        c[0] = values[i] - x[i] * c[0];
    }
}

static double start_of(int segment)
{
    return NEAR * exp2((double)segment / PER_DOUBLING);
}

static void fill(struct chi_square_score *s, int segment, double side, double *c)
{
    double from = start_of(segment), length = start_of(segment + 1) - from;
    double x[TERMS], values[TERMS];
    for (int i = 0; i < TERMS; i++) {
        x[i] = cos(PI * (i + 0.5) / TERMS) / 2;
        values[i] = log_ratio_at(s, from + length * (x[i] + 0.5), side) / 2;
    }
    polynomial_through(x, values, c);
}

status chi_square_score_prepare(struct chi_square_score *s, double df, pool *p)
{
    status done = chi_square_table(&s->near, df, p);
    if (done != OK) return done;
    s->log_df = log(df);
    s->log_k = 0.5 * log(df / (4 * PI)) - log_stirling_factor(df / 2);
    s->filled = pool_take_zeroed(p, 2 * FAR_SEGMENTS, sizeof *s->filled);
    s->far = pool_take(p, 2 * FAR_SEGMENTS, sizeof *s->far);
    return s->filled && s->far ? OK : NO_MEMORY;
}

static double far_scale(struct chi_square_score *s, double z)
{
    double size = fmin(fabs(z), FARTHEST), side = z < 0 ? -1 : 1;
    int segment = (int)(PER_DOUBLING * log2(size / NEAR)), place;
    double from = start_of(segment), length = start_of(segment + 1) - from;
    place = z < 0 ? segment : FAR_SEGMENTS + segment;
    double *c = s->far[place], x = (size - from) / length - 0.5, sum;
    if (!s->filled[place]) fill(s, segment, side, c);
    s->filled[place] = true;
    sum = c[TERMS - 1];
    for (int n = TERMS - 2; n >= 0; n--) sum = sum * x + c[n];
    return sum;
}

double log_chi_square_scale(struct chi_square_score *s, double z)
{
    if (fabs(z) > NEAR) return far_scale(s, z);
    return (log_chi_square(&s->near, z) - s->log_df) / 2;
}
