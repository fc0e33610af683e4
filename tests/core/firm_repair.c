/* Tests of src/firm_repair.c: every answer must carry its proof, and agree with what is known. */
#include "matrices.h"

#include "../../src/firm_repair.h"

/* Firmness from 1/spread to spread, evenly in the logarithm, and `held` of the entries held. */
static double *random_firmness(uint64_t *state, size_t d, double spread, double held, pool *p)
{
    double *w = pool_take(p, d, d * sizeof *w);
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j <= i; j++) {
            double firmness = pow(spread, 2 * random_uniform(state) - 1);
            w[i * d + j] = w[j * d + i] = random_uniform(state) < held ? INFINITY : firmness;
        }
    return w;
}

/* The proof that firm_repair.h promises, checked without regard to how it was found: S has no
 * negative eigenvalue, S (X - f I) = 0, and S = w (x - g) where nothing is held. Then for any Z
 * with the same entries held,
 *     objective(Z) - objective(X) >= 2 <S, Z - X> = 2 <S, Z - f I> >= 0. */
static void assert_proof(const double *g, const double *w, const double *x, const double *s,
                         size_t d, double floor, double trifle)
{
    pool p = { .last = NULL };
    double lowest, scale = 1;
    for (size_t i = 0; i < d * d; i++) scale = fmax(scale, fabs(s[i]));
    double most = trifle * scale * (double)d;
    assert_int_equal(lowest_eigenvalue(s, d, &lowest, &p), OK);
    if (lowest < -most) assert_within(lowest, 0, most);
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j < d; j++) {
            double sum = -floor * s[i * d + j];
            for (size_t k = 0; k < d; k++) sum += s[i * d + k] * x[k * d + j];
            assert_within(sum, 0, most);
            if (i == j) continue;
            if (isinf(w[i * d + j])) assert_same(x[i * d + j], g[i * d + j]);
            else assert_within(s[i * d + j], w[i * d + j] * (x[i * d + j] - g[i * d + j]), most);
        }
    pool_empty(&p);
}

/* All entries equally firm: the published nearest matrices (see tests of repair.c). */
static void equal_firmness_is_the_nearest_matrix(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("nearest_correlation.csv");
    size_t found = 0;
    for (size_t r = 0; r < t->rows; r++) {
        if (csv_number(t, r, "i") != 1 || csv_number(t, r, "j") != 1) continue;
        pool p = { .last = NULL };
        size_t d;
        double *given = matrix_of(t, csv_text(t, r, "matrix"), "given", &d, &p);
        double *want = matrix_of(t, csv_text(t, r, "matrix"), "nearest", &d, &p);
        double *x = pool_take(&p, d, d * sizeof *x), *w = pool_take(&p, d, d * sizeof *w);
        for (size_t i = 0; i < d * d; i++) w[i] = 0.25;
        assert_int_equal(nearest_firm(given, w, d, 0, x, NULL, NULL, NULL, &p), OK);
        for (size_t i = 0; i < d * d; i++)
            assert_within(x[i], want[i], csv_number(t, r, "tolerance"));
        found++;
        pool_empty(&p);
    }
    assert_true(found >= 13);
    csv_free(t);
}

/* Firm and held entries found by a general optimiser (tests/generators/firm_matrices.py). */
static void firm_and_held_as_a_general_optimiser_finds(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("nearest_correlation_firm.csv");
    size_t cases = 0;
    for (size_t first = 0, d; first < t->rows; first += d * (d - 1) / 2, cases++) {
        pool p = { .last = NULL };
        d = 1;
        while (first + d - 1 < t->rows && csv_number(t, first + d - 1, "i") == 1 &&
               csv_number(t, first + d - 1, "j") == (double)d + 1)
            d++;
        double *given = pool_take_zeroed(&p, d, d * sizeof *given);
        double *w = pool_take_zeroed(&p, d, d * sizeof *w), *x = pool_take(&p, d, d * sizeof *x);
        for (size_t r = first; r < first + d * (d - 1) / 2; r++) {
            size_t i = (size_t)csv_number(t, r, "i") - 1, j = (size_t)csv_number(t, r, "j") - 1;
            given[i * d + j] = given[j * d + i] = csv_number(t, r, "given");
            w[i * d + j] = w[j * d + i] =
                csv_number(t, r, "held") == 1 ? INFINITY : csv_number(t, r, "firmness");
        }
        assert_int_equal(nearest_firm(given, w, d, 0, x, NULL, NULL, NULL, &p), OK);
        for (size_t r = first; r < first + d * (d - 1) / 2; r++) {
            size_t i = (size_t)csv_number(t, r, "i") - 1, j = (size_t)csv_number(t, r, "j") - 1;
            assert_within(x[i * d + j], csv_number(t, r, "nearest"),
                          csv_number(t, r, "tolerance"));
        }
        pool_empty(&p);
    }
    assert_int_equal(cases, 9);
    csv_free(t);
}

/* The leading block held: shrinking to a feasible matrix, as a numerical library's manual does, is
 * one way to meet the hold, so that its distance bounds the least one from above. */
static void a_held_block_is_nearer_than_by_shrinking(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("nearest_correlation.csv");
    struct csv *bound = csv_read("nearest_correlation_fixed_block.csv");
    pool p = { .last = NULL };
    size_t d, held = (size_t)csv_number(bound, 0, "fixed_leading_block");
    double *given = matrix_of(t, "shrink5", "given", &d, &p), squares = 0;
    double *x = pool_take(&p, d, d * sizeof *x), *w = pool_take(&p, d, d * sizeof *w);
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j < d; j++) w[i * d + j] = i < held && j < held ? INFINITY : 1;
    assert_int_equal(nearest_firm(given, w, d, 0, x, NULL, NULL, NULL, &p), OK);
    for (size_t i = 0; i < d * d; i++) squares += (x[i] - given[i]) * (x[i] - given[i]);
    assert_true(sqrt(squares) < csv_number(bound, 0, "frobenius_distance"));
    pool_empty(&p);
    csv_free(t);
    csv_free(bound);
}

/* Any firmness within the factor of a million that the help of REPAIR names, no holds: proved
 * without the solver's own S. */
static void random_firmness_carries_its_proof(void **unused)
{
    (void)unused;
    const double floors[] = { 0, 1e-8, 0.05, 0.5 }, spreads[] = { 1, 3, 10, 100, 1000 };
    uint64_t state = 2011;
    for (size_t round = 0; round < effort(60); round++) {
        pool p = { .last = NULL };
        size_t d = 2 + random_below(&state, 25);
        double floor = floors[random_below(&state, 4)];
        double *given = noisy_matrix(&state, d, 1 + random_below(&state, d), 0.5, &p);
        double *w = random_firmness(&state, d, spreads[random_below(&state, 5)], 0, &p);
        double *x = pool_take(&p, d, d * sizeof *x), *s = pool_take(&p, d, d * sizeof *s);
        assert_int_equal(nearest_firm(given, w, d, floor, x, s, NULL, NULL, &p), OK);
        assert_correlations(x, d, floor);
        assert_nearest(given, w, x, d, floor, 1e-9);
        assert_proof(given, w, x, s, d, floor, 1e-9);
        pool_empty(&p);
    }
}

/* Some entries held at values that can be met, because they come from a feasible matrix. */
static void entries_held_keep_their_bits(void **unused)
{
    (void)unused;
    const double floors[] = { 0, 1e-8, 0.05 };
    uint64_t state = 1981;
    for (size_t round = 0; round < effort(60); round++) {
        pool p = { .last = NULL };
        size_t d = 3 + random_below(&state, 20);
        double floor = floors[random_below(&state, 3)];
        double *given = noisy_matrix(&state, d, 3, 0.5, &p);
        double *x = pool_take(&p, d, d * sizeof *x), *s = pool_take(&p, d, d * sizeof *s);
        double *w = random_firmness(&state, d, 3, 0.2, &p);
        assert_int_equal(nearest_correlation(given, d, floor + 0.01, x, NULL, &p), OK);
        for (size_t i = 0; i < d * d; i++)
            if (isinf(w[i])) given[i] = x[i];
        assert_int_equal(nearest_firm(given, w, d, floor, x, s, NULL, NULL, &p), OK);
        assert_correlations(x, d, floor);
        assert_proof(given, w, x, s, d, floor, 1e-9);
        pool_empty(&p);
    }
}

/* Two correlations held and a third asked to be as high or as low as it can: the limits of Stanley
 * & Wang (1969) and Olkin (1981). */
static void the_third_correlation_goes_to_its_limit(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("admissible_third_correlation.csv");
    pool p = { .last = NULL };
    size_t tried = 0;
    for (size_t r = 0; r < t->rows; r++) {
        double a = csv_number(t, r, "r_ab"), b = csv_number(t, r, "r_bc");
        double low = csv_number(t, r, "r_ac_low"), high = csv_number(t, r, "r_ac_high");
        const double w[] = { 1, INFINITY, 1, INFINITY, 1, INFINITY, 1, INFINITY, 1 };
        for (double wish = -1; wish <= 1; wish += 2) {
            double given[] = { 1, a, wish, a, 1, b, wish, b, 1 }, x[9], s[9];
            if (high - low < 1e-6) continue;      /* the holds leave no interior */
            assert_int_equal(nearest_firm(given, w, 3, 0, x, s, NULL, NULL, &p), OK);
            assert_within(x[2], wish < 0 ? low : high, 1e-10);
            assert_same(x[1], a);
            assert_same(x[5], b);
            tried++;
        }
    }
    assert_true(tried > 150);
    csv_free(t);
}

/* Holds that cannot stand together: the S that comes back proves it. */
static void clashing_holds_are_proved_to_clash(void **unused)
{
    (void)unused;
    uint64_t state = 77;
    for (size_t round = 0; round < effort(40); round++) {
        pool p = { .last = NULL };
        size_t d = 3 + random_below(&state, 10);
        double *g = noisy_matrix(&state, d, 3, 0.3, &p);
        double *w = random_firmness(&state, d, 10, 0.1, &p);
        double *x = pool_take(&p, d, d * sizeof *x), *s = pool_take(&p, d, d * sizeof *s);
        size_t line[] = { 0, d / 2, d - 1 };
        /* with 0.9 and 0.9 the third is at least 0.62 */
        const double clash[] = { 0.9, 0.9, -0.5 + 0.9 * random_uniform(&state) };
        for (size_t k = 0; k < 3; k++) {
            size_t a = line[k], b = line[(k + 1) % 3];
            w[a * d + b] = w[b * d + a] = INFINITY;
            g[a * d + b] = g[b * d + a] = clash[k];
        }
        bool clashes = false;
        double lowest, most = 0;
        assert_int_equal(nearest_firm(g, w, d, 0, x, s, &clashes, NULL, &p), OUT_OF_DOMAIN);
        assert_true(clashes);
        assert_int_equal(lowest_eigenvalue(s, d, &lowest, &p), OK);
        for (size_t i = 0; i < d * d; i++) {
            bool fixed = i % (d + 1) == 0 || isinf(w[i]);
            most += fixed ? s[i] * g[i] : fabs(s[i]);
        }
        double trace = 0;
        for (size_t i = 0; i < d; i++) trace += s[i * d + i];
        assert_true(lowest >= -1e-12 * trace);
        assert_true(most < 0);
        pool_empty(&p);
    }
}

/* Four lines in a ring, 0.9 three times and -0.9 once: no group of lines is held throughout, but
 * along three links of acos 0.9 = 25.8 degrees each nobody gets from a line to its opposite at 154
 * degrees. */
static void a_ring_of_holds_clashes(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    const double hold = INFINITY;
    const double ring[] = { 1, 0.9, 0, -0.9, 0.9, 1, 0.9, 0, 0, 0.9, 1, 0.9, -0.9, 0, 0.9, 1 };
    const double w[] = { 1, hold, 1, hold, hold, 1, hold, 1, 1, hold, 1, hold, hold, 1, hold, 1 };
    double x[16], s[16], sum = 0;
    bool clash = false;
    assert_int_equal(nearest_firm(ring, w, 4, 0, x, s, &clash, NULL, &p), OUT_OF_DOMAIN);
    assert_true(clash);
    for (size_t i = 0; i < 16; i++)
        sum += isinf(w[i]) || i % 5 == 0 ? s[i] * ring[i] : fabs(s[i]);
    assert_true(sum < 0);
    assert_null(p.last);
}

/* A fine matrix stays, all entries held or not; nothing held beyond what is fine. */
static void special_cases(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    double fine[] = { 1, 0.5, 0.5, 1 }, bad[] = { 1, 2, 2, 1 }, x[4], s[4];
    const double hold[] = { 1, INFINITY, INFINITY, 1 };
    course how = { 9, 9 };
    bool clash = true;
    assert_int_equal(nearest_firm(fine, hold, 2, 0, x, s, &clash, &how, &p), OK);
    for (size_t i = 0; i < 4; i++) assert_same(x[i], fine[i]);
    for (size_t i = 0; i < 4; i++) assert_same(s[i], 0);
    assert_false(clash);
    assert_int_equal(how.decompositions, 0);
    assert_int_equal(nearest_firm(fine, hold, 2, 0.6, x, NULL, &clash, NULL, &p), OUT_OF_DOMAIN);
    assert_true(clash);
    assert_int_equal(nearest_firm(bad, hold, 2, 0, x, NULL, &clash, NULL, &p), OUT_OF_DOMAIN);
    assert_true(clash);
    assert_null(p.last);
}

static void what_makes_no_sense_is_refused(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    double m[] = { 1, 2, 2, 1 }, w[] = { 1, 1, 1, 1 }, x[4], nan[] = { 1, NAN, NAN, 1 };
    bool clash = true;
    assert_int_equal(nearest_firm(m, w, 2, 1, x, NULL, &clash, NULL, &p), OUT_OF_DOMAIN);
    assert_false(clash);
    assert_int_equal(nearest_firm(m, w, 0, 0, x, NULL, NULL, NULL, &p), OUT_OF_DOMAIN);
    assert_int_equal(nearest_firm(nan, w, 2, 0, x, NULL, NULL, NULL, &p), NOT_SETTLED);
    const double wrong[] = { 0, -1, NAN };
    for (size_t k = 0; k < 3; k++) {
        w[1] = w[2] = wrong[k];
        assert_int_equal(nearest_firm(m, w, 2, 0, x, NULL, NULL, NULL, &p), OUT_OF_DOMAIN);
    }
    assert_null(p.last);
}

static void every_allocation_can_fail(void **unused)
{
    (void)unused;
    const double chain[] = { 1, 0.9, 0, 0.9, 1, 0.9, 0, 0.9, 1 };
    const double w[] = { 1, 2, 3, 2, 1, 4, 3, 4, 1 };
    size_t failures = 0;
    status s = NO_MEMORY;
    for (size_t fail = 1; s == NO_MEMORY; fail++) {
        pool p = { .fail_at = fail };
        double x[9];
        s = nearest_firm(chain, w, 3, 0, x, NULL, NULL, NULL, &p);
        failures += s == NO_MEMORY;
        assert_null(p.last);
    }
    assert_int_equal(s, OK);
    assert_in_range(failures, 20, 40);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equal_firmness_is_the_nearest_matrix),
        cmocka_unit_test(firm_and_held_as_a_general_optimiser_finds),
        cmocka_unit_test(a_held_block_is_nearer_than_by_shrinking),
        cmocka_unit_test(random_firmness_carries_its_proof),
        cmocka_unit_test(entries_held_keep_their_bits),
        cmocka_unit_test(the_third_correlation_goes_to_its_limit),
        cmocka_unit_test(clashing_holds_are_proved_to_clash),
        cmocka_unit_test(a_ring_of_holds_clashes),
        cmocka_unit_test(special_cases),
        cmocka_unit_test(what_makes_no_sense_is_refused),
        cmocka_unit_test(every_allocation_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
