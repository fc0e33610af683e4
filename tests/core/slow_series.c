/* Sums known in closed form: zeta functions, and Gauss's 2F1 at 1. */
#include "table.h"

#include "../../src/slow_series.h"

#include <gsl/gsl_sf_gamma.h>
#include <gsl/gsl_sf_zeta.h>

static double zeta_ratio(double n, double exponent)
{
    return pow((n - 1) / n, exponent);
}

static void zeta(void **state)
{
    (void)state;
    const double exponents[] = { 1.05, 1.1, 1.3, 2, 3.5, 8, 40 };
    for (size_t i = 0; i < sizeof exponents / sizeof *exponents; i++) {
        double e = exponents[i], most = 2e-14 + 1e-15 / (e - 1);
        assert_close(sum_of_slow_series(1, zeta_ratio, e, e - 1), gsl_sf_zeta(e), most);
    }
}

static double gauss_ratio(double n, double c)
{
    return (n - 0.5) * (n - 0.5) / (n * (c + n - 1));
}

/* 2F1(1/2, 1/2; c; 1) = Gamma(c) Gamma(c - 1) / Gamma(c - 1/2)^2, without its first term 1 */
static void gauss(void **state)
{
    (void)state;
    uint64_t s = 2;
    for (size_t i = 0; i < effort(200); i++) {
        double c = 1.1 + 5 * random_uniform(&s);
        double want = gsl_sf_gamma(c) * gsl_sf_gamma(c - 1) / pow(gsl_sf_gamma(c - 0.5), 2) - 1;
        assert_close(sum_of_slow_series(0.25 / c, gauss_ratio, c, c - 1), want, 5e-13);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = { cmocka_unit_test(zeta), cmocka_unit_test(gauss) };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
