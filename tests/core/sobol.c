/* Sobol' points: published directions, the net that they are before and after scrambling, and the
 * seed. */
#include "table.h"

#include "../../src/sobol.h"

/* sobol_points.csv: SciPy's points, in the order of the Gray code, made from the same published
 * numbers */
static void published_points(void **state)
{
    (void)state;
    struct csv *t = csv_read("sobol_points.csv");
    for (size_t i = 0; i < t->rows; i++) {
        uint64_t index = (uint64_t)csv_number(t, i, "point"), gray = index ^ (index >> 1);
        uint64_t v[SOBOL_BITS], x = 0;
        sobol_columns((size_t)csv_number(t, i, "dimension"), v);
        for (int k = 0; k < SOBOL_BITS; k++)
            if (gray >> k & 1) x ^= v[k];
        assert_within(ldexp((double)x, -SOBOL_BITS), csv_number(t, i, "value"), 0x1p-30);
    }
    assert_int_equal(t->rows, 22 * 11);
    csv_free(t);
}

/* One point of 2^m in each interval of length 2^-m, in every dimension and under every seed, from
 * any multiple of 2^m on. */
static void one_in_each_interval(void **state)
{
    (void)state;
    pool p = { 0 };
    struct sobol s;
    for (uint64_t seed = 0; seed < effort(3); seed++) {
        assert_int_equal(sobol_prepare(&s, SOBOL_DIMENSIONS, seed, &p), OK);
        for (size_t j = 0; j < SOBOL_DIMENSIONS; j++) {
            double u[ROWS_AT_ONCE];
            bool taken[ROWS_AT_ONCE] = { false };
            sobol_of_rows(&s, j, seed * 77 * ROWS_AT_ONCE, u);
            for (int i = 0; i < ROWS_AT_ONCE; i++) {
                assert_true(u[i] >= 0x1p-53 && u[i] <= 1 - 0x1p-53);
                int k = (int)(u[i] * ROWS_AT_ONCE);
                assert_false(taken[k]);
                taken[k] = true;
            }
        }
    }
    pool_empty(&p);
}

/* The first two dimensions are a (0,m,2)-net (Sobol' 1967): 2^m points put one into every
 * rectangle of area 2^-m and sides that are powers of 1/2. Scrambling keeps that. */
static void a_net_in_two_dimensions(void **state)
{
    (void)state;
    pool p = { 0 };
    struct sobol s;
    assert_int_equal(sobol_prepare(&s, 2, 5, &p), OK);
    double x[ROWS_AT_ONCE], y[ROWS_AT_ONCE];
    sobol_of_rows(&s, 0, 0, x);
    sobol_of_rows(&s, 1, 0, y);
    for (int a = 0; a <= 8; a++) {
        bool taken[ROWS_AT_ONCE] = { false };
        for (int i = 0; i < ROWS_AT_ONCE; i++) {
            int k = (int)ldexp(x[i], a) << (8 - a) | (int)ldexp(y[i], 8 - a);
            assert_false(taken[k]);
            taken[k] = true;
        }
    }
    pool_empty(&p);
}

/* A block from any point on equals the points one by one. */
static void points_stand_alone(void **state)
{
    (void)state;
    pool p = { 0 };
    struct sobol s;
    uint64_t pick = 4;
    assert_int_equal(sobol_prepare(&s, 5, 9007199254740992, &p), OK);
    for (size_t k = 0; k < effort(20); k++) {
        uint64_t first = random_bits(&pick) >> (12 + random_below(&pick, 50));
        size_t at = random_below(&pick, ROWS_AT_ONCE);
        double u[ROWS_AT_ONCE], v[ROWS_AT_ONCE];
        sobol_of_rows(&s, k % 5, first, u);
        sobol_of_rows(&s, k % 5, first + at, v);
        assert_same(u[at], v[0]);
    }
    pool_empty(&p);
}

/* Every point is uniform over the seeds: the mean of the first one. */
static void uniform_over_seeds(void **state)
{
    (void)state;
    pool p = { 0 };
    struct sobol s;
    size_t n = effort(2000);
    double sum = 0, product = 0;
    for (uint64_t seed = 0; seed < n; seed++) {
        double x[ROWS_AT_ONCE], y[ROWS_AT_ONCE];
        assert_int_equal(sobol_prepare(&s, 2, seed, &p), OK);
        sobol_of_rows(&s, 0, 0, x);
        sobol_of_rows(&s, 1, 0, y);
        sum += x[0] - 0.5;
        product += (x[3] - 0.5) * (y[3] - 0.5);
        pool_empty(&p);
    }
    assert_within(sum / (double)n, 0, 4 / sqrt(12 * (double)n));
    assert_within(product / (double)n, 0, 4 / (12 * sqrt((double)n)));
}

static void too_many_dimensions(void **state)
{
    (void)state;
    pool p = { 0 };
    struct sobol s;
    assert_int_equal(sobol_prepare(&s, SOBOL_DIMENSIONS + 1, 1, &p), OUT_OF_DOMAIN);
    for (size_t n = 1; n <= 2; n++) {
        pool failing = { .fail_at = n };
        assert_int_equal(sobol_prepare(&s, 3, 1, &failing), NO_MEMORY);
        pool_empty(&failing);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_points),
        cmocka_unit_test(one_in_each_interval),
        cmocka_unit_test(a_net_in_two_dimensions),
        cmocka_unit_test(points_stand_alone),
        cmocka_unit_test(uniform_over_seeds),
        cmocka_unit_test(too_many_dimensions),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
