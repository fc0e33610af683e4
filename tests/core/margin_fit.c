/* Tests of src/margin_fit.c and of the fits in src/distributions/. */
#include "margins.h"

#include "../../src/margin_fit.h"

/* tests/values/margin_fits.csv: score equations solved with 30 digits for the loss and expense
 * data */
static void agrees_with_many_digits(void **state)
{
    (void)state;
    struct csv *want = csv_read("margin_fits.csv"), *data = csv_read("data_loss_alae.csv");
    for (size_t i = 0; i < want->rows; i++) {
        size_t n, row;
        double *loss = csv_numbers(data, csv_text(want, i, "column"), NULL, NULL, &n);
        margin_fit f;
        const distribution *d = distribution_named(csv_text(want, i, "distribution"));
        assert_non_null(d);
        assert_int_equal(n, (size_t)csv_number(want, i, "n"));
        assert_int_equal(fit_margin(d, loss, n, &f, &row), OK);
        double b = csv_number(want, i, "b"), likelihood = csv_number(want, i, "log_likelihood");
        assert_close(f.margin.a, csv_number(want, i, "a"), 1e-10);
        if (isnan(b)) assert_true(isnan(f.margin.b) && isnan(f.error[1]));
        else assert_close(f.margin.b, b, 1e-10);
        assert_close(f.log_likelihood, likelihood, 1e-10);
        assert_close(f.aic, 2 * (isnan(b) ? 1 : 2) - 2 * likelihood, 1e-10);
        free(loss);
    }
    csv_free(want);
    csv_free(data);
}

/* The errors are the spread of the fits to many samples, and the fits are centred on the truth. The
 * threshold of a pareto has a bias of the size of its error. */
static void errors_are_the_spread(void **state)
{
    (void)state;
    static const struct { const char *word; double a, b; } truth[] = {
        { "normal", 100, 20 }, { "lognormal", 6, 1.2 }, { "gamma", 0.7, 300 },
        { "exponential", 250, NAN }, { "weibull", 1.6, 500 }, { "pareto", 2.2, 1000 },
        { "lomax", 2.5, 900 }
    };
    enum { N = 2000 };
    uint64_t random = 31;
    static double loss[N];
    size_t rounds = effort(150);
    for (size_t k = 0; k < sizeof truth / sizeof *truth; k++) {
        margin m = margin_of(truth[k].word, truth[k].a, truth[k].b);
        double sum[2] = { 0 }, squares[2] = { 0 }, errors[2] = { 0 }, count = (double)rounds;
        for (size_t i = 0; i < rounds; i++) {
            margin_fit f;
            size_t row;
            for (size_t j = 0; j < N; j++) loss[j] = margin_quantile(&m, random_uniform(&random));
            assert_int_equal(fit_margin(m.distribution, loss, N, &f, &row), OK);
            for (size_t j = 0; j < 2; j++) {
                double away = margin_parameter(&f.margin, j) - margin_parameter(&m, j);
                sum[j] += away;
                squares[j] += away * away;
                errors[j] += f.error[j];
            }
        }
        for (size_t j = 0; j < distribution_parameters(m.distribution); j++) {
            double mean = sum[j] / count, spread = sqrt(squares[j] / count - mean * mean);
            bool threshold = j == 1 && !strcmp(truth[k].word, "pareto");
            assert_close(errors[j] / count, spread, 0.25);
            assert_within(mean, 0, (threshold ? 1.4 : 0.5) * spread);
        }
    }
}

/* a scale only scales, for samples as far apart as computers can hold */
static void fits_scale(void **state)
{
    (void)state;
    const double loss[] = { 3, 17, 8, 44, 91, 26, 5, 12, 63, 150, 2, 900 };
    for (const distribution *const *d = distributions; *d; d++) {
        if (!(*d)->fit || !strcmp((*d)->word, "lognormal") || !strcmp((*d)->word, "normal"))
            continue;
        margin_fit f, big;
        double scaled[12];
        size_t row, last = distribution_parameters(*d) - 1;
        for (size_t i = 0; i < 12; i++) scaled[i] = 1e90 * loss[i];
        assert_int_equal(fit_margin(*d, loss, 12, &f, &row), OK);
        assert_int_equal(fit_margin(*d, scaled, 12, &big, &row), OK);
        assert_close(margin_parameter(&big.margin, last), 1e90 * margin_parameter(&f.margin, last),
                     1e-9);
        if (last) assert_close(big.margin.a, f.margin.a, 1e-9);
    }
}

static void nearly_alike(void **state)
{
    (void)state;
    double loss[50];
    for (int i = 0; i < 50; i++) loss[i] = 1000 + 1e-3 * i;
    margin_fit f;
    size_t row;
    assert_int_equal(fit_margin(distribution_named("gamma"), loss, 50, &f, &row), OK);
    double mean, sd, squares = 0;
    f.margin.distribution->moments(&f.margin, &mean, &sd);
    for (int i = 0; i < 50; i++) squares += (loss[i] - 1000.0245) * (loss[i] - 1000.0245);
    assert_close(mean, 1000.0245, 1e-12);
    assert_close(sd, sqrt(squares / 50), 1e-4);
    assert_close(f.log_likelihood, 140.97235526234546, 1e-6);              /* mpmath, 60 digits */
    assert_int_equal(fit_margin(distribution_named("weibull"), loss, 50, &f, &row), OK);
}

/* Likelihoods of gammas whose shape is 96, 5e9 and 2e14, which are all but normal then, must not
 * mislead: values from mpmath to 60 digits. */
static void likelihood_of_large_shapes(void **state)
{
    (void)state;
    static const double plain[] = { 9, 10, 10.5, 11, 12.25 };
    double alike[5];
    margin_fit f, normal;
    size_t row;
    for (int i = 0; i < 5; i++) alike[i] = 1000 + (0.5 * i - 1) * 1e-4;
    assert_int_equal(fit_margin(distribution_named("gamma"), plain, 5, &f, &row), OK);
    assert_close(f.log_likelihood, -7.4409847012116311, 1e-13);
    assert_int_equal(fit_margin(distribution_named("gamma"), alike, 5, &f, &row), OK);
    assert_close(f.log_likelihood, 40.689877146512516, 1e-6);
    assert_int_equal(fit_margin(distribution_named("normal"), alike, 5, &normal, &row), OK);
    assert_within(f.aic, normal.aic, 1e-4);
}

/* Losses in another unit: mean, sd and errors are scaled, the log-likelihood less n log of it. */
static void any_unit(void **state)
{
    (void)state;
    static const double unit[] = { 0x1p-1000, 0x1p-600, 0x1p600, 0x1p1000 };
    margin_fit f, scaled;
    double loss[6] = { 1, 2, 3, 5, 9, 40 }, other[6];
    size_t row;
    assert_int_equal(fit_margin(distribution_named("normal"), loss, 6, &f, &row), OK);
    assert_close(f.margin.b, sqrt(1120 / 6.0), 1e-15);     /* 81 + 64 + 49 + 25 + 1 + 900 */
    for (size_t k = 0; k < 4; k++) {
        for (size_t i = 0; i < 6; i++) other[i] = unit[k] * loss[i];
        assert_int_equal(fit_margin(distribution_named("normal"), other, 6, &scaled, &row), OK);
        assert_same(scaled.margin.a, unit[k] * f.margin.a);
        assert_same(scaled.margin.b, unit[k] * f.margin.b);
        assert_same(scaled.error[0], unit[k] * f.error[0]);
        assert_close(scaled.log_likelihood, f.log_likelihood - 6 * log(unit[k]), 1e-13);
    }
    const double huge[] = { 1e308, 1.2e308, 1.5e308 };
    assert_int_equal(fit_margin(distribution_named("normal"), huge, 3, &f, &row), NOT_SETTLED);
}

static void refusals(void **state)
{
    (void)state;
    const double zero[] = { 3, 0, 5 }, alike[] = { 4, 4, 4 }, even[] = { 10, 11, 12, 13 };
    margin_fit f;
    size_t row;
    assert_int_equal(fit_margin(distribution_named("gamma"), zero, 3, &f, &row), OUT_OF_DOMAIN);
    assert_int_equal(row, 1);
    assert_int_equal(fit_margin(distribution_named("exponential"), zero, 3, &f, &row), OK);
    assert_int_equal(fit_margin(distribution_named("weibull"), alike, 3, &f, &row), NO_VARIATION);
    assert_int_equal(fit_margin(distribution_named("normal"), even, 1, &f, &row), TOO_FEW);
    assert_int_equal(fit_margin(distribution_named("lomax"), even, 4, &f, &row), OUT_OF_DOMAIN);
    assert_int_equal(row, 4);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(agrees_with_many_digits),
        cmocka_unit_test(errors_are_the_spread),
        cmocka_unit_test(fits_scale),
        cmocka_unit_test(nearly_alike),
        cmocka_unit_test(likelihood_of_large_shapes),
        cmocka_unit_test(any_unit),
        cmocka_unit_test(refusals),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
