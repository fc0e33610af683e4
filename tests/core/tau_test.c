/* Kendall's test against exact counts of permutations, a published table and published examples. */
#include "pairs.h"

#include "../../src/tau_test.h"

/* All of the distribution for small n, enumerated up to n = 8 (file's own sources). */
static void null_distribution(void **state)
{
    (void)state;
    struct csv *t = csv_read("kendall_null_distribution.csv");
    pool p = { 0 };
    for (size_t k = 0; k < t->rows; k++) {
        size_t n = (size_t)csv_number(t, k, "n");
        uint64_t d = (uint64_t)csv_number(t, k, "discordant");
        double got;
        assert_int_equal(tau_null_probability(n, d, &got, &p), OK);
        assert_close(got, csv_number(t, k, "P_S_ge"), 1e-14);
    }
    assert_int_equal(p.bytes, 0);
    csv_free(t);
}

/* Tails down to tiny probabilities, by exact rational counts. */
static void null_tails(void **state)
{
    (void)state;
    struct csv *t = csv_read("kendall_null_tail.csv");
    pool p = { 0 };
    for (size_t k = 0; k < t->rows; k++) {
        size_t n = (size_t)csv_number(t, k, "n");
        double s = csv_number(t, k, "S"), got;
        uint64_t d = (uint64_t)(((double)pairs_among(n) - s) / 2);
        assert_int_equal(tau_null_probability(n, d, &got, &p), OK);
        assert_close(got, csv_number(t, k, "P_S_ge"), 1e-13);
    }
    csv_free(t);
}

/* The published table of critical values, n = 4 .. 50: the tail there is at most alpha, and one
 * step further in it is above. */
static void critical_values(void **state)
{
    (void)state;
    struct csv *t = csv_read("kendall_critical_values.csv");
    pool p = { 0 };
    size_t compared = 0;
    for (size_t k = 0; k < t->rows; k++) {
        size_t n = (size_t)csv_number(t, k, "n");
        double alpha = csv_number(t, k, "one_sided_alpha"), s = csv_number(t, k, "S_critical");
        double pairs = (double)pairs_among(n), got;
        if (is_gap(s)) {                             /* not even perfect agreement is rare enough */
            assert_int_equal(tau_null_probability(n, 0, &got, &p), OK);
            assert_true(got > alpha);
            continue;
        }
        assert_int_equal(tau_null_probability(n, (uint64_t)((pairs - s) / 2), &got, &p), OK);
        assert_close(got, csv_number(t, k, "exact_tail_probability"), 1e-13);
        assert_true(got <= alpha);
        assert_int_equal(tau_null_probability(n, (uint64_t)((pairs - s) / 2) + 1, &got, &p), OK);
        assert_true(got > alpha);
        compared++;
    }
    assert_in_range(compared, 200, 282);
    csv_free(t);
}

/* p-values of published data sets: exact without ties, normal with corrected variance with ties
 * (values recomputed in the file with SciPy and exact integers). */
static void published_examples(void **state)
{
    (void)state;
    struct csv *t = csv_read("kendall_examples.csv");
    size_t exact = 0;
    for (size_t k = 0; k < t->rows; k++) {
        size_t n, used;
        double *x = dataset(csv_text(t, k, "dataset"), &n), both, above, below;
        bool ties = csv_number(t, k, "pairs_tied_x") || csv_number(t, k, "pairs_tied_y");
        pool p = { 0 };
        assert_int_equal(tau_test(x, x + n, n, SIDE_BOTH, &both, &used, &p), OK);
        assert_int_equal(tau_test(x, x + n, n, SIDE_ABOVE, &above, &used, &p), OK);
        assert_int_equal(tau_test(x, x + n, n, SIDE_BELOW, &below, &used, &p), OK);
        assert_int_equal(used, n);
        const char *column = ties || n > 200 ? "p_two_sided_normal" : "p_two_sided_exact";
        double want = csv_number(t, k, column);
        if (want >= 1e-308) assert_close(both, want, 1e-11);
        else assert_same(both, 0);
        double smaller = fmin(above, below);
        assert_close(fmin(1, 2 * smaller), both, 1e-14);
        assert_true((csv_number(t, k, "S") > 0) == (above < below));
        exact += !ties;
        free(x);
    }
    assert_in_range(exact, 2, 10);
    csv_free(t);
}

/* Without ties: all orders of six rows, each equally likely, give p-values whose distribution is
 * their own: the share of orders with p <= some p is that p. By definition of a p-value. */
static void p_values_are_probabilities(void **state)
{
    (void)state;
    double x[6] = { 0, 1, 2, 3, 4, 5 }, y[6], p_values[720];
    pool p = { 0 };
    for (size_t order = 0; order < 720; order++) {
        size_t left = order, used;
        for (size_t i = 0; i < 6; i++) {             /* insert i at a place of the factorial base */
            size_t at = left % (i + 1);
            left /= i + 1;
            for (size_t k = i; k > at; k--) y[k] = y[k - 1];
            y[at] = (double)i;
        }
        assert_int_equal(tau_test(x, y, 6, SIDE_ABOVE, &p_values[order], &used, &p), OK);
    }
    for (size_t i = 0; i < 720; i++) {
        size_t as_small = 0;
        for (size_t k = 0; k < 720; k++) as_small += p_values[k] <= p_values[i] * (1 + 1e-12);
        assert_close(p_values[i], (double)as_small / 720, 1e-13);
    }
}

static void special_cases(void **state)
{
    (void)state;
    enum { N = 1100 };
    static double x[N], y[N];
    double got;
    size_t used;
    pool p = { 0 };
    for (size_t i = 0; i < N; i++) {
        x[i] = (double)i;
        y[i] = i % 2 ? (double)i : NAN;
    }
    assert_int_equal(tau_test(x, x, 1, SIDE_BOTH, &got, &used, &p), TOO_FEW);
    assert_int_equal(tau_test(x, y, 3, SIDE_BOTH, &got, &used, &p), TOO_FEW);
    assert_int_equal(used, 1);
    double flat[] = { 2, 2, 2 }, two[] = { 1, 2 };
    assert_int_equal(tau_test(x, flat, 3, SIDE_BOTH, &got, &used, &p), NO_VARIATION);
    assert_int_equal(tau_test(x, two, 2, SIDE_BOTH, &got, &used, &p), OK);
    assert_same(got, 1);                             /* either order of two rows is as extreme */
    assert_int_equal(tau_test(x, x, 150, SIDE_BELOW, &got, &used, &p), OK);
    assert_same(got, 1);
    assert_int_equal(tau_test(x, x, 150, SIDE_ABOVE, &got, &used, &p), OK);
    assert_close(got, exp(-lgamma(151)), 1e-11);     /* 1/150! = 1.75e-263 */
    assert_int_equal(tau_test(x, x, 200, SIDE_ABOVE, &got, &used, &p), OK);
    assert_same(got, 0);                             /* 1/200! = 1.3e-375 */
    assert_int_equal(tau_test(x, y, N, SIDE_ABOVE, &got, &used, &p), OK);
    assert_int_equal(used, N / 2);
    assert_true(got > 0 && got < 1e-200);            /* z = 35.2 */
    for (size_t k = 1; k <= 6; k++) {
        pool failing = { .fail_at = k };
        assert_int_equal(tau_test(x, x, 20, SIDE_BOTH, &got, &used, &failing), NO_MEMORY);
        assert_int_equal(failing.bytes, 0);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(null_distribution), cmocka_unit_test(null_tails),
        cmocka_unit_test(critical_values), cmocka_unit_test(published_examples),
        cmocka_unit_test(p_values_are_probabilities), cmocka_unit_test(special_cases),
    };
    return cmocka_run_group_tests_name("tau_test", tests, NULL, NULL);
}
