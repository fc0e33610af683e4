/* Tests of src/quantiles.c: the table against the direct quantile, and samples. */
#include "table.h"

#include "../../src/order_statistics.h"
#include "../../src/quantiles.h"

enum { MANY = 6000 };

/* uniforms all over (0;1), and down to 2^-53 at both ends */
static void spread(double *u, uint64_t *random)
{
    for (size_t i = 0; i < MANY; i++) {
        double p = random_uniform(random);
        if (i % 3 == 1) p = pow(2, -1 - 52 * p);
        if (i % 3 == 2) p = 1 - pow(2, -1 - 52 * p);
        u[i] = p;
    }
}

/* The direct path is checked against published values in distributions.c. */
static void table_agrees_with_direct(void **state)
{
    (void)state;
    uint64_t random = 1;
    static const double shapes[] = { 0.01, 0.05, 0.25, 0.5, 1, 2.5, 17, 100, 1e4, 1e6, 1e9 };
    for (size_t k = 0; k < sizeof shapes / sizeof *shapes; k++) {
        pool p = { 0 };
        double u[MANY], x[MANY];
        margin m = { distribution_named("gamma"), shapes[k], 250, NAN };
        const quantiles *q;
        spread(u, &random);
        u[0] = 1e-300;
        assert_int_equal(quantiles_prepare(&m, NULL, MANY, &p, &q), OK);
        losses_at(q, u, MANY, x);
        for (size_t i = 0; i < MANY; i++) assert_close(x[i], margin_quantile(&m, u[i]), 1e-12);
        pool_empty(&p);
    }
}

/* It rises, and it is a table: the last bits of most losses differ from the direct ones. */
static void table_rises(void **state)
{
    (void)state;
    pool p = { 0 };
    margin m = { distribution_named("gamma"), 0.8, 1000, NAN };
    const quantiles *q;
    static double u[MANY], x[MANY];
    size_t differ = 0;
    for (size_t i = 0; i < MANY; i++) u[i] = ((double)i + 0.5) / MANY;
    assert_int_equal(quantiles_prepare(&m, NULL, MANY, &p, &q), OK);
    losses_at(q, u, MANY, x);
    for (size_t i = 1; i < MANY; i++) assert_true(x[i] > x[i - 1]);
    for (size_t i = 0; i < MANY; i++) differ += x[i] != margin_quantile(&m, u[i]);
    assert_true(differ > MANY / 4);
    pool_empty(&p);
}

/* few losses go the direct way, to the bit; so do cheap distributions however many */
static void few_are_direct(void **state)
{
    (void)state;
    pool p = { 0 };
    static const char *const words[] = { "gamma", "lomax", "pareto", "weibull" };
    for (size_t k = 0; k < 4; k++) {
        margin m = { distribution_named(words[k]), 1.5, 20, NAN };
        const quantiles *q;
        double u[] = { 0.2, 0.999, 1e-20 }, x[3];
        assert_int_equal(quantiles_prepare(&m, NULL, k ? MANY : 3, &p, &q), OK);
        losses_at(q, u, 3, x);
        for (size_t i = 0; i < 3; i++) assert_same(x[i], margin_quantile(&m, u[i]));
    }
    pool_empty(&p);
}

/* normal and lognormal losses, however many and however far out */
static void scores_agree_with_direct(void **state)
{
    (void)state;
    static const double parameters[][2] = { { 0, 1 }, { 8, 2 }, { -40, 90 } };
    uint64_t random = 4;
    for (size_t k = 0; k < 6; k++) {
        pool p = { 0 };
        double u[MANY], x[MANY];
        margin m = { distribution_named(k % 2 ? "lognormal" : "normal"), parameters[k / 2][0],
                     parameters[k / 2][1], NAN };
        const quantiles *q;
        spread(u, &random);
        u[0] = 1e-300;
        assert_int_equal(quantiles_prepare(&m, NULL, MANY, &p, &q), OK);
        losses_at(q, u, MANY, x);
        for (size_t i = 0; i < MANY; i++) {
            double want = margin_quantile(&m, u[i]);
            assert_within(x[i], want, k % 2 ? 1e-12 * want : 1e-14 * (m.b + fabs(want)));
        }
        pool_empty(&p);
    }
}

/* The inverse of an empirical distribution: the k-th smallest, k = ceil(n u) (Hyndman & Fan
 * 1996, type 1), on the sample of tests/values/risk_empirical_small_sample_data.csv with their
 * values. */
static void samples_are_inverted(void **state)
{
    (void)state;
    pool p = { 0 };
    size_t n;
    struct csv *data = csv_read("risk_empirical_small_sample_data.csv");
    struct csv *want = csv_read("risk_empirical_small_sample.csv");
    samples given = { .cols = 1, .at = csv_numbers(data, "x", NULL, NULL, &n) };
    given.rows = n;
    margin m = { distribution_named("sample"), 1, NAN, NAN };
    const quantiles *q;
    assert_int_equal(quantiles_prepare(&m, &given, 10, &p, &q), OK);
    for (size_t i = 0; i < want->rows; i++) {
        double u = csv_number(want, i, "p"), x;
        losses_at(q, &u, 1, &x);
        assert_same(x, csv_number(want, i, "quantile_order_statistic"));
    }
    m.a = 2;
    assert_int_equal(quantiles_prepare(&m, &given, 10, &p, &q), BAD_KIND);
    assert_int_equal(quantiles_prepare(&m, NULL, 10, &p, &q), BAD_KIND);
    free(given.at);
    csv_free(data);
    csv_free(want);
    pool_empty(&p);
}

static void memory_can_fail(void **state)
{
    (void)state;
    margin m = { distribution_named("gamma"), 2, 1, NAN };
    for (size_t at = 1; at <= 3; at++) {
        pool p = { .fail_at = at };
        const quantiles *q;
        assert_int_equal(quantiles_prepare(&m, NULL, MANY, &p, &q), NO_MEMORY);
        pool_empty(&p);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(table_agrees_with_direct),
        cmocka_unit_test(table_rises),
        cmocka_unit_test(few_are_direct),
        cmocka_unit_test(scores_agree_with_direct),
        cmocka_unit_test(samples_are_inverted),
        cmocka_unit_test(memory_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
