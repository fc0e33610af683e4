/* slow_series.c - Richardson's extrapolation of partial sums.
 *
 * Method
 *   What is missing from the sum of N terms is N^-decay (c_0 + c_1/N + c_2/N^2 + ...). Partial sums
 *   at N = 16, 32, ..., 2048 remove these one after the other, without knowing the c.
 *
 * Accuracy
 *   The first step magnifies rounding by about 1.4/decay; the partial sums carry what each addition
 *   loses (Neumaier 1974).
 */
#include "slow_series.h"

#include <math.h>

enum { SUMS = 8, FIRST_LENGTH = 16 };

double sum_of_slow_series(double first, double (*ratio)(double n, double with), double with,
                          double decay)
{
    double sums[SUMS], term = first, sum = first, lost = 0;
    int n = 1;
    for (int k = 0; k < SUMS; k++) {
        while (n < FIRST_LENGTH << k) {
            term *= ratio(++n, with);
            double next = sum + term;
            lost += fabs(sum) >= fabs(term) ? (sum - next) + term : (term - next) + sum;
            sum = next;
        }
        sums[k] = sum + lost;
    }
    for (int order = 0; order + 1 < SUMS; order++) {
        double weight = 1 / expm1((decay + order) * 0.69314718055994531);
        for (int k = SUMS - 1; k > order; k--) sums[k] += (sums[k] - sums[k - 1]) * weight;
    }
    return sums[SUMS - 1];
}
