/* exp, log and their like: errors in units of the last place against the system's long double
 * functions (64-bit mantissa, good to half a unit there), and their special cases. */
#include "table.h"

#include "../../src/elementary.h"

#include <float.h>

static double units_apart(double got, long double want)
{
    if (fabsl(want) < DBL_MIN) return (double)(fabsl(got - want) / 0x1p-1074L);
    int power;
    frexpl(want, &power);
    return (double)(fabsl(got - want) / ldexpl(1, power - 53));
}

struct trial {
    const char *name;
    double (*mine)(double);
    long double (*theirs)(long double);
    double low, high, most;         /* where, and how many units are allowed */
    bool spread;                    /* x is exp of a uniform, with the sign of low */
};

static long double log1pexp_long(long double x) { return log1pl(expl(x)); }
static long double log1mexp_long(long double x)
{
    return x > -0.7L ? logl(-expm1l(x)) : log1pl(-expl(x));
}

static long double sin_pi_long(long double x)
{
    return sinl(3.14159265358979323846264338327950288L * (x > 0.5L ? 1 - x : x));
}

static const struct trial trials[] = {
    { "exp", portable_exp, expl, -708, 709.7, 0.9, false },
    { "exp", portable_exp, expl, -1, 1, 0.9, false },
    { "exp subnormal", portable_exp, expl, -745, -708, 1.3, false },
    { "expm1", portable_expm1, expm1l, -45, 700, 1.6, false },
    { "expm1", portable_expm1, expm1l, -1.5, 1.5, 1.9, false },
    { "expm1 near 0", portable_expm1, expm1l, -60, 0, 1.6, true },
    { "log", portable_log, logl, -700, 700, 0.9, true },
    { "log", portable_log, logl, 0.3, 3, 0.9, false },
    { "log1p", portable_log1p, log1pl, -0.999, 3, 0.95, false },
    { "log1p near 0", portable_log1p, log1pl, -600, 5, 0.95, true },
    { "log1p large", portable_log1p, log1pl, 0, 690, 0.95, true },
    { "log1pexp", portable_log1pexp, log1pexp_long, -700, 60, 3, false },
    { "log1mexp", portable_log1mexp, log1mexp_long, -700, -1e-3, 3, false },
    { "sin pi", portable_sin_pi, sin_pi_long, 1e-300, 1, 2, false },
    { "sin pi near 0", portable_sin_pi, sin_pi_long, -600, -1, 2, true },
};

static void errors_in_units(void **state)
{
    (void)state;
    uint64_t s = 17;
    for (size_t k = 0; k < sizeof trials / sizeof *trials; k++) {
        const struct trial *t = &trials[k];
        double worst = 0, at = 0;
        for (size_t i = 0; i < effort(40000); i++) {
            double x = t->low + (t->high - t->low) * random_uniform(&s);
            if (t->spread) x = exp(x);
            double apart = units_apart(t->mine(x), t->theirs(x));
            if (!(apart <= worst)) worst = apart, at = x;
        }
        if (getenv("SHOW_ERRORS")) print_message("%-16s %.3f units at %.17g\n", t->name, worst, at);
        if (!(worst < t->most)) fail_msg("%s is off by %g units at %.17g", t->name, worst, at);
    }
}

/* negative arguments near 0, where 1 + x and exp(x) - 1 cancel */
static void small_negative(void **state)
{
    (void)state;
    uint64_t s = 19;
    for (size_t i = 0; i < effort(20000); i++) {
        double x = -exp(-40 * random_uniform(&s) - 1);
        assert_true(units_apart(portable_log1p(x), log1pl(x)) < 0.95);
        assert_true(units_apart(portable_expm1(x), expm1l(x)) < 1.5);
    }
}

static void special_cases(void **state)
{
    (void)state;
    assert_same(portable_exp(0), 1.0);
    assert_same(portable_exp(-INFINITY), 0.0);
    assert_same(portable_exp(INFINITY), INFINITY);
    assert_same(portable_exp(1000), INFINITY);
    assert_same(portable_exp(-1000), 0.0);
    assert_same(portable_exp(NAN), NAN);
    assert_same(portable_exp(709.78271289338397), exp(709.78271289338397));
    assert_same(portable_log(1), 0.0);
    assert_same(portable_log(0), -INFINITY);
    assert_same(portable_log(-1), NAN);
    assert_same(portable_log(INFINITY), INFINITY);
    assert_same(portable_log(NAN), NAN);
    assert_close(portable_log(0x1p-1074), -1074 * 0.693147180559945309417, 1e-15);
    assert_same(portable_log1p(0), 0.0);
    assert_same(portable_log1p(-1), -INFINITY);
    assert_same(portable_log1p(-1.5), NAN);
    assert_same(portable_log1p(INFINITY), INFINITY);
    assert_same(portable_expm1(0), 0.0);
    assert_same(portable_expm1(-INFINITY), -1.0);
    assert_same(portable_expm1(INFINITY), INFINITY);
    assert_same(portable_expm1(1e-300), 1e-300);
    assert_same(portable_log1pexp(800), 800.0);
    assert_same(portable_log1pexp(-800), 0.0);
    assert_same(portable_log1mexp(0), -INFINITY);
    assert_same(portable_log1mexp(-1e-300), portable_log(1e-300));
    assert_same(portable_sin_pi(0), 0.0);
    assert_same(portable_sin_pi(1), 0.0);
    assert_same(portable_sin_pi(0.5), 1.0);
    assert_close(portable_pow(2, 10), 1024.0, 1e-14);
    assert_same(whole_part(0), 0.0);
    assert_same(whole_part(0.9999999999999999), 0.0);
    assert_same(whole_part(2.5), 2.0);
    assert_same(whole_part(3.5), 3.0);
    assert_same(whole_part(0x1p50 + 0.75), 0x1p50);
    assert_same(held(NAN, 1, 2), 1.0);
    assert_same(held(3, 1, 2), 2.0);
    assert_same(held(1.5, 1, 2), 1.5);
    assert_same(chosen(1, 2, 3), 2.0);
    assert_same(chosen(0, 2, -0.0), -0.0);
}

/* The bits are fixed: these were computed once, and must come out on every machine. */
static void bits_are_fixed(void **state)
{
    (void)state;
    uint64_t sum = 0, s = 23;
    for (int i = 0; i < 20000; i++) {
        double u = random_uniform(&s), results[] = {
            portable_exp(40 * u - 30), portable_log(u), portable_log1p(3 * u - 0.9),
            portable_expm1(4 * u - 2), portable_sin_pi(u), portable_log1pexp(90 * u - 45),
            portable_log1mexp(-5 * u) };
        for (size_t k = 0; k < sizeof results / sizeof *results; k++)
            sum = (sum << 7 | sum >> 57) ^ bits_of(results[k]);
    }
    assert_true(sum == 0x518fc3645baf337du);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(errors_in_units),
        cmocka_unit_test(small_negative),
        cmocka_unit_test(special_cases),
        cmocka_unit_test(bits_are_fixed),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
