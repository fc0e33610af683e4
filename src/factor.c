/* factor.c - the Cholesky factor, row by row.
 *
 * Special cases
 *   A pivot of the factorisation that is zero to rounding gives a zero column: the matrix is
 *   singular and the copula lives on fewer dimensions. Its row is scaled back to length one, so
 *   that the margin stays uniform. A pivot far below zero can still be rounding, enlarged by small
 *   pivots before it, in a matrix that is feasible to -1e-12 d (correlation.h). The factor then is
 *   that of (M + e I) / (1 + e), e = 2e-12 d, which has pivots of 1e-12 d at least.
 *   Where it has no factor either: OUT_OF_DOMAIN, no correlation matrix.
 *
 * Accuracy
 *   Sums run in a fixed order, without contraction: the bits do not depend on the machine.
 */
#include "factor.h"

#include <math.h>

static const double ROUNDING = 0x1p-50, NEGATIVE = -1e-8, LIFT = 2e-12;

static void scale_to_unit_length(double *row, size_t n)
{
    double sum = 0.0;
    for (size_t k = 0; k < n; k++) sum += row[k] * row[k];
    for (size_t k = 0; k < n; k++) row[k] /= sqrt(sum);
}

/* l l' is the matrix whose correlations are `kept` times those given. */
static status factorise(const double *matrix, size_t d, double kept, double *l)
{
    for (size_t i = 0; i < d; i++) {
        double *row = l + i * d;
        for (size_t j = 0; j <= i; j++) {
            const double *other = l + j * d;
            double rest = matrix[i * d + j] * (j < i ? kept : 1.0);
            for (size_t k = 0; k < j; k++) rest -= row[k] * other[k];
            if (j < i) {
                row[j] = other[j] > 0.0 ? rest / other[j] : 0.0;
            } else if (rest > ROUNDING * (double)d) {
                row[i] = sqrt(rest);
            } else if (rest > NEGATIVE) {
                row[i] = 0.0;
                scale_to_unit_length(row, i);
            } else {
                return OUT_OF_DOMAIN;
            }
        }
    }
    return OK;
}

status correlation_factor(const double *matrix, size_t d, double *l)
{
    status s = factorise(matrix, d, 1.0, l);
    return s == OK ? OK : factorise(matrix, d, 1.0 / (1.0 + LIFT * (double)d), l);
}

bool factor_is_singular(const double *l, size_t d)
{
    for (size_t i = 0; i < d; i++)
        if (!(l[i * d + i] > 0.0)) return true;
    return false;
}
