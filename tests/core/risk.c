/* Tests of src/risk.c. */
#include "margins.h"

#include "../../src/risk.h"

/* tests/values/risk_empirical_small_sample.csv: order statistic and expected shortfall of a
 * sample of 20 (Acerbi & Tasche 2002) */
static void small_sample(void **state)
{
    (void)state;
    pool p = { 0 };
    size_t n;
    struct csv *data = csv_read("risk_empirical_small_sample_data.csv");
    struct csv *want = csv_read("risk_empirical_small_sample.csv");
    double *x = csv_numbers(data, "x", NULL, NULL, &n), level[8];
    estimate var[8], tvar[8];
    for (size_t i = 0; i < want->rows; i++) level[i] = csv_number(want, i, "p");
    assert_int_equal(values_at_risk(x, n, level, want->rows, &p, var), OK);
    assert_int_equal(tail_values_at_risk(x, n, level, want->rows, &p, tvar), OK);
    for (size_t i = 0; i < want->rows; i++) {
        assert_close(var[i].value, csv_number(want, i, "quantile_order_statistic"), 1e-12);
        assert_close(tvar[i].value, csv_number(want, i, "expected_shortfall"), 1e-12);
    }
    free(x);
    csv_free(data);
    csv_free(want);
    pool_empty(&p);
}

enum { N = 100000 };
static double x[N];

static void simulate(const margin *m, uint64_t seed)
{
    for (size_t i = 0; i < N; i++) x[i] = margin_quantile(m, random_uniform(&seed));
}

/* one loss from the middle of each of N equally likely stretches */
static void stratify(const margin *m)
{
    for (size_t i = 0; i < N; i++) x[(i * 7919) % N] = margin_quantile(m, ((double)i + 0.5) / N);
}

static bool has_sd(const margin *m)
{
    double mean, sd;
    m->distribution->moments(m, &mean, &sd);
    return isfinite(sd);
}

/* tests/values/risk_var_tvar.csv (Klugman, Panjer & Willmot, appendix A), simulated: within four
 * standard errors. A shortfall without a second moment has no such error. */
static void closed_forms_simulated(void **state)
{
    (void)state;
    struct csv *t = csv_read("risk_var_tvar.csv");
    for (size_t i = 0; i < t->rows; i++) {
        pool p = { 0 };
        margin m = margin_in(t, i);
        double level = csv_number(t, i, "p");
        estimate e;
        simulate(&m, 1 + i);
        assert_int_equal(values_at_risk(x, N, &level, 1, &p, &e), OK);
        assert_within(e.value, csv_number(t, i, "VaR"), 4 * e.error);
        assert_int_equal(tail_values_at_risk(x, N, &level, 1, &p, &e), OK);
        if (has_sd(&m)) assert_within(e.value, csv_number(t, i, "TVaR"), 4 * e.error);
        pool_empty(&p);
    }
    csv_free(t);
}

/* the same from a stratified sample, where light tails leave little error: 0.2 % of the
 * shortfall */
static void closed_forms_stratified(void **state)
{
    (void)state;
    struct csv *t = csv_read("risk_var_tvar.csv");
    for (size_t i = 0; i < t->rows; i++) {
        margin m = margin_in(t, i);
        double level = csv_number(t, i, "p"), tvar = csv_number(t, i, "TVaR");
        bool heavy = csv_is(t, i, "distribution", "pareto_II")
                     || (csv_is(t, i, "distribution", "lognormal") && m.b > 1);
        if (heavy || level > 0.99) continue;
        pool p = { 0 };
        estimate e;
        stratify(&m);
        assert_int_equal(values_at_risk(x, N, &level, 1, &p, &e), OK);
        assert_close(e.value, csv_number(t, i, "VaR"), 1e-3);
        assert_int_equal(tail_values_at_risk(x, N, &level, 1, &p, &e), OK);
        assert_close(e.value, tvar, 2e-3);
        pool_empty(&p);
    }
    csv_free(t);
}

/* tests/values/risk_limited_expected_value.csv: the layers below and above a limit */
static void layers_simulated(void **state)
{
    (void)state;
    struct csv *t = csv_read("risk_limited_expected_value.csv");
    for (size_t i = 0; i < t->rows; i++) {
        margin m = margin_in(t, i);
        double limit = csv_number(t, i, "limit"), above = csv_number(t, i, "excess_over_limit");
        struct layer_cost below, beyond;
        simulate(&m, 1000 + i);
        assert_int_equal(layer_cost_of(x, N, 0, limit, &below), OK);
        assert_int_equal(layer_cost_of(x, N, limit, INFINITY, &beyond), OK);
        double p = m.distribution->probability(&m, limit, true);
        double error = sqrt(p * (1 - p) / N) + 1.0 / N;
        assert_within(below.mean, csv_number(t, i, "limited_expected_value"),
                      4 * below.error + 1e-4 * above);
        if (has_sd(&m) && p * N > 50) assert_within(beyond.mean, above, 4 * beyond.error);
        assert_within(below.exhausting, p, 4 * error);
        assert_within(beyond.attaching, p, 4 * error);
        assert_true(isnan(beyond.exhausting));
    }
    csv_free(t);
}

/* the mean of very many equal payments is one of them, and nothing varies */
static void layers_of_equal_losses(void **state)
{
    (void)state;
    struct layer_cost c;
    for (size_t i = 0; i < N; i++) x[i] = 0.1;
    assert_int_equal(layer_cost_of(x, N, 0, INFINITY, &c), OK);
    assert_same(c.mean, 0.1);
    assert_same(c.sd, 0);
    for (size_t i = 0; i < N; i++) x[i] = i % 2 ? 0.1 : 0.3;
    assert_int_equal(layer_cost_of(x, N, 0, 0.25, &c), OK);
    assert_close(c.mean, 0.175, 1e-14);
    assert_close(c.sd, 0.075 * sqrt(N / (N - 1.0)), 1e-14);
    assert_same(c.exhausting, 0.5);
}

/* With an exponential of mean 1 and a = 1 - level, the asymptotic errors are sqrt(level / (a
 * n)) for the value at risk (its density there is a) and sqrt((2 - a) / (a n)) for the
 * shortfall. */
static void errors_of_the_exponential(void **state)
{
    (void)state;
    pool p = { 0 };
    margin m = margin_of("exponential", 1, NAN);
    static const double levels[] = { 0.5, 0.9, 0.99 };
    estimate var[3], tvar[3];
    simulate(&m, 77);
    assert_int_equal(values_at_risk(x, N, levels, 3, &p, var), OK);
    assert_int_equal(tail_values_at_risk(x, N, levels, 3, &p, tvar), OK);
    for (size_t i = 0; i < 3; i++) {
        double a = 1 - levels[i];
        assert_close(var[i].error, sqrt(levels[i] / (a * N)), 0.2);
        assert_close(tvar[i].error, sqrt((2 - a) / (a * N)), 0.1);
    }
    pool_empty(&p);
}

/* How often the interval of two errors to each side holds the true value, at n = 1,000 */
static void errors_cover(void **state)
{
    (void)state;
    margin m = margin_of("lognormal", 0, 1);
    const double level = 0.95, var = 5.180251602233016, tvar = 8.557226866796713;
    size_t rounds = effort(1000), var_held = 0, tvar_held = 0;
    uint64_t random = 4;
    for (size_t i = 0; i < rounds; i++) {
        pool p = { 0 };
        estimate e;
        for (size_t k = 0; k < 1000; k++) x[k] = margin_quantile(&m, random_uniform(&random));
        assert_int_equal(values_at_risk(x, 1000, &level, 1, &p, &e), OK);
        var_held += fabs(e.value - var) < 2 * e.error;
        assert_int_equal(tail_values_at_risk(x, 1000, &level, 1, &p, &e), OK);
        tvar_held += fabs(e.value - tvar) < 2 * e.error;
        pool_empty(&p);
    }
    double var_share = (double)var_held / (double)rounds,
           tvar_share = (double)tvar_held / (double)rounds;
    assert_true(var_share > 0.92 && var_share < 0.98);
    assert_true(tvar_share > 0.85 && tvar_share < 0.98);      /* skewed: below the nominal 0.954 */
}

static void too_few_to_tell(void **state)
{
    (void)state;
    pool p = { 0 };
    const double few[] = { 1, 2, 3 }, level = 0.99;
    estimate e;
    struct layer_cost c;
    assert_int_equal(values_at_risk(few, 3, &level, 1, &p, &e), OK);
    assert_same(e.value, 3);
    assert_true(isnan(e.error));
    assert_int_equal(tail_values_at_risk(few, 3, &level, 1, &p, &e), OK);
    assert_same(e.value, 3);
    assert_true(isnan(e.error));
    const double almost = 1 - 1e-13, hardly = 1e-13;
    assert_int_equal(tail_values_at_risk(few, 3, &almost, 1, &p, &e), OK);
    assert_same(e.value, 3);
    assert_int_equal(tail_values_at_risk(few, 3, &hardly, 1, &p, &e), OK);
    assert_same(e.value, 2);
    assert_int_equal(values_at_risk(few, 0, &level, 1, &p, &e), TOO_FEW);
    assert_int_equal(layer_cost_of(few, 0, 1, 1, &c), TOO_FEW);
    assert_int_equal(layer_cost_of(few, 1, 0.25, 1, &c), OK);
    assert_same(c.mean, 0.75);
    assert_true(isnan(c.error) && isnan(c.sd));
    p.fail_at = 1;
    assert_int_equal(values_at_risk(few, 3, &level, 1, &p, &e), NO_MEMORY);
    pool_empty(&p);
}

static void rows_are_summed(void **state)
{
    (void)state;
    pool p = { 0 };
    double at[] = { 1, 2, 3, 10, 20, 30 };
    const samples two = { 3, 2, at, NULL };
    const double *sums;
    assert_int_equal(row_sums(&two, &p, &sums), OK);
    assert_same(sums[0], 11);
    assert_same(sums[2], 33);
    pool_empty(&p);
}

static void exceedance_of_a_ramp(void **state)
{
    (void)state;
    pool p = { 0 };
    double at[50], share[50];
    for (size_t i = 0; i < 1000; i++) x[i] = (double)((i * 389) % 1000 + 1);      /* 1 to 1,000 */
    assert_int_equal(exceedance_points(1000, 50), 50);
    assert_int_equal(exceedance_points(7, 50), 7);
    assert_int_equal(exceedance_curve(x, 1000, 50, &p, at, share), OK);
    for (size_t i = 0; i < 50; i++) {
        assert_close(at[i], 1001 - 1000 * share[i], 1e-12);
        if (i) assert_true(at[i] > at[i - 1] && share[i] < share[i - 1]);
    }
    assert_same(share[0], 1);
    assert_close(share[49], 1e-3, 1e-15);
    assert_int_equal(exceedance_curve(x, 20, 50, &p, at, share), OK);
    for (size_t i = 1; i < 20; i++) assert_close(share[i - 1] - share[i], 0.05, 1e-12);
    pool_empty(&p);
}

/* with ties, by counting: the share of losses at or above each */
static void exceedance_with_ties(void **state)
{
    (void)state;
    pool p = { 0 };
    double at[40], share[40], zeros[8] = { 0, 0, 0, 5, 0, 0, 0, 0 };
    uint64_t random = 6;
    assert_int_equal(exceedance_curve(zeros, 8, 2, &p, at, share), OK);
    assert_true(at[0] == 0 && share[0] == 1 && at[1] == 5 && share[1] == 0.125);
    for (size_t round = 0; round < effort(50); round++) {
        size_t n = 2 + random_below(&random, 2000), points = 2 + random_below(&random, 39);
        for (size_t i = 0; i < n; i++) x[i] = floor(exp(6 * random_uniform(&random) - 3));
        assert_int_equal(exceedance_curve(x, n, points, &p, at, share), OK);
        for (size_t i = 0; i < exceedance_points(n, points); i++) {
            size_t count = 0;
            for (size_t k = 0; k < n; k++) count += x[k] >= at[i];
            assert_same(share[i], (double)count / (double)n);
        }
    }
    pool_empty(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(small_sample),
        cmocka_unit_test(closed_forms_simulated),
        cmocka_unit_test(closed_forms_stratified),
        cmocka_unit_test(layers_simulated),
        cmocka_unit_test(layers_of_equal_losses),
        cmocka_unit_test(errors_of_the_exponential),
        cmocka_unit_test(errors_cover),
        cmocka_unit_test(too_few_to_tell),
        cmocka_unit_test(rows_are_summed),
        cmocka_unit_test(exceedance_of_a_ramp),
        cmocka_unit_test(exceedance_with_ties),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
