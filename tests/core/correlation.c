/* Tests of src/correlation.c against published matrices and closed forms. */
#include "matrices.h"

#include "../../src/correlation.h"
#include "../../src/repair.h"

/* 1 and r: eigenvalues 1 + (d - 1) r once, 1 - r otherwise (a rank one matrix added to a multiple
 * of I) */
static void equal_correlations_have_known_eigenvalues(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    for (size_t d = 1; d <= 20; d++) {
        double matrix[400], values[20], lowest;
        for (size_t i = 0; i < d * d; i++) matrix[i] = i % (d + 1) ? 0.3 : 1;
        assert_int_equal(all_eigenvalues(matrix, d, values, &p), OK);
        assert_int_equal(lowest_eigenvalue(matrix, d, &lowest, &p), OK);
        assert_close(values[0], 1 + 0.3 * (double)(d - 1), 1e-14);
        for (size_t k = 1; k < d; k++) assert_close(values[k], 0.7, 1e-13);
        assert_same(values[d - 1], lowest);
    }
    assert_null(p.last);
}

/* The lowest eigenvalues that the collections give for their matrices. */
static void published_lowest_eigenvalues(void **unused)
{
    (void)unused;
    struct csv *entries = csv_read("nearest_correlation.csv");
    struct csv *summary = csv_read("nearest_correlation_summary.csv");
    for (size_t r = 0; r < summary->rows; r++) {
        pool p = { .last = NULL };
        size_t d;
        double lowest;
        const double *matrix = matrix_of(entries, csv_text(summary, r, "matrix"), "given", &d, &p);
        assert_int_equal(d, (size_t)csv_number(summary, r, "n"));
        assert_int_equal(lowest_eigenvalue(matrix, d, &lowest, &p), OK);
        assert_within(lowest, csv_number(summary, r, "min_eigenvalue_given"), 1e-12);
        pool_empty(&p);
    }
    csv_free(summary);
    csv_free(entries);
}

/* The matrices of the directive and the delegated regulation on Solvency II: tables of
 * correlations, feasible, and nothing there to repair. */
static void matrices_of_law_are_feasible_and_stay_as_they_are(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("law_correlation_matrices.csv");
    size_t found = 0;
    for (size_t r = 0; r < t->rows; r++) {
        if (csv_number(t, r, "i") != 1 || csv_number(t, r, "j") != 1) continue;
        pool p = { .last = NULL };
        size_t d;
        double lowest;
        bool feasible = false;
        double *matrix = matrix_of(t, csv_text(t, r, "matrix"), "value", &d, &p);
        double *nearest = pool_take(&p, d, d * sizeof *nearest);
        assert_int_equal(d, (size_t)csv_number(t, r, "n"));
        assert_int_equal(matrix_defect(matrix, d).what, NO_DEFECT);
        assert_int_equal(lowest_eigenvalue(matrix, d, &lowest, &p), OK);
        assert_within(lowest, csv_number(t, r, "smallest_eigenvalue_numpy"), 1e-11);
        assert_int_equal(matrix_feasible(matrix, d, 0, &feasible, &p), OK);
        assert_true(feasible);
        assert_int_equal(nearest_correlation(matrix, d, 0, nearest, NULL, &p), OK);
        for (size_t i = 0; i < d * d; i++) assert_same(nearest[i], matrix[i]);
        assert_false(tidy_matrix(matrix, d));
        found++;
        pool_empty(&p);
    }
    assert_true(found >= 5);
    csv_free(t);
}

/* {1, r; r, 1} has lowest eigenvalue 1 - r: feasible up to the allowance of 1e-12 d = 2e-12. */
static void feasible_allows_rounding_and_no_more(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    const double off[] = { -3e-12, -1.9e-12, 0, 1e-13, 1e-3 };
    for (size_t k = 0; k < 5; k++) {
        double r = 0.5 - off[k], matrix[] = { 1, r, r, 1 };
        bool feasible;
        assert_int_equal(matrix_feasible(matrix, 2, 0.5, &feasible, &p), OK);
        assert_int_equal(feasible, off[k] > -2e-12);
        bool above;
        assert_int_equal(lies_above(matrix, 2, 0.5, &above, &p), OK);
        if (off[k] <= -1.9e-12) assert_false(above);
        if (off[k] >= 1e-13) assert_true(above);
    }
    double singular[] = { 1, 1, 1, 1 };
    bool feasible = false;
    p.taken = 0;
    assert_int_equal(matrix_feasible(singular, 2, 0, &feasible, &p), OK);
    assert_true(feasible);
    assert_int_equal(p.taken, 1);                /* a factor shows it, without the eigenvalues */
    assert_null(p.last);
}

static void assert_defect(const double *matrix, size_t d, int what, size_t row, size_t col)
{
    defect found = matrix_defect(matrix, d);
    assert_int_equal(found.what, what);
    assert_int_equal(found.row, row);
    assert_int_equal(found.column, col);
}

static void defects_are_found_where_they_are(void **unused)
{
    (void)unused;
    double m[] = { 1, 0.1, 0.2, 0.1, 1, 0.3, 0.2, 0.3, 1 };
    assert_defect(m, 3, NO_DEFECT, 0, 0);
    m[5] = 0.3 + 2e-9;
    assert_defect(m, 3, NOT_SYMMETRIC, 1, 2);
    m[5] = m[7] = -1.5;
    assert_defect(m, 3, OUTSIDE_UNIT, 1, 2);
    m[5] = m[7] = NAN;
    assert_defect(m, 3, OUTSIDE_UNIT, 1, 2);
    m[5] = m[7] = 0.3;
    m[8] = 2;
    assert_defect(m, 3, DIAGONAL_NOT_ONE, 2, 2);
    m[8] = NAN;
    assert_defect(m, 3, DIAGONAL_NOT_ONE, 2, 2);
}

static void tidying_takes_means_and_removes_rounding(void **unused)
{
    (void)unused;
    double m[] = { 1 + 1e-12, 0.5, 1 + 1e-12, 0.5 + 4e-10, 1, 0.25, 1 + 1e-12, 0.25, 1 };
    assert_int_equal(matrix_defect(m, 3).what, NO_DEFECT);
    assert_true(tidy_matrix(m, 3));
    const double want[] = { 1, 0.5 + 2e-10, 1, 0.5 + 2e-10, 1, 0.25, 1, 0.25, 1 };
    for (size_t i = 0; i < 9; i++) assert_within(m[i], want[i], 1e-16);
    assert_same(m[1], m[3]);
    assert_same(m[0], 1);
    assert_same(m[2], 1);
    assert_false(tidy_matrix(m, 3));
}

static void what_is_empty_or_not_finite_has_no_answer(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    double nan[] = { 1, NAN, NAN, 1 }, infinite[] = { INFINITY }, x;
    bool feasible;
    assert_int_equal(lowest_eigenvalue(nan, 0, &x, &p), OUT_OF_DOMAIN);
    assert_int_equal(matrix_feasible(nan, 0, 0, &feasible, &p), OUT_OF_DOMAIN);
    assert_int_equal(lowest_eigenvalue(nan, 2, &x, &p), NOT_SETTLED);
    assert_int_equal(matrix_feasible(nan, 2, 0, &feasible, &p), NOT_SETTLED);
    assert_int_equal(matrix_feasible(infinite, 1, 0, &feasible, &p), NOT_SETTLED);
    assert_null(p.last);
}

static void every_allocation_can_fail(void **unused)
{
    (void)unused;
    const double bad[] = { 1, 2, 2, 1 };
    size_t failures = 0;
    for (size_t fail = 1; fail < 20; fail++) {
        pool p = { .fail_at = fail };
        double x, two[2];
        bool feasible;
        status s = lowest_eigenvalue(bad, 2, &x, &p);
        assert_true(s == OK || s == NO_MEMORY);
        failures += s == NO_MEMORY;
        p.taken = 0;
        s = all_eigenvalues(bad, 2, two, &p);
        assert_true(s == OK || s == NO_MEMORY);
        p.taken = 0;
        s = matrix_feasible(bad, 2, 0, &feasible, &p);
        assert_true(s == NO_MEMORY || (s == OK && !feasible));
        assert_null(p.last);
    }
    assert_int_equal(failures, 4);      /* work, whole numbers, copy, eigenvalues */
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equal_correlations_have_known_eigenvalues),
        cmocka_unit_test(published_lowest_eigenvalues),
        cmocka_unit_test(matrices_of_law_are_feasible_and_stay_as_they_are),
        cmocka_unit_test(feasible_allows_rounding_and_no_more),
        cmocka_unit_test(defects_are_found_where_they_are),
        cmocka_unit_test(tidying_takes_means_and_removes_rounding),
        cmocka_unit_test(what_is_empty_or_not_finite_has_no_answer),
        cmocka_unit_test(every_allocation_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
