/* Tests of src/order_statistics.c against a full sort by the C library. */
#include "table.h"

#include "../../src/order_statistics.h"

static int rising(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* kinds of samples: continuous, many ties, sorted, falling, all alike, organ pipe */
static void fill(double *x, size_t n, int kind, uint64_t *random)
{
    for (size_t i = 0; i < n; i++) {
        double u = random_uniform(random);
        x[i] = kind == 0 ? u : kind == 1 ? floor(4 * u) : kind == 2 ? (double)i
             : kind == 3 ? -(double)i : kind == 4 ? 7 : (double)(i < n / 2 ? i : n - i);
    }
}

static void selects_like_a_sort(void **state)
{
    (void)state;
    uint64_t random = 11;
    for (size_t round = 0; round < effort(400); round++) {
        size_t n = 1 + random_below(&random, 3000), wanted[7], count = 0;
        double *x = malloc(n * sizeof *x), *sorted = malloc(n * sizeof *x);
        fill(x, n, (int)(round % 6), &random);
        memcpy(sorted, x, n * sizeof *x);
        qsort(sorted, n, sizeof *x, rising);
        for (size_t k = 1; k <= n && count < 7; k += 1 + random_below(&random, n / 4 + 1))
            wanted[count++] = k;
        select_orders(x, n, wanted, count);
        for (size_t i = 0; i < count; i++) {
            size_t k = wanted[i];
            assert_same(x[k - 1], sorted[k - 1]);
            for (size_t j = 0; j < k; j++) assert_true(x[j] <= x[k - 1]);
            for (size_t j = k; j < n; j++) assert_true(x[j] >= x[k - 1]);
        }
        qsort(x, n, sizeof *x, rising);
        assert_memory_equal(x, sorted, n * sizeof *x);
        free(x);
        free(sorted);
    }
}

static void same_order_twice(void **state)
{
    (void)state;
    double x[] = { 5, 3, 9, 1 };
    const size_t wanted[] = { 2, 2, 3 };
    select_orders(x, 4, wanted, 3);
    assert_same(x[1], 3);
    assert_same(x[2], 5);
}

/* patterns that mislead simple choices of a pivot, at a size where a quadratic search takes
 * minutes */
static void long_patterns(void **state)
{
    (void)state;
    enum { N = 1 << 20 };
    double *x = malloc(N * sizeof *x);
    for (int kind = 2; kind < 6; kind++) {
        uint64_t random = 5;
        fill(x, N, kind, &random);
        double got = select_order(x, N, N / 2);
        fill(x, N, kind, &random);
        qsort(x, N, sizeof *x, rising);
        assert_same(got, x[N / 2 - 1]);
    }
    free(x);
}

/* functions.md: k = ceil(n level), n level taken as whole when within 1e-9 of it */
static void orders_of_levels(void **state)
{
    (void)state;
    assert_int_equal(order_of(100, 0.99), 99);
    assert_int_equal(order_of(1000, 0.999), 999);
    assert_int_equal(order_of(100, 0.07), 7);            /* 100 x 0.07 is 7.000000000000001 */
    assert_int_equal(order_of(20, 0.975), 20);
    assert_int_equal(order_of(10, 0.55), 6);
    assert_int_equal(order_of(1, 0.5), 1);
    assert_int_equal(order_of(5, 1e-12), 1);
    assert_int_equal(order_of(10000000, 0.995), 9950000);
}

static void sorts(void **state)
{
    (void)state;
    double x[] = { 3, -1, 2, 2, 8 };
    sort_numbers(x, 5);
    const double want[] = { -1, 2, 2, 3, 8 };
    assert_memory_equal(x, want, sizeof x);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(selects_like_a_sort),
        cmocka_unit_test(same_order_twice),
        cmocka_unit_test(long_patterns),
        cmocka_unit_test(orders_of_levels),
        cmocka_unit_test(sorts),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
