/* Confidence intervals for tau: published formulas' values, exact bootstrap distributions,
 * coverage. */
#include "scored.h"

#include "../../src/tau_band.h"

/* Esscher's (1924) variance, recomputed in the file with mpmath and confirmed by quadrature. */
static void binormal_variance(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_variance_normal.csv");
    for (size_t k = 0; k < t->rows; k++) {
        double got = tau_variance_binormal(csv_number(t, k, "rho"), (size_t)csv_number(t, k, "n"));
        assert_close(got, csv_number(t, k, "var_tau_hat"), 1e-13);
    }
    csv_free(t);
}

static bool has_ties(const double *x, size_t n)
{
    struct tau_counts c;
    pool p = { 0 };
    assert_int_equal(tau_count(x, x + n, n, &c, &p), OK);
    return c.tied_x || c.tied_y;
}

/* Limits of the data sets without ties, where tau-a is tau-b, by the file's formulas (mpmath). */
static void published_limits(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_confidence_intervals.csv");
    size_t compared = 0;
    for (size_t k = 0; k < t->rows; k++) {
        static const char *const methods[] = { "wald_hollander_wolfe", "", "fisher_z_fieller",
                                               "wald_jackknife" };
        size_t n, method = 0;
        while (method < 4 && !csv_is(t, k, "method", methods[method])) method++;
        if (method == 4 || csv_is(t, k, "dataset", "given tau")) continue;
        double *x = dataset(csv_text(t, k, "dataset"), &n), level = csv_number(t, k, "level");
        if (!has_ties(x, n)) {
            struct tau_band b;
            pool p = { 0 };
            assert_int_equal(tau_band(x, x + n, n, level, (band_method)method, 0, &b, &p), OK);
            assert_within(b.low, fmax(-1, csv_number(t, k, "lower")), 1e-10);
            assert_within(b.high, fmin(1, csv_number(t, k, "upper")), 1e-10);
            assert_int_equal(b.used, n);
            assert_int_equal(p.bytes, 0);
            compared++;
        }
        free(x);
    }
    assert_in_range(compared, 18, 200);
    csv_free(t);
}

/* Standard errors: Esscher's at the fitted correlation, recomputed in the file with mpmath. */
static void published_errors(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_variance_estimates.csv");
    size_t compared = 0;
    for (size_t k = 0; k < t->rows; k++) {
        if (!csv_is(t, k, "estimator", "normal_plug_in_esscher")) continue;
        size_t n;
        double *x = dataset(csv_text(t, k, "dataset"), &n);
        if (!has_ties(x, n)) {
            struct tau_band b;
            pool p = { 0 };
            assert_int_equal(tau_band(x, x + n, n, 0.95, BAND_BINORMAL, 0, &b, &p), OK);
            assert_close(b.error, csv_number(t, k, "sd"), 1e-11);
            compared++;
        }
        free(x);
    }
    assert_in_range(compared, 2, 13);
    csv_free(t);
}

/* The jackknife's error and the limits that follow from it, ties or not: SciPy's kendalltau with
 * each row left out, in the file; 1.959963984540054 is the normal quantile of 97.5 %. */
static void jackknife_with_ties(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_b_jackknife.csv");
    size_t tied = 0;
    for (size_t k = 0; k < t->rows; k++) {
        size_t n;
        double *x = dataset(csv_text(t, k, "dataset"), &n), most = csv_number(t, k, "tolerance");
        double tau = csv_number(t, k, "tau_b"), error = csv_number(t, k, "jackknife_error");
        struct tau_band b;
        pool p = { 0 };
        assert_int_equal(tau_band(x, x + n, n, 0.95, BAND_JACKKNIFE, 0, &b, &p), OK);
        assert_close(b.tau, tau, most);
        assert_close(b.error, error, most);
        assert_within(b.low, fmax(-1, tau - 1.959963984540054 * error), most);
        assert_within(b.high, fmin(1, tau + 1.959963984540054 * error), most);
        tied += has_ties(x, n);
        free(x);
    }
    assert_int_equal(tied, 13);
    csv_free(t);
}

/* The delta method: the derivative of tanh at atanh(tau), by a difference. */
static void fisher_error(void **state)
{
    (void)state;
    size_t n;
    double *x = dataset("tuna9", &n);
    struct tau_band b, narrow;
    pool p = { 0 };
    assert_int_equal(tau_band(x, x + n, n, 0.95, BAND_FISHERZ, 0, &b, &p), OK);
    assert_int_equal(tau_band(x, x + n, n, 1e-5, BAND_FISHERZ, 0, &narrow, &p), OK);
    double z = 1e-5 * sqrt(atan(1) * 2);             /* half-normal quantile of a small coverage */
    assert_close((narrow.high - narrow.low) / (2 * z), b.error, 1e-6);
    free(x);
}

/* All 46,656 resamples of Genest & Favre's (2007) six pairs, six of them without variation: mean
 * and standard deviation of tau-b in the file by exact enumeration. */
static void bootstrap_distribution(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_bootstrap_exact.csv");
    size_t n;
    double *x = dataset("gf6", &n), errors = 0, low = 0, high = 0;
    pool p = { 0 };
    enum { SEEDS = 40 };
    for (uint64_t seed = 0; seed < SEEDS; seed++) {
        struct tau_band b, again;
        assert_int_equal(tau_band(x, x + n, n, 0.95, BAND_BOOTSTRAP, seed, &b, &p), OK);
        assert_int_equal(tau_band(x, x + n, n, 0.95, BAND_BOOTSTRAP, seed, &again, &p), OK);
        assert_same(b.error, again.error);
        assert_same(b.low, again.low);
        errors += b.error / SEEDS;
        low += b.low / SEEDS;
        high += b.high / SEEDS;
    }
    assert_true(csv_is(t, 1, "statistic", "tau_b (undefined when all draws equal)"));
    /* 80,000 draws: a relative standard error of at most 0.3 % */
    assert_close(errors, csv_number(t, 1, "bootstrap_sd"), 0.012);
    assert_true(low < -0.6 && low > -1.01 && high > 0.8 && high < 1.01);
    free(x);
    csv_free(t);
}

/* How many of so many intervals from a normal pair with this tau hold it. */
static size_t intervals_that_hold(double tau, size_t n, band_method method, size_t times,
                                  uint64_t *random)
{
    double x[50], y[50], correlation = sin(2 * atan(1) * tau);
    size_t inside = 0;
    for (size_t k = 0; k < times; k++) {
        for (size_t i = 0; i < n; i++) {
            x[i] = random_normal(random);
            y[i] = correlation * x[i]
                 + sqrt(1 - correlation * correlation) * random_normal(random);
        }
        struct tau_band b;
        pool p = { 0 };
        assert_int_equal(tau_band(x, y, n, 0.95, method, 0, &b, &p), OK);
        inside += b.low <= tau && tau <= b.high;
    }
    return inside;
}

/* Simulated coverage of nominal 95 % for normal pairs, n = 10 to 50 (NumPy, in the file), within
 * four standard errors of both simulations. */
static void coverage(void **state)
{
    (void)state;
    static const char *const methods[] = { "wald_hollander_wolfe", "", "fisher_z_fieller",
                                           "wald_jackknife" };
    struct csv *t = csv_read("tau_ci_coverage.csv");
    uint64_t random = 91;
    size_t compared = 0, times = effort(1000);
    for (size_t k = 0; k < t->rows; k++) {
        size_t method = 0, n = (size_t)csv_number(t, k, "n");
        while (method < 4 && !csv_is(t, k, "method", methods[method])) method++;
        if (method == 4 || n > 50 || !csv_is(t, k, "copula", "normal")) continue;
        double tau = csv_number(t, k, "tau"), want = csv_number(t, k, "coverage");
        size_t inside = intervals_that_hold(tau, n, (band_method)method, times, &random);
        double theirs = csv_number(t, k, "mc_standard_error");
        double ours = sqrt(want * (1 - want) / (double)times);
        assert_within((double)inside / (double)times, want, 4 * hypot(ours, theirs));
        compared++;
    }
    assert_int_equal(compared, 36);
    csv_free(t);
}

static void special_cases(void **state)
{
    (void)state;
    double x[] = { 1, 2, 3, 4, 5, 6, NAN }, flat[] = { 1, 1, 1, 1, 1, 1, 1 };
    double reverse[] = { 6, 5, 4, 3, 2, 1, 0 }, step[] = { 0, 0, 0, 0, 0, 1, 1 };
    struct tau_band b;
    pool p = { 0 };
    for (band_method m = BAND_FREE; m <= BAND_BOOTSTRAP; m++) {
        assert_int_equal(tau_band(x, x, 7, 0.95, m, 1, &b, &p), OK);
        assert_int_equal(b.used, 6);
        assert_same(b.low, 1);
        assert_same(b.high, 1);
        assert_same(b.error, 0);
        assert_int_equal(tau_band(x, reverse, 7, 0.95, m, 1, &b, &p), OK);
        assert_same(b.tau, -1);
        assert_same(b.high, -1);
        assert_int_equal(tau_band(x, flat, 7, 0.95, m, 1, &b, &p), NO_VARIATION);
        assert_int_equal(tau_band(x, x, m == BAND_FISHERZ ? 4 : 2, 0.95, m, 1, &b, &p), TOO_FEW);
        p.taken = 0;
        assert_int_equal(tau_band(x, reverse, 7, 0.95, m, 1, &b, &p), OK);
        for (size_t k = 1; k <= p.taken; k++) {
            pool failing = { .fail_at = k };
            assert_int_equal(tau_band(x, reverse, 7, 0.95, m, 1, &b, &failing), NO_MEMORY);
            assert_int_equal(failing.bytes, 0);
        }
    }
    assert_int_equal(tau_band(x, step, 7, 0.95, BAND_JACKKNIFE, 1, &b, &p), NO_VARIATION);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(binormal_variance), cmocka_unit_test(published_limits),
        cmocka_unit_test(published_errors), cmocka_unit_test(jackknife_with_ties),
        cmocka_unit_test(fisher_error), cmocka_unit_test(bootstrap_distribution),
        cmocka_unit_test(coverage), cmocka_unit_test(special_cases),
    };
    return cmocka_run_group_tests_name("tau_band", tests, NULL, NULL);
}
