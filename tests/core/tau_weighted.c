/* Tau with weights: the definition, repeated rows, exactness, and what goes wrong. */
#include "pairs.h"

#include "../../src/tau_weighted.h"

/* Sums over pairs by their definition. */
static double by_definition(const double *x, const double *y, const double *w, size_t n)
{
    double score = 0, differ_x = 0, differ_y = 0;
    for (size_t i = 0; i < n; i++) {
        for (size_t j = 0; j < i; j++) {
            if (is_gap(x[i] + y[i] + x[j] + y[j] + w[i] + w[j])) continue;
            int in_x = sign_of(x[i], x[j]), in_y = sign_of(y[i], y[j]);
            score += in_x * in_y * w[i] * w[j];
            differ_x += abs(in_x) * w[i] * w[j];
            differ_y += abs(in_y) * w[i] * w[j];
        }
    }
    return score / sqrt(differ_x * differ_y);
}

static void equals_definition(void **state)
{
    (void)state;
    uint64_t random = 17;
    double at[600], w[300];
    pool p = { 0 };
    for (size_t k = 0; k < effort(500); k++) {
        size_t n = 12 + (k < 288 ? k : random_below(&random, 289)), used;
        random_columns(at, n, 2, kind_of_case(k, &random), &random);
        for (size_t i = 0; i < n; i++) {
            double u = random_uniform(&random);
            w[i] = u < 0.1 ? 0 : k % 3 ? u : exp(20 * random_normal(&random));
            if (k % 4 == 2 && u > 0.95) w[i] = NAN;
        }
        for (size_t i = 0; i < 6; i++) {             /* so that something varies */
            at[i] = (double)i;
            at[n + i] = (double)(i * i % 4);
            w[i] = 1;
        }
        double tau, swapped, want = by_definition(at, at + n, w, n);
        assert_int_equal(tau_weighted(at, at + n, w, n, &tau, &used, &p), OK);
        assert_within(tau, want, 1e-12);
        assert_true(fabs(tau) <= 1);
        assert_int_equal(tau_weighted(at + n, at, w, n, &swapped, &used, &p), OK);
        assert_same(swapped, tau);
        assert_int_equal(p.bytes, 0);
    }
}

/* Whole weights, times any power of two, give to the bit the tau of rows repeated so often. */
static void repeated_rows(void **state)
{
    (void)state;
    uint64_t random = 18;
    double at[200], w[100], x[1000], y[1000];
    pool p = { 0 };
    for (size_t k = 0; k < effort(200); k++) {
        size_t n = 10 + random_below(&random, 90), repeated = 0, used;
        random_columns(at, n, 2, kind_of_case(k, &random), &random);
        at[0] = at[n] = 1;
        at[1] = at[n + 1] = 2;
        for (size_t i = 0; i < n; i++) {
            size_t times = i < 2 ? 1 : random_below(&random, 10);
            w[i] = ldexp((double)times, (int)(k % 41) * 50 - 1000);
            for (size_t j = 0; j < times; j++, repeated++) {
                x[repeated] = at[i];
                y[repeated] = at[n + i];
            }
        }
        struct tau_counts c;
        double tau, want;
        assert_int_equal(tau_count(x, y, repeated, &c, &p), OK);
        assert_int_equal(tau_b(&c, &want), OK);
        assert_int_equal(tau_weighted(at, at + n, w, n, &tau, &used, &p), OK);
        assert_same(tau, want);
    }
}

/* Perfect dependence is exact for any weights. */
static void perfect_dependence(void **state)
{
    (void)state;
    uint64_t random = 19;
    pool p = { 0 };
    double x[500], y[500], z[500], w[500], tau;
    for (size_t k = 0; k < effort(100); k++) {
        size_t n = 2 + random_below(&random, 499), used;
        for (size_t i = 0; i < n; i++) {
            x[i] = i < 2 ? (double)i : floor(random_normal(&random) * 40);
            y[i] = 2 * x[i] + 1;
            z[i] = -x[i];
            w[i] = random_uniform(&random);
        }
        assert_int_equal(tau_weighted(x, y, w, n, &tau, &used, &p), OK);
        assert_same(tau, 1);
        assert_int_equal(tau_weighted(x, z, w, n, &tau, &used, &p), OK);
        assert_same(tau, -1);
    }
}

/* By definition. */
static void refusals(void **state)
{
    (void)state;
    double x[] = { 1, 2, 3 }, y[] = { 1, 3, 2 }, w[] = { 1, 0, 0 }, tau;
    pool p = { 0 };
    size_t used;
    assert_int_equal(tau_weighted(x, y, w, 3, &tau, &used, &p), TOO_FEW);
    assert_int_equal(used, 1);
    w[1] = 1;
    assert_int_equal(tau_weighted(x, y, w, 3, &tau, &used, &p), OK);
    assert_same(tau, 1);
    x[1] = 1;
    assert_int_equal(tau_weighted(x, y, w, 3, &tau, &used, &p), NO_VARIATION);
    w[2] = -1;
    assert_int_equal(tau_weighted(x, y, w, 3, &tau, &used, &p), OUT_OF_DOMAIN);
    w[2] = INFINITY;
    assert_int_equal(tau_weighted(x, y, w, 3, &tau, &used, &p), OUT_OF_DOMAIN);
}

static void memory(void **state)
{
    (void)state;
    double x[] = { 1, 2, 3 }, w[] = { 1, 2, 1 }, tau;
    pool p = { 0 };
    size_t used;
    assert_int_equal(tau_weighted(x, x, w, 3, &tau, &used, &p), OK);
    for (size_t k = 1; k <= p.taken; k++) {
        pool failing = { .fail_at = k };
        assert_int_equal(tau_weighted(x, x, w, 3, &tau, &used, &failing), NO_MEMORY);
        assert_int_equal(failing.bytes, 0);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equals_definition), cmocka_unit_test(repeated_rows),
        cmocka_unit_test(perfect_dependence), cmocka_unit_test(refusals),
        cmocka_unit_test(memory),
    };
    return cmocka_run_group_tests_name("tau_weighted", tests, NULL, NULL);
}
