/* Tests of src/leeway.c against closed forms and eigenvalues. */
#include "matrices.h"

#include "../../src/leeway.h"

/* Three lines: the published limits of Stanley & Wang (1969) and Olkin (1981), whichever entry is
 * asked for. */
static void limits_of_the_third_correlation(void **unused)
{
    (void)unused;
    struct csv *t = csv_read("admissible_third_correlation.csv");
    for (size_t r = 0; r < t->rows; r++) {
        double a = csv_number(t, r, "r_ab"), b = csv_number(t, r, "r_bc"), low, high;
        double most = csv_number(t, r, "tolerance");
        third_correlation(a, b, &low, &high);
        assert_within(low, csv_number(t, r, "r_ac_low"), most);
        assert_within(high, csv_number(t, r, "r_ac_high"), most);
        const double m[] = { 1, a, 9, a, 1, b, 9, b, 1 };
        for (size_t turn = 0; turn < 2; turn++) {
            double again_low, again_high;
            size_t row = turn ? 0 : 2, column = turn ? 2 : 0;
            assert_int_equal(entry_leeway(m, 3, row, column, &again_low, &again_high, NULL), OK);
            assert_same(again_low, low);
            assert_same(again_high, high);
        }
    }
    csv_free(t);
}

/* the partial correlation of a and b given c (Yule 1907) */
static double partial(double ab, double ac, double bc)
{
    return (ab - ac * bc) / sqrt((1 - ac * ac) * (1 - bc * bc));
}

/* Four lines: the limits are where the partial correlation given both others is -1 and 1, which
 * Yule's recursion solves in closed form. */
static void limits_by_partial_correlations(void **unused)
{
    (void)unused;
    uint64_t state = 1907;
    for (size_t round = 0; round < effort(200); round++) {
        pool p = { .last = NULL };
        double *m = noisy_matrix(&state, 4, 6, 0, &p), low, high;
        double ac = m[2], ad = m[3], bc = m[6], bd = m[7], cd = m[11];
        double ad_c = partial(ad, ac, cd), bd_c = partial(bd, bc, cd);
        double reach = sqrt((1 - ad_c * ad_c) * (1 - bd_c * bd_c));
        double turn = sqrt((1 - ac * ac) * (1 - bc * bc));
        if (fabs(cd) > 0.99) continue;
        assert_int_equal(entry_leeway(m, 4, 0, 1, &low, &high, &p), OK);
        assert_within(low, ac * bc + turn * (ad_c * bd_c - reach), 1e-12);
        assert_within(high, ac * bc + turn * (ad_c * bd_c + reach), 1e-12);
        pool_empty(&p);
    }
}

static double lowest_with(double *m, size_t d, size_t row, size_t column, double x)
{
    pool p = { .last = NULL };
    double lowest = NAN;
    m[row * d + column] = m[column * d + row] = x;
    assert_int_equal(lowest_eigenvalue(m, d, &lowest, &p), OK);
    assert_null(p.last);
    return lowest;
}

/* Any number of lines: at both limits the lowest eigenvalue is 0, between them above, outside
 * below. */
static void eigenvalues_change_sign_at_the_limits(void **unused)
{
    (void)unused;
    uint64_t state = 5;
    for (size_t round = 0; round < effort(100); round++) {
        pool p = { .last = NULL };
        size_t d = 4 + random_below(&state, 20), row = random_below(&state, d);
        size_t column = (row + 1 + random_below(&state, d - 1)) % d;
        double *m = noisy_matrix(&state, d, 2 * d, 0, &p), low, high;
        double was = m[row * d + column];
        assert_int_equal(entry_leeway(m, d, row, column, &low, &high, &p), OK);
        assert_true(low < was && was < high);
        assert_within(lowest_with(m, d, row, column, low), 0, 1e-12);
        assert_within(lowest_with(m, d, row, column, high), 0, 1e-12);
        assert_true(lowest_with(m, d, row, column, low - 1e-6) < -1e-9);
        assert_true(lowest_with(m, d, row, column, high + 1e-6) < -1e-9);
        assert_true(lowest_with(m, d, row, column, (low + high) / 2) > 1e-9);
        pool_empty(&p);
    }
}

/* A line that is there twice adds nothing; one that is all but another's copy must go along with
 * it. */
static void singular_neighbours(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    const double twice[] = { 1, 9, .5, .5, 9, 1, .7, .7, .5, .7, 1, 1, .5, .7, 1, 1 };
    const double copy[] = { 1, 9, 1, .2, 9, 1, .7, .3, 1, .7, 1, .2, .2, .3, .2, 1 };
    double low, high, want_low, want_high;
    third_correlation(0.5, 0.7, &want_low, &want_high);
    assert_int_equal(entry_leeway(twice, 4, 0, 1, &low, &high, &p), OK);
    assert_within(low, want_low, 1e-12);
    assert_within(high, want_high, 1e-12);
    assert_int_equal(entry_leeway(copy, 4, 1, 0, &low, &high, &p), OK);
    assert_within(low, 0.7, 1e-7);
    assert_within(high, 0.7, 1e-7);
    assert_null(p.last);
}

static bool is_feasible(const double *m, size_t d)
{
    pool p = { .last = NULL };
    bool feasible = false;
    assert_int_equal(matrix_feasible(m, d, 0, &feasible, &p), OK);
    pool_empty(&p);
    return feasible;
}

/* A matrix that is feasible by its eigenvalues, singular and off by the noise of a sheet's
 * rounding, has leeway by definition: the entry as it stands is one that will do. And what will do lies
 * between the limits, as far as its last digits allow. */
static void feasible_singular_matrices(void **unused)
{
    (void)unused;
    static const double noises[] = { 0, 1e-16, 4e-15, 1e-13, 1e-12 };
    uint64_t state = 77;
    size_t checked = 0;
    for (size_t round = 0; round < effort(600); round++) {
        pool p = { .last = NULL };
        size_t d = 4 + random_below(&state, 12), factors = 1 + random_below(&state, d - 1);
        double *m = noisy_matrix(&state, d, factors, noises[round % 5], &p), low, high;
        size_t row = random_below(&state, d), column = (row + 1 + random_below(&state, d - 1)) % d;
        if (is_feasible(m, d)) {
            double was = m[row * d + column];
            assert_int_equal(entry_leeway(m, d, row, column, &low, &high, &p), OK);
            assert_true(low <= high);
            assert_true(low - 1e-4 <= was && was <= high + 1e-4);
            checked++;
        }
        pool_empty(&p);
    }
    assert_true(checked > effort(600) / 2);
}

static void no_value_helps_when_the_others_clash(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    /* lines 2, 3, 4 clash (0.9, 0.9, 0), and the entry asked for is between 1 and 2 */
    const double m[] = { 1, 0, 0, 0, 0, 1, .9, 0, 0, .9, 1, .9, 0, 0, .9, 1 };
    const double copies[] = { 1, 0, .5, .6, 0, 1, .5, .5, .5, .5, 1, 1, .6, .5, 1, 1 };
    double low, high;
    assert_int_equal(entry_leeway(m, 4, 0, 1, &low, &high, &p), OUT_OF_DOMAIN);
    assert_int_equal(entry_leeway(copies, 4, 0, 1, &low, &high, &p), OUT_OF_DOMAIN);
    assert_int_equal(entry_leeway(m, 4, 1, 1, &low, &high, &p), OUT_OF_DOMAIN);
    assert_int_equal(entry_leeway(m, 4, 4, 1, &low, &high, &p), OUT_OF_DOMAIN);
    assert_int_equal(entry_leeway(m, 2, 0, 1, &low, &high, &p), OK);
    assert_same(low, -1);
    assert_same(high, 1);
    assert_null(p.last);
}

/* Every triple by its eigenvalues. */
static void clashes_are_those_that_eigenvalues_show(void **unused)
{
    (void)unused;
    uint64_t state = 9;
    for (size_t round = 0; round < effort(20); round++) {
        pool p = { .last = NULL };
        size_t d = 2 + random_below(&state, 10), most = random_below(&state, 8), n, all, want = 0;
        double *m = noisy_matrix(&state, d, 3, 0.6, &p);
        clash *found;
        assert_int_equal(clashing_triples(m, d, most, &found, &n, &all, &p), OK);
        double worst = 1;
        for (size_t i = 0; i < d; i++)
            for (size_t j = i + 1; j < d; j++)
                for (size_t k = j + 1; k < d; k++) {
                    double a = m[i * d + j], b = m[i * d + k], c = m[j * d + k], lowest;
                    const double three[] = { 1, a, b, a, 1, c, b, c, 1 };
                    assert_int_equal(lowest_eigenvalue(three, 3, &lowest, &p), OK);
                    want += lowest < -3e-12;
                    worst = fmin(worst, lowest);
                }
        assert_int_equal(all, want);
        assert_int_equal(n, want < most ? want : most);
        if (n) assert_within(found[0].lowest, worst, 1e-14);
        for (size_t c = 0; c < n; c++) {
            const size_t *l = found[c].line;
            double a = m[l[0] * d + l[1]], b = m[l[0] * d + l[2]];
            double x = m[l[1] * d + l[2]], low, high;
            assert_true(l[0] < l[1] && l[1] < l[2]);
            if (c) assert_true(found[c - 1].lowest <= found[c].lowest);
            third_correlation(a, b, &low, &high);
            assert_same(found[c].low, low);
            assert_same(found[c].high, high);
            assert_true(x < low || x > high);
        }
        pool_empty(&p);
    }
}

/* Whatever is held, it is the head of the full list. */
static void the_worst_come_first(void **unused)
{
    (void)unused;
    uint64_t state = 12;
    pool p = { .last = NULL };
    size_t n, all, few;
    double *m = noisy_matrix(&state, 40, 3, 0.6, &p);
    clash *whole, *head;
    assert_int_equal(clashing_triples(m, 40, 100000, &whole, &n, &all, &p), OK);
    assert_int_equal(n, all);
    assert_true(all > 1000);
    for (size_t k = 1; k < n; k++) assert_true(whole[k - 1].lowest <= whole[k].lowest);
    for (size_t most = 0; most <= all; most = 3 * most + 1) {
        assert_int_equal(clashing_triples(m, 40, most, &head, &few, &all, &p), OK);
        assert_int_equal(few, most);
        assert_memory_equal(head, whole, few * sizeof *head);
    }
    pool_empty(&p);
}

/* The matrix of law holds no clash. Of 0.9, 0.9 and 0 (chain99 of nearest_correlation_summary.csv)
 * the lowest eigenvalue is 1 - 0.9 sqrt 2. */
static void known_clashes(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    struct csv *t = csv_read("law_correlation_matrices.csv");
    size_t d, n, all;
    clash *found;
    double *m = matrix_of(t, "nonlife_premium_reserve_segments", "value", &d, &p);
    assert_int_equal(clashing_triples(m, d, 10, &found, &n, &all, &p), OK);
    assert_int_equal(all, 0);
    const double chain[] = { 1, 0.9, 0, 0.9, 1, 0.9, 0, 0.9, 1 };
    assert_int_equal(clashing_triples(chain, 3, 10, &found, &n, &all, &p), OK);
    assert_int_equal(n, 1);
    assert_within(found[0].lowest, 1 - 0.9 * sqrt(2), 1e-15);
    pool_empty(&p);
    csv_free(t);
}

static void every_allocation_can_fail(void **unused)
{
    (void)unused;
    const double m[] = { 1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1 };
    double low, high;
    for (size_t fail = 1; fail <= 4; fail++) {
        pool p = { .fail_at = fail };
        assert_int_equal(entry_leeway(m, 4, 0, 1, &low, &high, &p), NO_MEMORY);
        assert_null(p.last);
    }
    const double copies[] = { 1, 0, .5, .6, 0, 1, .5, .5, .5, .5, 1, 1, .6, .5, 1, 1 };
    status s = NO_MEMORY;
    for (size_t fail = 1; s == NO_MEMORY; fail++) {
        pool few = { .fail_at = fail };
        s = entry_leeway(copies, 4, 0, 1, &low, &high, &few);
        assert_null(few.last);
    }
    assert_int_equal(s, OUT_OF_DOMAIN);
    pool p = { .fail_at = 1 };
    clash *found;
    size_t n, all;
    assert_int_equal(clashing_triples(m, 4, 5, &found, &n, &all, &p), NO_MEMORY);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(limits_of_the_third_correlation),
        cmocka_unit_test(limits_by_partial_correlations),
        cmocka_unit_test(eigenvalues_change_sign_at_the_limits),
        cmocka_unit_test(singular_neighbours),
        cmocka_unit_test(feasible_singular_matrices),
        cmocka_unit_test(no_value_helps_when_the_others_clash),
        cmocka_unit_test(clashes_are_those_that_eigenvalues_show),
        cmocka_unit_test(the_worst_come_first),
        cmocka_unit_test(known_clashes),
        cmocka_unit_test(every_allocation_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
