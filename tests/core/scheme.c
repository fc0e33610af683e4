/* The schemes: antithetic pairs, latin strata, sobol points, and that plain is draw(). */
#include "draws.h"

#include "../../src/scheme.h"

static double *by_scheme(const copula *c, scheme how, uint64_t seed, size_t first, size_t rows)
{
    pool p = { 0 };
    double *u = malloc(rows * c->dimension * sizeof *u);
    assert_int_equal(draw_by_scheme(c, how, seed, first, rows, u, rows, &p), OK);
    assert_null(p.last);
    return u;
}

static void plain_is_draw(void **state)
{
    (void)state;
    struct sample_copula s;
    copula *c = one_parameter(&s, "gumbel", 3, 1.5);
    double *u = by_scheme(c, SCHEME_PLAIN, 4, 11, 500), *v = drawn(c, 4, 11, 500);
    assert_memory_equal(u, v, 3 * 500 * sizeof *u);
    free(u), free(v);
}

/* Even rows are those of a plain draw, odd ones are 1 - them in an elliptical copula; any part of
 * a draw is the same as the whole there. */
static void antithetic_pairs(void **state)
{
    (void)state;
    struct sample_copula s;
    size_t n = 20001, d = 3;
    uint64_t pick = 3;
    for (int k = 0; k < 2; k++) {
        copula *c = k ? one_parameter(&s, "clayton", d, 2) : elliptical(&s, "t", d, 0.5, 3);
        double *u = by_scheme(c, SCHEME_ANTITHETIC, 4, 0, n), *v = drawn(c, 4, 0, n / 2 + 1);
        for (size_t j = 0; j < d; j++)
            for (size_t i = 0; i < n; i++) {
                double even = v[j * (n / 2 + 1) + i / 2];
                if (i % 2 == 0) assert_same(u[j * n + i], even);
                else if (k == 0) assert_within(u[j * n + i], 1 - even, 2e-16);
            }
        for (size_t m = 0; m < effort(10); m++) {
            size_t first = random_below(&pick, n), rows = 1 + random_below(&pick, n - first);
            double *part = by_scheme(c, SCHEME_ANTITHETIC, 4, first, rows);
            for (size_t j = 0; j < d; j++)
                assert_memory_equal(part + j * rows, u + j * n + first, rows * sizeof *u);
            free(part);
        }
        free(u), free(v);
    }
}

/* A pair's mean varies less than that of two independent rows: for the sum of a row's columns the
 * correlation of the two is well below 0; for elliptical copulas it is -1. */
static void antithetic_rows_oppose(void **state)
{
    (void)state;
    static const char *const words[] = { "clayton", "gumbel", "frank", "joe" };
    for (int w = 0; w < 4; w++) {
        struct sample_copula s;
        size_t n = effort(10000) * 2;
        copula *c = one_parameter(&s, words[w], 2, 2);
        double *u = by_scheme(c, SCHEME_ANTITHETIC, 8, 0, n), xy = 0, xx = 0;
        for (size_t i = 0; i < n; i += 2) {
            double x = u[i] + u[n + i] - 1, y = u[i + 1] + u[n + i + 1] - 1;
            xy += x * y;
            xx += x * x + y * y;
        }
        assert_true(2 * xy / xx < -0.5);
        free(u);
    }
}

/* Each column has one number in each stratum, and its ranks are those of the plain draw. */
static void latin_strata(void **state)
{
    (void)state;
    static const size_t sizes[] = { 1, 2, 255, 256, 257, 5000 };
    for (size_t k = 0; k < 6; k++) {
        struct sample_copula s;
        size_t n = sizes[k], d = 4;
        copula *c = one_parameter(&s, "frank", d, 5);
        double *u = by_scheme(c, SCHEME_LATIN, 4, 0, n), *v = drawn(c, 4, 0, n);
        char *taken = calloc(n, 1);
        for (size_t j = 0; j < d; j++) {
            memset(taken, 0, n);
            for (size_t i = 0; i < n; i++) {
                size_t stratum = (size_t)(u[j * n + i] * (double)n);
                assert_true(stratum < n && !taken[stratum]);
                taken[stratum] = 1;
                if (i) assert_int_equal(u[j * n + i] < u[j * n], v[j * n + i] < v[j * n]);
            }
        }
        free(u), free(v), free(taken);
    }
}

/* A part of a sobol draw is the same as the whole there. */
static void sobol_stands_alone(void **state)
{
    (void)state;
    struct sample_copula s;
    copula *c = elliptical(&s, "t", 3, 0.4, 5);
    uint64_t pick = 12;
    size_t n = 3000;
    double *u = by_scheme(c, SCHEME_SOBOL, 4, 0, n);
    for (size_t m = 0; m < effort(10); m++) {
        size_t first = random_below(&pick, n), rows = 1 + random_below(&pick, n - first);
        double *part = by_scheme(c, SCHEME_SOBOL, 4, first, rows);
        for (size_t j = 0; j < 3; j++)
            assert_memory_equal(part + j * rows, u + j * n + first, rows * sizeof *u);
        free(part);
    }
    free(u);
}

/* Owen (1997): the mean over 2^m scrambled points varies far less than that over as many
 * independent rows. Here the mean of the product of three columns, over 40 seeds; the mean over
 * all seeds agrees with that of independent rows within four of their standard errors. */
static void sobol_varies_less(void **state)
{
    (void)state;
    static const char *const words[] = { "independent", "gaussian", "t", "clayton", "gumbel",
                                         "frank", "joe" };
    for (int w = 0; w < 7; w++) {
        struct sample_copula s;
        size_t n = 2048, seeds = 40;
        copula *c = one_parameter(&s, words[w], 3, 2);
        if (c->family->has_matrix) elliptical(&s, words[w], 3, 0.5, 3);
        double sum[2] = { 0 }, squares[2] = { 0 };
        for (size_t seed = 0; seed < seeds; seed++)
            for (int k = 0; k < 2; k++) {
                double *u = by_scheme(c, k ? SCHEME_SOBOL : SCHEME_PLAIN, seed, 0, n), mean = 0;
                for (size_t i = 0; i < n; i++) mean += u[i] * u[n + i] * u[2 * n + i] / (double)n;
                sum[k] += mean / (double)seeds;
                squares[k] += mean * mean / (double)seeds;
                free(u);
            }
        double plain = squares[0] - sum[0] * sum[0], sobol = squares[1] - sum[1] * sum[1];
        if (!(sobol < plain / 25))
            fail_msg("%s: variance %g, with sobol %g", words[w], plain, sobol);
        assert_within(sum[1], sum[0], 4 * sqrt(plain / (double)seeds));
    }
}

static void what_is_refused(void **state)
{
    (void)state;
    struct sample_copula s;
    copula *c = one_parameter(&s, "frank", 2, 5);
    double u[40];
    pool p = { 0 };
    assert_int_equal(draw_by_scheme(c, SCHEME_LATIN, 1, 1, 10, u, 20, &p), OUT_OF_DOMAIN);
    one_parameter(&s, "frank", 129, 5);
    assert_int_equal(draw_by_scheme(c, SCHEME_SOBOL, 1, 0, 0, u, 0, &p), OUT_OF_DOMAIN);
    elliptical(&s, "t", 3, -0.9, 3);
    assert_int_equal(draw_by_scheme(c, SCHEME_ANTITHETIC, 1, 0, 10, u, 10, &p), OUT_OF_DOMAIN);
}

static void memory_runs_out(void **state)
{
    (void)state;
    struct sample_copula s;
    copula *c = elliptical(&s, "t", 2, 0.3, 5);
    double u[40];
    for (int how = SCHEME_PLAIN; how <= SCHEME_SOBOL; how++) {
        pool p = { 0 };
        assert_int_equal(draw_by_scheme(c, (scheme)how, 1, 0, 20, u, 20, &p), OK);
        for (size_t n = 1; n <= p.taken; n++) {
            pool failing = { .fail_at = n };
            assert_int_equal(draw_by_scheme(c, (scheme)how, 1, 0, 20, u, 20, &failing), NO_MEMORY);
            assert_null(failing.last);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(plain_is_draw),
        cmocka_unit_test(antithetic_pairs),
        cmocka_unit_test(antithetic_rows_oppose),
        cmocka_unit_test(latin_strata),
        cmocka_unit_test(sobol_stands_alone),
        cmocka_unit_test(sobol_varies_less),
        cmocka_unit_test(what_is_refused),
        cmocka_unit_test(memory_runs_out),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
