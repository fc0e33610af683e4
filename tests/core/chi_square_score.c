/* The logarithm of chi-square by the normal score of its probability, at any depth. */
#include "table.h"

#include "../../src/chi_square_score.h"

/* chi_square_score.csv, by grouped_points.py with mpmath: to 4000 standard deviations */
static void published(void **state)
{
    (void)state;
    struct csv *t = csv_read("chi_square_score.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct chi_square_score s;
        pool p = { 0 };
        double want = csv_number(t, i, "log_scale");
        assert_int_equal(chi_square_score_prepare(&s, csv_number(t, i, "df"), &p), OK);
        assert_within(log_chi_square_scale(&s, csv_number(t, i, "z")), want,
                      1e-12 * fmax(1, fabs(want)));
        pool_empty(&p);
    }
    assert_int_equal(t->rows, 94);
    csv_free(t);
}

/* Where the table of student.h ends, and from each segment to the next */
static void without_jumps(void **state)
{
    (void)state;
    for (double df = 0.001; df < 1e7; df *= 7) {
        struct chi_square_score s;
        pool p = { 0 };
        assert_int_equal(chi_square_score_prepare(&s, df, &p), OK);
        for (int side = -1; side <= 1; side += 2)
            for (int k = 0; k < 60; k++) {
                double z = side * 8 * exp2(k / 4.0), near = log_chi_square_scale(&s, z);
                double within = log_chi_square_scale(&s, z * (1 - 1e-15));
                double beyond = log_chi_square_scale(&s, z * (1 + 1e-15));
                assert_within(beyond, within, 2e-12 * fmax(1, fabs(near)));
            }
        pool_empty(&p);
    }
}

static void every_take_can_fail(void **state)
{
    (void)state;
    for (size_t fail_at = 1;; fail_at++) {
        struct chi_square_score s;
        pool p = { .fail_at = fail_at };
        status done = chi_square_score_prepare(&s, 4, &p);
        bool failed = p.taken >= fail_at;
        pool_empty(&p);
        assert_int_equal(done, failed ? NO_MEMORY : OK);
        if (!failed) break;
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published), cmocka_unit_test(without_jumps),
        cmocka_unit_test(every_take_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
