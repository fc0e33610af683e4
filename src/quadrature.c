/* quadrature.c - Gauss and Legendre's rule on 20 points, exact for polynomials to degree 39.
 *
 * Method
 *   The rule as it stands, or on intervals that are halved while the rule on the halves differs
 *   from that on the whole. Since its error falls by up to 2^40 with each halving, what agrees to
 *   1e-12 is right to rounding.
 */
#include "quadrature.h"

#include <math.h>
#include <stdbool.h>

static const double node[] = {
    0.07652652113349734, 0.22778585114164507, 0.37370608871541955, 0.5108670019508271,
    0.636053680726515, 0.7463319064601508, 0.8391169718222188, 0.912234428251326,
    0.9639719272779138, 0.9931285991850949
};
static const double weight[] = {
    0.15275338713072584, 0.14917298647260374, 0.14209610931838204, 0.13168863844917664,
    0.11819453196151841, 0.10193011981724044, 0.08327674157670475, 0.06267204833410907,
    0.04060142980038694, 0.017614007139152118
};

double integral_over(double (*f)(double x, double with), double with, double from, double to)
{
    double middle = (from + to) / 2, half = (to - from) / 2, sum = 0;
    for (int i = 9; i >= 0; i--)
        sum += weight[i] * (f(middle - half * node[i], with) + f(middle + half * node[i], with));
    return sum * half;
}

void quadrature_points(double from, double to, double x[QUADRATURE_POINTS],
                       double weights[QUADRATURE_POINTS])
{
    double middle = (from + to) / 2, half = (to - from) / 2;
    for (int i = 0; i < QUADRATURE_POINTS; i++) {
        int k = i < 10 ? i : i - 10;
        x[i] = middle + half * (i < 10 ? node[k] : -node[k]);
        weights[i] = half * weight[k];
    }
}

double integral_of(double (*f)(double x, const void *with), const void *with, double from,
                   double to)
{
    double middle = (from + to) / 2, half = (to - from) / 2, sum = 0;
    for (int i = 9; i >= 0; i--)
        sum += weight[i] * (f(middle - half * node[i], with) + f(middle + half * node[i], with));
    return sum * half;
}

struct adapting {
    double (*f)(double x, const void *with);
    const void *with;
    double enough;
    int left;                /* halvings that may still be made: noise in f never agrees */
    double error;            /* how far apart the rules were where it stopped */
};

static double halved(struct adapting *a, double from, double to, double whole, int depth)
{
    double middle = (from + to) / 2;
    double left = integral_of(a->f, a->with, from, middle);
    double right = integral_of(a->f, a->with, middle, to), apart = fabs(left + right - whole);
    bool settled = !(apart > 1e-12 * fabs(left + right) && apart > a->enough);
    if (settled || depth == 0 || a->left == 0) {
        a->error += apart;
        return left + right;
    }
    a->left--;
    left = halved(a, from, middle, left, depth - 1);
    return left + halved(a, middle, to, right, depth - 1);
}

double adapted_integral(double (*f)(double x, const void *with), const void *with, double from,
                        double to, double enough, double *error)
{
    enum { DEEPEST = 44, MOST_HALVINGS = 200 };
    struct adapting a = { f, with, enough, MOST_HALVINGS, 0 };
    double sum = halved(&a, from, to, integral_of(f, with, from, to), DEEPEST);
    *error += a.error;
    return sum;
}

struct from_zero {
    double (*f)(double x, const void *with);
    const void *with;
    double end;
};

/* With x = end s^5 the interval near 0 where f bends shrinks to nothing. */
static double in_root(double s, const void *with)
{
    const struct from_zero *k = with;
    double power = s * s * s * s;
    return 5 * k->end * power * k->f(k->end * power * s, k->with);
}

double integral_to_bend(double (*f)(double x, const void *with), const void *with, double end,
                        double bend)
{
    double ignored = 0, cut = end - fmin(end / 2, 40 * bend);
    double sum = adapted_integral(f, with, cut, end, 0, &ignored);
    return sum + adapted_integral(in_root, &(struct from_zero){ f, with, cut }, 0, 1, 0, &ignored);
}

double outward_integral(double (*f)(double x, const void *with), const void *with, double from,
                        double length)
{
    enum { MOST_PANELS = 60 };
    double sum = 0, ignored = 0;
    for (int panel = 0; panel < MOST_PANELS; panel++) {
        double enough = 1e-16 * sum;
        double part = fabs(adapted_integral(f, with, from, from + length, enough, &ignored));
        sum += part;
        if (part <= 1e-17 * sum && (sum > 0 || panel > 8)) break;
        from += length;
        length *= 2;
    }
    return sum;
}
