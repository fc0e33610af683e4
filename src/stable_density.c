/* stable_density.c - the density of positive stable variables.
 *
 * Method
 *   By Kanter (1975) x = log V / (theta - 1) is B(a) - log E with a uniform and E exponential, so
 *   that its density is the integral over a of h(B(a) - x), h(c) = exp(c - e^c), which has one
 *   peak: taken in -log(1 - a), and kept as Chebyshev series of its logarithm in asinh(x - centre),
 *   which stretches the left tail, doubly exponential, and shrinks the right one. From V^(1/theta)
 *   = 10 on the series in powers of V^(-1/theta) (Feller 1971, XVII.6), whose terms fall tenfold.
 *
 * Special cases
 *   theta near 1: the logarithms of B are of ratios near 1, and so taken from their differences.
 *
 * Accuracy
 *   As in stable_density.h.
 */
#include "stable_density.h"
#include "elementary.h"
#include "peak.h"
#include "stirling.h"

#include <math.h>

static const double PI = 3.14159265358979323846;

/* log of sin(pi a share) / sin(pi a), a = 1 - b */
static double log_second(double a, double b, double share)
{
    return log(portable_sin_pi(a * share) / portable_sin_pi(fmin(a, b)));
}

/* B(a), a = 1 - b: (theta - 1) B is the log V of a uniform a and E = 1. */
static double angle_part(double a, double b, double theta)
{
    double beyond = theta - 1, share = beyond / theta;
    double whole = portable_sin_pi(fmin(a, b));
    double part = portable_sin_pi(fmin(a / theta, (beyond + b) / theta));
    double apart = 2 * portable_sin_pi(a * share / 2) / whole;
    double middle = a * (1 - share / 2), cosine = middle < 0.5 ? portable_sin_pi(0.5 - middle)
                                                               : -portable_sin_pi(middle - 0.5);
    double over = -cosine * apart;                                /* part / whole - 1 */
    double ratio = fabs(over) < 0.5 ? log1p(over) : log(part / whole);
    return ratio / beyond + log_second(a, b, share);
}

static double part_at(double s, double theta)
{
    return angle_part(fmax(-expm1(-s), 1e-30), exp(-s), theta);
}

/* A point x, and s_0 = -log b_0 at which B is x. */
struct angle {
    double theta, x, s, b, share;
};

/* B(s_0 + move) - x without the difference, by sin(pi a / theta) / sin(pi a) = cos(pi a share) +
 * cot(pi b) sin(pi a share), whose logarithm theta - 1 divides, unless the move is far. */
static double moved_part(double move, const struct angle *k)
{
    double b = k->b * exp(-move), less = k->b * -expm1(-move), a = 1 - b, a0 = 1 - k->b;
    double sine = sin(PI * k->b), step = PI * less * k->share / 2;
    double mean = PI * (a + a0) * k->share / 2;
    double at = cos(PI * a0 * k->share) + cos(PI * k->b) / sine * sin(PI * a0 * k->share);
    double change = -2 * sin(mean) * sin(step)
                    + sin(PI * less) / (sin(PI * b) * sine) * sin(PI * a * k->share)
                    + cos(PI * k->b) / sine * 2 * cos(mean) * sin(step);
    if (fabs(change / at) > 0.5) return part_at(k->s + move, k->theta) - k->x;
    return log1p(change / at) / (k->theta - 1)
           + log_second(fmax(a, 1e-30), b, k->share) - log_second(a0, k->b, k->share);
}

/* log of h(B - x) da/ds at a = 1 - exp(-s), s = s_0 + move */
static double log_integrand(double move, const void *with)
{
    const struct angle *k = with;
    double c = k->s > 0 ? moved_part(move, k) : part_at(move, k->theta) - k->x;
    return c - exp(c) - k->s - move;
}

/* Far to the right x = B is solved first, since there B - x would have lost its digits. */
static double log_density_of(double x, double start, double theta)
{
    struct angle k = { .theta = theta, .x = x, .share = (theta - 1) / theta };
    double low = 0, high = 1;
    while (part_at(high, theta) < x) low = high, high *= 2;
    if (x < start + 5) return log_integral_of_peak(log_integrand, &k, 0, HUGE_VAL, 0, high);
    for (int i = 0; i < 50; i++) {
        double middle = (low + high) / 2;
        *(part_at(middle, theta) < x ? &low : &high) = middle;
    }
    k.s = high;
    k.b = exp(-k.s);
    return log_integral_of_peak(log_integrand, &k, -k.s, HUGE_VAL, -k.s, 1);
}

/* Chebyshev coefficients from values at Chebyshev's points. */
static void set_panel(struct stable_density *s, int panel)
{
    double value[STABLE_ORDER];
    for (int i = 0; i < STABLE_ORDER; i++) {
        double y = s->first + s->panel * (panel + (1 + cos(PI * (i + 0.5) / STABLE_ORDER)) / 2);
        double x = s->centre + sinh(y);
        value[i] = log_density_of(x, s->start, s->theta) + exp(s->start - x);
    }
    for (int k = 0; k < STABLE_ORDER; k++) {
        double sum = 0;
        for (int i = 0; i < STABLE_ORDER; i++)
            sum += value[i] * cos(PI * k * (i + 0.5) / STABLE_ORDER);
        s->at[panel][k] = (k ? 2 : 1) * sum / STABLE_ORDER;
    }
}

/* The density of log V is the sum over n of power[n - 1] w^n, w = V^(-1/theta): n! is divided out
 * in logarithms. */
static void set_series(struct stable_density *s)
{
    double share = (s->theta - 1) / s->theta;
    for (int n = 1; n <= STABLE_TERMS; n++) {
        double turn = n * fmin(share, 1 / s->theta), sign = share > 0.5 && n % 2 == 0 ? -1 : 1;
        double half_turns = floor(turn), sine = portable_sin_pi(turn - half_turns);
        if (fmod(half_turns, 2) == 1) sign = -sign;
        double log_size = portable_log_gamma(1 + n / s->theta) - portable_log_gamma(1.0 + n);
        s->power[n - 1] = sign * sine / PI * exp(log_size);
    }
}

void stable_density_prepare(struct stable_density *s, double theta)
{
    double beyond = theta - 1, start = angle_part(1e-30, 1, theta);
    *s = (struct stable_density){ .theta = theta, .start = start, .lowest = start - 3.9,
                                   .centre = start + 1 };
    s->farthest = log(10) * theta / beyond;
    s->first = asinh(s->lowest - s->centre);
    double length = asinh(s->farthest - s->centre) - s->first;
    s->panels = (int)fmin(STABLE_PANELS, ceil(length / 1.5));
    s->panel = length / s->panels;
    for (int k = 0; k < s->panels; k++) set_panel(s, k);
    set_series(s);
}

static double by_series(const struct stable_density *s, double x)
{
    double log_w = -x * (s->theta - 1) / s->theta, w = exp(log_w), sum = 0;
    for (int n = STABLE_TERMS; n-- > 0;) sum = sum * w + s->power[n];
    return log_w + log(sum * (s->theta - 1));
}

double stable_log_density(const struct stable_density *s, double x)
{
    if (x >= s->farthest) return by_series(s, x);
    double at = fmax(0, (asinh(x - s->centre) - s->first) / s->panel);
    int panel = (int)fmin(at, s->panels - 1);
    double y = 2 * (at - panel) - 1, before = 0, now = 0;
    for (int k = STABLE_ORDER - 1; k >= 1; k--) {
        double next = s->at[panel][k] + 2 * y * now - before;
        before = now, now = next;
    }
    return s->at[panel][0] + y * now - before - exp(s->start - x);
}
