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

/* The same for a function that needs more beside x. */
double integral_of(double (*f)(double x, const void *with), const void *with, double from,
                   double to);

/* The integral over an interval that is halved until both halves agree with the whole, to 1e-12 of
 * their sum or to `enough`, or have been halved 200 times: about 1e-14 relative for a positive f
 * that bends anywhere. *error grows by how far apart they still are. */
double adapted_integral(double (*f)(double x, const void *with), const void *with, double from,
                        double to, double enough, double *error);

/* The integral from 0 to `end`, to 1e-12 of itself, of a positive bounded f that may behave like a
 * power or a logarithm of x at 0 and change within some `bend` of the end. */
double integral_to_bend(double (*f)(double x, const void *with), const void *with, double end,
                        double bend);

/* The integral of a positive f from `from` to infinity (length > 0) or minus infinity (length < 0),
 * over panels the first of which has this length and each next twice that of the one before, until
 * one adds nothing. f must not rise again once it has fallen to nothing. */
double outward_integral(double (*f)(double x, const void *with), const void *with, double from,
                        double length);

#endif
