/* Tests of src/moments.c against sums taken directly. */
#include "table.h"

#include "../../src/moments.h"

enum { N = 5000 };

static void fill(double *x, uint64_t *random)
{
    for (size_t i = 0; i < N; i++) x[i] = 1e6 + 3 * exp(random_normal(random));
}

static double power_sum(const double *x, double mean, int power)
{
    long double sum = 0;
    for (size_t i = 0; i < N; i++) sum += powl((long double)x[i] - mean, power);
    return (double)sum;
}

/* far from zero, where sums of squares would lose everything, and cut into random blocks */
static void blocks_give_the_whole(void **state)
{
    (void)state;
    uint64_t random = 5;
    static double x[N];
    for (size_t round = 0; round < effort(20); round++) {
        running_moments m = { 0 };
        fill(x, &random);
        for (size_t i = 0; i < N;) {
            size_t n = random_below(&random, 700);
            if (n > N - i) n = N - i;
            moments_add(&m, x + i, n);
            i += n;
        }
        long double sum = 0;
        for (size_t i = 0; i < N; i++) sum += x[i];
        double mean = (double)(sum / N);
        assert_close(m.mean, mean, 1e-15);
        assert_close(m.second, power_sum(x, mean, 2), 1e-10);
        assert_close(m.third, power_sum(x, mean, 3), 1e-9);
        assert_close(m.fourth, power_sum(x, mean, 4), 1e-9);
    }
}

/* 2 4 4 4 5 5 7 9: mean 5, sum of squares 32 */
static void small_sample(void **state)
{
    (void)state;
    const double x[] = { 2, 4, 4, 4, 5, 5, 7, 9 };
    running_moments m = { 0 };
    moments_add(&m, x, 8);
    assert_close(moments_mean(&m).value, 5, 1e-15);
    assert_close(moments_mean(&m).error, sqrt(32.0 / 7 / 8), 1e-15);
    assert_close(moments_sd(&m).value, sqrt(32.0 / 7), 1e-15);
}

/* for normal numbers the error of the sd is sd / sqrt(2 n) (Kendall & Stuart, vol. 1, ch. 10) */
static void error_of_normal_sd(void **state)
{
    (void)state;
    uint64_t random = 8;
    static double x[N];
    running_moments m = { 0 };
    for (int block = 0; block < 40; block++) {
        for (size_t i = 0; i < N; i++) x[i] = 20 * random_normal(&random);
        moments_add(&m, x, N);
    }
    assert_close(moments_sd(&m).error, 20 / sqrt(2.0 * 40 * N), 0.02);
    assert_within(moments_sd(&m).value, 20, 4 * moments_sd(&m).error);
}

/* 0.1 is no sum of powers of two, and three of them do not add up to three times one: that must
 * not make alike numbers vary. */
static void alike_is_alike(void **state)
{
    (void)state;
    static const double of[] = { 0.1, 0.7, 1e-3, 3.3e9, -0.3 };
    for (size_t k = 0; k < 5; k++) {
        static double x[N];
        running_moments m = { 0 };
        for (size_t i = 0; i < N; i++) x[i] = of[k];
        for (size_t n = 1; n < 200; n += 3) moments_add(&m, x, n);
        moments_add(&m, x, N);
        assert_same(m.mean, of[k]);
        assert_same(m.second, 0);
        assert_same(moments_sd(&m).value, 0);
    }
}

/* What is beyond the range of numbers is not known, and not 0. */
static void powers_out_of_range(void **state)
{
    (void)state;
    const double large[] = { 1e80, 2e80, 5e80 }, larger[] = { 1e200, 2e200, 5e200 };
    running_moments m = { 0 }, most = { 0 };
    moments_add(&m, large, 3);
    assert_close(moments_sd(&m).value, sqrt(13.0 / 3) * 1e80, 1e-14);      /* 25/9 + 4/9 + 49/9 */
    assert_true(isnan(moments_sd(&m).error));
    moments_add(&most, larger, 3);
    assert_close(moments_mean(&most).value, 8e200 / 3, 1e-15);
    assert_true(isnan(moments_mean(&most).error));
    assert_true(isnan(moments_sd(&most).value) && isnan(moments_sd(&most).error));
    const double near[] = { 0x1p530, 0x1p530 + 0x1p490, 0x1p530 + 0x1p491 };
    running_moments close = { 0 };
    moments_add(&close, near, 3);
    assert_close(moments_sd(&close).value, 0x1p490, 1e-12);                /* 1 + 0 + 1, by 2 */
}

static void edges(void **state)
{
    (void)state;
    running_moments m = { 0 };
    const double x[] = { 7, 7, 7 };
    moments_add(&m, x, 0);
    moments_add(&m, x, 1);
    assert_same(moments_mean(&m).value, 7);
    assert_true(isnan(moments_mean(&m).error));
    assert_true(isnan(moments_sd(&m).value));
    moments_add(&m, x, 2);
    assert_same(moments_sd(&m).value, 0);
    assert_same(moments_sd(&m).error, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(blocks_give_the_whole),
        cmocka_unit_test(small_sample),
        cmocka_unit_test(error_of_normal_sd),
        cmocka_unit_test(alike_is_alike),
        cmocka_unit_test(powers_out_of_range),
        cmocka_unit_test(edges),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
