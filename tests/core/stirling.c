/* The gamma function against the system's long double lgamma. */
#include "table.h"

#include "../../src/stirling.h"

static void log_gamma_is_close(void **state)
{
    (void)state;
    uint64_t s = 47;
    for (size_t i = 0; i < effort(20000); i++) {
        double a = i % 2 ? 30 * random_uniform(&s) : exp(80 * random_uniform(&s) - 40);
        long double want = lgammal(a);
        assert_within(portable_log_gamma(a), (double)want, 3e-14 + 1e-15 * fabs((double)want));
    }
    assert_within(portable_log_gamma(1), 0, 3e-14);
    assert_within(portable_log_gamma(2), 0, 3e-14);
}

/* what Stirling's formula leaves out: 1/(12 a) - 1/(360 a^3) + ... */
static void factor_is_close(void **state)
{
    (void)state;
    uint64_t s = 53;
    const long double log_root = 0.918938533204672741780329736405617639862L;
    for (size_t i = 0; i < effort(20000); i++) {
        double a = exp(20 * random_uniform(&s) - 10);
        long double b = a, want = lgammal(b) - (b - 0.5L) * logl(b) + b - log_root;
        assert_within(log_stirling_factor(a), (double)want, 2e-14 + 3e-17 * a);
    }
    assert_close(log_stirling_factor(1e15), 1 / 12e15, 1e-14);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(log_gamma_is_close),
        cmocka_unit_test(factor_is_close),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
