/* quadrature.h - integrals of smooth functions. */
#ifndef QUADRATURE_H
#define QUADRATURE_H

/* The integral of f(x, with) for x from `from` to `to`, by Gauss and Legendre's rule on 20 points:
 * to rounding where f is analytic within a distance of 0.6 (to - from) of the interval. */
double integral_over(double (*f)(double x, double with), double with, double from, double to);

/* The points and weights of the same rule, for integrals in more than one variable. */
enum { QUADRATURE_POINTS = 20 };
void quadrature_points(double from, double to, double x[QUADRATURE_POINTS],
                       double weights[QUADRATURE_POINTS]);

#endif
