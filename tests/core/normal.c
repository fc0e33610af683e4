/* The normal distribution function and its inverse against the system's long double erfc. */
#include "table.h"

#include "../../src/normal.h"

static long double exact_probability(long double x)
{
    return 0.5L * erfcl(-x / 1.41421356237309504880168872420969808L);
}

/* the quantile of u by Newton's steps from a start that is nearly there */
static long double exact_quantile(double u, double start)
{
    long double x = start;
    for (int k = 0; k < 3; k++)
        x -= (exact_probability(x) - u) / (0.398942280401432677939946059934L * expl(-x * x / 2));
    return x;
}

static void probability_is_close(void **state)
{
    (void)state;
    uint64_t s = 1;
    for (size_t i = 0; i < effort(30000); i++) {
        double x = 14 * random_uniform(&s) - 6;
        assert_close(normal_probability(x), (double)exact_probability(x), 1e-15);
        double y = -38 + 32 * random_uniform(&s);
        if (y > -37.4) assert_close(normal_probability(y), (double)exact_probability(y), 2e-15);
    }
    assert_same(normal_probability(0), 0.5);
    assert_same(normal_probability(-INFINITY), 0.0);
    assert_same(normal_probability(INFINITY), 1.0);
    assert_same(normal_probability(NAN), NAN);
    assert_same(normal_probability(-37.6) > 0 ? 1.0 : 0.0, 1.0);
}

/* As far as the long double erfc goes, and beyond by the bounds of Gordon (1941): Mills' ratio is
 * between x/(1 + x^2) and 1/x. */
static void logarithm_is_close(void **state)
{
    (void)state;
    for (double x = -140; x < 40; x += 0.0371) {
        long double want = x < 0 ? logl(exact_probability(x)) : log1pl(-exact_probability(-x));
        assert_within(normal_log_probability(x), (double)want,
                      2e-14 + 1e-15 * fabs((double)want));
    }
    for (double x = 200; x < 1e100; x *= 1e5) {
        double at = normal_log_probability(-x) + x * x / 2 + log(x) + log(2 * acos(-1)) / 2;
        assert_within(at, -0.5 / (x * x), 0.5 / (x * x) + 1e-15 * x * x);
    }
}

static void quantile_is_close(void **state)
{
    (void)state;
    uint64_t s = 2;
    for (size_t i = 0; i < effort(20000); i++) {
        double u = i % 2 ? random_uniform(&s) : exp(-700 * random_uniform(&s));
        double x = normal_quantile(u);
        long double want = exact_quantile(u, x);
        assert_within(x, (double)want, 2e-15 * fabs((double)want) + 1e-17);
    }
    assert_same(normal_quantile(0), -INFINITY);
    assert_same(normal_quantile(1), INFINITY);
    assert_same(normal_quantile(-0.1), NAN);
    assert_same(normal_quantile(1.1), NAN);
    assert_same(normal_quantile(NAN), NAN);
}

static void quantile_is_odd(void **state)
{
    (void)state;
    uint64_t s = 3;
    for (size_t i = 0; i < effort(20000); i++) {
        double u = random_uniform(&s);
        if (i % 3 == 0) u = ldexp(u, -(int)random_below(&s, 50));
        u = floor(u * 0x1p53) * 0x1p-53;
        if (u > 0) assert_same(normal_quantile(1 - u), -normal_quantile(u));
    }
}

static void many_at_a_time(void **state)
{
    (void)state;
    uint64_t s = 4;
    for (size_t k = 0; k < effort(50); k++) {
        double u[ROWS_AT_ONCE], z[ROWS_AT_ONCE], p[ROWS_AT_ONCE];
        for (int i = 0; i < ROWS_AT_ONCE; i++) u[i] = random_uniform(&s);
        if (k % 2) u[7] = 0x1p-53, u[8] = 1 - 0x1p-53, u[9] = 1e-11, u[10] = 0.075, u[11] = 0.925;
        memcpy(z, u, sizeof z);
        normal_scores_of_rows(z);
        for (int i = 0; i < ROWS_AT_ONCE; i++) assert_same(z[i], normal_quantile(u[i]));
        memcpy(p, z, sizeof p);
        normal_probabilities_of_rows(p);
        for (int i = 0; i < ROWS_AT_ONCE; i++) {
            assert_same(p[i], normal_probability(z[i]));
            assert_close(p[i], u[i], 1e-13);           /* |z|^2 times the error of z */
        }
    }
    double far[ROWS_AT_ONCE] = { -8.3, 8.3, -50, 50, -1e300, 1e300, -8.2, 8.2, 0.0, -0.0 };
    normal_probabilities_of_rows(far);
    for (int i = 0; i < 6; i++) assert_same(far[i], i % 2 ? 1 - 0x1p-53 : 0x1p-53);
    assert_same(far[6], normal_probability(-8.2));
    assert_true(far[7] < 1 && far[7] > 1 - 2e-16);
    assert_same(far[8], 0.5);
    assert_same(far[9], 0.5);
}

/* The bits are fixed: computed once, the same on every machine. */
static void bits_are_fixed(void **state)
{
    (void)state;
    uint64_t sum = 0, s = 5;
    for (int i = 0; i < 20000; i++) {
        double z = normal_quantile(ldexp(random_uniform(&s), -(i % 45)));
        sum = (sum << 7 | sum >> 57) ^ bits_of(z) ^ bits_of(normal_probability(1.7 * z)) << 1;
    }
    assert_true(sum == 0x40183692b8bdd807u);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(probability_is_close),
        cmocka_unit_test(logarithm_is_close),
        cmocka_unit_test(quantile_is_close),
        cmocka_unit_test(quantile_is_odd),
        cmocka_unit_test(many_at_a_time),
        cmocka_unit_test(bits_are_fixed),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
