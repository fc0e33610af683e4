/* The density of positive stable variables, against Levy's and by the Laplace transform. */
#include "table.h"

#include "../../src/quadrature.h"
#include "../../src/stable_density.h"

#include <math.h>

/* theta = 2 (Levy 1939): v^(-3/2) exp(-1/(4 v)) / (2 sqrt(pi)) */
static void levy(void **state)
{
    (void)state;
    struct stable_density s;
    stable_density_prepare(&s, 2);
    for (double x = s.lowest; x < 700; x += x < 10 ? 0.01 : 1) {
        double want = -log(2 * sqrt(acos(-1))) - x / 2 - exp(-x) / 4;
        assert_within(stable_log_density(&s, x), want, 2e-11);
    }
}

struct transformed {
    struct stable_density density;
    double t;
};

/* in asinh(x - centre) */
static double integrand(double y, const void *with)
{
    const struct transformed *k = with;
    double x = k->density.centre + sinh(y);
    if (x * (k->density.theta - 1) / k->density.theta > 600) return 0;
    double falls = k->t > 0 ? k->t * exp((k->density.theta - 1) * x) : 0;
    return exp(stable_log_density(&k->density, x) - falls) * cosh(y);
}

/* E exp(-t V) = exp(-t^(1/theta)), and 1 at t = 0: from next to V = 1 to all but perfect
 * dependence. */
static void laplace_transforms(void **state)
{
    (void)state;
    static const double theta[] = { 1 + 0x1p-52, 1 + 1e-9, 1.0001, 1.01, 1.2, 1.5, 2, 3, 5, 10, 30,
                                    100, 1000, 1e4, 1e9, 1e17 };
    static const double t[] = { 0, 1e-30, 1e-3, 0.5, 1, 3 };
    for (size_t i = 0; i < sizeof theta / sizeof *theta; i++) {
        struct transformed k;
        stable_density_prepare(&k.density, theta[i]);
        for (size_t j = 0; j < sizeof t / sizeof *t; j++) {
            k.t = t[j];
            double sum = outward_integral(integrand, &k, k.density.first, 0.5);
            assert_within(sum, exp(-pow(t[j], 1 / theta[i])), 2e-11);
        }
    }
}

/* P(V > v) falls like v^(-1/theta) / Gamma(1 - 1/theta) (Feller 1971, XVII.5) */
static void far_tails(void **state)
{
    (void)state;
    for (double theta = 1.001; theta < 1e6; theta *= 2) {
        struct stable_density s;
        stable_density_prepare(&s, theta);
        double a = 1 / theta, beyond = theta - 1, x = 60 * theta / beyond;
        double want = -a * beyond * x - lgamma(1 - a) + log(a * beyond);
        assert_within(stable_log_density(&s, x), want, 1e-11);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = { cmocka_unit_test(levy), cmocka_unit_test(far_tails),
                                        cmocka_unit_test(laplace_transforms) };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
