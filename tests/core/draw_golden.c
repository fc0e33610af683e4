/* Golden draws: the bits of draws under a seed, which must be the same on every machine and in
 * every version.
 *
 * tests/values/golden_draws.csv was written by this program:
 *     WRITE_GOLDEN=1 build/tests/draw_golden > tests/values/golden_draws.csv
 * Write it anew only for a case that is new. What the numbers mean is tested in draw*.c, and
 * tests/values/golden_draws.py recomputes most of them by an independent program.
 */
#include "draws.h"

#include "../../src/scheme.h"

struct golden {
    const char *name, *word;
    size_t dimension;
    double parameter, df, last_df;      /* last_df: of the last column, when it is another */
    int rotation;
    scheme how;
    uint64_t seed;
    size_t first, rows;
};

static const struct golden cases[] = {
    { "independent", "independent", 3, 0, 0, 0, 0, SCHEME_PLAIN, 1, 0, 4 },
    { "independent, row beyond 2^32", "independent", 2, 0, 0, 0, 0, SCHEME_PLAIN,
      9007199254740992, 4294967294, 4 },
    { "gaussian", "gaussian", 3, 0.5, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "gaussian, skipped", "gaussian", 2, -0.75, 0, 0, 0, SCHEME_PLAIN, 2, 1000000, 4 },
    { "gaussian, singular", "gaussian", 3, -0.5, 0, 0, 0, SCHEME_PLAIN, 3, 0, 4 },
    { "gaussian, comonotone", "gaussian", 2, 1, 0, 0, 0, SCHEME_PLAIN, 3, 0, 3 },
    { "gaussian, 50 columns", "gaussian", 50, 0.25, 0, 0, 0, SCHEME_PLAIN, 4, 0, 2 },
    { "t, df 0.5", "t", 2, 0.3, 0.5, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "t, df 0.01", "t", 2, 0.3, 0.01, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "t, df 4", "t", 5, 0.5, 4, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "t, df 5.5", "t", 3, 0.5, 5.5, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "t, df 1e6", "t", 2, 0.5, 1e6, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "t, grouped 3 and 30", "t", 3, 0.5, 3, 30, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "clayton", "clayton", 3, 2, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "clayton, shape above 1", "clayton", 3, 0.25, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "clayton, tau 1e-9", "clayton", 2, 2e-9, 0, 0, 0, SCHEME_PLAIN, 1, 0, 4 },
    { "clayton, tau 0.9999", "clayton", 2, 19998, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "clayton, negative", "clayton", 2, -0.5, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "gumbel", "gumbel", 3, 2, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "gumbel, tau 1e-9", "gumbel", 2, 1.000000001, 0, 0, 0, SCHEME_PLAIN, 1, 0, 4 },
    { "gumbel, tau 0.9999", "gumbel", 2, 10000, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "gumbel, theta 1", "gumbel", 2, 1, 0, 0, 0, SCHEME_PLAIN, 1, 0, 3 },
    { "frank", "frank", 3, 5.75, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "frank, tau 1e-9", "frank", 2, 9e-9, 0, 0, 0, SCHEME_PLAIN, 1, 0, 4 },
    { "frank, tau 0.9999", "frank", 2, 39996, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "frank, negative", "frank", 2, -8, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "joe", "joe", 3, 3, 0, 0, 0, SCHEME_PLAIN, 1, 0, 12 },
    { "joe, tau 1e-9", "joe", 2, 1.000000001, 0, 0, 0, SCHEME_PLAIN, 1, 0, 4 },
    { "joe, tau 0.9999", "joe", 2, 20000, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "gumbel, rotation 90", "gumbel", 2, 2, 0, 0, 90, SCHEME_PLAIN, 1, 0, 3 },
    { "gumbel, rotation 180", "gumbel", 2, 2, 0, 0, 180, SCHEME_PLAIN, 1, 0, 3 },
    { "gumbel, rotation 270", "gumbel", 2, 2, 0, 0, 270, SCHEME_PLAIN, 1, 0, 3 },
    { "t, antithetic", "t", 2, 0.5, 4, 0, 0, SCHEME_ANTITHETIC, 1, 1, 5 },
    { "clayton, antithetic", "clayton", 2, 2, 0, 0, 0, SCHEME_ANTITHETIC, 1, 1, 5 },
    { "joe, latin", "joe", 2, 3, 0, 0, 0, SCHEME_LATIN, 1, 0, 8 },
    { "t, sobol", "t", 3, 0.5, 4, 0, 0, SCHEME_SOBOL, 1, 0, 8 },
    { "amh", "amh", 2, 0.75, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "amh, theta -1", "amh", 2, -1, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "amh, rotation 90", "amh", 2, 1, 0, 0, 90, SCHEME_PLAIN, 1, 0, 3 },
    { "plackett", "plackett", 2, 12, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "plackett, negative", "plackett", 2, 0.0625, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "plackett, theta 1", "plackett", 2, 1, 0, 0, 0, SCHEME_PLAIN, 1, 0, 3 },
    { "plackett, tau 0.9999", "plackett", 2, 6e8, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "plackett, rotation 180", "plackett", 2, 12, 0, 0, 180, SCHEME_PLAIN, 1, 0, 3 },
    { "fgm", "fgm", 2, 1, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "fgm, negative", "fgm", 2, -0.75, 0, 0, 0, SCHEME_PLAIN, 1, 0, 6 },
    { "fgm, rotation 270", "fgm", 2, 1, 0, 0, 270, SCHEME_PLAIN, 1, 0, 3 },
    { "clayton, rotation 180", "clayton", 3, 2, 0, 0, 180, SCHEME_PLAIN, 1, 0, 3 },
    { "clayton, rotation 90", "clayton", 2, 2, 0, 0, 90, SCHEME_PLAIN, 1, 0, 3 },
    { "frank, rotation 270", "frank", 2, 5.75, 0, 0, 270, SCHEME_PLAIN, 1, 0, 3 },
    { "joe, rotation 180", "joe", 3, 3, 0, 0, 180, SCHEME_PLAIN, 1, 0, 3 },
    { "t, grouped, rotation 90", "t", 2, 0.5, 3, 30, 90, SCHEME_PLAIN, 1, 0, 3 },
    { "gaussian, rotation 270", "gaussian", 2, 0.5, 0, 0, 270, SCHEME_PLAIN, 1, 0, 3 },
    { "plackett, sobol", "plackett", 2, 12, 0, 0, 0, SCHEME_SOBOL, 7, 0, 4 },
    { "gumbel, sobol, skipped", "gumbel", 2, 2, 0, 0, 0, SCHEME_SOBOL, 7, 1000000, 4 },
};
enum { CASES = sizeof cases / sizeof *cases };

/* column by column; the caller frees */
static double *draw_case(const struct golden *g)
{
    struct sample_copula s;
    pool p = { 0 };
    copula *c = one_parameter(&s, g->word, g->dimension, g->parameter);
    if (c->family->has_matrix) elliptical(&s, g->word, g->dimension, g->parameter, g->df);
    if (g->last_df > 0) s.df[g->dimension - 1] = g->last_df;
    c->rotation = g->rotation;
    double *u = malloc(g->rows * g->dimension * sizeof *u);
    assert_int_equal(draw_by_scheme(c, g->how, g->seed, g->first, g->rows, u, g->rows, &p), OK);
    return u;
}

static void write_all(void)
{
    printf("case,row,column,u\n");
    for (size_t k = 0; k < CASES; k++) {
        double *u = draw_case(&cases[k]);
        for (size_t i = 0; i < cases[k].rows; i++)
            for (size_t j = 0; j < cases[k].dimension; j++)
                printf("\"%s\",%zu,%zu,%a\n", cases[k].name, i, j, u[j * cases[k].rows + i]);
        free(u);
    }
}

static void bits_are_golden(void **state)
{
    (void)state;
    struct csv *t = csv_read("golden_draws.csv");
    size_t at = 0;
    for (size_t k = 0; k < CASES; k++) {
        double *u = draw_case(&cases[k]);
        for (size_t i = 0; i < cases[k].rows; i++)
            for (size_t j = 0; j < cases[k].dimension; j++, at++) {
                assert_true(at < t->rows);
                assert_string_equal(csv_text(t, at, "case"), cases[k].name);
                assert_int_equal(csv_number(t, at, "row"), i);
                assert_int_equal(csv_number(t, at, "column"), j);
                double want = csv_number(t, at, "u"), got = u[j * cases[k].rows + i];
                if (got != want) print_error("%s, row %zu, column %zu\n", cases[k].name, i, j);
                assert_same(got, want);
            }
        free(u);
    }
    assert_int_equal(at, t->rows);
    csv_free(t);
}

int main(void)
{
    if (getenv("WRITE_GOLDEN")) {
        write_all();
        return 0;
    }
    const struct CMUnitTest tests[] = { cmocka_unit_test(bits_are_golden) };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
