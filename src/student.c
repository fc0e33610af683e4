/* student.c - Student's t and its chi-square by tables of Taylor polynomials
 *
 * Method
 *   t       In w = sign(t) sqrt(df log(1 + t^2/df)) the density is c r(w) exp(-w^2/2) with
 *           r = sqrt(q / (1 - exp(-q))), q = w^2/df, for every df: as smooth as the normal and
 *           with its tails. Segment by segment from w = 12 towards 0 the Taylor series of r
 *           exp(-w^2/2) is integrated; only positive parts are added, so the tail keeps its
 *           relative accuracy. c follows from P(T > 0) = 1/2, so that no gamma function is needed.
 *   chi2    With chi2 = df exp(2y), y as a function of the normal score z of its probability obeys
 *           y' = phi(z) / f(y), where f is the density of y. Two marches from z = -12 and 12,
 *           started by the leading term of the tail, meet at 0; an error made in a tail dies away
 *           inwards. With P = exp(2y) - 1 and Y = y' the Taylor coefficients follow from
 *           P' = 2 (P + 1) Y and Y' = Y (df P Y - z); Y is taken anew from f at each segment.
 *           f(y) = K exp(-df/2 (exp(2y) - 1 - 2y)), K = 2 a^a exp(-a) / Gamma(a), a = df/2, by
 *           Stirling's series.
 *
 * Special cases
 *   df below 0.2 gets narrower segments, for the nearest singularity of r is at |w| = sqrt(2 pi
 *   df). The chi-square of a small df underflows: only its logarithm is ever used.
 *
 * Accuracy
 *   As in student.h; tests/core/student.c measures it against GSL and closed forms, and that the
 *   two marches meet.
 */
#include "student.h"

#include "elementary.h"
#include "stirling.h"

#include <math.h>

/* `tail` reaches to w = TOP; both integrations start at START. The normal scores of
 * `log_chi_square` reach CHI_HALF segments to either side of 0. */
enum { TERMS = STUDENT_TERMS, TOP = 9, START = 12, CHI_PER_UNIT = 16, CHI_HALF = 132 };

static const double SMALLEST = 0x1p-53, PI = 3.14159265358979323846;

/* value of a polynomial on its segment, -1/2 <= t <= 1/2 */
IN_LOOPS double polynomial(const double *c, double t)
{
    double sum = c[TERMS - 1];
    for (int n = TERMS - 2; n >= 0; n--) sum = sum * t + c[n];
    return sum;
}

/* Power series in t up to t^(TERMS - 1); n-th coefficients follow from those before. */

static double convolved(const double *a, const double *b, int n)
{
    double sum = 0.0;
    for (int k = 0; k <= n; k++) sum += a[k] * b[n - k];
    return sum;
}

static void series_quotient(const double *a, const double *b, double *out)
{
    for (int n = 0; n < TERMS; n++) {
        double sum = a[n];
        for (int k = 1; k <= n; k++) sum -= b[k] * out[n - k];
        out[n] = sum / b[0];
    }
}

static void series_root(const double *a, double *out)
{
    out[0] = sqrt(a[0]);
    for (int n = 1; n < TERMS; n++) {
        double sum = a[n];
        for (int k = 1; k < n; k++) sum -= out[k] * out[n - k];
        out[n] = sum / (2.0 * out[0]);
    }
}

/* exp of the quadratic a + b t + c t^2 */
static void series_exp(double a, double b, double c, double *out)
{
    out[0] = portable_exp(a);
    out[1] = b * out[0];
    for (int n = 2; n < TERMS; n++) out[n] = (b * out[n - 1] + 2.0 * c * out[n - 2]) / n;
}

/* (1 - exp(-q)) / q for the quadratic q; by its power series in q where that settles quickly */
static void series_of_decay(const double q[3], double *out)
{
    double largest = q[0] + q[1] + q[2];
    if (largest > 1.0) {
        double below[TERMS], whole[TERMS] = { q[0], q[1], q[2] };
        series_exp(-q[0], -q[1], -q[2], below);
        for (int n = 0; n < TERMS; n++) below[n] = -below[n];
        below[0] = -portable_expm1(-q[0]);
        series_quotient(below, whole, out);
        return;
    }
    int order = 1;
    for (double size = largest; size > 1e-18; size *= largest / (order + 1)) order++;
    for (int n = 0; n < TERMS; n++) out[n] = 0.0;
    out[0] = 1.0;
    for (; order >= 1; order--) {
        for (int n = TERMS - 1; n >= 0; n--) {
            double product = out[n] * q[0];
            if (n >= 1) product += out[n - 1] * q[1];
            if (n >= 2) product += out[n - 2] * q[2];
            out[n] = -product / (order + 1);
        }
        out[0] += 1.0;
    }
}

/* -dP/dt on the segment around `middle`, but for the constant c */
static void series_of_density(double middle, double width, double df, double *out)
{
    double q[3] = { middle * middle / df, 2.0 * middle * width / df, width * width / df };
    double decay[TERMS], root[TERMS], bell[TERMS];
    series_of_decay(q, decay);
    series_root(decay, root);
    series_exp(-0.5 * middle * middle, -middle * width, -0.5 * width * width, bell);
    series_quotient(bell, root, out);
    for (int n = 0; n < TERMS; n++) out[n] *= width;
}

/* Fills the table of P(T > t) from the top down. */
static void fill_tail(struct student *s)
{
    double width = 1.0 / s->per_unit, edge = 0.0, density[TERMS], scrap[TERMS];
    for (size_t k = s->segments * START / TOP; k-- > 0;) {
        double *c = k < s->segments ? s->tail[k] : scrap;
        series_of_density((0.5 + (double)k) * width, width, s->df, density);
        for (int n = 1; n < TERMS; n++) c[n] = -density[n - 1] / n;
        c[0] = 0.0;
        c[0] = edge - polynomial(c, 0.5);
        edge = polynomial(c, -0.5);
    }
    for (size_t k = 0; k < s->segments; k++)
        for (int n = 0; n < TERMS; n++) s->tail[k][n] *= 0.5 / edge;
}

/* log of the density of y = log(chi2 / df) / 2, log_k being log K */
static double log_density(double y, double df, double log_k)
{
    return log_k - 0.5 * df * portable_exp_beyond_line(2.0 * y);
}

/* The y beyond which the tail on the side of `sign` has the probability Phi(-z), by the leading
 * term density / (df |P|), which rises towards y = 0: bisection to the last bit. */
static double start_of_march(double z, double sign, double df, double log_k)
{
    double wanted = -0.5 * z * z - portable_log(z * 2.506628274631000502);
    double inner = 0.0, outer = sign < 0.0 ? 40.0 + 100.0 / df
                                           : 0.5 * portable_log1p(400.0 / df) + 40.0 / sqrt(df);
    for (;;) {
        double y = 0.5 * (inner + outer), p = fabs(portable_expm1(2.0 * sign * y));
        if (y == inner || y == outer) return sign * y;
        double found = log_density(sign * y, df, log_k) - portable_log(df * p);
        if (found > wanted) {
            inner = y;
        } else {
            outer = y;
        }
    }
}

/* Taylor coefficients of y around z for steps of `width` */
static void series_of_y(double z, double width, double df, double log_k, double *y)
{
    double big_y[TERMS], p[TERMS], slope[TERMS];         /* Y, P and Y'/Y of the head comment */
    double log_phi = -0.5 * z * z - 0.918938533204672742;
    big_y[0] = portable_exp(log_phi - log_density(y[0], df, log_k));
    p[0] = portable_expm1(2.0 * y[0]);
    for (int n = 0; n < TERMS - 1; n++) {
        double p_y = convolved(p, big_y, n), step = width / (n + 1);
        slope[n] = df * p_y - (n == 0 ? z : n == 1 ? width : 0.0);
        y[n + 1] = step * big_y[n];
        p[n + 1] = 2.0 * step * (p_y + big_y[n]);
        big_y[n + 1] = step * convolved(big_y, slope, n);
    }
}

/* One march from z = sign * START inwards, filling the table where it reaches. */
static void march(struct student *s, double sign, double log_k)
{
    double width = 1.0 / CHI_PER_UNIT, scrap[TERMS], log_df = portable_log(s->df), z, y;
    int k = START * CHI_PER_UNIT - 1;
    z = sign * (k + 0.5) * width;
    y = start_of_march(fabs(z), sign, s->df, log_k);
    for (; k >= 0; k--) {
        int place = sign < 0.0 ? CHI_HALF - 1 - k : CHI_HALF + k;
        double *c = k >= CHI_HALF ? scrap : s->log_chi_square[place];
        z = sign * (k + 0.5) * width;
        c[0] = y;
        series_of_y(z, width, s->df, log_k, c);
        y = polynomial(c, -sign);
        for (int n = 0; n < TERMS; n++) c[n] *= 2.0;
        c[0] += log_df;
    }
}

status chi_square_table(struct student *s, double df, pool *p)
{
    if (!(df > 0.0 && df <= 1e300)) return OUT_OF_DOMAIN;
    *s = (struct student){ .df = df };
    s->log_chi_square = pool_take(p, 2 * CHI_HALF, sizeof *s->log_chi_square);
    if (!s->log_chi_square) return NO_MEMORY;
    double log_k = 0.5 * portable_log(df / PI) - log_stirling_factor(0.5 * df);
    march(s, -1.0, log_k);
    march(s, 1.0, log_k);
    return OK;
}

status student_tables(struct student *s, double df, pool *p)
{
    status done = chi_square_table(s, df, p);
    if (done != OK) return done;
    s->per_unit = 16.0;
    while (s->per_unit * s->per_unit * df < 12.0 && s->per_unit < 4096.0) s->per_unit *= 2.0;
    s->segments = (size_t)(TOP * s->per_unit);
    s->tail = pool_take(p, s->segments, sizeof *s->tail);
    if (!s->tail) return NO_MEMORY;
    fill_tail(s);
    return OK;
}

/* segment and place within it of a point at `place` segments from the start of a table */
IN_LOOPS double from_table(double (*table)[TERMS], double place)
{
    int32_t k = (int32_t)place;
    return polynomial(table[k], (place - k) - 0.5);
}

IN_LOOPS double probability(double tail, double x)
{
    double sign = copysign(1.0, x), kept = chosen(tail > SMALLEST, tail, SMALLEST);
    return (0.5 + 0.5 * sign) - sign * kept;
}

double student_probability(const struct student *s, double x)
{
    if (x != x) return x;
    double root = fabs(x) / sqrt(s->df);
    double q = root < 1e150 ? portable_log1p(root * root) : 2.0 * portable_log(root);
    double place = s->per_unit * sqrt(s->df * q), last = (double)s->segments - 0.5;
    return probability(from_table(s->tail, place < last ? place : last), x);
}

double log_chi_square(const struct student *s, double z)
{
    return from_table(s->log_chi_square, z * CHI_PER_UNIT + CHI_HALF);
}

void log_chi_squares_of_rows(const struct student *s, const double *restrict z,
                             double *restrict log_chi)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) log_chi[i] = log_chi_square(s, z[i]);
}

/* Where chi2 < exp(-500), log(1 + x^2/chi2) = log(1 + x^2 e^500) - 500 - log chi2 to the last bit,
 * whatever x of ours but 0. */
FOR_EACH_PROCESSOR
void student_probabilities_of_rows(const struct student *s, const double *restrict log_chi,
                                   double *restrict x)
{
    double place[ROWS_AT_ONCE], last = (double)s->segments - 0.5, scale = s->per_unit, df = s->df;
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double held = chosen(log_chi[i] > -500.0, log_chi[i], -500.0);
        double q = log1p_within(x[i] * x[i] * exp_within(-held)) + (held - log_chi[i]);
        double far = scale * sqrt(df * q);
        place[i] = chosen(far < last, far, last);
    }
    for (int i = 0; i < ROWS_AT_ONCE; i++)
        x[i] = probability(from_table(s->tail, place[i]), x[i]);
}
