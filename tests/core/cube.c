/* Points of a cube: Sobol's where those have dimensions, beyond them numbers that are uniform and
 * independent. */
#include "table.h"

#include "../../src/cube.h"

enum { D = SOBOL_DIMENSIONS + 5, BLOCKS = 64, N = BLOCKS * ROWS_AT_ONCE };

static void sobol_first(void **state)
{
    (void)state;
    pool p = { 0 };
    struct cube_points c;
    struct sobol s;
    double u[ROWS_AT_ONCE], v[ROWS_AT_ONCE];
    assert_int_equal(cube_prepare(&c, D, 3, &p), OK);
    assert_int_equal(sobol_prepare(&s, SOBOL_DIMENSIONS, 3, &p), OK);
    for (size_t j = 0; j < SOBOL_DIMENSIONS; j++) {
        cube_of_rows(&c, j, 512, u);
        sobol_of_rows(&s, j, 512, v);
        assert_memory_equal(u, v, sizeof u);
    }
    pool_empty(&p);
}

/* Means 1/2, variances 1/12 and no correlation within five standard errors of N numbers. */
static void random_beyond(void **state)
{
    (void)state;
    pool p = { 0 };
    struct cube_points c;
    static double u[D - SOBOL_DIMENSIONS][N];
    assert_int_equal(cube_prepare(&c, D, 3, &p), OK);
    for (size_t j = 0; j < D - SOBOL_DIMENSIONS; j++)
        for (size_t k = 0; k < BLOCKS; k++)
            cube_of_rows(&c, SOBOL_DIMENSIONS + j, k * ROWS_AT_ONCE, u[j] + k * ROWS_AT_ONCE);
    for (size_t i = 0; i < D - SOBOL_DIMENSIONS; i++)
        for (size_t j = 0; j <= i; j++) {
            double sum = 0, products = 0;
            for (size_t k = 0; k < N; k++) {
                assert_true(u[i][k] > 0 && u[i][k] < 1);
                sum += u[i][k] - 0.5;
                products += (u[i][k] - 0.5) * (u[j][k] - 0.5);
            }
            assert_within(sum / N, 0, 5 * sqrt(1.0 / 12 / N));
            assert_within(products / N, i == j ? 1.0 / 12 : 0, 5 / 12.0 / sqrt(N));
        }
    pool_empty(&p);
}

static void every_take_can_fail(void **state)
{
    (void)state;
    for (size_t fail_at = 1; fail_at <= 2; fail_at++) {
        pool p = { .fail_at = fail_at };
        struct cube_points c;
        assert_int_equal(cube_prepare(&c, D, 3, &p), NO_MEMORY);
        pool_empty(&p);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(sobol_first), cmocka_unit_test(random_beyond),
        cmocka_unit_test(every_take_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
