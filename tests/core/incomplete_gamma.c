/* Tests of src/incomplete_gamma.c. */
#include "table.h"

#include "../../src/incomplete_gamma.h"

/* tests/values/incomplete_gamma.csv: both tails with 60 digits (mpmath) */
static void agrees_with_many_digits(void **state)
{
    (void)state;
    struct csv *t = csv_read("incomplete_gamma.csv");
    for (size_t i = 0; i < t->rows; i++) {
        double shape = csv_number(t, i, "shape"), x = csv_number(t, i, "x");
        double below = csv_number(t, i, "below"), above = csv_number(t, i, "above");
        if (!isnan(below)) assert_close(gamma_probability(shape, x, false), below, 1e-12);
        if (!isnan(above)) assert_close(gamma_probability(shape, x, true), above, 1e-12);
    }
    csv_free(t);
}

/* Abramowitz & Stegun 1964, 6.5.17 and 26.4.21: shape 1/2 is an error function, shape n + 1 a
 * Poisson sum */
static void closed_forms(void **state)
{
    (void)state;
    for (double x = 1e-6; x < 600; x *= 1.7) {
        assert_close(gamma_probability(0.5, x, false), erf(sqrt(x)), 1e-12);
        assert_close(gamma_probability(1, x, true), exp(-x), 1e-12);
        assert_close(gamma_probability(3, x, true), exp(-x) * (1 + x + x * x / 2), 1e-12);
    }
}

/* Where the expansion takes over from the series, six neighbouring shapes lie on a smooth
 * curve: the fifth difference of log P or log Q, of the order of 1e-15 there, amplifies errors
 * 32 times. */
static void large_shapes_join(void **state)
{
    (void)state;
    static const double binomial[] = { -1, 5, -10, 10, -5, 1 };
    for (double z = -35; z < 35; z += 0.7) {
        double x = 1e6 + z * 1e3, difference = 0;
        for (int k = 0; k < 6; k++)
            difference += binomial[k] * log(gamma_probability(1e6 - 3 + k, x, z > 0));
        assert_within(difference, 0, 32e-12);
        double far = 1e9 + z * sqrt(1e9);
        assert_within(gamma_probability(1e9, far, true) + gamma_probability(1e9, far, false), 1,
                      1e-15);
    }
}

static void edges(void **state)
{
    (void)state;
    assert_same(gamma_probability(2, 0, false), 0);
    assert_same(gamma_probability(2, -1, true), 1);
    assert_same(gamma_probability(2, INFINITY, true), 0);
    assert_same(gamma_probability(2, INFINITY, false), 1);
    assert_same(gamma_quantile(0.001, 1e-100, false), 0);
    assert_same(log_gamma_1p(0), 0);
    assert_close(log_gamma_1p(1e-9), -5.7721566408e-10, 1e-10);    /* -gamma a + pi^2 a^2 / 12 */
}

/* quantile and probability undo each other, at random shapes from 0.01 to 10^8 */
static void quantile_undoes_probability(void **state)
{
    (void)state;
    uint64_t random = 7;
    for (size_t i = 0; i < effort(3000); i++) {
        double shape = pow(10, -2 + 10 * random_uniform(&random));
        double p = pow(10, -300 * pow(random_uniform(&random), 4));
        bool above = random_below(&random, 2) == 1;
        double x = gamma_quantile(shape, p, above);
        if (!(x > 1e-300)) continue;
        /* rounding x moves the probability by up to x f(x) / P, of the order of these terms */
        double moved = 1 + shape + fabs(log(p)) + 40 * sqrt(shape);
        assert_close(gamma_probability(shape, x, above), p, 1e-12 + 3e-16 * moved);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(agrees_with_many_digits),
        cmocka_unit_test(closed_forms),
        cmocka_unit_test(large_shapes_join),
        cmocka_unit_test(edges),
        cmocka_unit_test(quantile_undoes_probability),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
