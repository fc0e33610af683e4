/* The frailties against their Laplace transforms: E exp(-t V) must be psi(t). */
#include "table.h"

#include "../../src/family.h"
#include "../../src/frailty.h"
#include "../../src/random.h"

typedef long double inverse(long double q, long double theta);

/* log of t with psi(t) = q, for the generators of Nelsen (2006), table 4.1 */

static long double clayton_inverse(long double q, long double theta)
{
    return -theta * logl(q) + logl(-expm1l(theta * logl(q)));
}

static long double gumbel_inverse(long double q, long double theta)
{
    return theta * logl(-logl(q));
}

static long double frank_inverse(long double q, long double theta)
{
    long double log_x = -theta * q + logl(expm1l(-theta * (1 - q)) / expm1l(-theta));
    return log_x < -40 ? log_x : logl(-log1pl(-expl(log_x)));
}

static long double joe_inverse(long double q, long double theta)
{
    long double log_x = theta * log1pl(-q);
    return log_x < -40 ? log_x : logl(-log1pl(-expl(log_x)));
}

static const struct {
    const char *family;
    inverse *log_t;
} archimedean[] = {
    { "clayton", clayton_inverse }, { "gumbel", gumbel_inverse },
    { "frank", frank_inverse }, { "joe", joe_inverse },
};

/* log V of n rows; the caller frees */
static double *log_frailties(const struct frailty *f, double theta, uint64_t seed, size_t n)
{
    pool p = { 0 };
    struct frailty_tables t;
    double *log_v = malloc((n + ROWS_AT_ONCE) * sizeof *log_v), b[ROWS_AT_ONCE];
    assert_int_equal(f->prepare(&t, theta, &p), OK);
    for (size_t i = 0; i < n; i += ROWS_AT_ONCE) {
        uniforms_of_rows(seed, FOR_MIXING, i, 0, log_v + i, b);
        f->log_frailties(&t, log_v + i, b);
    }
    for (size_t i = 0; i < n; i++) assert_true(isfinite(log_v[i]));
    pool_empty(&p);
    return log_v;
}

/* Marshall & Olkin (1988): the mean of exp(-t V) over rows within 4.5 standard errors of psi(t),
 * from near independence to tau = 0.9999 */
static void means_are_transforms(void **state)
{
    (void)state;
    static const double taus[] = { 1e-9, 1e-3, 0.05, 0.25, 0.5, 0.9, 0.9999 };
    static const double qs[] = { 0.1, 0.5, 0.9 };
    size_t n = effort(40000);
    for (size_t k = 0; k < 4; k++)
        for (size_t m = 0; m < sizeof taus / sizeof *taus; m++) {
            const family *f = family_named(archimedean[k].family);
            double theta, sum[3] = { 0 }, squares[3] = { 0 }, log_t[3];
            assert_int_equal(f->theta_from_tau(taus[m], &theta), OK);
            for (int j = 0; j < 3; j++) log_t[j] = (double)archimedean[k].log_t(qs[j], theta);
            double *log_v = log_frailties(f->frailty, theta, 29 + m, n);
            for (size_t i = 0; i < n; i++)
                for (int j = 0; j < 3; j++) {
                    double e = exp(-exp(log_t[j] + log_v[i]));
                    sum[j] += e;
                    squares[j] += e * e;
                }
            free(log_v);
            for (int j = 0; j < 3; j++) {
                double mean = sum[j] / (double)n, spread = squares[j] / (double)n - mean * mean;
                double error = sqrt(fmax(spread, 0) / (double)n);
                if (!(fabs(mean - qs[j]) < 4.5 * error + 1e-8))
                    fail_msg("%s, tau %g: mean %g, psi %g, error %g", f->word, taus[m], mean, qs[j],
                             error);
            }
        }
}

/* The counts of log-series and Sibuya frailties: V is a whole number, and P(V = 1) is
 * p / -log(1 - p) and 1/theta (Kemp 1981; Devroye 1993). */
static void counts_are_whole(void **state)
{
    (void)state;
    size_t n = effort(50000);
    double theta = 2.5, p = 1 - exp(-theta), expected[2] = { p / theta, 1 / theta };
    for (int k = 0; k < 2; k++) {
        double *log_v = log_frailties(k ? &sibuya_frailty : &log_series_frailty, theta, 31, n);
        size_t ones = 0;
        for (size_t i = 0; i < n; i++) {
            double v = exp(log_v[i]);
            if (v < 1e6) assert_within(v, round(v), 3e-13 * v);
            assert_true(v > 0.999);
            ones += v < 1.5;
        }
        assert_within((double)ones / (double)n, expected[k],
                      4 * sqrt(expected[k] * (1 - expected[k]) / (double)n));
        free(log_v);
    }
}

/* V of Sibuya by inversion: V > n exactly where u < prod_{k <= n} (1 - a/k), also
 * beyond the walk. */
static void sibuya_by_inversion(void **state)
{
    (void)state;
    static const double thetas[] = { 1.001, 1.4, 2, 7, 300 };
    for (size_t k = 0; k < 5; k++) {
        pool p = { 0 };
        struct frailty_tables t;
        long double beyond = 1;
        assert_int_equal(sibuya_frailty.prepare(&t, thetas[k], &p), OK);
        for (int n = 1; n < 3000; n++) {
            beyond *= 1 - 1 / (thetas[k] * n);
            double u[ROWS_AT_ONCE], b[ROWS_AT_ONCE] = { 0 };
            for (int i = 0; i < ROWS_AT_ONCE; i++) u[i] = 0.5;
            u[0] = (double)beyond * (1 + 1e-10);
            u[1] = (double)beyond * (1 - 1e-10);
            if (u[0] >= 1 || u[1] < 1e-15) continue;
            sibuya_frailty.log_frailties(&t, u, b);
            assert_within(exp(u[0]), n, 1e-9);
            assert_within(exp(u[1]), n + 1, 1e-9);
        }
    }
}

/* A gamma variable of any shape: mean and variance of V are both the shape. */
static void gamma_has_its_moments(void **state)
{
    (void)state;
    static const double shapes[] = { 0.05, 0.7, 1, 3, 400 };
    size_t n = effort(60000);
    for (size_t k = 0; k < 5; k++) {
        double a = shapes[k], sum = 0, squares = 0;
        double *log_v = log_frailties(&gamma_frailty, 1 / a, 41, n);
        for (size_t i = 0; i < n; i++) {
            double v = exp(log_v[i]) - a;
            sum += v;
            squares += v * v;
        }
        assert_within(sum / (double)n, 0, 4 * sqrt(a / (double)n));
        assert_within(squares / (double)n, a, 4 * sqrt((2 * a * a + 6 * a) / (double)n));
        free(log_v);
    }
}

static void theta_1_is_independence(void **state)
{
    (void)state;
    for (int k = 0; k < 2; k++) {
        double *log_v = log_frailties(k ? &sibuya_frailty : &stable_frailty, 1, 3, 1000);
        for (size_t i = 0; i < 1000; i++) assert_same(log_v[i] + 0.0, 0.0);
        free(log_v);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(means_are_transforms),
        cmocka_unit_test(counts_are_whole),
        cmocka_unit_test(sibuya_by_inversion),
        cmocka_unit_test(gamma_has_its_moments),
        cmocka_unit_test(theta_1_is_independence),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
