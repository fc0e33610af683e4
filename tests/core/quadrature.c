/* The rule is exact for powers to the 39th and no further. */
#include "table.h"

#include "../../src/quadrature.h"

static void powers(void **state)
{
    (void)state;
    for (int k = 0; k <= 39; k++) {
        double want = (pow(2, k + 1) - pow(0.5, k + 1)) / (k + 1);
        assert_close(integral_over(pow, k, 0.5, 2), want, 4e-15);
    }
    double beyond = (1 + pow(-1, 40)) / 41;
    assert_true(fabs(integral_over(pow, 40, -1, 1) - beyond) > 1e-13);
}

/* The same rule point by point: its weights sum to the width, and x^39 is still exact. */
static void points(void **state)
{
    (void)state;
    double x[QUADRATURE_POINTS], weights[QUADRATURE_POINTS], width = 0, sum = 0;
    quadrature_points(0.5, 2, x, weights);
    for (int i = 0; i < QUADRATURE_POINTS; i++) {
        width += weights[i];
        sum += weights[i] * pow(x[i], 39);
    }
    assert_close(width, 1.5, 1e-15);
    assert_close(sum, (pow(2, 40) - pow(0.5, 40)) / 40, 4e-15);
}

static double step_like(double x, const void *with)
{
    const double *width = with;
    return 1 / (1 + exp(-x / *width));
}

static double noisy(double x, const void *with)
{
    (void)with;
    return 1 + 1e-6 * sin(1e12 * x);
}

/* the logistic function integrates to width log(1 + exp(x/width)) */
static void narrow_bends(void **state)
{
    (void)state;
    for (double width = 1; width > 1e-9; width /= 10) {
        double want = 0.7 - width * log1p(exp(-0.3 / width)) + width * log1p(exp(-0.7 / width));
        double error = 0;
        assert_close(adapted_integral(step_like, &width, -0.3, 0.7, 0, &error), want, 1e-13);
        assert_true(error < 1e-11);
    }
    double error = 0, sum = adapted_integral(noisy, NULL, 0, 1, 0, &error);   /* has to end */
    assert_close(sum, 1, 1e-6);
    assert_true(error > fabs(sum - 1) && error < 1e-5);
}

static double small_power(double x, const void *with)
{
    const double *p = with;
    return pow(x, *p);
}

static double rise(double x, const void *with)
{
    (void)with;
    return 1 - log(x);
}

/* end^(p + 1)/(p + 1), down to all but a step at 0; 2 end - end log(end) */
static void powers_at_zero(void **state)
{
    (void)state;
    for (double end = 1; end > 1e-300; end *= 1e-23) {
        for (double p = 1e-12; p < 3; p *= 2) {
            double want = pow(end, p + 1) / (p + 1);
            if (want > 1e-290)
                assert_close(integral_to_bend(small_power, &p, end, end), want, 1e-12);
        }
        assert_close(integral_to_bend(rise, NULL, end, end), end * (2 - log(end)), 1e-12);
    }
}

static double falling(double x, const void *with)
{
    const double *width = with;
    return -expm1((x - 1) / *width);
}

/* 1 less the width, however narrow */
static void bends_at_the_end(void **state)
{
    (void)state;
    for (double width = 1e-1; width > 1e-14; width /= 3)
        assert_close(integral_to_bend(falling, &width, 1, width), 1 + width * expm1(-1 / width),
                     1e-13);
}

static double power(double x, const void *with)
{
    const double *p = with;
    return pow(1 + fabs(x), -*p);
}

/* 1/(p - 1), to either side */
static void to_infinity(void **state)
{
    (void)state;
    for (double p = 2; p < 40; p *= 1.5) {
        assert_close(outward_integral(power, &p, 0, 1), 1 / (p - 1), 1e-13);
        assert_close(outward_integral(power, &p, 0, -1e-3), 1 / (p - 1), 1e-13);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = { cmocka_unit_test(powers), cmocka_unit_test(points),
                                        cmocka_unit_test(narrow_bends),
                                        cmocka_unit_test(powers_at_zero),
                                        cmocka_unit_test(bends_at_the_end),
                                        cmocka_unit_test(to_infinity) };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
