/* Spearman's rho and normal scores against their definitions, and exactness. */
#include "pairs.h"

#include "../../src/normal.h"
#include "../../src/rho.h"

/* twice the mid-rank of row i among the rows of x with a value in y */
static double mid_rank(const double *x, const double *y, size_t n, size_t i)
{
    double lower = 0, level = 0;
    for (size_t j = 0; j < n; j++) {
        if (is_gap(x[j]) || is_gap(y[j])) continue;
        lower += x[j] < x[i];
        level += x[j] == x[i];
    }
    return lower + (level + 1) / 2;
}

static double correlation(const double *a, const double *b, size_t n)
{
    double mean_a = 0, mean_b = 0, aa = 0, bb = 0, ab = 0;
    for (size_t i = 0; i < n; i++) {
        mean_a += a[i] / (double)n;
        mean_b += b[i] / (double)n;
    }
    for (size_t i = 0; i < n; i++) {
        aa += (a[i] - mean_a) * (a[i] - mean_a);
        bb += (b[i] - mean_b) * (b[i] - mean_b);
        ab += (a[i] - mean_a) * (b[i] - mean_b);
    }
    return ab / sqrt(aa * bb);
}

struct ranked {
    pool pool;
    ranking *r;
    struct rho_room *room;
};

static void rank_both(struct ranked *k, const double *x, const double *y, size_t n)
{
    struct rank_room *sorting;
    assert_int_equal(new_rankings(n, 2, &k->r, &k->pool), OK);
    assert_int_equal(new_rank_room(n, &sorting, &k->pool), OK);
    assert_int_equal(new_rho_room(n, &k->room, &k->pool), OK);
    rank_values(x, n, &k->r[0], sorting);
    rank_values(y, n, &k->r[1], sorting);
}

static status scores_of(struct ranked *k, size_t x, size_t y, double *got)
{
    size_t used;
    return normal_score_correlation(&k->r[x], &k->r[y], got, &used, k->room);
}

static void equals_definition(void **state)
{
    (void)state;
    uint64_t random = 61;
    double at[400], a[200], b[200], u[200], v[200];
    for (size_t k = 0; k < effort(400); k++) {
        size_t n = 4 + random_below(&random, 196), m = 0, used;
        random_columns(at, n, 2, kind_of_case(k, &random), &random);
        for (size_t i = 0; i < 4; i++) at[i] = at[n + 3 - i] = (double)i;
        for (size_t i = 0; i < n; i++) {
            if (is_gap(at[i]) || is_gap(at[n + i])) continue;
            a[m] = mid_rank(at, at + n, n, i);
            b[m++] = mid_rank(at + n, at, n, i);
        }
        for (size_t i = 0; i < m; i++) {
            u[i] = normal_quantile(a[i] / (double)(m + 1));
            v[i] = normal_quantile(b[i] / (double)(m + 1));
        }
        struct ranked both = { 0 };
        double rho, swapped, scores;
        rank_both(&both, at, at + n, n);
        assert_int_equal(spearman_rho(&both.r[0], &both.r[1], &rho, &used, both.room), OK);
        assert_int_equal(used, m);
        assert_within(rho, correlation(a, b, m), 1e-13);
        assert_int_equal(spearman_rho(&both.r[1], &both.r[0], &swapped, &used, both.room), OK);
        assert_same(swapped, rho);
        scores_of(&both, 0, 0, &swapped);            /* of another number of rows */
        assert_int_equal(scores_of(&both, 0, 1, &scores), OK);
        assert_within(scores, correlation(u, v, m), 1e-13);
        assert_int_equal(scores_of(&both, 1, 0, &swapped), OK);
        assert_same(swapped, scores);
        pool_empty(&both.pool);
    }
}

/* Genest & Favre (2007), six pairs: rho = 1/35. A hand-worked case with a tie: ranks 1 2.5 2.5 4
 * and 1 2 3 4 give 4.5/sqrt(4.5 5). */
static void published(void **state)
{
    (void)state;
    size_t n, used;
    double *x = dataset("gf6", &n), rho;
    struct ranked both = { 0 };
    rank_both(&both, x, x + n, n);
    assert_int_equal(spearman_rho(&both.r[0], &both.r[1], &rho, &used, both.room), OK);
    assert_close(rho, 1 / 35.0, 1e-15);
    free(x);
    double a[] = { 1, 5, 5, 9 }, b[] = { 1, 2, 3, 4 };
    rank_both(&both, a, b, 4);
    assert_int_equal(spearman_rho(&both.r[0], &both.r[1], &rho, &used, both.room), OK);
    assert_close(rho, 4.5 / sqrt(22.5), 1e-15);
    pool_empty(&both.pool);
}

static void perfect_dependence(void **state)
{
    (void)state;
    uint64_t random = 62;
    for (size_t n = 2; n < 3000; n = n * 3 / 2 + 1) {
        double *x = malloc(3 * n * sizeof *x), *y = x + n, *z = y + n, got;
        size_t used;
        for (size_t i = 0; i < n; i++) {
            x[i] = i < 2 ? (double)i : floor(random_normal(&random) * (n % 2 ? 10 : 1e9));
            y[i] = 3 * x[i];
            z[i] = -x[i];
        }
        struct ranked both = { 0 };
        rank_both(&both, x, y, n);
        assert_int_equal(spearman_rho(&both.r[0], &both.r[1], &got, &used, both.room), OK);
        assert_same(got, 1);
        assert_int_equal(scores_of(&both, 0, 1, &got), OK);
        assert_same(got, 1);
        rank_both(&both, x, z, n);
        assert_int_equal(spearman_rho(&both.r[0], &both.r[1], &got, &used, both.room), OK);
        assert_same(got, -1);
        assert_int_equal(scores_of(&both, 0, 1, &got), OK);
        assert_same(got, -1);
        pool_empty(&both.pool);
        free(x);
    }
}

static void special_cases(void **state)
{
    (void)state;
    double x[] = { 1, 2, NAN, 4 }, y[] = { 3, NAN, 1, NAN }, flat[] = { 5, 5, 7, 5 }, got;
    size_t used;
    struct ranked both = { 0 };
    rank_both(&both, x, y, 4);
    assert_int_equal(spearman_rho(&both.r[0], &both.r[1], &got, &used, both.room), TOO_FEW);
    assert_int_equal(used, 1);
    rank_both(&both, x, flat, 4);
    assert_int_equal(spearman_rho(&both.r[0], &both.r[1], &got, &used, both.room), NO_VARIATION);
    assert_int_equal(scores_of(&both, 1, 0, &got), NO_VARIATION);
    for (size_t k = 1; k <= 3; k++) {
        pool failing = { .fail_at = k };
        assert_int_equal(new_rho_room(5, &both.room, &failing), NO_MEMORY);
        pool_empty(&failing);
    }
    assert_int_equal(new_rho_room((1 << 21) + 1, &both.room, &both.pool), OUT_OF_DOMAIN);
    pool_empty(&both.pool);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equals_definition), cmocka_unit_test(published),
        cmocka_unit_test(perfect_dependence), cmocka_unit_test(special_cases),
    };
    return cmocka_run_group_tests_name("rho", tests, NULL, NULL);
}
