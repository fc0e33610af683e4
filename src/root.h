/* root.h - where a function of one variable is zero. */
#ifndef ROOT_H
#define ROOT_H

#include "status.h"

/* Finds x between low and high with f(x) = 0, to the last two bits of x or as well as f's own
 * rounding allows. f must be continuous and have opposite signs at the ends, or be zero at one of
 * them; `with` is handed on to f. OUT_OF_DOMAIN when the signs are alike or f is NaN at an end,
 * NOT_SETTLED after 200 evaluations. Source: Chandrupatla (1997). */
status root_between(double (*f)(double x, const void *with), const void *with,
                    double low, double high, double *x);

#endif
