/* laplace.c - Laplace transforms of the frailties, many at a time
 *
 * Method
 *   The formulas of laplace.h in loops without branches, which become vector code. A difference
 *   from 1 is taken in the form that does not cancel: where x = exp(-t) is below 1/2 log1p(-x),
 *   above it log(-expm1(-t)), both computed and one chosen.
 *
 * Special cases
 *   Strong dependence has log t down to -theta: where exp(-t) is 1 - t to the last bit t enters by
 *   its logarithm alone. log t above 6.5, exp(-t) below 1e-288, is held there.
 *
 * Accuracy
 *   As in laplace.h; tests/core/laplace.c compares with long double.
 */
#include "laplace.h"

#include "elementary.h"
#include "random.h"

#include <math.h>

FOR_EACH_PROCESSOR
void gamma_transforms(double *restrict log_t, double theta)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double x = held(log_t[i], -690.0, 1e300), above = chosen(x > 0.0, x, 0.0);
        double below = held(above + above - x, 0.0, 690.0);              /* |x| */
        double log_sum = above + log1p_within(exp_within(-below));
        log_t[i] = exp_within(held(-log_sum / theta, -690.0, 0.0));
    }
}

FOR_EACH_PROCESSOR
void stable_transforms(double *restrict log_t, double theta)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++)
        log_t[i] = exp_within(-exp_within(held(log_t[i] / theta, -690.0, 6.5)));
}

/* Below t = e^-40 the argument of the logarithm is t + exp(-theta), both of which may underflow. */
FOR_EACH_PROCESSOR
void log_series_transforms(double *restrict log_t, double theta)
{
    double p = -portable_expm1(-theta), rest = portable_exp(-theta);
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double t = exp_within(held(log_t[i], -690.0, 6.5)), e, below = -expm1_within(-t, &e);
        double near = log1p_within(-p * e), far = log_within(below + rest * e);
        double apart = log_t[i] + theta, larger = chosen(apart > 0.0, log_t[i], -theta);
        double further = log1p_within(exp_within(held(-fabs(apart), -690.0, 0.0)));
        double logarithm = chosen(p * e < 0.5, near, far);
        log_t[i] = -chosen(log_t[i] < -40.0, larger + further, logarithm) / theta;
    }
}

FOR_EACH_PROCESSOR
void sibuya_transforms(double *restrict log_t, double theta)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) {
        double t = exp_within(held(log_t[i], -690.0, 6.5)), e, below = -expm1_within(-t, &e);
        double near = log1p_within(-e), far = log_within(below), power;
        double logarithm = chosen(log_t[i] < -40.0, log_t[i], chosen(e < 0.5, near, far));
        log_t[i] = -expm1_within(held(logarithm / theta, -690.0, 0.0), &power);
    }
}
