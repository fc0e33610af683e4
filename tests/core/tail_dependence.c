/* Empirical tail dependence: published data, and the standard error against simulation. */
#include "pairs.h"

#include "../../src/tail_dependence.h"

/* As defined: the rows whose mid-ranks are beyond the edge in both columns. Mid-ranks by counting
 * the values below and the ties. */
static size_t joint_by_definition(const double *x, const double *y, size_t n, size_t k, bool upper)
{
    size_t joint = 0;
    for (size_t i = 0; i < n; i++) {
        double in_x = 0.5, in_y = 0.5;
        for (size_t j = 0; j < n; j++) {
            in_x += (x[j] < x[i]) + 0.5 * (x[j] == x[i]);
            in_y += (y[j] < y[i]) + 0.5 * (y[j] == y[i]);
        }
        double edge = upper ? (double)(n - k) : (double)k;
        joint += upper ? in_x > edge && in_y > edge : in_x <= edge && in_y <= edge;
    }
    return joint;
}

/* Every size of tail, with few and many ties. */
static void every_tail(void **state)
{
    (void)state;
    enum { MOST = 40 };
    uint64_t random = 5;
    for (size_t time = 0; time < effort(100); time++) {
        double x[MOST], y[MOST];
        size_t n = 2 + random_below(&random, MOST - 1), values = 1 + random_below(&random, 60);
        for (size_t i = 0; i < n; i++) {
            x[i] = (double)random_below(&random, values);
            y[i] = (double)random_below(&random, values);
        }
        struct joint_ranks ranks;
        struct tail_estimate upper, lower;
        pool p = { 0 };
        assert_int_equal(new_joint_ranks(x, y, n, &ranks, &p), OK);
        for (size_t k = 1; k <= n; k++) {
            upper_tail(&ranks, k, &upper);
            lower_tail(&ranks, k, &lower);
            assert_int_equal(upper.joint, joint_by_definition(x, y, n, k, true));
            assert_int_equal(lower.joint, joint_by_definition(x, y, n, k, false));
            assert_same(upper.lambda, (double)upper.joint / (double)k);
            assert_same(lower.lambda, (double)lower.joint / (double)k);
        }
        pool_empty(&p);
    }
}

/* A hundred thousand rows and a look at each of 100,000 tails: a rescan of the rows at each would
 * take minutes. Opposite columns: nothing is joint up to half of the rows, then two more a row. */
static void many_tails(void **state)
{
    (void)state;
    enum { ROWS = 100000 };
    double *x = malloc(2 * ROWS * sizeof *x);
    assert_non_null(x);
    for (size_t i = 0; i < ROWS; i++) x[ROWS + i] = -(x[i] = (double)i);
    struct joint_ranks ranks;
    struct tail_estimate t;
    pool p = { 0 };
    assert_int_equal(new_joint_ranks(x, x + ROWS, ROWS, &ranks, &p), OK);
    for (size_t k = 1; k <= ROWS; k++) {
        size_t joint = 2 * k > ROWS ? 2 * k - ROWS : 0;
        lower_tail(&ranks, k, &t);
        assert_true(t.joint == joint);
        upper_tail(&ranks, k, &t);
        assert_true(t.joint == joint);
    }
    pool_empty(&p);
    free(x);
}

/* Losses and expenses of Frees & Valdez (1998) and others, counts recomputed in the file with
 * NumPy. */
static void published(void **state)
{
    (void)state;
    struct csv *t = csv_read("tail_dependence_empirical.csv");
    for (size_t row = 0; row < t->rows; row++) {
        size_t n, k = (size_t)csv_number(t, row, "k");
        double *x = dataset(csv_text(t, row, "dataset"), &n);
        struct joint_ranks ranks;
        struct tail_estimate upper, lower;
        pool p = { 0 };
        assert_int_equal(new_joint_ranks(x, x + n, n, &ranks, &p), OK);
        assert_int_equal(ranks.rows, csv_number(t, row, "n"));
        assert_int_equal(rows_in_tail(&ranks, (double)k / (double)n), k);
        upper_tail(&ranks, k, &upper);
        lower_tail(&ranks, k, &lower);
        assert_int_equal(upper.joint, csv_number(t, row, "count_upper"));
        assert_int_equal(lower.joint, csv_number(t, row, "count_lower"));
        assert_within(upper.lambda, csv_number(t, row, "lambda_upper_count"), 1e-12);
        assert_within(lower.lambda, csv_number(t, row, "lambda_lower_count"), 1e-12);
        assert_true(is_gap(upper.error) == (upper.joint < 10));
        pool_empty(&p);
        free(x);
    }
    csv_free(t);
}

/* Lower tails of a Clayton copula with theta = 1 (Marshall & Olkin 1988), whose lower tail
 * dependence is 1/2: the mean of the estimated errors against the spread of 400 estimates, each of
 * 2,000 rows, k = 100. */
static void error_against_simulation(void **state)
{
    (void)state;
    enum { ROWS = 2000, TIMES = 400 };
    uint64_t random = 81;
    static double x[ROWS], y[ROWS];
    double mean = 0, squares = 0, errors = 0;
    for (size_t k = 0; k < TIMES; k++) {
        for (size_t i = 0; i < ROWS; i++) {
            double frailty = -log(random_uniform(&random));
            x[i] = 1 / (1 - log(random_uniform(&random)) / frailty);
            y[i] = 1 / (1 - log(random_uniform(&random)) / frailty);
        }
        struct joint_ranks ranks;
        struct tail_estimate t;
        pool p = { 0 };
        assert_int_equal(new_joint_ranks(x, y, ROWS, &ranks, &p), OK);
        lower_tail(&ranks, 100, &t);
        double apart = t.lambda - mean;
        mean += apart / (double)(k + 1);
        squares += apart * (t.lambda - mean);
        errors += t.error / TIMES;
        pool_empty(&p);
    }
    assert_within(mean, 0.5, 0.02);
    assert_close(errors, sqrt(squares / (TIMES - 1)), 0.15);     /* 4 standard errors of a spread */
}

/* By definition: ties across the edge, rounding of k, gaps. */
static void by_hand(void **state)
{
    (void)state;
    double x[] = { 1, 2, 3, 3, NAN, 5 }, y[] = { 1, 2, 4, 5, 1, 3 };
    struct joint_ranks ranks;
    struct tail_estimate t;
    pool p = { 0 };
    assert_int_equal(new_joint_ranks(x, y, 6, &ranks, &p), OK);
    assert_int_equal(ranks.rows, 5);
    assert_int_equal(rows_in_tail(&ranks, 0.5), 3);              /* 2.5 */
    assert_int_equal(rows_in_tail(&ranks, 0.01), 1);
    assert_int_equal(rows_in_tail(&ranks, 1), 5);
    upper_tail(&ranks, 2, &t);                   /* ranks 1 2 3.5 3.5 5 and 1 2 4 5 3 */
    assert_int_equal(t.joint, 2);
    upper_tail(&ranks, 1, &t);
    assert_int_equal(t.joint, 0);
    lower_tail(&ranks, 3, &t);
    assert_same(t.lambda, 2 / 3.0);
    assert_int_equal(new_joint_ranks(x, y, 1, &ranks, &p), TOO_FEW);
    pool_empty(&p);
    for (size_t k = 1; k <= 6; k++) {
        pool failing = { .fail_at = k };
        assert_int_equal(new_joint_ranks(x, y, 6, &ranks, &failing), NO_MEMORY);
        pool_empty(&failing);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published), cmocka_unit_test(error_against_simulation),
        cmocka_unit_test(by_hand), cmocka_unit_test(every_tail), cmocka_unit_test(many_tails),
    };
    return cmocka_run_group_tests_name("tail_dependence", tests, NULL, NULL);
}
