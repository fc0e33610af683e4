/* Scores of rows against their definition, and the standard errors that follow against published
 * formulas and values. */
#include "scored.h"

static void equals_definition(void **state)
{
    (void)state;
    uint64_t random = 31;
    double at[400];
    for (size_t k = 0; k < effort(400); k++) {
        size_t n = k < 200 ? k : random_below(&random, 201);
        random_columns(at, n, 2, kind_of_case(k, &random), &random);
        const double *x = at, *y = at + n;
        pool p = { 0 };
        struct tau_scores s = scores_of(x, y, n, &p);
        struct tau_counts want = counts_by_definition(x, y, n);
        assert_same_counts(s.counts, want);
        assert_int_equal(s.rows, want.rows);
        for (size_t i = 0; i < n; i++) {
            if (is_gap(x[i]) || is_gap(y[i])) continue;
            double score = 0, differ_x = 0, differ_y = 0;
            size_t place = 0;                        /* by x, then by row */
            for (size_t j = 0; j < n; j++) {
                if (is_gap(x[j]) || is_gap(y[j])) continue;
                score += sign_of(x[i], x[j]) * sign_of(y[i], y[j]);
                differ_x += x[i] != x[j];
                differ_y += y[i] != y[j];
                place += x[j] < x[i] || (x[j] == x[i] && j < i);
            }
            assert_same(s.score[place], score);
            assert_same(s.differ_x[place], differ_x);
            assert_same(s.differ_y[place], differ_y);
        }
        pool_empty(&p);
    }
}

static double centred_squares(const struct tau_scores *s)
{
    double mean = 2 * tau_score(&s->counts) / (double)s->rows, sum = 0;
    for (size_t k = 0; k < s->rows; k++) sum += pow(s->score[k] - mean, 2);
    return sum;
}

/* Variance estimates of tau-a on 13 data sets by the formulas of Fligner & Rust (1982), Samara &
 * Randles (1988) and the jackknife, recomputed in the file with mpmath. Where nothing ties, tau-a
 * is tau-b and the library's errors must be their roots. */
static void published_variances(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_variance_estimates.csv");
    size_t compared = 0;
    for (size_t k = 0; k < t->rows; k++) {
        bool consistent = csv_is(t, k, "estimator", "consistent_hollander_wolfe");
        if (!consistent && !csv_is(t, k, "estimator", "jackknife")) continue;
        size_t rows;
        double *x = dataset(csv_text(t, k, "dataset"), &rows), error;
        pool p = { 0 };
        struct tau_scores s = scores_of(x, x + rows, rows, &p);
        double n = (double)rows, tau = csv_number(t, k, "tau_a"), squares = centred_squares(&s);
        double first = 2 * (n - 2) / (n * (n - 1) * (n - 1)) * squares;
        double variance = consistent ? 2 / (n * (n - 1)) * (first + 1 - tau * tau)
                                     : 4 * squares / (n * (n - 1) * (n - 2) * (n - 2));
        assert_close(variance, csv_number(t, k, "variance"), 1e-11);
        if (!s.counts.tied_x && !s.counts.tied_y) {
            assert_int_equal(consistent ? tau_error_free(&s, &error)
                                        : tau_error_jackknife(&s, &error), OK);
            assert_close(error, csv_number(t, k, "sd"), 1e-11);
            compared++;
        }
        pool_empty(&p);
        free(x);
    }
    assert_in_range(compared, 4, 26);
    csv_free(t);
}

/* The influence values of tau-b with ties: the root of their sum of squares over the number of
 * pairs is the asymptotic standard error of tau-b (Brown & Benedetti 1977), here for the data sets
 * of the file, recomputed there with mpmath. */
static void influence_with_ties(void **state)
{
    (void)state;
    struct csv *t = csv_read("kendall_examples.csv");
    size_t compared = 0;
    for (size_t k = 0; k < t->rows; k++) {
        double want = csv_number(t, k, "ase_tau_b"), squares = 0, sum = 0, size = 0;
        if (is_gap(want)) continue;
        size_t n;
        double *x = dataset(csv_text(t, k, "dataset"), &n);
        pool p = { 0 };
        struct tau_scores s = scores_of(x, x + n, n, &p);
        assert_int_equal(tau_influence(&s), OK);
        for (size_t i = 0; i < n; i++) {
            squares += s.score[i] * s.score[i];
            sum += s.score[i];
            size += fabs(s.score[i]);
        }
        assert_close(sqrt(squares) / (double)s.counts.pairs, want, 1e-11);
        assert_within(sum, 0, 1e-12 * size);
        compared++;
        pool_empty(&p);
        free(x);
    }
    assert_in_range(compared, 20, 28);
    csv_free(t);
}

/* The jackknife error of tau-b in data sets of which most have ties, and tau-b itself: SciPy's
 * kendalltau with each row left out, in the file. */
static void jackknife_with_ties(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_b_jackknife.csv");
    size_t tied = 0;
    for (size_t k = 0; k < t->rows; k++) {
        size_t n;
        double *x = dataset(csv_text(t, k, "dataset"), &n), error, tau;
        pool p = { 0 };
        struct tau_scores s = scores_of(x, x + n, n, &p);
        assert_int_equal(n, (size_t)csv_number(t, k, "n"));
        assert_int_equal(tau_b(&s.counts, &tau), OK);
        assert_close(tau, csv_number(t, k, "tau_b"), csv_number(t, k, "tolerance"));
        assert_int_equal(tau_error_jackknife(&s, &error), OK);
        assert_close(error, csv_number(t, k, "jackknife_error"), csv_number(t, k, "tolerance"));
        tied += s.counts.tied_x || s.counts.tied_y;
        pool_empty(&p);
        free(x);
    }
    assert_int_equal(t->rows, 15);
    assert_int_equal(tied, 13);
    csv_free(t);
}

/* h of a pair of rows as in tau_scores.c, straight from its definition. */
static double error_by_definition(const double *x, const double *y, size_t n)
{
    struct tau_counts c = counts_by_definition(x, y, n);
    double a = (double)(c.pairs - c.tied_x), b = (double)(c.pairs - c.tied_y), tau;
    assert_int_equal(tau_b(&c, &tau), OK);
    double zeta1 = 0, zeta2 = 0, m = (double)n;
    for (size_t i = 0; i < n; i++) {
        double row = 0;
        for (size_t j = 0; j < n; j++) {
            if (i == j) continue;
            int in_x = sign_of(x[i], x[j]), in_y = sign_of(y[i], y[j]);
            double h = (in_x * in_y - tau / 2 * (sqrt(b / a) * abs(in_x) + sqrt(a / b) * abs(in_y)))
                     * (double)c.pairs / sqrt(a * b);
            row += h;
            zeta2 += h * h / (m * (m - 1));
        }
        zeta1 += pow(row / (m - 1), 2) / m;
    }
    return sqrt(2 / (m * (m - 1)) * (2 * (m - 2) * zeta1 + zeta2));
}

/* Both errors, ties or not, against their definitions: the U-statistic's, and leaving out rows. */
static void errors_equal_definitions(void **state)
{
    (void)state;
    uint64_t random = 8;
    double at[160], part[160];
    for (size_t k = 0; k < effort(100); k++) {
        size_t n = 5 + random_below(&random, 75);
        random_columns(at, n, 2, (struct kind_of_pair){ k % 2, false, 0.7 }, &random);
        for (size_t i = 0; i < 3; i++) at[i] = at[n + i] = 50 + (double)i;
        pool p = { 0 };
        struct tau_scores s = scores_of(at, at + n, n, &p);
        double jackknife, error, mean = 0, squares = 0, tau[80];
        assert_int_equal(tau_error_jackknife(&s, &jackknife), OK);
        assert_int_equal(tau_error_free(&s, &error), OK);
        assert_close(error, error_by_definition(at, at + n, n), 1e-11);
        for (size_t left_out = 0; left_out < n; left_out++) {
            for (size_t i = 0, to = 0; i < n; i++) {
                if (i == left_out) continue;
                part[to] = at[i];
                part[n - 1 + to++] = at[n + i];
            }
            struct tau_counts c = counts_by_definition(part, part + n - 1, n - 1);
            assert_int_equal(tau_b(&c, &tau[left_out]), OK);
            mean += tau[left_out] / (double)n;
        }
        for (size_t i = 0; i < n; i++) squares += pow(tau[i] - mean, 2);
        assert_within(jackknife, sqrt((double)(n - 1) / (double)n * squares), 1e-12);
        pool_empty(&p);
    }
}

/* By definition: nothing to estimate from, nothing that varies, perfect dependence. */
static void special_cases(void **state)
{
    (void)state;
    double x[] = { 1, 2, 3, 4 }, flat[] = { 1, 1, 1, 1 }, step[] = { 0, 0, 0, 1 }, error;
    pool p = { 0 };
    struct tau_scores s = scores_of(x, x, 2, &p);
    assert_int_equal(tau_error_free(&s, &error), TOO_FEW);
    assert_int_equal(tau_error_jackknife(&s, &error), TOO_FEW);
    s = scores_of(x, flat, 4, &p);
    assert_int_equal(tau_error_free(&s, &error), NO_VARIATION);
    assert_int_equal(tau_influence(&s), NO_VARIATION);
    s = scores_of(x, step, 4, &p);
    assert_int_equal(tau_error_jackknife(&s, &error), NO_VARIATION);
    s = scores_of(x, x, 4, &p);
    assert_int_equal(tau_error_jackknife(&s, &error), OK);
    assert_same(error, 0);
    assert_int_equal(tau_error_free(&s, &error), OK);
    assert_same(error, 0);
    pool_empty(&p);
}

static void memory(void **state)
{
    (void)state;
    pool p = { 0 };
    struct score_room *room;
    assert_int_equal(new_score_room(1000, &room, &p), OK);
    assert_in_range(p.bytes, 1, 1000 * 48);
    for (size_t k = 1; k <= p.taken; k++) {
        pool failing = { .fail_at = k };
        assert_int_equal(new_score_room(1000, &room, &failing), NO_MEMORY);
        pool_empty(&failing);
    }
    pool_empty(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equals_definition), cmocka_unit_test(published_variances),
        cmocka_unit_test(influence_with_ties), cmocka_unit_test(jackknife_with_ties),
        cmocka_unit_test(errors_equal_definitions), cmocka_unit_test(special_cases),
        cmocka_unit_test(memory),
    };
    return cmocka_run_group_tests_name("tau_scores", tests, NULL, NULL);
}
