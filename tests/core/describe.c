/* What a model says of itself, and READ, as a cell calls them. */
#include "cells.h"

#include <gsl/gsl_errno.h>

struct call {
    pool pool;
    report report;
    value out;
    status s;
};

static struct call *call(struct call *c, const char *name, size_t n, const value *in)
{
    const function *f = function_named(name);
    assert_non_null(f);
    c->report = (report){ .pool = &c->pool };
    c->s = call_function(f, in, n, &c->out, &c->report);
    return c;
}

static value model(struct call *c, size_t n, const value *in)
{
    call(c, "MODEL", n, in);
    assert_string_equal(c->report.why, "");
    return c->out;
}

static double number_of(struct call *c, const char *name, size_t n, const value *in)
{
    call(c, name, n, in);
    assert_string_equal(c->report.why, "");
    assert_int_equal(c->out.is, IS_NUMBER);
    return c->out.number;
}

/* closed forms: gumbel 1 - 1/theta and 2 - 2^(1/theta), Pearson (1907), Nelsen (2006) */
static void numbers(void **state)
{
    (void)state;
    struct call c = { 0 };
    value gumbel = model(&c, 5, (value[]){ text("gumbel"), number(2), nothing(), number(180),
                                           number(3) });
    assert_close(number_of(&c, "TAUOF", 1, &gumbel), 0.5, 1e-15);
    double lower = number_of(&c, "TAILOF", 2, (value[]){ gumbel, text("Lower") });
    assert_close(lower, 2 - sqrt(2), 1e-15);
    assert_same(number_of(&c, "TAILOF", 2, (value[]){ gumbel, text("upper") }), 0);
    value clayton = model(&c, 4, (value[]){ text("clayton"), number(2), nothing(), number(90) });
    assert_close(number_of(&c, "TAUOF", 1, &clayton), -0.5, 1e-15);
    value gaussian = model(&c, 2, (value[]){ text("gaussian"), number(0.5) });
    assert_close(number_of(&c, "TAUOF", 1, &gaussian), 1.0 / 3, 1e-15);
    assert_close(number_of(&c, "RHOOF", 1, &gaussian), asin(0.25) * 6 / acos(-1), 1e-15);
    pool_empty(&c.pool);
}

/* Table 5.1 of McNeil, Frey & Embrechts (2005), in tail_dependence.csv: 0.3125 at df 3, 0.5 */
static void matrices(void **state)
{
    (void)state;
    struct call c = { 0 };
    value t = model(&c, 3, (value[]){ text("t"), cells(&c.pool, "1,0.5,0;0.5,1,-0.5;0,-0.5,1"),
                                      number(3) });
    assert_int_equal(call(&c, "TAUOF", 1, &t)->s, OK);
    static const double tau[] = { 1, 1, 0, 1, 1, -1, 0, -1, 1 };
    for (size_t i = 0; i < 9; i++)
        assert_within(c.out.table.at[i], i % 4 ? tau[i] / 3 : 1, 1e-15);
    assert_int_equal(call(&c, "TAILOF", 2, (value[]){ t, text("upper") })->s, OK);
    assert_close(c.out.table.at[1], 0.3125, 1e-12);
    assert_close(c.out.table.at[2], 0.1161165235168155945, 1e-12);
    assert_same(c.out.table.at[7], c.out.table.at[5]);
    assert_int_equal(call(&c, "RHOOF", 1, &t)->s, OK);
    assert_within(c.out.table.at[1], 0.464320478, 1e-8);
    assert_same(c.out.table.at[4], 1);
    pool_empty(&c.pool);
}

static const char *BLOCK = "copula,t,,,,,,;dimension,2,,,,,,;lines,motor,,,,,,;"
                           "df,4.2,error,0.9,low,3.1,high,;matrix,1,0.3,,,,,;,0.3,1,,,,,;"
                           ",,,,,,,;matrix error,0,0.05,,,,,;,0.05,0,,,,,;notes,,,,,,,";

static void reading(void **state)
{
    (void)state;
    struct call c = { 0 };
    value block = cells(&c.pool, BLOCK);
    assert_same(number_of(&c, "READ", 2, (value[]){ block, text("df") }), 4.2);
    assert_same(number_of(&c, "READ", 3, (value[]){ block, text(" DF "), text("Error") }), 0.9);
    assert_same(number_of(&c, "READ", 3, (value[]){ block, text("matrix"), number(2) }), 0.3);
    call(&c, "READ", 2, (value[]){ block, text("matrix") });
    assert_int_equal(c.out.table.rows, 2);
    assert_int_equal(c.out.table.cols, 2);
    assert_same(c.out.table.at[2], 0.3);
    call(&c, "READ", 2, (value[]){ block, text("matrix error") });
    assert_int_equal(c.out.table.rows, 2);
    assert_same(c.out.table.at[1], 0.05);
    call(&c, "READ", 2, (value[]){ block, text("lines") });
    assert_string_equal(c.out.text, "motor");
    call(&c, "READ", 3, (value[]){ block, text("df"), text("high") });
    assert_string_equal(c.out.text, "");
    call(&c, "READ", 2, (value[]){ block, text("notes") });
    assert_string_equal(c.out.text, "");
    value priced = cells(&c.pool, "figure,gross,error,ceded,error;mean,10,1,4,0.5;sd,7,2,3,0.2");
    assert_same(number_of(&c, "READ", 3, (value[]){ priced, text("sd"), text("ceded") }), 3);
    assert_same(number_of(&c, "READ", 3, (value[]){ priced, text("mean"), number(4) }), 0.5);
    call(&c, "READ", 2, (value[]){ priced, text("mean") });
    assert_int_equal(c.out.table.cols, 4);
    assert_same(c.out.table.at[3], 0.5);
    pool_empty(&c.pool);
}

static void reading_refused(void **state)
{
    (void)state;
    struct call c = { 0 };
    value block = cells(&c.pool, BLOCK);
    assert_int_equal(call(&c, "READ", 2, (value[]){ block, text("theta") })->s, BAD_KIND);
    assert_string_equal(c.report.why, "block has no label \"theta\"");
    call(&c, "READ", 3, (value[]){ block, text("df"), text("errors") });
    assert_string_equal(c.report.why, "block has no column \"errors\"");
    assert_int_equal(call(&c, "READ", 3, (value[]){ block, text("df"), number(8) })->s,
                     OUT_OF_DOMAIN);
    assert_string_equal(c.report.why, "column is 8, but must be a whole number from 1 to 7");
    assert_int_equal(call(&c, "READ", 2, (value[]){ text("df"), text("df") })->s, BAD_KIND);
    assert_int_equal(call(&c, "TAUOF", 1, &block)->s, OK);      /* one empty name is no defect */
    pool_empty(&c.pool);
}

int main(void)
{
    gsl_set_error_handler_off();                             /* as the add-in does at load */
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(numbers), cmocka_unit_test(matrices), cmocka_unit_test(reading),
        cmocka_unit_test(reading_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
