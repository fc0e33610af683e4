/* Tests of src/distributions/: every row of the table. */
#include "margins.h"

/* tests/values/distribution_quantiles.csv: closed forms and inversions with 50 digits (mpmath),
 * down to p = 1e-300 in both tails */
static void quantiles_agree_with_many_digits(void **state)
{
    (void)state;
    struct csv *t = csv_read("distribution_quantiles.csv");
    for (size_t i = 0; i < t->rows; i++) {
        margin m = margin_of(csv_text(t, i, "distribution"), csv_number(t, i, "a"),
                             csv_number(t, i, "b"));
        double p = csv_number(t, i, "p"), want = csv_number(t, i, "quantile");
        bool normal = csv_is(t, i, "distribution", "normal");
        double got = m.distribution->quantile(&m, p, csv_number(t, i, "above") == 1);
        assert_within(got, want, 1e-12 * fmax(fabs(want), normal ? m.b : 0));
    }
    csv_free(t);
}

/* tests/values/risk_var_tvar.csv: the value at risk is the quantile (Klugman, Panjer & Willmot) */
static void values_at_risk(void **state)
{
    (void)state;
    struct csv *t = csv_read("risk_var_tvar.csv");
    for (size_t i = 0; i < t->rows; i++) {
        margin m = margin_in(t, i);
        assert_close(margin_quantile(&m, csv_number(t, i, "p")), csv_number(t, i, "VaR"), 1e-10);
    }
    csv_free(t);
}

/* tests/values/risk_limited_expected_value.csv holds the mean and sd of its distributions */
static void moments_agree(void **state)
{
    (void)state;
    struct csv *t = csv_read("risk_limited_expected_value.csv");
    for (size_t i = 0; i < t->rows; i++) {
        margin m = margin_in(t, i);
        double mean, sd, want = csv_number(t, i, "sd");
        m.distribution->moments(&m, &mean, &sd);
        assert_close(mean, csv_number(t, i, "mean"), 1e-10);
        if (isnan(want)) assert_true(isinf(sd));
        else assert_close(sd, want, 1e-10);
    }
    csv_free(t);
}

/* tests/values/moment_fits.csv */
static void moment_fits(void **state)
{
    (void)state;
    size_t used = 0;
    struct csv *t = csv_read("moment_fits.csv");
    for (size_t i = 0; i < t->rows; i++) {
        const char *word = csv_text(t, i, "family");
        const distribution *d = distribution_named(strcmp(word, "pareto_II") ? word : "lomax");
        if (!d) continue;
        margin m;
        double sd = sqrt(csv_number(t, i, "variance"));
        assert_int_equal(d->from_moments(csv_number(t, i, "mean"), sd, NAN, &m), OK);
        assert_close(m.a, csv_number(t, i, "value1"), 1e-11);
        assert_close(m.b, csv_number(t, i, "value2"), 1e-11);
        used++;
    }
    assert_int_equal(used, 20);
    csv_free(t);
}

/* moments and from_moments undo each other for every distribution that has them */
static void moments_undo_each_other(void **state)
{
    (void)state;
    uint64_t random = 3;
    for (size_t i = 0; i < effort(200); i++) {
        double wanted_mean = pow(10, 6 * random_uniform(&random) - 2);
        double wanted_sd = wanted_mean * pow(10, 3 * random_uniform(&random) - 2);
        for (const distribution *const *d = distributions; *d; d++) {
            margin m;
            double mean, sd;
            size_t which;
            if (!(*d)->from_moments) continue;
            status s = (*d)->from_moments(wanted_mean, wanted_sd, NAN, &m);
            if (s == OUT_OF_DOMAIN) continue;
            assert_int_equal(s, OK);
            assert_int_equal(margin_check(&m, &which), OK);
            (*d)->moments(&m, &mean, &sd);
            assert_close(mean, wanted_mean, 1e-12);
            if (strcmp((*d)->word, "exponential")) assert_close(sd, wanted_sd, 1e-11);
        }
    }
}

static void moments_refused(void **state)
{
    (void)state;
    margin m;
    assert_int_equal(distribution_named("lomax")->from_moments(100, 100, NAN, &m), OUT_OF_DOMAIN);
    assert_int_equal(distribution_named("gamma")->from_moments(-1, 1, NAN, &m), OUT_OF_DOMAIN);
    assert_int_equal(distribution_named("pareto")->from_moments(100, 1, 100, &m), OUT_OF_DOMAIN);
    assert_int_equal(distribution_named("pareto")->from_moments(100, 1, 50, &m), OK);
    assert_same(m.a, 2);
    assert_same(m.b, 50);
}

/* p(q(u)) = u in both tails, and the two probabilities add up to 1 */
static void probability_undoes_quantile(void **state)
{
    (void)state;
    static const double parameters[][2] = { { 0.7, 3 }, { 2.5, 0.4 }, { 9, 120 } };
    for (const distribution *const *d = distributions; *d; d++) {
        for (size_t k = 0; (*d)->quantile && k < 3; k++) {
            margin m = { *d, parameters[k][0], parameters[k][1], NAN };
            for (double p = 0.5; p > 1e-280; p *= 0.03) {
                for (int above = 0; above < 2; above++) {
                    double x = (*d)->quantile(&m, p, above);
                    if (!(fabs(x) < 1e290) || fabs(x) < 1e-290) continue;
                    /* rounding x moves the probability by x f(x) / p */
                    double moved = fabs(x) * exp((*d)->log_density(&m, x)) / p;
                    assert_close((*d)->probability(&m, x, above), p, 1e-12 + 3e-16 * moved);
                    assert_within((*d)->probability(&m, x, above)
                                      + (*d)->probability(&m, x, !above),
                                  1, 1e-14);
                }
            }
        }
    }
}

/* the density is the slope of the probability */
static void density_is_slope(void **state)
{
    (void)state;
    for (const distribution *const *d = distributions; *d; d++) {
        if (!(*d)->quantile) continue;
        margin m = { *d, 2.5, 1.7, NAN };
        for (double u = 0.02; u < 1; u += 0.07) {
            double x = margin_quantile(&m, u), h = 1e-4 * x;
            double slope =
                ((*d)->probability(&m, x + h, false) - (*d)->probability(&m, x - h, false))
                / (2 * h);
            if ((*d)->probability(&m, x - h, false) == 0) continue;
            assert_close(exp((*d)->log_density(&m, x)), slope, 1e-5);
        }
    }
}

static void parameters_are_checked(void **state)
{
    (void)state;
    size_t which;
    margin m = margin_of("gamma", 2, 3);
    assert_int_equal(margin_check(&m, &which), OK);
    m.b = 0;
    assert_int_equal(margin_check(&m, &which), OUT_OF_DOMAIN);
    assert_int_equal(which, 1);
    m.b = NAN;
    assert_int_equal(margin_check(&m, &which), BAD_KIND);
    m.b = 1;
    m.c = 1;
    assert_int_equal(margin_check(&m, &which), BAD_KIND);
    assert_int_equal(which, 2);
    m = margin_of("lognormal", INFINITY, 1);
    assert_int_equal(margin_check(&m, &which), OUT_OF_DOMAIN);
    m = margin_of("sample", 1.5, NAN);
    assert_int_equal(margin_check(&m, &which), OUT_OF_DOMAIN);
    m.a = 1;
    assert_int_equal(margin_check(&m, &which), OK);
    assert_null(distribution_named("cauchy"));
}

static void heavy_tails_have_no_moments(void **state)
{
    (void)state;
    double mean, sd;
    margin m = margin_of("pareto", 1.5, 10);
    m.distribution->moments(&m, &mean, &sd);
    assert_close(mean, 30, 1e-15);
    assert_true(isinf(sd));
    m = margin_of("lomax", 1, 10);
    m.distribution->moments(&m, &mean, &sd);
    assert_true(isinf(mean));
    assert_true(isinf(margin_quantile(&(margin){ m.distribution, 0.01, 1, NAN }, 1 - 1e-15)));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(quantiles_agree_with_many_digits),
        cmocka_unit_test(values_at_risk),
        cmocka_unit_test(moments_agree),
        cmocka_unit_test(moment_fits),
        cmocka_unit_test(moments_undo_each_other),
        cmocka_unit_test(moments_refused),
        cmocka_unit_test(probability_undoes_quantile),
        cmocka_unit_test(density_is_slope),
        cmocka_unit_test(parameters_are_checked),
        cmocka_unit_test(heavy_tails_have_no_moments),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
