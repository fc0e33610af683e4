/* allocate.c - Euler allocation of expected shortfall and standard deviation.
 *
 * Method
 *   The shortfall by tail.c. For the standard deviation s of the sum S with means removed, the
 *   part of a line X is c / s, c = cov(X, S), with the influence values (X S - c) / s - c (S^2
 *   - s^2) / (2 s^3).
 *
 * Special cases
 *   A line that does not vary has part 0 of the standard deviation.
 *
 * Accuracy
 *   Parts add up to the measure to 1e-13.
 */
#include "allocate.h"
#include "moments.h"
#include "tail.h"

#include <math.h>

status allocate_tail(const samples *losses, double level, pool *p, estimate *part, double *alone)
{
    tail t;
    const double *sums;
    estimate at_risk, shortfall;
    size_t rows = losses->rows, lines = losses->cols;
    if (rows == 0) return TOO_FEW;
    status s = row_sums(losses, p, &sums);
    if (s == OK) s = tail_prepare(&t, lines, rows, level, p);
    if (s != OK) return s;
    tail_add(&t, sums, losses->at, rows, rows);
    s = tail_measure(&t, p, &at_risk, &shortfall, part);
    for (size_t j = 0; s == OK && j < lines; j++) {
        estimate own;
        s = tail_values_at_risk(column(losses, j), rows, &level, 1, p, &own);
        alone[j] = own.value;
    }
    return s;
}

/* one line, x, of the sums */
static estimate part_of_sd(const double *x, double mean, const double *sums,
                           const running_moments *sum)
{
    double n = sum->count, variance = sum->second / (n - 1), sd = sqrt(variance);
    double covariance = 0, squares = 0;
    for (size_t i = 0; i < (size_t)n; i++) covariance += (x[i] - mean) * (sums[i] - sum->mean);
    covariance /= n - 1;
    for (size_t i = 0; i < (size_t)n; i++) {
        double away = sums[i] - sum->mean;
        double influence = ((x[i] - mean) * away - covariance) / sd
                           - covariance * (away * away - variance) / (2 * variance * sd);
        squares += influence * influence;
    }
    return (estimate){ covariance / sd, sqrt(squares / n / (n - 1)) };
}

status allocate_covariance(const samples *losses, pool *p, estimate *part, double *alone)
{
    const double *sums;
    running_moments sum = { 0 };
    if (losses->rows < 2) return TOO_FEW;
    status s = row_sums(losses, p, &sums);
    if (s != OK) return s;
    moments_add(&sum, sums, losses->rows);
    if (!isfinite(sum.second)) return OUT_OF_DOMAIN;
    if (!(sum.second > 0)) return NO_VARIATION;
    for (size_t j = 0; j < losses->cols; j++) {
        running_moments line = { 0 };
        moments_add(&line, column(losses, j), losses->rows);
        alone[j] = moments_sd(&line).value;
        part[j] = part_of_sd(column(losses, j), line.mean, sums, &sum);
        if (!isfinite(alone[j]) || !isfinite(part[j].value)) return OUT_OF_DOMAIN;
    }
    return OK;
}
