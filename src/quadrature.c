/* quadrature.c - Gauss and Legendre's rule on 20 points, exact for polynomials to degree 39. */
#include "quadrature.h"

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
