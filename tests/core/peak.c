/* Integrals of one peak, against closed forms. */
#include "table.h"

#include "../../src/peak.h"

#include <math.h>

struct shape {
    double a, b;
};

static double over_all(double (*log_f)(double x, const void *with), const struct shape *s,
                       double from, double to)
{
    return log_integral_of_peak(log_f, s, -HUGE_VAL, HUGE_VAL, from, to);
}

static double log_normal(double x, const void *with)
{
    const struct shape *s = with;
    double z = (x - s->a) / s->b;
    return -z * z / 2;
}

/* sqrt(2 pi) times the width, found within an interval 1e6 times as wide or a millionth of it */
static void widths(void **state)
{
    (void)state;
    for (double width = 1e-10; width < 1e11; width *= 10) {
        struct shape s = { 3 * width, width };
        double want = log(width) + log(2 * acos(-1)) / 2;
        assert_within(over_all(log_normal, &s, -1e6 * width, 2e6 * width),
                      want, 1e-12);
        assert_within(over_all(log_normal, &s, s.a, s.a + width * 1e-6),
                      want, 1e-12);
        assert_within(log_integral_of_peak(log_normal, &s, s.a, HUGE_VAL, s.a, s.a + width),
                      want - log(2), 1e-12);
    }
}

static double log_gamma(double x, const void *with)
{
    const struct shape *s = with;
    return s->a * x - exp(x);
}

/* Gamma(a), also where one side is a million times as wide as the other */
static void gamma_functions(void **state)
{
    (void)state;
    for (double a = 1e-6; a < 2e6; a *= 10) {
        struct shape s = { .a = a };
        double got = over_all(log_gamma, &s, log(a) - 1, log(a) + 900);
        assert_within(got, lgamma(a), 1e-11 + 1e-15 * fabs(lgamma(a)));
    }
}

static double log_saturating(double x, const void *with)
{
    const struct shape *s = with;
    double product = -expm1(-exp(x - s->b));
    return (x < s->b - 30 ? x - s->b : log(product)) - s->a * x;
}

/* exp(-a b) Gamma(1 - a) / a: a sudden rise, then a plateau of length 1/a */
static void plateaus(void **state)
{
    (void)state;
    for (double a = 0.5; a > 1e-9; a /= 8)
        for (double b = -1000; b < 2000; b += 500) {
            struct shape s = { a, b };
            double got = over_all(log_saturating, &s, b - 5, b + 100);
            assert_within(got, lgamma(1 - a) - log(a) - a * b, 1e-11);
        }
}

static double nothing(double x, const void *with)
{
    (void)x;
    (void)with;
    return -HUGE_VAL;
}

static void no_peak(void **state)
{
    (void)state;
    assert_same(log_integral_of_peak(nothing, NULL, 0, HUGE_VAL, 0, 1), -HUGE_VAL);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(widths), cmocka_unit_test(gamma_functions), cmocka_unit_test(plateaus),
        cmocka_unit_test(no_peak),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
