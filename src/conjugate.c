/* conjugate.c - preconditioned conjugate gradients.
 *
 * Method: Hestenes & Stiefel (1952), with a diagonal preconditioner (Golub & Van Loan, Matrix
 * Computations, 4th edition 2013, algorithm 11.5.1).
 * Special cases: stops where A turns out not to be positive along a direction, which rounding can
 * do.
 * Accuracy: the residual is updated, not computed afresh: exact to rounding for the few rounds of
 * use here.
 */
#include "conjugate.h"

#include <math.h>
#include <string.h>

static double dot(const double *a, const double *b, size_t n)
{
    double sum = 0;
    for (size_t i = 0; i < n; i++) sum += a[i] * b[i];
    return sum;
}

void conjugate_gradients(const linear_system *a, double wanted, size_t most, double *step,
                         double *scratch)
{
    size_t n = a->n;
    double *residual = scratch, *direction = scratch + n, *image = scratch + 2 * n, before = 0;
    memset(step, 0, n * sizeof *step);
    memset(direction, 0, n * sizeof *direction);
    for (size_t i = 0; i < n; i++) residual[i] = -a->gradient[i];
    for (size_t round = 0; round < most && sqrt(dot(residual, residual, n)) > wanted; round++) {
        double now = 0;
        for (size_t i = 0; i < n; i++) now += residual[i] * residual[i] / a->diagonal[i];
        double along = before > 0 ? now / before : 0;
        for (size_t i = 0; i < n; i++)
            direction[i] = residual[i] / a->diagonal[i] + along * direction[i];
        a->apply(a->with, direction, image);
        double curvature = dot(direction, image, n);
        if (!(curvature > 0)) return;
        for (size_t i = 0; i < n; i++) {
            step[i] += now / curvature * direction[i];
            residual[i] -= now / curvature * image[i];
        }
        before = now;
    }
}
