/* The Laplace transforms of blocks of rows against their formulas in long double, and against the
 * psi of the families' own rows. */
#include "table.h"

#include "../../src/family.h"
#include "../../src/frailty.h"
#include "../../src/laplace.h"
#include "../../src/random.h"

static long double gamma_exact(long double t, long double theta)
{
    return expl(-log1pl(t) / theta);
}

static long double stable_exact(long double t, long double theta)
{
    return expl(-powl(t, 1 / theta));
}

static long double log_series_exact(long double t, long double theta)
{
    long double x = -expm1l(-theta) * expl(-t);
    return -(x < 0.5L ? log1pl(-x) : logl(-expm1l(-t) + expl(-theta - t))) / theta;
}

static long double sibuya_exact(long double t, long double theta)
{
    long double e = expl(-t);
    return -expm1l((e < 0.5L ? log1pl(-e) : logl(-expm1l(-t))) / theta);
}

static const struct {
    const char *family;
    void (*rows)(double *restrict log_t, double theta);
    long double (*exact)(long double t, long double theta);
} transforms[] = {
    { "clayton", gamma_transforms, gamma_exact },
    { "gumbel", stable_transforms, stable_exact },
    { "frank", log_series_transforms, log_series_exact },
    { "joe", sibuya_transforms, sibuya_exact },
};

/* What rounding of log t, or of t^(1/theta), costs: |log t| units in log t, times the slope of log
 * psi. */
static double allowed(long double log_t, long double psi, long double theta,
                      long double (*exact)(long double, long double))
{
    long double later = exact(expl(log_t * (1 + 0x1p-40L)), theta);
    return 4e-14 + 4 * (double)(fabsl(later - psi) / psi * 0x1p-12L);
}

static void rows_are_close(void **state)
{
    (void)state;
    static const double thetas[] = { 1.000000001, 1.05, 1.7, 2, 3.3, 10, 80, 900, 5000 };
    uint64_t s = 43;
    for (size_t k = 0; k < 4; k++)
        for (size_t m = 0; m < sizeof thetas / sizeof *thetas; m++)
            for (size_t times = 0; times < effort(4); times++) {
                double log_t[ROWS_AT_ONCE], psi[ROWS_AT_ONCE], theta = thetas[m];
                const family *f = family_named(transforms[k].family);
                assert_true(f->frailty->transforms == transforms[k].rows);
                for (int i = 0; i < ROWS_AT_ONCE; i++)
                    psi[i] = log_t[i] = (i % 2 ? 10 : i % 4 ? 200 : 1.2 * theta)
                                        * (2 * random_uniform(&s) - 1);
                transforms[k].rows(psi, theta);
                for (int i = 0; i < ROWS_AT_ONCE; i++) {
                    long double want = transforms[k].exact(expl(log_t[i]), theta);
                    assert_true(psi[i] >= 0 && psi[i] <= 1);
                    if (want < 1e-250L) {
                        assert_true(psi[i] < 1e-249);
                        continue;
                    }
                    double most = allowed(log_t[i], want, theta, transforms[k].exact);
                    assert_close(psi[i], (double)want, most);
                    if (theta < 100) assert_close(f->psi(log_t[i], theta), (double)want, most);
                }
            }
}

/* Far outside what a table can hold: no NaN, and the limits 1 and 0. */
static void far_out(void **state)
{
    (void)state;
    static const double thetas[] = { 1.0000001, 5, 20000, 1e9 };
    for (size_t k = 0; k < 4; k++)
        for (size_t m = 0; m < 4; m++) {
            double psi[ROWS_AT_ONCE] = { -1e6, -1e300, -800, 0, 800, 1e6, 1e12, 1e300 };
            transforms[k].rows(psi, thetas[m]);
            for (int i = 0; i < 8; i++) assert_true(psi[i] >= 0 && psi[i] <= 1);
            for (int i = 1; i < 8; i++) assert_true(psi[i] <= psi[i - 1] || i < 3);
            assert_true(psi[7] < 1e-280);
        }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(rows_are_close),
        cmocka_unit_test(far_out),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
