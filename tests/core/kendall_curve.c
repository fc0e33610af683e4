/* The empirical Kendall distribution: its definition, and its identity with tau. */
#include "pairs.h"

#include "../../src/kendall_curve.h"

static int by_value(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return sign_of(x, y);
}

static void equals_definition(void **state)
{
    (void)state;
    uint64_t random = 71;
    double at[400], w[200], want[200];
    for (size_t k = 0; k < effort(300); k++) {
        size_t n = 1 + random_below(&random, 200), used, m = 0;
        random_columns(at, n, 2, kind_of_case(k, &random), &random);
        at[0] = at[n] = 1;
        const double *x = at, *y = at + n;
        double rows = (double)counts_by_definition(x, y, n).rows;
        for (size_t i = 0; i < n; i++) {
            if (is_gap(x[i]) || is_gap(y[i])) continue;
            double count = 0;
            for (size_t j = 0; j < n; j++) count += x[j] <= x[i] && y[j] <= y[i];
            want[m++] = count / rows;
        }
        qsort(want, m, sizeof *want, by_value);
        pool p = { 0 };
        assert_int_equal(kendall_values(x, y, n, w, &used, &p), OK);
        assert_int_equal(used, m);
        assert_int_equal(p.bytes, 0);
        for (size_t i = 0; i < m; i++) assert_same(w[i], want[i]);
        for (size_t i = 0; i < m; i++) {
            size_t most = i;
            while (most + 1 < m && want[most + 1] == want[i]) most++;
            assert_same(share_at_most(w, m, want[i]), (double)(most + 1) / (double)m);
        }
        assert_same(share_at_most(w, m, 0), 0);
        assert_same(share_at_most(w, m, 1), 1);
    }
}

/* Without ties tau = 4 n/(n-1) mean(W) - (n+3)/(n-1) (Genest & Favre 2007), here on their six
 * pairs, tau = 1/15. */
static void identity_with_tau(void **state)
{
    (void)state;
    size_t n, used;
    double *x = dataset("gf6", &n), w[6], sum = 0;
    pool p = { 0 };
    assert_int_equal(kendall_values(x, x + n, n, w, &used, &p), OK);
    for (size_t i = 0; i < n; i++) sum += w[i];
    assert_close(4 * sum / 5 - 9 / 5.0, 1 / 15.0, 1e-14);
    free(x);
}

static void special_cases(void **state)
{
    (void)state;
    double x[] = { 1, NAN }, y[] = { NAN, 2 }, w[2];
    size_t used;
    pool p = { 0 };
    assert_int_equal(kendall_values(x, y, 2, w, &used, &p), TOO_FEW);
    p.taken = 0;
    assert_int_equal(kendall_values(x, x, 2, w, &used, &p), OK);
    for (size_t k = 1; k <= p.taken; k++) {
        pool failing = { .fail_at = k };
        assert_int_equal(kendall_values(x, x, 2, w, &used, &failing), NO_MEMORY);
        assert_int_equal(failing.bytes, 0);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equals_definition), cmocka_unit_test(identity_with_tau),
        cmocka_unit_test(special_cases),
    };
    return cmocka_run_group_tests_name("kendall_curve", tests, NULL, NULL);
}
