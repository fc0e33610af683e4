/* Kendall's tau of a pair: published counts and values, the definition on random data, exactness,
 * and what goes wrong. */
#include "pairs.h"

/* Counts, tau-b, S of 28 data sets (Hollander & Wolfe 1973 p.187f, Kendall ch.3, and others, each
 * in the file's column "source"; recomputed there by exact integers and SciPy). */
static void published_counts_and_tau_b(void **state)
{
    (void)state;
    struct csv *t = csv_read("kendall_examples.csv");
    for (size_t k = 0; k < t->rows; k++) {
        size_t n;
        double *x = dataset(csv_text(t, k, "dataset"), &n), tau;
        struct tau_counts c;
        pool p = { 0 };
        assert_int_equal(tau_count(x, x + n, n, &c, &p), OK);
        assert_int_equal(c.rows, csv_number(t, k, "n"));
        assert_int_equal(c.concordant, csv_number(t, k, "concordant"));
        assert_int_equal(c.discordant, csv_number(t, k, "discordant"));
        assert_int_equal(c.tied_x, csv_number(t, k, "pairs_tied_x"));
        assert_int_equal(c.tied_y, csv_number(t, k, "pairs_tied_y"));
        assert_int_equal(c.tied_both, csv_number(t, k, "pairs_tied_both"));
        assert_same(tau_score(&c), csv_number(t, k, "S"));
        assert_int_equal(tau_b(&c, &tau), OK);
        assert_close(tau, csv_number(t, k, "tau_b"), 1e-12);
        assert_int_equal(p.bytes, 0);
        free(x);
    }
    csv_free(t);
}

/* Contingency tables as columns of observations: a statistics manual's 2 x 5 (tau-b printed there),
 * Agresti's (2002) 4 x 4. */
static void contingency_tables(void **state)
{
    (void)state;
    struct csv *t = csv_read("kendall_contingency.csv");
    for (size_t k = 0; k < t->rows; k++) {
        double x[200], y[200], tau;
        size_t n = 0, row = 0, col = 0;
        const char *at = csv_text(t, k, "counts_rows_separated_by_semicolons");
        for (char *end; *at; at = *end ? end + 1 : end) {
            size_t count = strtoul(at, &end, 10);
            for (size_t i = 0; i < count; i++, n++) {
                x[n] = (double)row;
                y[n] = (double)col;
            }
            col = *end == ';' ? 0 : col + 1;
            row += *end == ';';
        }
        struct tau_counts c;
        pool p = { 0 };
        assert_int_equal(n, csv_number(t, k, "n"));
        assert_int_equal(tau_count(x, y, n, &c, &p), OK);
        assert_int_equal(c.concordant, csv_number(t, k, "concordant"));
        assert_int_equal(c.discordant, csv_number(t, k, "discordant"));
        assert_int_equal(tau_b(&c, &tau), OK);
        assert_within(tau, csv_number(t, k, "tau_b"), csv_number(t, k, "tolerance"));
    }
    csv_free(t);
}

static void equals_definition(void **state)
{
    (void)state;
    uint64_t random = 20240501;
    pool p = { 0 };
    double at[600];
    for (size_t k = 0; k < effort(1200); k++) {
        size_t n = k < 301 ? k : random_below(&random, 301);
        random_columns(at, n, 2, kind_of_case(k, &random), &random);
        if (k % 3 == 0)
            for (size_t i = 0; i < 2 * n; i++)
                if (!is_gap(at[i])) at[i] = adversarial(k / 3, &random);
        struct tau_counts c, swapped, want = counts_by_definition(at, at + n, n);
        assert_int_equal(tau_count(at, at + n, n, &c, &p), OK);
        assert_same_counts(c, want);
        assert_int_equal(tau_count(at + n, at, n, &swapped, &p), OK);
        double tau = 2, other = 2;
        assert_int_equal(tau_b(&c, &tau), tau_b(&swapped, &other));
        assert_same(tau, other);
    }
}

static void tau_of(const double *x, const double *y, size_t n, double *tau, status want)
{
    pool p = { 0 };
    struct tau_counts c;
    assert_int_equal(tau_count(x, y, n, &c, &p), OK);
    assert_int_equal(tau_b(&c, tau), want);
}

/* Perfect dependence is exact at any size, with and without ties. By definition. */
static void perfect_dependence(void **state)
{
    (void)state;
    uint64_t random = 7;
    for (size_t n = 2; n < 200000; n = n * 3 / 2 + 1) {
        double *x = malloc(3 * n * sizeof *x), *y = x + n, *z = y + n, tau;
        for (size_t ties = 0; ties < 2; ties++) {
            for (size_t i = 0; i < n; i++) {
                x[i] = ties ? floor(random_uniform(&random) * 50) : random_uniform(&random);
                if (i < 2) x[i] = (double)i;         /* so that something varies */
                y[i] = exp(x[i]);
                z[i] = -x[i] * x[i];
            }
            tau_of(x, y, n, &tau, OK);
            assert_same(tau, 1);
            tau_of(z, y, n, &tau, OK);
            assert_same(tau, -1);
        }
        free(x);
    }
}

/* Too little to say anything: by definition. */
static void undefined(void **state)
{
    (void)state;
    double x[] = { 1, 2, 3 }, flat[] = { 4, 4, 4 };
    double gaps[] = { NAN, 2, NAN }, part[] = { 1, 1, NAN };
    double tau;
    tau_of(x, x, 0, &tau, TOO_FEW);
    tau_of(x, x, 1, &tau, TOO_FEW);
    tau_of(x, gaps, 3, &tau, TOO_FEW);
    tau_of(x, flat, 3, &tau, NO_VARIATION);
    tau_of(flat, flat, 3, &tau, NO_VARIATION);
    tau_of(x, part, 3, &tau, NO_VARIATION);
}

/* A million rows in reverse with one exchange: n(n-1)/2 - 1 discordant pairs, by definition. */
static void counts_beyond_32_bits(void **state)
{
    (void)state;
    size_t n = 1048576;
    double *x = malloc(2 * n * sizeof *x), *y = x + n;
    for (size_t i = 0; i < n; i++) {
        x[i] = (double)i;
        y[i] = -(double)i;
    }
    y[10] = -11;
    y[11] = -10;
    struct tau_counts c;
    pool p = { 0 };
    assert_int_equal(tau_count(x, y, n, &c, &p), OK);
    assert_int_equal(c.concordant, 1);
    assert_int_equal(c.discordant, pairs_among(n) - 1);
    free(x);
}

/* Every take fails in turn; the pool is left as it was, and holds no more than 96 bytes a row. */
static void memory(void **state)
{
    (void)state;
    uint64_t random = 3;
    double at[20000];
    random_columns(at, 10000, 2, (struct kind_of_pair){ false, false, 0.5 }, &random);
    pool p = { 0 };
    struct tau_counts c;
    assert_int_equal(tau_count(at, at + 10000, 10000, &c, &p), OK);
    size_t takes = p.taken;
    assert_in_range(takes, 1, 6);
    for (size_t k = 1; k <= takes; k++) {
        pool failing = { .fail_at = k };
        assert_int_equal(tau_count(at, at + 10000, 10000, &c, &failing), NO_MEMORY);
        assert_int_equal(failing.bytes, 0);
    }
    ranking *r;
    struct rank_room *room;
    assert_int_equal(new_rankings(10000, 2, &r, &p), OK);
    assert_int_equal(new_rank_room(10000, &room, &p), OK);
    assert_in_range(p.bytes, 1, 10000 * 96);
    pool_empty(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_counts_and_tau_b), cmocka_unit_test(contingency_tables),
        cmocka_unit_test(equals_definition), cmocka_unit_test(perfect_dependence),
        cmocka_unit_test(undefined), cmocka_unit_test(counts_beyond_32_bits),
        cmocka_unit_test(memory),
    };
    return cmocka_run_group_tests_name("tau", tests, NULL, NULL);
}
