/* Means of products over the frailties, against closed forms; survival_cdf.csv is read in
 * evaluate.c. */
#include "table.h"

#include "../../src/family.h"
#include "../../src/frailty.h"

#include <math.h>

static double mean_of(const char *word, double theta, const double *log_t, size_t n)
{
    struct frailty_mean m = { .theta = theta, .log_t = log_t, .n = n };
    return family_named(word)->frailty->log_mean(&m);
}

/* Of an exponential V, E (1 - exp(-V t))^n = Beta(1/t, n + 1) / t. */
static void many_columns(void **state)
{
    (void)state;
    static double log_t[10000];
    for (double t = 1e-3; t < 2e3; t *= 10)
        for (size_t n = 1; n <= 10000; n *= 10) {
            for (size_t j = 0; j < n; j++) log_t[j] = log(t);
            double a = 1 / t, b = (double)n + 1;
            double want = lgamma(a) + lgamma(b) - lgamma(a + b) - log(t);
            double rounding = 4e-16 * (lgamma(a + b) + fabs(lgamma(a)) + lgamma(b));
            assert_within(mean_of("clayton", 1, log_t, n), want, 1e-11 + rounding);
        }
}

static const struct {
    const char *word;
    double theta[7];
} any[] = {
    { "clayton", { 1e-9, 0.02, 1, 5, 100, 1e4, 1e12 } },
    { "gumbel", { 1, 1 + 1e-9, 1.02, 1.7, 5, 100, 1e6 } },
    { "frank", { 1e-9, 0.02, 1, 5, 40, 700, 1e6 } },
    { "joe", { 1, 1 + 1e-9, 1.02, 1.7, 5, 100, 1e6 } },
};

/* One column: 1 - psi(t). */
static void one_column(void **state)
{
    (void)state;
    for (size_t i = 0; i < 4; i++)
        for (int k = 0; k < 7; k++)
            for (double log_t = -3; log_t < 6; log_t += 0.5) {
                double theta = any[i].theta[k];
                double want = 1 - family_named(any[i].word)->psi(log_t, theta);
                if (want < 1e-3) continue;
                assert_within(mean_of(any[i].word, theta, &log_t, 1), log(want), 1e-11);
            }
}

/* A column that is never above changes nothing. */
static void columns_at_one(void **state)
{
    (void)state;
    for (size_t i = 0; i < 4; i++)
        for (int k = 0; k < 7; k++) {
            const double two[] = { -2, -1 }, four[] = { -2, HUGE_VAL, -1, HUGE_VAL };
            assert_within(mean_of(any[i].word, any[i].theta[k], four, 4),
                          mean_of(any[i].word, any[i].theta[k], two, 2), 1e-11);
        }
}

int main(void)
{
    const struct CMUnitTest tests[] = { cmocka_unit_test(many_columns),
                                        cmocka_unit_test(one_column),
                                        cmocka_unit_test(columns_at_one) };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
