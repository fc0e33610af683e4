/* What a model says of itself, and READ, as a cell calls them. */
#include "call.h"

#include <gsl/gsl_errno.h>

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
    value named = cells(&c.pool, "figure,motor  own,error,all,error; Mean motor   own ,10,1,4,0.5");
    assert_same(number_of(&c, "READ", 3, (value[]){ named, text("mean motor  own"), number(1) }),
                10);
    assert_same(number_of(&c, "READ", 3, (value[]){ named, text(" mean  Motor own"),
                                                    text("Motor own ") }), 10);
    pool_empty(&c.pool);
}

/* PRICE has an error beside each of its figures. */
static void ambiguous_columns(void **state)
{
    (void)state;
    struct call c = { 0 };
    value priced = cells(&c.pool, "figure,gross,error,ceded,error;mean,10,1,4,0.5;sd,7,2,3,0.2");
    call(&c, "READ", 3, (value[]){ priced, text("mean"), text("error") });
    assert_int_equal(c.s, BAD_KIND);
    assert_string_equal(c.report.why,
                        "block has \"error\" 2 times in row 1; a number as column picks one");
    value fitted = cells(&c.pool, "theta,2,error,0.1,error,0.2");
    call(&c, "READ", 3, (value[]){ fitted, text("theta"), text("error") });
    assert_int_equal(c.s, BAD_KIND);
    call(&c, "READ", 3, (value[]){ priced, text("mean"), text("mea n") });
    assert_string_equal(c.report.why, "block has no column \"mea n\"");
    call(&c, "READ", 2, (value[]){ priced, text("me") });
    assert_string_equal(c.report.why, "block has no label \"me\"");
    pool_empty(&c.pool);
}

/* Equal pairs are computed once: 600 lines with one correlation or a few are 179,700 pairs, and a
 * rho of t takes long enough for them to take minutes. */
static void equal_pairs(void **state)
{
    (void)state;
    enum { LINES = 600 };
    static const double of_blocks[] = { 0.1, 0.2, 0.3 };
    struct call c = { 0 };
    report r = { .pool = &c.pool };
    value matrix;
    assert_int_equal(new_table(&r, LINES, LINES, &matrix), OK);
    for (size_t i = 0; i < LINES; i++)
        for (size_t j = 0; j < LINES; j++)
            put_number(&matrix, i, j, i == j ? 1 : i % 3 == j % 3 ? 0.5 : of_blocks[(i + j) % 3]);
    value t = model(&c, 3, (value[]){ text("t"), matrix, number(4) });
    assert_int_equal(call(&c, "RHOOF", 1, &t)->s, OK);
    value all = c.out;
    for (size_t i = 1; i < 7; i++) {
        double correlation = matrix.table.at[i * LINES];
        value pair = model(&c, 3, (value[]){ text("t"), number(correlation), number(4) });
        assert_same(number_of(&c, "RHOOF", 1, &pair), all.table.at[i * LINES]);
        assert_same(all.table.at[i], all.table.at[i * LINES]);
    }
    pool_empty(&c.pool);
}

/* More different pairs than are remembered: each equals its own pair's, grouped df in order. */
static void different_pairs(void **state)
{
    (void)state;
    enum { LINES = 9 };
    struct call c = { 0 };
    report r = { .pool = &c.pool };
    value matrix, df;
    assert_int_equal(new_table(&r, LINES, LINES, &matrix), OK);
    assert_int_equal(new_table(&r, LINES, 1, &df), OK);
    for (size_t i = 0; i < LINES; i++) {
        put_number(&df, i, 0, 3 + (double)(i % 2));
        for (size_t j = 0; j < LINES; j++)
            put_number(&matrix, i, j, i == j ? 1 : 0.01 * (double)((i + j) % 12));
    }
    value t = model(&c, 3, (value[]){ text("t"), matrix, df });
    assert_int_equal(call(&c, "TAUOF", 1, &t)->s, OK);
    value all = c.out;
    for (size_t i = 0; i < LINES; i++)
        for (size_t j = 0; j < i; j++) {
            value two = cells(&c.pool, "1,0;0,1"), both = cells(&c.pool, "1;1");
            two.table.at[1] = two.table.at[2] = matrix.table.at[i * LINES + j];
            both.table.at[0] = df.table.at[i];
            both.table.at[1] = df.table.at[j];
            value pair = model(&c, 3, (value[]){ text("t"), two, both });
            assert_same(number_of(&c, "TAUOF", 1, &pair), all.table.at[i * LINES + j]);
        }
    pool_empty(&c.pool);
}

/* a grouped t with one correlation, whose df are 3, 4, ... and begin again after `groups` */
static value grouped_model(struct call *c, size_t lines, size_t groups)
{
    report r = { .pool = &c->pool };
    value df;
    assert_int_equal(new_table(&r, lines, 1, &df), OK);
    for (size_t i = 0; i < lines; i++) put_number(&df, i, 0, 3 + (double)(i % groups));
    return model(c, 5, (value[]){ text("t"), number(0.5), df, nothing(), number((double)lines) });
}

/* What counts are pairs that differ, the order of their df aside: 300 lines in seven groups have
 * 28, in three hundred groups 44,850. */
static void too_many_pairs(void **state)
{
    (void)state;
    struct call c = { 0 };
    value few = grouped_model(&c, 300, 7), many = grouped_model(&c, 300, 300);
    assert_int_equal(call(&c, "RHOOF", 1, &few)->s, OK);
    assert_same(c.out.table.at[1], c.out.table.at[300]);
    assert_int_equal(call(&c, "RHOOF", 1, &many)->s, OUT_OF_DOMAIN);
    assert_string_equal(c.report.why, "44850 pairs of this model would take about 336 s: ask for "
                                      "fewer at a time");
    assert_int_equal(call(&c, "TAUOF", 1, &many)->s, OUT_OF_DOMAIN);
    assert_int_equal(call(&c, "TAILOF", 2, (value[]){ many, text("upper") })->s, OUT_OF_DOMAIN);
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
        cmocka_unit_test(reading_refused), cmocka_unit_test(ambiguous_columns),
        cmocka_unit_test(equal_pairs), cmocka_unit_test(different_pairs),
        cmocka_unit_test(too_many_pairs),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
