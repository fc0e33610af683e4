/* CDF, DENSITY, CONDITIONAL, FROMCONDITIONAL, KENDALLOF and THETABAND, as a cell calls them. */
#include "call.h"

#include <gsl/gsl_errno.h>

/* MODEL of a family, its parameter, df, rotation and dimension; 0 where left out */
static value model(struct call *c, const char *word, double parameter, double df, double rotation,
                   double dimension)
{
    value in[] = { text(word), number(parameter), df > 0 ? number(df) : nothing(), number(rotation),
                   number(dimension) };
    call(c, "MODEL", 5, in);
    assert_string_equal(c->report.why, "");
    return c->out;
}

static double cell(const struct call *c, size_t row, size_t col)
{
    assert_string_equal(c->report.why, "");
    assert_int_equal(c->s, OK);
    assert_true(row < c->out.table.rows && col < c->out.table.cols);
    return c->out.table.at[row * c->out.table.cols + col];
}

static void refused(const char *name, value m, value points, status want, const char *why)
{
    struct call c = { 0 };
    call(&c, name, 2, (value[]){ m, points });
    assert_string_equal(c.report.why, why);
    assert_int_equal(c.s, want);
    pool_empty(&c.pool);
}

/* Sheppard (1899); clayton with theta = 1 is uv/(u + v - uv); joint_exceedance.csv */
static void values(void **state)
{
    (void)state;
    struct call c = { 0 };
    value gaussian = model(&c, "gaussian", 0.5, 0, 0, 2);
    value clayton = model(&c, "clayton", 1, 0, 0, 2);
    value t = model(&c, "t", 0.5, 4, 180, 2);
    value points = cells(&c.pool, "0.5,0.5;0.2,0.9;,0.5;0,0.3;1,0.4");
    call(&c, "CDF", 2, (value[]){ gaussian, points });
    assert_close(cell(&c, 0, 0), 1.0 / 3, 1e-12);
    assert_int_equal(c.out.table.rows, 5);
    assert_int_equal(c.out.table.cols, 1);
    assert_true(marks_gap(cell(&c, 2, 0)));
    assert_non_null(strstr(c.report.facts, "1 row of points with gaps left empty"));
    call(&c, "CDF", 2, (value[]){ clayton, points });
    assert_close(cell(&c, 1, 0), 0.18 / 0.92, 1e-14);
    assert_same(cell(&c, 3, 0), 0);
    assert_same(cell(&c, 4, 0), 0.4);
    call(&c, "CDF", 2, (value[]){ t, cells(&c.pool, "0.01,0.01") });
    assert_close(cell(&c, 0, 0), 0.0028767843485153781, 1e-10);
    call(&c, "DENSITY", 2, (value[]){ gaussian, cells(&c.pool, "motor,cargo;0.5,0.5") });
    assert_string_equal(c.out.table.words[0], "density");
    assert_close(cell(&c, 1, 0), 2 / sqrt(3), 1e-13);
    call(&c, "CONDITIONAL", 2, (value[]){ clayton, cells(&c.pool, "motor,cargo;0.5,0.5") });
    assert_string_equal(c.out.table.words[1], "cargo");
    assert_same(cell(&c, 1, 0), 0.5);
    assert_close(cell(&c, 1, 1), 4.0 / 9, 1e-14);          /* (v/(u+v-uv))^2 */
    value back = c.out;
    call(&c, "FROMCONDITIONAL", 2, (value[]){ clayton, back });
    assert_close(cell(&c, 1, 1), 0.5, 1e-14);
    call(&c, "KENDALLOF", 2, (value[]){ clayton, cells(&c.pool, "0.5;1") });
    assert_close(cell(&c, 0, 0), 0.75, 1e-14);
    assert_same(cell(&c, 1, 0), 1);
    pool_empty(&c.pool);
}

static double told_error(const struct call *c)
{
    const char *at = strstr(c->report.facts, "at most ");
    return at ? strtod(at + strlen("at most "), NULL) : NAN;
}

/* David (1953): 1/4 at correlation 1/2 in three columns; the error is in WHY. A mean over a frailty
 * has none. */
static void errors_are_told(void **state)
{
    (void)state;
    struct call c = { 0 };
    value three = model(&c, "gaussian", 0.5, 0, 0, 3), survival = model(&c, "gumbel", 2, 0, 180, 3);
    call(&c, "CDF", 2, (value[]){ three, cells(&c.pool, "0.5,0.5,0.5") });
    assert_within(cell(&c, 0, 0), 0.25, 1e-5);
    assert_non_null(strstr(c.report.facts, "quasi-Monte Carlo with 32768 points, with a "
                                           "standard error of at most "));
    assert_in_range(1e9 * told_error(&c), 1, 1e4);
    call(&c, "CDF", 2, (value[]){ survival, cells(&c.pool, "0.5,0.5,0.5") });
    assert_true(cell(&c, 0, 0) > 0.25);
    assert_null(strstr(c.report.facts, "standard error"));
    pool_empty(&c.pool);
}

static value halves(pool *p, size_t rows, size_t cols)
{
    value v = { .is = IS_TABLE, .table = { rows, cols, pool_take(p, rows * cols, sizeof(double)),
                                           NULL } };
    for (size_t i = 0; i < rows * cols; i++) v.table.at[i] = 0.5;
    return v;
}

/* Points that all say the same tell no error; a density that no number holds. */
static void why_it_is_so(void **state)
{
    (void)state;
    struct call c = { 0 };
    pool *p = &c.pool;
    value frank = model(&c, "frank", 3, 0, 180, 100);
    call(&c, "WHY", 3, (value[]){ text("KENDALLOF"), frank, number(0.3) });
    assert_string_equal(c.out.text, "fine: by quasi-Monte Carlo with 64 points, which all agree");
    value many = model(&c, "clayton", 1e17, 0, 0, 40);
    call(&c, "WHY", 3, (value[]){ text("DENSITY"), many, halves(p, 1, 40) });
    assert_string_equal(c.out.text, "no cell has a value: 1 cell of the result holds an error, the "
                                    "first in row 1, column 1: the density is above 1e308");
    pool_empty(p);
}

/* Many rows: fewer points each, and an error that says so; too many are refused. */
static void takes_too_long(void **state)
{
    (void)state;
    struct call c = { 0 };
    pool *p = &c.pool;
    value three = model(&c, "gaussian", 0.5, 0, 0, 3), wide = model(&c, "gaussian", 0.5, 0, 0, 128);
    value gumbel = model(&c, "gumbel", 2, 0, 0, 1000), t = model(&c, "t", 0.5, 4, 0, 2);
    call(&c, "CDF", 2, (value[]){ three, halves(p, 700, 3) });
    assert_within(cell(&c, 699, 0), 0.25, 1e-4);
    assert_non_null(strstr(c.report.facts, "quasi-Monte Carlo with 8192 points, with a standard"));
    refused("CDF", wide, halves(p, 10000, 128), OUT_OF_DOMAIN,
            "10000 points of this model would take about 113 s: ask for fewer at a time");
    refused("FROMCONDITIONAL", gumbel, halves(p, 3000, 1000), OUT_OF_DOMAIN,
            "3000 points of this model would take about 27 s: ask for fewer at a time");
    call(&c, "CONDITIONAL", 2, (value[]){ gumbel, halves(p, 2, 1000) });
    assert_close(cell(&c, 1, 999), 0.36820332388547027, 1e-10);     /* mpmath, 150 digits */
    refused("KENDALLOF", t, halves(p, 100, 20), OUT_OF_DOMAIN,
            "2000 values of this model would take about 50 s: ask for fewer at a time");
    pool_empty(p);
}

/* A grouped t answers far out too: df 3 and 8 at (1e-9, 0.3), from grouped_points.csv. */
static void grouped_t(void **state)
{
    (void)state;
    struct call c = { 0 };
    pool *p = &c.pool;
    call(&c, "MODEL", 3, (value[]){ text("t"), number(0.5), cells(p, "3,8") });
    value t = c.out;
    call(&c, "CONDITIONAL", 2, (value[]){ t, cells(p, "0.2,0.3;1e-9,0.3") });
    assert_true(cell(&c, 0, 1) > 0);
    assert_close(cell(&c, 1, 1), 0.83392834890903667, 1e-10);
    call(&c, "DENSITY", 2, (value[]){ t, cells(p, "1e-9,0.3") });
    assert_close(cell(&c, 0, 0), exp(-2.8812156182224816), 1e-10);
    pool_empty(p);
}

/* In the shape of the range; P(C(U) <= w) of this grouped t at 0.5 is 0.74107, at 0.05 0.1297
 * (kendall_distribution.csv), where a correlation of 0.49 is meant. */
static void kendall_distribution(void **state)
{
    (void)state;
    struct call c = { 0 };
    pool *p = &c.pool;
    call(&c, "MODEL", 3, (value[]){ text("t"), number(0.49), cells(p, "3,8") });
    value t = c.out;
    call(&c, "KENDALLOF", 2, (value[]){ t, cells(p, "low,high;0.05,0.5; ,1.5") });
    assert_within(cell(&c, 1, 0), 0.1297, 1e-3);
    assert_within(cell(&c, 1, 1), 0.74107, 1e-3);
    assert_true(is_gap(cell(&c, 2, 0)) && fault_in(cell(&c, 2, 0)) == OK);
    assert_int_equal(fault_in(cell(&c, 2, 1)), OUT_OF_DOMAIN);
    assert_non_null(strstr(c.report.facts, "by quasi-Monte Carlo with 4096 points, with a standard "
                           "error of at most "));
    assert_in_range(1e9 * told_error(&c), 1e3, 1e6);
    double known = cell(&c, 1, 1);
    call(&c, "KENDALLOF", 2, (value[]){ t, number(0.5) });
    assert_int_equal(c.out.is, IS_NUMBER);
    assert_same(c.out.number, known);
    refused("KENDALLOF", t, number(-0.1), OUT_OF_DOMAIN,
            "w is -0.1, but must be at least 0 and at most 1");
    pool_empty(p);
}

static void refusals(void **state)
{
    (void)state;
    struct call c = { 0 };
    pool *p = &c.pool;
    value gumbel = model(&c, "gumbel", 2, 0, 0, 2), singular = model(&c, "gaussian", 1, 0, 0, 2);
    value opposite = model(&c, "clayton", -1, 0, 0, 2);
    refused("CDF", gumbel, cells(p, "0.5,0.5,0.5"), BAD_KIND,
            "points has 3 lines, but model has 2");
    refused("CDF", gumbel, cells(p, "a,b;0.5,0.5;0.5,1.5"), OUT_OF_DOMAIN,
            "points has 1.5 in row 3, column 2, but must be between 0 and 1");
    refused("DENSITY", gumbel, cells(p, "0.5,1"), OUT_OF_DOMAIN,
            "points has 1 in row 1, column 2, but must be between 0 and 1, ends excluded");
    refused("DENSITY", singular, cells(p, "0.5,0.5"), OUT_OF_DOMAIN,
            "model has a singular matrix: it has no density and some columns no conditional "
            "distribution");
    refused("CONDITIONAL", opposite, cells(p, "0.5,0.5"), OUT_OF_DOMAIN,
            "model has perfect dependence: it has no density and its columns no conditional "
            "distribution");
    call(&c, "MODEL", 2, (value[]){ text("gaussian"), cells(p, "motor,cargo;1,0.5;0.5,1") });
    refused("CDF", c.out, cells(p, "motor,fire;0.5,0.5"), BAD_KIND,
            "points names line 2 \"fire\", but model names it \"cargo\"");
    pool_empty(p);
}

/* Hollander & Wolfe's (1973) nine pairs */
static void bands(void **state)
{
    (void)state;
    struct call c = { 0 };
    value x = cells(&c.pool, "44.4;45.9;41.9;53.3;44.7;44.1;50.7;45.2;60.1");
    value y = cells(&c.pool, "2.6;3.1;2.5;5.0;3.6;4.0;5.2;2.8;3.8");
    call(&c, "THETABAND", 3, (value[]){ text("gumbel"), x, y });
    assert_close(cell(&c, 0, 0), 1.8, 1e-14);
    assert_same(cell(&c, 0, 1), 1);
    assert_close(cell(&c, 0, 3), 0.253575258104244 * 3.24, 1e-9);
    assert_same(cell(&c, 0, 4), 9);
    assert_non_null(strstr(c.report.facts, "low cut: that of tau is -0.05"));
    assert_non_null(strstr(c.report.facts, "reaches only [0;1); it is 1"));
    call(&c, "THETABAND", 4, (value[]){ text("clayton"), x, y, number(0.999) });
    assert_true(marks_gap(cell(&c, 0, 2)));
    assert_non_null(strstr(c.report.facts, "reaches only [-1;1); it is left open"));
    call(&c, "THETABAND", 3, (value[]){ text("fgm"), x, y });
    assert_int_equal(c.s, OUT_OF_DOMAIN);
    assert_string_equal(c.report.why, "tau of x and y is 0.444444, but a pair of the fgm copula "
                                      "reaches only [-0.222222;0.222222]");
    call(&c, "THETABAND", 3, (value[]){ text("independent"), x, y });
    assert_string_equal(c.report.why, "independent has no parameter");
    value two = cells(&c.pool, "1;2");
    call(&c, "THETABAND", 3, (value[]){ text("joe"), two, two });
    assert_int_equal(c.s, TOO_FEW);
    pool_empty(&c.pool);
}

static void every_take_can_fail(void **state)
{
    (void)state;
    static const char *const names[] = { "CDF", "DENSITY", "CONDITIONAL", "FROMCONDITIONAL",
                                        "KENDALLOF" };
    for (int k = 0; k < 15; k++)
        for (size_t fail_at = 1;; fail_at++) {
            struct call c = { 0 };
            value m = k < 5 ? model(&c, "gumbel", 2, 0, k < 4 ? 180 : 0, 3)
                      : k < 10 ? model(&c, "t", 0.5, 4, 0, 3) : model(&c, "amh", 0.5, 0, 90, 2);
            value points = cells(&c.pool, k < 10 ? "a,b,c;0.5,0.2,0.3" : "a,b;0.5,0.2");
            c.pool.fail_at = c.pool.taken + fail_at;
            call(&c, names[k % 5], 2, (value[]){ m, points });
            bool failed = c.pool.taken >= c.pool.fail_at;
            pool_empty(&c.pool);
            assert_int_equal(c.s, failed ? NO_MEMORY : OK);
            if (!failed) break;
        }
}

int main(void)
{
    gsl_set_error_handler_off();                             /* as the add-in does at load */
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(values), cmocka_unit_test(errors_are_told), cmocka_unit_test(refusals),
        cmocka_unit_test(bands),
        cmocka_unit_test(takes_too_long), cmocka_unit_test(why_it_is_so),
        cmocka_unit_test(grouped_t),
        cmocka_unit_test(kendall_distribution),
        cmocka_unit_test(every_take_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
