/* One call of a function: arguments left out or too many, sentences, the cache, no memory. */
#include "cells.h"

#include "../../addin/cache.h"

static size_t calls;

static status add_up(const argument *in, value *out, report *r)
{
    calls++;
    const samples *s = &in[0].data;
    if (s->rows < 2) return TOO_FEW;
    remark(r, "%zu rows used", s->rows);
    double sum = 0;
    for (size_t i = 0; i < s->rows; i++) sum += s->at[i] * in[1].number;
    status made = new_table(r, 1, 2, out);
    if (made != OK) return made;
    put_number(out, 0, 0, sum);
    return put_text(r, out, 0, 1, text_from(r->pool, "of %zu", s->rows));
}

static const function sum = {
    .name = "sum",
    .params = {
        { .name = "x", .kind = COLUMN },
        { .name = "factor", .kind = NUMBER, .optional = true, .otherwise = 2 },
    },
    .call = add_up,
};

static const function kept_sum = {
    .name = "keptSum",
    .params = {
        { .name = "x", .kind = COLUMN },
        { .name = "factor", .kind = NUMBER, .optional = true, .otherwise = 2 },
    },
    .costly = true,
    .call = add_up,
};

static void defaults_and_refusals(void **state)
{
    (void)state;
    pool p = { 0 };
    report r = { .pool = &p };
    value in[3] = { cells(&p, "1;2;3"), nothing(), nothing() }, out;
    assert_int_equal(call_function(&sum, in, 1, &out, &r), OK);
    assert_same(out.table.at[0], 12);
    assert_string_equal(out.table.words[1], "of 3");
    assert_string_equal(r.facts, "3 rows used");
    assert_int_equal(call_function(&sum, in, 2, &out, &r), OK);
    assert_int_equal(call_function(&sum, in, 3, &out, &r), BAD_KIND);
    assert_string_equal(r.why, "3 arguments given, but at most 2 can be");
    r = (report){ .pool = &p };
    assert_int_equal(call_function(&sum, in, 0, &out, &r), BAD_KIND);
    assert_string_equal(r.why, "x is missing");
    r = (report){ .pool = &p };
    in[0] = cells(&p, "h;2");
    assert_int_equal(call_function(&sum, in, 1, &out, &r), TOO_FEW);
    assert_string_equal(r.why, "there are too few observations");
    assert_int_equal(out.is == IS_TABLE && out.table.rows > 0, 0);
    pool_empty(&p);
}

static double kept(double first, double factor, const char *facts)
{
    pool p = { 0 };
    report r = { .pool = &p };
    value in[2] = { cells(&p, "0;2;3"), number(factor) }, out;
    in[0].table.at[0] = first;
    assert_int_equal(call_function(&kept_sum, in, 2, &out, &r), OK);
    assert_string_equal(r.facts, facts);
    assert_string_equal(out.table.words[1], "of 3");
    double result = out.table.at[0];
    pool_empty(&p);
    return result;
}

static void the_cache_keeps_whole_calls(void **state)
{
    (void)state;
    calls = 0;
    for (int again = 0; again < 3; again++) {
        assert_same(kept(1, 1, "3 rows used"), 6);
        assert_same(kept(1, 2, "3 rows used"), 12);
        assert_same(kept(2, 1, "3 rows used"), 7);
    }
    assert_int_equal(calls, 3);
    for (int i = 0; i < 40; i++) assert_same(kept(i, 1, "3 rows used"), i + 5);
    assert_int_equal(calls, 41);                /* 1 and 2 were known: 3 + 38 */
    assert_same(kept(1, 2, "3 rows used"), 12); /* forgotten by now */
    assert_int_equal(calls, 42);
    cache_empty();
    assert_same(kept(1, 2, "3 rows used"), 12);
    assert_int_equal(calls, 43);
    cache_empty();
}

static void every_allocation_may_fail(void **state)
{
    (void)state;
    for (size_t fail = 1;; fail++) {
        pool arguments = { 0 }, p = { .fail_at = fail };
        report r = { .pool = &p };
        value in = cells(&arguments, "h;2;3;4"), out;
        status s = call_function(&sum, &in, 1, &out, &r);
        bool failed = p.taken >= fail;
        assert_int_equal(s, failed ? NO_MEMORY : OK);
        if (failed) assert_string_equal(r.why, "there is not enough memory");
        pool_empty(&p);
        pool_empty(&arguments);
        if (!failed) break;
    }
}

static void why_speaks_for_others(void **state)
{
    (void)state;
    pool p = { 0 };
    report r = { .pool = &p };
    value in[3] = { text("joint.About"), nothing(), nothing() }, out;
    const function *why = function_named(" WHY ");
    assert_non_null(why);
    assert_int_equal(call_function(why, in, 1, &out, &r), OK);
    assert_string_equal(out.text, "fine");
    assert_int_equal(call_function(why, in, 2, &out, &r), OK);
    assert_string_equal(out.text, "1 argument given, but at most 0 can be");
    in[0] = text("nothing");
    assert_int_equal(call_function(why, in, 1, &out, &r), OK);
    assert_non_null(strstr(out.text, "there is no function \"nothing\""));
    in[0] = number(1);
    assert_int_equal(call_function(why, in, 1, &out, &r), OK);
    assert_string_equal(out.text, "WHY takes a name in quotes and then the arguments, as in "
                                  "WHY(\"TAU\";A1:A9;B1:B9)");
    assert_int_equal(call_function(why, in, 0, &out, &r), OK);
    assert_non_null(strstr(out.text, "WHY takes a name in quotes"));
    in[0] = text("greiner");
    in[1] = cells(&p, "0.5,2;3,1");
    assert_int_equal(call_function(why, in, 2, &out, &r), OK);
    assert_string_equal(out.text, "done, but 2 cells of the result hold errors, the first in row "
                                  "1, column 2: a number is outside its domain; the result is 2 x "
                                  "2 cells");
    in[1] = cells(&p, "a,b;0.5,2");
    assert_int_equal(call_function(why, in, 2, &out, &r), OK);
    assert_string_equal(out.text, "done, but 1 cell of the result holds an error, the first in row "
                                  "2, column 2: a number is outside its domain; header of tau "
                                  "skipped (\"a\", ...); the result is 2 x 2 cells");
    in[0] = text("why");
    assert_int_equal(call_function(why, in, 1, &out, &r), OK);
    assert_string_equal(out.text, "WHY cannot be asked about itself");
    pool_empty(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(defaults_and_refusals),
        cmocka_unit_test(the_cache_keeps_whole_calls),
        cmocka_unit_test(every_allocation_may_fail),
        cmocka_unit_test(why_speaks_for_others),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
