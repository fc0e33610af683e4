/* Ranking against the definition, on ordinary and on adversarial values, and scaled ranks. */
#include "pairs.h"

static void assert_ranking(const double *x, size_t n, const ranking *r)
{
    size_t observed = 0, tied_rows = 0;
    uint64_t tied_pairs = 0;
    uint32_t highest = 0;
    for (size_t i = 0; i < n; i++) {
        if (is_gap(x[i])) {
            assert_int_equal(r->rank[i], NO_RANK);
            continue;
        }
        observed++;
        highest = r->rank[i] > highest ? r->rank[i] : highest;
        bool tied = false;
        for (size_t j = 0; j < n; j++) {
            if (is_gap(x[j]) || i == j) continue;
            assert_int_equal(sign_of(x[i], x[j]), sign_of(r->rank[i], r->rank[j]));
            tied = tied || x[i] == x[j];
            tied_pairs += j < i && x[i] == x[j];
        }
        tied_rows += tied;
    }
    assert_int_equal(r->observed, observed);
    assert_int_equal(r->rows, n);
    assert_int_equal(r->distinct, observed ? highest + 1 : 0);
    assert_int_equal(r->tied_pairs, tied_pairs);
    assert_int_equal(r->n_tied, tied_rows);
    for (size_t k = 1; k < observed; k++) {
        uint32_t before = r->order[k - 1], row = r->order[k];
        assert_true(x[before] < x[row] || (x[before] == x[row] && before < row));
        assert_in_range(r->rank[row] - r->rank[before], 0, 1);
    }
}

static void equals_definition(void **state)
{
    (void)state;
    uint64_t random = 11;
    pool p = { 0 };
    ranking *r;
    struct rank_room *room;
    double x[400];
    assert_int_equal(new_rankings(400, 1, &r, &p), OK);
    assert_int_equal(new_rank_room(400, &room, &p), OK);
    for (size_t k = 0; k < effort(1500); k++) {
        size_t n = k < 300 ? k : random_below(&random, 401);
        random_columns(x, n, 1, kind_of_case(k, &random), &random);
        if (k % 2)
            for (size_t i = 0; i < n; i++)
                if (!is_gap(x[i])) x[i] = adversarial(k / 2, &random);
        rank_values(x, n, r, room);
        assert_ranking(x, n, r);
    }
    pool_empty(&p);
}

static int by_value(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return sign_of(x, y);
}

/* Large columns, where buckets are spread again: the order against qsort(). */
static void equals_qsort(void **state)
{
    (void)state;
    enum { N = 20000 };
    uint64_t random = 12;
    pool p = { 0 };
    ranking *r;
    struct rank_room *room;
    double *x = malloc(2 * N * sizeof *x), *sorted = x + N;
    assert_int_equal(new_rankings(N, 1, &r, &p), OK);
    assert_int_equal(new_rank_room(N, &room, &p), OK);
    for (size_t k = 0; k < effort(16); k++) {
        for (size_t i = 0; i < N; i++) sorted[i] = x[i] = adversarial(k, &random);
        rank_values(x, N, r, room);
        qsort(sorted, N, sizeof *sorted, by_value);
        for (size_t i = 0; i < N; i++) assert_true(x[r->order[i]] == sorted[i]);
    }
    pool_empty(&p);
    free(x);
}

/* By hand: 7 5 - 5 9 has ranks 3, 1.5, gap, 1.5, 4 of 4. */
static void scaled_by_hand(void **state)
{
    (void)state;
    double at[] = { 7, 5, NAN, 5, 9 }, u[5];
    double want[3][5] = { { 3, 1.5, NAN, 1.5, 4 }, { 3, 1, NAN, 1, 4 }, { 3, 2, NAN, 2, 4 } };
    samples s = { 5, 1, at, NULL };
    pool p = { 0 };
    for (size_t how = TIES_AVERAGE; how <= TIES_HIGH; how++) {
        assert_int_equal(scaled_ranks(&s, (tie_rule)how, 0, u, &p), OK);
        for (size_t i = 0; i < 5; i++) assert_same(u[i], want[how][i] / 5);
    }
    ranking *r;
    struct rank_room *room;
    assert_int_equal(new_rankings(5, 1, &r, &p), OK);
    assert_int_equal(new_rank_room(5, &room, &p), OK);
    rank_values(at, 5, r, room);
    mid_ranks(r, u);
    for (size_t i = 0; i < 5; i++) assert_same(u[i], want[0][i]);
    pool_empty(&p);
}

/* Random ties: a permutation of the ranks that respects the order, the same for the same seed,
 * another for another, different from column to column; each of 3! orders of three ties about
 * equally often. */
static void ties_at_random(void **state)
{
    (void)state;
    double at[] = { 4, 1, 4, 4, 0, 4, 1, 4, 4, 0 }, u[10], again[10];
    samples s = { 5, 2, at, NULL };
    pool p = { 0 };
    size_t orders[5][5] = { 0 }, columns_differ = 0;
    for (size_t seed = 0; seed < 3000; seed++) {
        assert_int_equal(scaled_ranks(&s, TIES_RANDOM, seed, u, &p), OK);
        assert_int_equal(scaled_ranks(&s, TIES_RANDOM, seed, again, &p), OK);
        assert_memory_equal(u, again, sizeof u);
        assert_same(u[4], 1 / 6.0);
        assert_same(u[1], 2 / 6.0);
        size_t first = (size_t)lround(u[0] * 6), second = (size_t)lround(u[2] * 6);
        orders[first - 1][second - 1]++;
        columns_differ += memcmp(u, u + 5, 5 * sizeof *u) != 0;
    }
    for (size_t a = 2; a < 5; a++)
        for (size_t b = 2; b < 5; b++)           /* 500 of 3,000, standard deviation 20 */
            assert_in_range(orders[a][b], a == b ? 0 : 400, a == b ? 0 : 600);
    assert_in_range(columns_differ, 2400, 2600); /* 5 in 6 */
}

static void memory(void **state)
{
    (void)state;
    double at[] = { 3, 1, 2 }, u[3];
    samples s = { 3, 1, at, NULL };
    pool p = { 0 };
    assert_int_equal(scaled_ranks(&s, TIES_LOW, 0, u, &p), OK);
    for (size_t k = 1; k <= p.taken; k++) {
        pool failing = { .fail_at = k };
        assert_int_equal(scaled_ranks(&s, TIES_LOW, 0, u, &failing), NO_MEMORY);
        assert_int_equal(failing.bytes, 0);
    }
    ranking *r;
    assert_int_equal(new_rankings((size_t)UINT32_MAX, 1, &r, &p), OUT_OF_DOMAIN);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equals_definition), cmocka_unit_test(equals_qsort),
        cmocka_unit_test(scaled_by_hand), cmocka_unit_test(ties_at_random),
        cmocka_unit_test(memory),
    };
    return cmocka_run_group_tests_name("ranks", tests, NULL, NULL);
}
