/* Draws of every family against published joint exceedances at matched tau, and the tau of draws
 * from near independence to near perfect dependence. */
#include "draws.h"

#include "../../src/tau.h"

static double tau_of(const double *u, size_t n)
{
    pool p = { 0 };
    struct tau_counts c;
    double tau;
    assert_int_equal(tau_count(u, u + n, n, &c, &p), OK);
    assert_int_equal(tau_b(&c, &tau), OK);
    pool_empty(&p);
    return tau;
}

/* Rows i and k of the file describe the same copula. */
static bool same_copula(const struct csv *t, size_t i, size_t k)
{
    static const char *const columns[] = { "family", "tau", "nu" };
    for (int j = 0; j < 3; j++)
        if (strcmp(csv_text(t, i, columns[j]), csv_text(t, k, columns[j]))) return false;
    return true;
}

static copula *copula_of_row(struct sample_copula *s, const struct csv *t, size_t i)
{
    const char *word = csv_text(t, i, "family");
    double parameter = csv_number(t, i, "parameter");
    if (!strcmp(word, "normal")) return elliptical(s, "gaussian", 2, parameter, 0);
    if (!strcmp(word, "student_t")) return elliptical(s, "t", 2, parameter, csv_number(t, i, "nu"));
    return one_parameter(s, word, 2, parameter);
}

/* joint_exceedance_matched_tau.csv, by definition of the families: within four standard errors */
static void joint_exceedances(void **state)
{
    (void)state;
    struct csv *t = csv_read("joint_exceedance_matched_tau.csv");
    size_t n = effort(1000000), checked = 0;
    bool *done = calloc(t->rows, sizeof *done);
    for (size_t i = 0; i < t->rows; i++) {
        if (done[i]) continue;
        struct sample_copula s;
        copula *c = copula_of_row(&s, t, i);
        assert_non_null(c->family);
        double *u = drawn(c, 7000 + i, 0, n);
        for (size_t k = i; k < t->rows; k++) {
            if (!same_copula(t, i, k)) continue;
            double q = csv_number(t, k, "q"), above = csv_number(t, k, "P_both_above_q");
            double below = csv_number(t, k, "P_both_below_1_minus_q");
            assert_within(share_beyond(u, n, 2, -q), above, four_errors(above, n));
            assert_within(share_beyond(u, n, 2, 1 - q), below, four_errors(below, n));
            done[k] = true;
            checked++;
        }
        free(u);
    }
    assert_int_equal(checked, 240);
    free(done);
    csv_free(t);
}

/* The tau that theta was made for, within four standard errors of the sample tau; Var is at most
 * 2 (1 - tau^2) / n (Kendall & Gibbons 1990, 4.17). At tau = 1e-9 every number must be near
 * that of independence: for clayton to the spread of the frailty, sqrt(theta). */
static void tau_comes_back(void **state)
{
    (void)state;
    static const char *const words[] = { "clayton", "gumbel", "frank", "joe" };
    static const double taus[] = { -0.9999, -0.6, -0.1, -1e-9, 1e-9, 0.02, 0.2, 0.5, 0.8, 0.99,
                                   0.9999 };
    size_t n = effort(40000);
    for (int w = 0; w < 4; w++)
        for (size_t k = 0; k < sizeof taus / sizeof *taus; k++) {
            struct sample_copula s;
            copula *c = one_parameter(&s, words[w], 2, 0);
            if (taus[k] < c->family->tau_low) continue;
            assert_int_equal(c->family->theta_from_tau(taus[k], &c->theta), OK);
            if (c->family->tau_low == 0 && taus[k] < 0) continue;
            double *u = drawn(c, 50 + k, 0, n), want = taus[k];
            double error = sqrt(2 * (1 - want * want) / (double)n);
            assert_within(tau_of(u, n), want, 4 * error);
            if (want > 0 && want < 1e-8) {
                struct sample_copula none;
                double *v = drawn(one_parameter(&none, "independent", 2, 0), 50 + k, 0, n);
                for (size_t i = 0; i < 2 * n; i++) assert_within(u[i], v[i], 5 * sqrt(1e-9));
                free(v);
            }
            free(u);
        }
}

/* All pairs of a draw in five dimensions have the same tau, and Archimedean copulas do not tell
 * their columns apart: P(U_1 <= U_2 <= ... <= U_5) is 1/120. */
static void columns_are_alike(void **state)
{
    (void)state;
    static const char *const words[] = { "clayton", "gumbel", "frank", "joe" };
    size_t n = effort(30000), d = 5;
    for (int w = 0; w < 4; w++) {
        struct sample_copula s;
        copula *c = one_parameter(&s, words[w], d, 0);
        assert_int_equal(c->family->theta_from_tau(0.4, &c->theta), OK);
        double *u = drawn(c, 3 + (uint64_t)w, 0, n);
        size_t ascending = 0;
        for (size_t i = 0; i < n; i++) {
            size_t steps = 0;
            for (size_t j = 1; j < d; j++) steps += u[j * n + i] >= u[(j - 1) * n + i];
            ascending += steps == d - 1;
        }
        assert_within((double)ascending / (double)n, 1.0 / 120, four_errors(1.0 / 120, n));
        for (size_t j = 1; j < d; j++)
            assert_within(tau_of(u + (j - 1) * n, n), 0.4, 4 * sqrt(2 * 0.84 / (double)n));
        free(u);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(joint_exceedances),
        cmocka_unit_test(tau_comes_back),
        cmocka_unit_test(columns_are_alike),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
