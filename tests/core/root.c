/* The root finder on functions whose roots are known in closed form, smooth, flat and steep. */
#include "table.h"

#include "../../src/root.h"

static size_t evaluations;

static double shifted_power(double x, const void *with)
{
    const double *c = with;
    evaluations++;
    return pow(x, c[0]) - c[1];
}

static double pole(double x, const void *with)
{
    (void)with;
    return x < 0.25 ? -1 / (0.25 - x) : 1e-30 + (x - 0.25);
}

static double hollow(double x, const void *with)
{
    (void)with;
    return x == 0 ? NAN : x;
}

/* x^k = c has the root c^(1/k); the libm's power is the outside source. */
static void powers(void **state)
{
    (void)state;
    uint64_t s = 11;
    for (size_t i = 0; i < effort(2000); i++) {
        double k = (double)(1 + random_below(&s, 9)), root = exp(8 * random_normal(&s));
        double c[] = { k, pow(root, k) }, x;
        if (!isfinite(c[1]) || c[1] < 1e-300) continue;
        evaluations = 0;
        assert_int_equal(root_between(shifted_power, c, root / 7, root * 11, &x), OK);
        assert_close(x, root, 4e-16 * (2 + k));
        assert_true(evaluations < 60);
        assert_int_equal(root_between(shifted_power, c, root * 11, root / 7, &x), OK);
        assert_close(x, root, 4e-16 * (2 + k));
    }
}

static void ends(void **state)
{
    (void)state;
    double line[] = { 1, 2 }, x = 0;
    assert_int_equal(root_between(shifted_power, line, 2, 5, &x), OK);
    assert_same(x, 2);
    assert_int_equal(root_between(shifted_power, line, 0, 2, &x), OK);
    assert_same(x, 2);
    assert_int_equal(root_between(shifted_power, line, 3, 5, &x), OUT_OF_DOMAIN);
    assert_int_equal(root_between(hollow, NULL, 0, 5, &x), OUT_OF_DOMAIN);
    assert_int_equal(root_between(pole, NULL, 0, 1, &x), OK);
    assert_within(x, 0.25, 1e-15);
}

int main(void)
{
    const struct CMUnitTest tests[] = { cmocka_unit_test(powers), cmocka_unit_test(ends) };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
