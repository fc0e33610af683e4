/* root.c - bracketing root finder.
 *
 * Method
 *   Chandrupatla, "A new hybrid quadratic/bisection algorithm for finding the zero of a nonlinear
 *   function without using derivatives", Advances in Engineering Software 28 (1997): inverse
 *   quadratic interpolation where the three latest points vouch for it, else bisection.
 *
 * Special cases
 *   An end of the bracket that is a root is returned as it is.
 *
 * Accuracy
 *   The bracket shrinks until it is no wider than two units in the last place of x.
 */
#include "root.h"

#include <float.h>
#include <math.h>

enum { MOST_EVALUATIONS = 200 };

/* Newest point a, the point b with the opposite sign, and the one c that a or b replaced. */
struct bracket {
    double a, fa, b, fb, c, fc;
};

static void take(struct bracket *k, double x, double fx)
{
    k->c = k->b;
    k->fc = k->fb;
    if ((fx > 0) == (k->fa > 0)) {
        k->c = k->a;
        k->fc = k->fa;
    } else {
        k->b = k->a;
        k->fb = k->fa;
    }
    k->a = x;
    k->fa = fx;
}

/* How far to go from a towards b, as a part of the way. */
static double next_step(const struct bracket *k)
{
    double xi = (k->a - k->b) / (k->c - k->b), phi = (k->fa - k->fb) / (k->fc - k->fb);
    if (phi * phi >= xi || (1 - phi) * (1 - phi) >= 1 - xi) return 0.5;
    return k->fa / (k->fb - k->fa) * k->fc / (k->fb - k->fc)
         + (k->c - k->a) / (k->b - k->a) * k->fa / (k->fc - k->fa) * k->fb / (k->fc - k->fb);
}

status root_between(double (*f)(double x, const void *with), const void *with,
                    double low, double high, double *x)
{
    struct bracket k = { .a = high, .fa = f(high, with), .b = low, .fb = f(low, with) };
    if (k.fa == 0 || k.fb == 0) {
        *x = k.fa == 0 ? high : low;
        return OK;
    }
    if (!((k.fa < 0 && k.fb > 0) || (k.fa > 0 && k.fb < 0))) return OUT_OF_DOMAIN;

    double step = 0.5;
    for (int i = 2; i < MOST_EVALUATIONS; i++) {
        double at = k.a + step * (k.b - k.a);
        take(&k, at, f(at, with));
        double best = fabs(k.fa) < fabs(k.fb) ? k.a : k.b;
        double least = (2 * DBL_EPSILON * fabs(best) + DBL_MIN) / fabs(k.b - k.a);
        *x = best;
        if (k.fa == 0 || least >= 0.5) return OK;
        step = next_step(&k);
        if (step < least) step = least;
        if (step > 1 - least) step = 1 - least;
    }
    return NOT_SETTLED;
}
