/* strong_rho.c - 1 - rho as an integral of positive terms.
 *
 * Method
 *   1 - rho is 12 times the integral of M - C, M(u,v) = min(u,v) being the upper bound (Nelsen
 *   2006). Clayton: for v < u, with a = 1/theta, exp(-p) = (v/u)^theta and exp(-q) = u^theta,
 *     v - C = v (1 - (1 + exp(-p) (1 - exp(-q)))^-a).
 *   Joe has the same with 1 - u, 1 - v and exponent a in place of -a. In p the integrand falls like
 *   exp(-p), in q it has a limit, both to rounding by FAR; the weight beyond is known in closed
 *   form. Its poles are pi away, so panels of width FAR / PANELS settle to rounding.
 *
 * Accuracy
 *   1e-13 relative, for theta from 2.
 */
#include "strong_rho.h"
#include "quadrature.h"

#include <math.h>

enum { PANELS = 12, NODES = PANELS * QUADRATURE_POINTS + 1 };

static const double FAR = 40;

/* Nodes exp(-t), and weights of rate exp(-rate t) dt; the last node is for all beyond FAR. */
struct nodes {
    double x[NODES], weight[NODES];
};

static void take_nodes(double rate, struct nodes *n)
{
    for (int k = 0; k < PANELS; k++) {
        double *x = n->x + k * QUADRATURE_POINTS, *weight = n->weight + k * QUADRATURE_POINTS;
        quadrature_points(k * FAR / PANELS, (k + 1) * FAR / PANELS, x, weight);
        for (int i = 0; i < QUADRATURE_POINTS; i++) {
            weight[i] *= rate * exp(-rate * x[i]);
            x[i] = exp(-x[i]);
        }
    }
    n->x[NODES - 1] = 0;
    n->weight[NODES - 1] = exp(-rate * FAR);
}

/* With y, z = exp(-p), exp(-q): |(1 + y (1 - z))^power - 1| averaged over z at rate 3a, and over y
 * at the rate given. What v and dv leave of a and the rates is outside. */
static double one_minus_rho(double a, double power, double rate)
{
    double sum = 0;
    struct nodes along, across;
    take_nodes(3 * a, &along);
    take_nodes(rate, &across);
    for (int i = 0; i < NODES; i++)
        for (int j = 0; j < NODES; j++)
            sum += along.weight[i] * across.weight[j]
                 * fabs(expm1(power * log1p(across.x[j] * (1 - along.x[i]))));
    return 24 * a / (3 * rate) * sum;
}

double one_minus_rho_of_clayton(double theta)
{
    return one_minus_rho(1 / theta, -1 / theta, 2 / theta);
}

double one_minus_rho_of_joe(double theta)
{
    return one_minus_rho(1 / theta, 1 / theta, 1 / theta);
}
