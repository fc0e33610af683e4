/* Tests of src/duality.c: the gap bounds what is known to be lost, and vanishes at the best. */
#include "matrices.h"

#include "../../src/duality.h"
#include "../../src/firm_repair.h"

static double sum_of_changes(const double *given, const double *x, size_t d)
{
    double sum = 0;
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j < d; j++)
            if (i != j) sum += pow(x[i * d + j] - given[i * d + j], 2);
    return sum;
}

/* Published matrices, with their nearest one and one found by shrinking, both recomputed with
 * mpmath in the file. */
static void published_matrices(void **state)
{
    (void)state;
    struct csv *t = csv_read("nearest_correlation.csv");
    size_t found = 0;
    for (size_t r = 0; r < t->rows; r++) {
        if (csv_number(t, r, "i") != 1 || csv_number(t, r, "j") != 1) continue;
        pool p = { 0 };
        size_t d;
        double *given = matrix_of(t, csv_text(t, r, "matrix"), "given", &d, &p);
        double *best = matrix_of(t, csv_text(t, r, "matrix"), "nearest", &d, &p);
        double *shrunk = matrix_of(t, csv_text(t, r, "matrix"), "shrink_to_identity", &d, &p);
        double gap, lost = sum_of_changes(given, shrunk, d) - sum_of_changes(given, best, d);
        assert_int_equal(duality_gap(given, NULL, NULL, best, d, 0, &gap, &p), OK);
        assert_within(gap, 0, 1e-15 * (double)d * (1 + sum_of_changes(given, best, d)));
        if (isfinite(lost)) {
            assert_int_equal(duality_gap(given, NULL, NULL, shrunk, d, 0, &gap, &p), OK);
            assert_true(gap >= lost);
        }
        found++;
        pool_empty(&p);
    }
    assert_true(found >= 13);
    csv_free(t);
}

/* How near to their best our solvers are asked to come. */
static double trifle(const double *given, const double *x, size_t d)
{
    return 1e-10 * (double)d * (1 + sum_of_changes(given, x, d));
}

/* What our own solvers return, firm and held entries and floors included, is at its best. */
static void our_results(void **state)
{
    (void)state;
    uint64_t random = 77;
    for (size_t round = 0; round < effort(40); round++) {
        pool p = { 0 };
        size_t d = 2 + random_below(&random, 12);
        double floor = round % 2 ? 0.05 : 0, gap;
        double *given = noisy_matrix(&random, d, d, 0.3, &p);
        double *x = pool_take(&p, d, d * sizeof *x), *s = pool_take_zeroed(&p, d, d * sizeof *s);
        double *w = pool_take(&p, d, d * sizeof *w);
        for (size_t i = 0; i < d; i++)
            for (size_t j = 0; j <= i; j++)
                w[i * d + j] = w[j * d + i] = 0.2 + 3 * random_uniform(&random);
        w[1] = w[d] = INFINITY;
        given[1] = given[d] = 0.2;
        assert_int_equal(nearest_firm(given, w, d, floor, x, s, NULL, NULL, &p), OK);
        assert_int_equal(duality_gap(given, w, s, x, d, floor, &gap, &p), OK);
        assert_within(gap, 0, trifle(given, x, d));
        assert_int_equal(nearest_correlation(given, d, floor, x, NULL, &p), OK);
        assert_int_equal(duality_gap(given, NULL, NULL, x, d, floor, &gap, &p), OK);
        assert_within(gap, 0, trifle(given, x, d));
        pool_empty(&p);
    }
}

static void no_memory(void **state)
{
    (void)state;
    const double given[] = { 1, 0.5, 0.5, 1 };
    double gap;
    pool whole = { 0 };
    assert_int_equal(duality_gap(given, NULL, NULL, given, 2, 0, &gap, &whole), OK);
    assert_same(gap, 0);
    for (size_t k = 1; k <= whole.taken; k++) {
        pool p = { .fail_at = k };
        assert_int_equal(duality_gap(given, NULL, NULL, given, 2, 0, &gap, &p), NO_MEMORY);
        pool_empty(&p);
    }
    pool_empty(&whole);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_matrices),
        cmocka_unit_test(our_results),
        cmocka_unit_test(no_memory),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
