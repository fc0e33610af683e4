/* matrices.h - matrices for tests: published ones, random ones, and the certificate that one is the
 * nearest. */
#ifndef TESTS_MATRICES_H
#define TESTS_MATRICES_H

#include "table.h"

#include "../../src/correlation.h"

/* The matrix of this name, from rows that give i, j and a value (one triangle or all of it). */
static inline double *matrix_of(const struct csv *t, const char *name, const char *column,
                                size_t *d, pool *p)
{
    *d = 0;
    for (size_t r = 0; r < t->rows; r++)
        if (csv_is(t, r, "matrix", name)) *d = (size_t)fmax((double)*d, csv_number(t, r, "j"));
    double *matrix = pool_take(p, *d, *d * sizeof *matrix);
    for (size_t r = 0; r < t->rows; r++) {
        if (!csv_is(t, r, "matrix", name)) continue;
        size_t i = (size_t)csv_number(t, r, "i") - 1, j = (size_t)csv_number(t, r, "j") - 1;
        matrix[i * *d + j] = matrix[j * *d + i] = csv_number(t, r, column);
    }
    return matrix;
}

/* A correlation matrix of `factors` random factors, each entry then moved by up to `noise`:
 * feasible only while the noise is small. */
static inline double *noisy_matrix(uint64_t *state, size_t d, size_t factors, double noise, pool *p)
{
    double *loads = pool_take(p, d * factors, sizeof *loads);
    double *matrix = pool_take(p, d, d * sizeof *matrix);
    for (size_t i = 0; i < d * factors; i++) loads[i] = random_normal(state);
    for (size_t i = 0; i < d; i++) {
        for (size_t j = 0; j <= i; j++) {
            double across = 0, own = 0, other = 0;
            for (size_t k = 0; k < factors; k++) {
                across += loads[i * factors + k] * loads[j * factors + k];
                own += loads[i * factors + k] * loads[i * factors + k];
                other += loads[j * factors + k] * loads[j * factors + k];
            }
            double moved = across / sqrt(own * other) + noise * (2 * random_uniform(state) - 1);
            matrix[i * d + j] = matrix[j * d + i] = i == j ? 1 : fmin(1, fmax(-1, moved));
        }
    }
    return matrix;
}

/* Symmetric to the bit, a diagonal of exactly 1, lowest eigenvalue at least floor - 1e-12. */
static inline void assert_correlations(const double *x, size_t d, double floor)
{
    pool p = { .last = NULL };
    double lowest;
    assert_int_equal(lowest_eigenvalue(x, d, &lowest, &p), OK);
    if (lowest < floor - 1e-12) assert_within(lowest, floor, 0);
    for (size_t i = 0; i < d; i++) {
        assert_same(x[i * d + i], 1);
        for (size_t j = 0; j < i; j++) {
            assert_same(x[i * d + j], x[j * d + i]);
            assert_true(fabs(x[i * d + j]) <= 1);
        }
    }
    pool_empty(&p);
}

/* Proves that no matrix Z with unit diagonal and eigenvalues >= f has a sum of w (z - g)^2 that is
 * smaller than that of X by more than a trifle. weight NULL means 1 everywhere; an infinite weight
 * is an entry held.
 *
 * Let S = w (x - g) off the diagonal (free at entries held). X is optimal when S can be completed
 * so that it has no negative eigenvalue and S (X - f I) = 0, for then, the objective being convex,
 * any Z has
 *     objective(Z) - objective(X) >= 2 <S, Z - X> = 2 <S, Z - f I> - 2 <S, X - f I> >= 0.
 * Without entries held, S (X - f I) = 0 itself tells the diagonal of S. An eigenvalue of S as low
 * as -e costs at most 2 e trace(Z - f I) = 2 e d (1 - f), and so the proof holds to that. */
static inline void assert_nearest(const double *g, const double *weight, const double *x, size_t d,
                                  double floor, double trifle)
{
    pool p = { .last = NULL };
    double *s = pool_take(&p, d, d * sizeof *s), lowest, scale = 1;
    for (size_t i = 0; i < d * d; i++) {
        s[i] = (weight ? weight[i] : 1) * (x[i] - g[i]);
        if (i % (d + 1)) scale = fmax(scale, fabs(s[i]));
    }
    for (size_t i = 0; i < d; i++) {
        double across = 0;
        for (size_t j = 0; j < d; j++)
            if (j != i) across += s[i * d + j] * x[i * d + j];
        s[i * d + i] = -across / (1 - floor);
    }
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j < d; j++) {
            double sum = -floor * s[i * d + j];
            for (size_t k = 0; k < d; k++) sum += s[i * d + k] * x[k * d + j];
            assert_within(sum, 0, trifle * scale * (double)d);
        }
    assert_int_equal(lowest_eigenvalue(s, d, &lowest, &p), OK);
    if (lowest < -trifle * scale * (double)d) assert_within(lowest, 0, trifle * scale * (double)d);
    pool_empty(&p);
}

#endif
