/* Tests of src/repair.c: published and recomputed nearest matrices, and the proof of optimality on
 * random ones. */
#include "matrices.h"

#include "../../src/repair.h"

/* Reads "1e-8" or "1e-8 on entries, ...": the tolerance is the number in front. */
static double tolerance_of(const struct csv *t, size_t row)
{
    return csv_number(t, row, "tolerance");
}

/* The collection of Higham & Strabic (2016) and others, recomputed with 50 digits and a
 * certificate. */
static void nearest_to_published_matrices(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("nearest_correlation.csv");
    size_t found = 0;
    for (size_t r = 0; r < t->rows; r++) {
        if (csv_number(t, r, "i") != 1 || csv_number(t, r, "j") != 1) continue;
        const char *name = csv_text(t, r, "matrix");
        pool p = { .last = NULL };
        size_t d;
        double *given = matrix_of(t, name, "given", &d, &p);
        double *want = matrix_of(t, name, "nearest", &d, &p);
        double *nearest = pool_take(&p, d, d * sizeof *nearest);
        assert_int_equal(nearest_correlation(given, d, 0, nearest, NULL, &p), OK);
        assert_correlations(nearest, d, 0);
        assert_nearest(given, NULL, nearest, d, 0, 1e-10);
        for (size_t i = 0; i < d * d; i++) assert_within(nearest[i], want[i], tolerance_of(t, r));
        found++;
        pool_empty(&p);
    }
    assert_true(found >= 13);
    csv_free(t);
}

static double distance(const double *a, const double *b, size_t n)
{
    double sum = 0;
    for (size_t i = 0; i < n; i++) sum += (a[i] - b[i]) * (a[i] - b[i]);
    return sqrt(sum);
}

/* Distance, largest change and rank of the same matrices. */
static void summaries_of_published_matrices(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("nearest_correlation.csv");
    struct csv *summary = csv_read("nearest_correlation_summary.csv");
    for (size_t r = 0; r < summary->rows; r++) {
        pool p = { .last = NULL };
        size_t d, rank = 0;
        double *given = matrix_of(t, csv_text(summary, r, "matrix"), "given", &d, &p);
        double *nearest = pool_take(&p, d, d * sizeof *nearest);
        double *values = pool_take(&p, d, sizeof *values), largest = 0;
        assert_int_equal(nearest_correlation(given, d, 0, nearest, NULL, &p), OK);
        assert_within(distance(given, nearest, d * d), csv_number(summary, r, "frobenius_distance"),
                      tolerance_of(summary, r));
        for (size_t i = 0; i < d * d; i++)
            if (i % (d + 1)) largest = fmax(largest, fabs(nearest[i] - given[i]));
        assert_within(largest, csv_number(summary, r, "largest_off_diagonal_change"),
                      tolerance_of(summary, r));
        assert_int_equal(all_eigenvalues(nearest, d, values, &p), OK);
        for (size_t k = 0; k < d; k++) rank += values[k] > 1e-9;
        assert_int_equal(rank, (size_t)csv_number(summary, r, "rank_of_nearest"));
        pool_empty(&p);
    }
    csv_free(summary);
    csv_free(t);
}

/* The same matrices under floors: every row of the table. Each matrix comes once for each floor,
 * its first row being entry (1, 2). */
static void nearest_above_a_floor(void **unused)
{
    (void)unused;
    struct csv *given_of = csv_read("nearest_correlation.csv");
    struct csv *t = csv_read("nearest_correlation_floor.csv");
    size_t d = 0, found = 0;
    double nearest[30 * 30], floor = 0;
    for (size_t r = 0; r < t->rows; r++) {
        size_t i = (size_t)csv_number(t, r, "i") - 1, j = (size_t)csv_number(t, r, "j") - 1;
        if (i == 0 && j == 1) {
            pool p = { .last = NULL };
            double *given = matrix_of(given_of, csv_text(t, r, "matrix"), "given", &d, &p);
            assert_in_range(d, 2, 30);
            floor = csv_number(t, r, "eigenvalue_floor");
            assert_int_equal(nearest_correlation(given, d, floor, nearest, NULL, &p), OK);
            assert_correlations(nearest, d, floor);
            assert_nearest(given, NULL, nearest, d, floor, 1e-10);
            pool_empty(&p);
        }
        assert_same(floor, csv_number(t, r, "eigenvalue_floor"));
        assert_within(nearest[i * d + j], csv_number(t, r, "nearest"), tolerance_of(t, r));
        found++;
    }
    assert_int_equal(found, t->rows);
    csv_free(t);
    csv_free(given_of);
}

/* Kendall's tau-b by its definition, pair by pair */
static double tau_b(const double *x, const double *y, size_t n)
{
    double sum = 0, apart_x = 0, apart_y = 0;
    for (size_t i = 0; i < n; i++) {
        for (size_t j = 0; j < i; j++) {
            int a = (x[i] > x[j]) - (x[i] < x[j]), b = (y[i] > y[j]) - (y[i] < y[j]);
            sum += a * b;
            apart_x += a != 0;
            apart_y += b != 0;
        }
    }
    return sum / sqrt(apart_x * apart_y);
}

/* Greiner's sine of tau for four European indices, from the table but for the pair that it leaves
 * out */
static void sines_of_indices(const struct csv *t, double *matrix)
{
    const char *names[] = { "dax", "smi", "cac", "ftse" };
    for (size_t i = 0; i < 16; i++) matrix[i] = 1;
    for (size_t r = 0; r < t->rows; r++) {
        size_t a = 0, b = 0;
        while (!csv_is(t, r, "a", names[a])) a++;
        while (!csv_is(t, r, "b", names[b])) b++;
        matrix[a * 4 + b] = matrix[b * 4 + a] = csv_number(t, r, "rho");
    }
    struct csv *smi_data = csv_read("data_eu_dax_smi.csv");
    struct csv *ftse_data = csv_read("data_eu_dax_ftse.csv");
    size_t n, m;
    double *smi = csv_numbers(smi_data, "y", NULL, NULL, &n);
    double *ftse = csv_numbers(ftse_data, "y", NULL, NULL, &m);
    assert_int_equal(n, m);
    matrix[7] = matrix[13] = sin(acos(-1) / 2 * tau_b(smi, ftse, n));
    free(smi);
    free(ftse);
    csv_free(smi_data);
    csv_free(ftse_data);
}

/* Feasible, and so left as it is. */
static void sines_of_tau_of_indices_stay(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("greiner_indices.csv");
    double given[16], nearest[16], lowest;
    pool p = { .last = NULL };
    sines_of_indices(t, given);
    assert_int_equal(lowest_eigenvalue(given, 4, &lowest, &p), OK);
    assert_within(lowest, csv_number(t, 0, "smallest_eigenvalue"), tolerance_of(t, 0));
    assert_int_equal(nearest_correlation(given, 4, 0, nearest, NULL, &p), OK);
    for (size_t i = 0; i < 16; i++) assert_same(nearest[i], given[i]);
    assert_null(p.last);
    csv_free(t);
}

/* Four lines over six years: the matrix of tau is feasible, Greiner's sine of it is not. */
static void sines_of_tau_may_need_repair(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("greiner_needs_repair.csv");
    double taus[16], given[16], want[16], nearest[16], lowest;
    pool p = { .last = NULL };
    assert_int_equal(t->rows, 6);
    for (size_t i = 0; i < 16; i++) taus[i] = given[i] = want[i] = 1;
    for (size_t r = 0; r < t->rows; r++) {
        size_t i = (size_t)csv_number(t, r, "i") - 1, j = (size_t)csv_number(t, r, "j") - 1;
        taus[i * 4 + j] = taus[j * 4 + i] = csv_number(t, r, "tau");
        given[i * 4 + j] = given[j * 4 + i] = csv_number(t, r, "sine_map");
        want[i * 4 + j] = want[j * 4 + i] = csv_number(t, r, "nearest_correlation");
    }
    double most = tolerance_of(t, 0);
    assert_int_equal(lowest_eigenvalue(taus, 4, &lowest, &p), OK);
    assert_within(lowest, csv_number(t, 0, "smallest_eigenvalue_tau_matrix"), most);
    assert_int_equal(lowest_eigenvalue(given, 4, &lowest, &p), OK);
    assert_within(lowest, csv_number(t, 0, "smallest_eigenvalue_sine_map"), most);
    assert_int_equal(nearest_correlation(given, 4, 0, nearest, NULL, &p), OK);
    for (size_t i = 0; i < 16; i++) assert_within(nearest[i], want[i], most);
    assert_within(distance(given, nearest, 16), csv_number(t, 0, "frobenius_distance"), most);
    assert_null(p.last);
    csv_free(t);
}

/* Random matrices: a result is right when it carries its own proof (assert_nearest). */
static void random_matrices_carry_their_proof(void **unused)
{
    (void)unused;
    const double floors[] = { 0, 0, 1e-8, 0.01, 0.3, 0.9 }, noises[] = { 0.01, 0.1, 0.5, 2 };
    uint64_t state = 20061116;
    for (size_t round = 0; round < effort(120); round++) {
        pool p = { .last = NULL };
        size_t d = 2 + random_below(&state, 40), factors = 1 + random_below(&state, d);
        double floor = floors[random_below(&state, 6)], noise = noises[random_below(&state, 4)];
        double *given = noisy_matrix(&state, d, factors, noise, &p);
        double *nearest = pool_take(&p, d, d * sizeof *nearest);
        assert_int_equal(nearest_correlation(given, d, floor, nearest, NULL, &p), OK);
        assert_correlations(nearest, d, floor);
        assert_nearest(given, NULL, nearest, d, floor, 1e-10);
        pool_empty(&p);
    }
}

/* Entries of -1 and 1 at random under floors near 1: the farthest that any input is from its
 * answer. */
static void floors_near_one(void **unused)
{
    (void)unused;
    const double floors[] = { 0.99, 0.999, 0.9999 };
    uint64_t state = 99;
    for (size_t round = 0; round < effort(30); round++) {
        pool p = { .last = NULL };
        size_t d = 2 + random_below(&state, 30);
        double floor = floors[round % 3];
        double *given = noisy_matrix(&state, d, 1, 100, &p);
        double *nearest = pool_take(&p, d, d * sizeof *nearest);
        assert_int_equal(nearest_correlation(given, d, floor, nearest, NULL, &p), OK);
        assert_correlations(nearest, d, floor);
        assert_nearest(given, NULL, nearest, d, floor, 1e-9);
        pool_empty(&p);
    }
}

/* What was repaired is fine, and fine matrices come back bit for bit; above a floor they have a
 * factor. */
static void a_repaired_matrix_is_not_repaired_again(void **unused)
{
    (void)unused;
    uint64_t state = 7;
    for (size_t round = 0; round < effort(60); round++) {
        pool p = { .last = NULL };
        size_t d = 1 + random_below(&state, 30);
        double floor = round % 2 ? 1e-8 : 0;
        double *given = noisy_matrix(&state, d, 3, 0.5, &p);
        double *once = pool_take(&p, d, d * sizeof *once);
        double *twice = pool_take(&p, d, d * sizeof *twice);
        course how = { 99, 99 };
        bool factor;
        assert_int_equal(nearest_correlation(given, d, floor, once, NULL, &p), OK);
        assert_int_equal(nearest_correlation(once, d, floor, twice, &how, &p), OK);
        assert_int_equal(how.iterations, 0);
        for (size_t i = 0; i < d * d; i++) assert_same(once[i], twice[i]);
        assert_int_equal(lies_above(once, d, 0, &factor, &p), OK);
        if (floor > 0) assert_true(factor);
        pool_empty(&p);
    }
}

/* In place, at d = 1, and with a diagonal that is not 1: all as promised. */
static void special_cases(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    double one[] = { 3 }, chain[] = { 9, 0.9, 0, 0.9, 7, 0.9, 0, 0.9, 5 }, same[9];
    assert_int_equal(nearest_correlation(one, 1, 0.5, one, NULL, &p), OK);
    assert_same(one[0], 1);
    assert_int_equal(nearest_correlation(chain, 3, 0, same, NULL, &p), OK);
    for (size_t i = 0; i < 3; i++) chain[4 * i] = 1;
    assert_int_equal(nearest_correlation(chain, 3, 0, chain, NULL, &p), OK);
    for (size_t i = 0; i < 9; i++) assert_same(chain[i], same[i]);
    assert_null(p.last);
}

static void what_cannot_be_repaired_is_refused(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    double m[] = { 1, 2, 2, 1 }, x[4], nan[] = { 1, NAN, NAN, 1 };
    assert_int_equal(nearest_correlation(m, 2, 1, x, NULL, &p), OUT_OF_DOMAIN);
    assert_int_equal(nearest_correlation(m, 2, -0.1, x, NULL, &p), OUT_OF_DOMAIN);
    assert_int_equal(nearest_correlation(m, 2, NAN, x, NULL, &p), OUT_OF_DOMAIN);
    assert_int_equal(nearest_correlation(m, 0, 0, x, NULL, &p), OUT_OF_DOMAIN);
    assert_int_equal(nearest_correlation(nan, 2, 0, x, NULL, &p), NOT_SETTLED);
    assert_null(p.last);
}

static void every_allocation_can_fail(void **unused)
{
    (void)unused;
    const double chain[] = { 1, 0.9, 0, 0.9, 1, 0.9, 0, 0.9, 1 };
    size_t failures = 0;
    status s = NO_MEMORY;
    for (size_t fail = 1; s == NO_MEMORY; fail++) {
        pool p = { .fail_at = fail };
        double x[9];
        s = nearest_correlation(chain, 3, 0, x, NULL, &p);
        failures += s == NO_MEMORY;
        assert_null(p.last);
    }
    assert_int_equal(s, OK);
    assert_int_equal(failures, 14);      /* what one call takes */
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(nearest_to_published_matrices),
        cmocka_unit_test(summaries_of_published_matrices),
        cmocka_unit_test(nearest_above_a_floor),
        cmocka_unit_test(sines_of_tau_of_indices_stay),
        cmocka_unit_test(sines_of_tau_may_need_repair),
        cmocka_unit_test(random_matrices_carry_their_proof),
        cmocka_unit_test(floors_near_one),
        cmocka_unit_test(a_repaired_matrix_is_not_repaired_again),
        cmocka_unit_test(special_cases),
        cmocka_unit_test(what_cannot_be_repaired_is_refused),
        cmocka_unit_test(every_allocation_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
