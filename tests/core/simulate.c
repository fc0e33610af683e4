/* DRAW as a cell calls it. */
#include "call.h"
#include "draws.h"

#include "../../src/scheme.h"

static const char t_block[] = "copula,t,; dimension,2,; df,4,; matrix,1,0.5; ,0.5,1";
static const char gumbel_block[] = "copula,gumbel; theta,2; dimension,3; rotation,180";

/* DRAW(model; rows; seed; scheme; skip); a scheme or skip of NULL or below 0 is left out */
static struct call *draw_of(struct call *c, const char *block, double rows, double seed,
                            const char *how, double skip)
{
    *c = (struct call){ 0 };
    value in[] = { cells(&c->pool, block), number(rows), number(seed), how ? text(how) : nothing(),
                   skip < 0 ? nothing() : number(skip) };
    return call(c, "DRAW", 5, in);
}

static void refused(const char *block, double rows, double seed, const char *how, double skip,
                    status want, const char *why)
{
    struct call c;
    draw_of(&c, block, rows, seed, how, skip);
    assert_string_equal(c.report.why, why);
    assert_int_equal(c.s, want);
    pool_empty(&c.pool);
}

/* The cells are those of the draw in src/, row by row. */
static void cells_of_a_draw(void **state)
{
    (void)state;
    struct sample_copula s;
    copula *t = elliptical(&s, "t", 2, 0.5, 4);
    size_t n = 40000;
    struct call c;
    draw_of(&c, t_block, (double)n, 7, NULL, 5);
    assert_string_equal(c.report.why, "");
    assert_int_equal(c.s, OK);
    assert_int_equal(c.out.table.rows, n);
    assert_int_equal(c.out.table.cols, 2);
    double *u = drawn(t, 7, 5, n);
    for (size_t i = 0; i < n; i++)
        for (size_t j = 0; j < 2; j++) assert_same(c.out.table.at[2 * i + j], u[j * n + i]);
    free(u);
    pool_empty(&c.pool);
}

static void schemes_of_a_draw(void **state)
{
    (void)state;
    static const char *const words[] = { "plain", " Antithetic", "LATIN", "sobol" };
    struct sample_copula s;
    copula *gumbel = one_parameter(&s, "gumbel", 3, 2);
    gumbel->rotation = 180;
    for (int how = SCHEME_PLAIN; how <= SCHEME_SOBOL; how++) {
        struct call c;
        pool p = { 0 };
        size_t n = 20011;
        double *u = malloc(3 * n * sizeof *u);
        draw_of(&c, gumbel_block, (double)n, 0, words[how], -1);
        assert_string_equal(c.report.why, "");
        assert_int_equal(draw_by_scheme(gumbel, (scheme)how, 0, 0, n, u, n, &p), OK);
        for (size_t i = 0; i < n; i++)
            for (size_t j = 0; j < 3; j++) assert_same(c.out.table.at[3 * i + j], u[j * n + i]);
        free(u);
        pool_empty(&c.pool);
    }
}

static void what_is_refused(void **state)
{
    (void)state;
    refused("copula,gumbel; theta,2; dimension,129", 10, 1, "sobol", -1, OUT_OF_DOMAIN,
            "model has 129 columns, but the scheme sobol reaches only to 128");
    refused(gumbel_block, 10, 1, "latin", 2, OUT_OF_DOMAIN,
            "skip is 2, but latin has no rows to skip: its rows belong together");
    struct call c;
    assert_int_equal(draw_of(&c, gumbel_block, 0, 1, NULL, -1)->s, OUT_OF_DOMAIN);
    pool_empty(&c.pool);
    assert_int_equal(draw_of(&c, gumbel_block, 1048577, 1, NULL, -1)->s, OUT_OF_DOMAIN);
    pool_empty(&c.pool);
    assert_int_equal(draw_of(&c, gumbel_block, 2.5, 1, NULL, -1)->s != OK, 1);
    pool_empty(&c.pool);
    assert_int_equal(draw_of(&c, gumbel_block, 10, -1, NULL, -1)->s, OUT_OF_DOMAIN);
    pool_empty(&c.pool);
    assert_int_equal(draw_of(&c, gumbel_block, 10, 1, "sobel", -1)->s, BAD_KIND);
    pool_empty(&c.pool);
    assert_int_equal(draw_of(&c, "copula,gumbel; theta,2; dimension,25", 1000000, 1, NULL, -1)->s,
                     OUT_OF_DOMAIN);                                    /* over 20 million cells */
    pool_empty(&c.pool);
}

static void memory_runs_out(void **state)
{
    (void)state;
    struct call c;
    draw_of(&c, t_block, 500, 1, "latin", -1);
    size_t takes = c.pool.taken;
    pool_empty(&c.pool);
    for (size_t n = 1; n <= takes; n++) {
        pool making = { 0 }, failing = { .fail_at = n };
        report r = { .pool = &failing };
        value in[] = { cells(&making, t_block), number(500), number(1), text("latin") }, out;
        status s = call_function(function_named("DRAW"), in, 4, &out, &r);
        assert_true(s == NO_MEMORY || (s == OK && failing.taken < n));
        pool_empty(&failing);
        pool_empty(&making);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(cells_of_a_draw),
        cmocka_unit_test(schemes_of_a_draw),
        cmocka_unit_test(what_is_refused),
        cmocka_unit_test(memory_runs_out),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
