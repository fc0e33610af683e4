/* Tests of src/linear.c: identities that define the results, on random matrices. */
#include "table.h"

#include "../../src/linear.h"

static double *random_square(uint64_t *state, size_t d, pool *p)
{
    double *a = pool_take(p, d, d * sizeof *a);
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j <= i; j++) a[i * d + j] = a[j * d + i] = random_normal(state);
    return a;
}

/* A v = lambda v and v'v = 1, the definition of both */
static void eigenvectors_satisfy_their_equation(void **unused)
{
    (void)unused;
    uint64_t state = 1;
    for (size_t round = 0; round < effort(20); round++) {
        pool p = { .last = NULL };
        size_t d = 1 + random_below(&state, 40);
        double *a = random_square(&state, d, &p), *v = pool_take(&p, d, d * sizeof *v);
        double *values = pool_take(&p, d, sizeof *values);
        memcpy(v, a, d * d * sizeof *v);
        eigen_room room;
        assert_int_equal(make_eigen_room(&room, d, true, &p), OK);
        assert_int_equal(eigen(v, values, &room), OK);
        for (size_t k = 0; k < d; k++) {
            double length = 0;
            if (k) assert_true(values[k - 1] <= values[k]);
            for (size_t i = 0; i < d; i++) {
                double image = 0;
                for (size_t j = 0; j < d; j++) image += a[i * d + j] * v[k * d + j];
                assert_within(image, values[k] * v[k * d + i], 1e-12);
                length += v[k * d + i] * v[k * d + i];
            }
            assert_within(length, 1, 1e-13);
        }
        pool_empty(&p);
    }
}

/* Products against their definition as sums. */
static void products_are_sums(void **unused)
{
    (void)unused;
    uint64_t state = 2;
    for (size_t round = 0; round < effort(20); round++) {
        pool p = { .last = NULL };
        size_t n = 1 + random_below(&state, 9), k = random_below(&state, 9);
        size_t m = 1 + random_below(&state, 9);
        double *a = pool_take(&p, n * k + 1, sizeof *a), *t = pool_take(&p, n * k + 1, sizeof *t);
        double *b = pool_take(&p, k * m + 1, sizeof *b), *c = pool_take(&p, n * m, sizeof *c);
        double *turned = pool_take(&p, n * m, sizeof *turned);
        double *outer = pool_take(&p, n * n, sizeof *outer);
        for (size_t i = 0; i < k * m; i++) b[i] = random_normal(&state);
        for (size_t i = 0; i < n; i++)
            for (size_t l = 0; l < k; l++) a[l * n + i] = t[i * k + l] = random_normal(&state);
        product(a, b, n, k, m, c);
        transposed_product(t, b, n, k, m, turned);
        outer_product(a, n, k, outer);
        for (size_t i = 0; i < n; i++) {
            for (size_t j = 0; j < m; j++) {
                double sum = 0;
                for (size_t l = 0; l < k; l++) sum += a[l * n + i] * b[j * k + l];
                assert_within(c[j * n + i], sum, 1e-13);
                assert_within(turned[j * n + i], sum, 1e-13);
            }
            for (size_t j = 0; j < n; j++) {
                double sum = 0;
                for (size_t l = 0; l < k; l++) sum += a[l * n + i] * a[l * n + j];
                assert_within(outer[j * n + i], sum, 1e-13);
                assert_same(outer[j * n + i], outer[i * n + j]);
            }
        }
        pool_empty(&p);
    }
}

/* {1, r; r, 1} is positive definite exactly for |r| < 1. */
static void a_factor_exists_when_definite(void **unused)
{
    (void)unused;
    double inside[] = { 1, 0.999, 0.999, 1 }, outside[] = { 1, 1.001, 1.001, 1 };
    assert_true(cholesky(inside, 2));
    assert_false(cholesky(outside, 2));
}

static void what_is_not_finite_or_too_large_is_refused(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    eigen_room room;
    double a[] = { 1, NAN, NAN, 1 }, values[2];
    assert_int_equal(make_eigen_room(&room, 0, true, &p), OUT_OF_DOMAIN);
    assert_int_equal(make_eigen_room(&room, 30001, true, &p), OUT_OF_DOMAIN);
    assert_int_equal(make_eigen_room(&room, 2, true, &p), OK);
    assert_int_equal(eigen(a, values, &room), NOT_SETTLED);
    a[1] = a[2] = INFINITY;
    assert_int_equal(eigen(a, values, &room), NOT_SETTLED);
    pool_empty(&p);
}

static void every_allocation_can_fail(void **unused)
{
    (void)unused;
    for (size_t fail = 1; fail <= 2; fail++) {
        pool p = { .fail_at = fail };
        eigen_room room;
        assert_int_equal(make_eigen_room(&room, 3, true, &p), NO_MEMORY);
        pool_empty(&p);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(eigenvectors_satisfy_their_equation),
        cmocka_unit_test(products_are_sums),
        cmocka_unit_test(a_factor_exists_when_definite),
        cmocka_unit_test(what_is_not_finite_or_too_large_is_refused),
        cmocka_unit_test(every_allocation_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
