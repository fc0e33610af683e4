/* Tests of addin/functions/price.c, risk.c and losses.c: what the cells of a call hold. */
#include "cells.h"

#include "../../addin/version.h"

static pool memory;
static report r;
static value out;

static status call(const char *name, const value *in, size_t n)
{
    const function *f = function_named(name);
    assert_non_null(f);
    r = (report){ .pool = &memory };
    return call_function(f, in, n, &out, &r);
}

static int done(void **state)
{
    (void)state;
    pool_empty(&memory);
    return 0;
}

static void refused(const char *name, const value *in, size_t n, status want, const char *why)
{
    assert_int_equal(call(name, in, n), want);
    assert_string_equal(r.why, why);
}

static double at(size_t row, size_t col)
{
    assert_int_equal(out.is, IS_TABLE);
    assert_true(row < out.table.rows && col < out.table.cols);
    return out.table.at[row * out.table.cols + col];
}

static const char *word(size_t row, size_t col)
{
    const char *w = out.table.words ? out.table.words[row * out.table.cols + col] : NULL;
    return w ? w : "";
}

/* the row of a block that begins with this label, which must stand there once */
static size_t labelled(const char *label)
{
    size_t found = out.table.rows;
    for (size_t i = 0; i < out.table.rows; i++) {
        if (strcmp(word(i, 0), label)) continue;
        assert_int_equal(found, out.table.rows);
        found = i;
    }
    if (found == out.table.rows) fail_msg("no label \"%s\"", label);
    return found;
}

/* ---- distributions and losses ---- */

static void moments_in_a_row(void **state)
{
    (void)state;
    value in[] = { text("Gamma"), number(1000), number(500), nothing() };
    assert_int_equal(call("moments", in, 3), OK);
    assert_int_equal(out.table.cols, 3);
    assert_same(at(0, 0), 4);
    assert_same(at(0, 1), 250);
    assert_true(marks_gap(at(0, 2)));
    in[0] = text("lomax");
    refused("moments", in, 3, OUT_OF_DOMAIN,
            "no lomax has mean 1000 and sd 500: it needs a mean above 0 and sd above the mean");
    in[3] = number(10);
    refused("moments", in, 4, BAD_KIND, "threshold is 10, but lomax has none");
    in[0] = text("pareto");
    in[3] = number(500);
    assert_int_equal(call("moments", in, 4), OK);
    assert_same(at(0, 0), 2);
    assert_same(at(0, 1), 500);
    in[0] = text("cauchy");
    refused("moments", in, 4, BAD_KIND,
            "distribution is \"cauchy\", but must be normal, lognormal, gamma, "
            "exponential, weibull, pareto, lomax or sample");
}

static void quantiles_of_a_range(void **state)
{
    (void)state;
    value in[] = { cells(&memory, "0.5,0;1,;2,0.99"), text("pareto"), number(1), number(10) };
    assert_int_equal(call("quantile", in, 4), OK);
    assert_close(at(0, 0), 20, 1e-14);
    assert_same(at(0, 1), 10);
    assert_int_equal(fault_in(at(1, 0)), OUT_OF_DOMAIN);
    assert_true(marks_gap(at(1, 1)));
    assert_int_equal(fault_in(at(2, 0)), OUT_OF_DOMAIN);
    assert_close(at(2, 1), 1000, 1e-13);
    in[3] = number(-1);
    refused("quantile", in, 4, OUT_OF_DOMAIN,
            "b, the threshold of the pareto, is -1, but must be above 0");
    refused("quantile", in, 3, BAD_KIND, "b, the threshold of the pareto, is missing");
    in[0] = number(1);
    in[3] = number(2);
    refused("quantile", in, 4, OUT_OF_DOMAIN, "p is 1, where the pareto has no finite quantile");
    in[0] = number(20);
    assert_int_equal(call("probability", in, 4), OK);
    assert_close(out.number, 0.9, 1e-15);
}

/* a header row and gaps stay where they are */
static void losses_keep_the_shape(void **state)
{
    (void)state;
    value in[] = { cells(&memory, "motor,fire;0.5,0.25;,0.75;0.9,"),
                   cells(&memory, "motor,exponential,100;fire,sample,1"),
                   cells(&memory, "30;10;20;40") };
    assert_int_equal(call("losses", in, 3), OK);
    assert_int_equal(out.table.rows, 4);
    assert_string_equal(word(0, 1), "fire");
    assert_close(at(1, 0), 100 * log(2), 1e-15);
    assert_same(at(1, 1), 10);
    assert_true(marks_gap(at(2, 0)));
    assert_same(at(2, 1), 30);
    assert_true(marks_gap(at(3, 1)));
    refused("losses", in, 2, BAD_KIND,
            "margins takes line 2 from a sample, but samples is missing");
    in[1] = cells(&memory, "motor,exponential,100;fire,sample,2");
    refused("losses", in, 3, BAD_KIND,
            "margins takes line 2 from column 2 of samples, which has 1");
    in[0] = cells(&memory, "motor,fire;0.5,0.25;1,0.75");
    refused("losses", in, 3, OUT_OF_DOMAIN,
            "uniforms has 1 in row 3, column 1, but must be between 0 and 1");
    in[0] = cells(&memory, "0.5,0.25");
    in[1] = cells(&memory, "fire,exponential,100,;motor,lomax,0.001,1");
    assert_int_equal(call("losses", in, 2), OK);
    assert_int_equal(fault_in(at(0, 1)), OK);
    in[0] = cells(&memory, "0.5,0.75");
    assert_int_equal(call("losses", in, 2), OK);
    assert_int_equal(fault_in(at(0, 1)), OUT_OF_DOMAIN);     /* 4^1000 */
}

static void fit_cells(void **state)
{
    (void)state;
    value in[] = { text("exponential"), cells(&memory, "loss;100;;300;200;") };
    assert_int_equal(call("marginFit", in, 2), OK);
    assert_int_equal(out.table.cols, 8);
    assert_close(at(0, 0), 200, 1e-15);
    assert_true(marks_gap(at(0, 1)) && marks_gap(at(0, 4)));
    assert_close(at(0, 3), 200 / sqrt(3), 1e-15);
    assert_close(at(0, 6), -3 * (1 + log(200)), 1e-15);
    assert_close(at(0, 7), 2 + 6 * (1 + log(200)), 1e-15);
    in[0] = text("gamma");
    in[1] = cells(&memory, "loss;100;;-1;200");
    refused("marginFit", in, 2, OUT_OF_DOMAIN,
            "losses has -1 in row 4, but the gamma needs losses above 0");
    in[0] = text("lomax");
    in[1] = cells(&memory, "10;11;12");
    refused("marginFit", in, 2, OUT_OF_DOMAIN,
            "no lomax fits these losses best: it takes losses that "
            "vary more than an exponential, whose sd is above their mean");
    in[0] = text("sample");
    refused("marginFit", in, 2, BAD_KIND,
            "distribution is sample, which comes from data and has no formula");
}

/* ---- risk measures ---- */

static void one_row_a_level(void **state)
{
    (void)state;
    value in[] = { cells(&memory, "a,b;1,2;3,4;5,6;7,8"), cells(&memory, "0.5;1;;0.75") };
    assert_int_equal(call("valueAtRisk", in, 2), OK);
    assert_int_equal(out.table.rows, 4);
    assert_same(at(0, 0), 7);
    assert_true(marks_gap(at(0, 1)));
    assert_int_equal(fault_in(at(1, 0)), OUT_OF_DOMAIN);
    assert_true(marks_gap(at(2, 0)));
    assert_same(at(3, 0), 11);
    assert_int_equal(call("tvar", in, 2), OK);
    assert_same(at(0, 0), 13);
    assert_same(at(3, 0), 15);
    in[1] = number(1);
    assert_int_equal(call("tvar", in, 2), OUT_OF_DOMAIN);
    in[0] = cells(&memory, "1;;3");
    in[1] = number(0.5);
    refused("tvar", in, 2, BAD_KIND, "losses has an empty cell in row 2, column 1");
}

static void layer_cells(void **state)
{
    (void)state;
    value in[] = { cells(&memory, "10;20;30;40"), number(15), number(20) };
    assert_int_equal(call("layerCost", in, 3), OK);
    const double want[] = { 10, sqrt(250.0 / 3 / 4), sqrt(250.0 / 3), 0.75, 0.25 };
    for (size_t k = 0; k < 5; k++) assert_close(at(0, k), want[k], 1e-15);
    assert_int_equal(call("layerCost", in, 2), OK);
    assert_true(marks_gap(at(0, 4)));
}

static void ceded_cells(void **state)
{
    (void)state;
    value in[] = { cells(&memory, "claims,costs;300,60;50,10"),
                   cells(&memory, "name,excess,limit,share,with;claims,100,,1,;costs,,,,claims"),
                   cells(&memory, "120,,0.5") };
    assert_int_equal(call("cede", in, 3), OK);
    assert_string_equal(word(0, 0), "claims");
    assert_close(at(1, 0), 50, 1e-15);       /* 200 + 40 before the aggregate, 60 after it */
    assert_close(at(1, 1), 10, 1e-15);
    assert_same(at(2, 0), 0);
    in[1] = cells(&memory, "name,excess,limit,share;costs,100,,1;claims,0,,1");
    assert_int_equal(call("cede", in, 2), BAD_KIND);
}

/* ---- the block ---- */

static const char model_cells[] =
    "copula,gaussian,;dimension,2,;lines,motor,fire;matrix,1,0.5;,0.5,1";

static size_t price_arguments(value *in)
{
    in[0] = cells(&memory, model_cells);
    in[1] = cells(&memory, "motor,lognormal,6,1;fire,gamma,2,300");
    in[2] = cells(&memory, "excess,limit,share;500,1000,0.5;400,,1");
    in[3] = nothing();
    in[4] = cells(&memory, "rows,20000;level,0.95");
    return 5;
}

static void labels_of_the_block(void **state)
{
    (void)state;
    static const char *const labels[] = {
        "figure", "mean", "sd", "attaching", "exhausting", "VaR", "TVaR", "mean motor", "mean fire",
        "TVaR motor", "TVaR fire", "rows", "seed", "scheme", "level", "version", "inputs", "notes"
    };
    static const char *const heading[] = {
        "figure", "gross", "error", "ceded", "error", "retained", "error"
    };
    value in[6];
    assert_int_equal(call("price", in, price_arguments(in)), OK);
    assert_int_equal(out.table.rows, sizeof labels / sizeof *labels);
    assert_int_equal(out.table.cols, 7);
    for (size_t i = 0; i < out.table.rows; i++) assert_string_equal(word(i, 0), labels[i]);
    for (size_t k = 0; k < 7; k++) assert_string_equal(word(0, k), heading[k]);
    assert_same(at(labelled("rows"), 1), 20000);
    assert_same(at(labelled("seed"), 1), 1);
    assert_string_equal(word(labelled("scheme"), 1), "plain");
    assert_same(at(labelled("level"), 1), 0.95);
    assert_string_equal(word(labelled("version"), 1), JOINTSHEET_VERSION);
    assert_int_equal(strlen(word(labelled("inputs"), 1)), 16);
    assert_string_equal(word(labelled("notes"), 1), "");
    assert_true(marks_gap(at(labelled("attaching"), 1)));
    assert_true(at(labelled("attaching"), 3) > 0);
    assert_true(marks_gap(at(labelled("exhausting"), 3)));            /* the second limit is open */
    for (size_t k = 1; k < 7; k += 2)
        assert_close(at(labelled("TVaR motor"), k) + at(labelled("TVaR fire"), k),
                     at(labelled("TVaR"), k), 1e-13);
}

/* what is too large to add up is said to be, and where */
static void too_large(void **state)
{
    (void)state;
    value in[] = { cells(&memory, "motor,fire;1,2;9e299,9e299"), number(0.5),
                   text("covariance") };
    refused("report", in, 1, OUT_OF_DOMAIN, "the losses of a row add up to more than 1e300");
    refused("tvar", in, 2, OUT_OF_DOMAIN, "a loss or the sum of a row is beyond 1e300");
    refused("allocate", in, 2, OUT_OF_DOMAIN, "the losses are too large to be added or squared");
    in[0] = cells(&memory, "motor,fire;1,2;3,1e308");
    refused("report", in, 1, OUT_OF_DOMAIN,
            "a loss of fire is beyond 1e300; if it is simulated, are a, b, c parameters, and not "
            "mean and sd? See MOMENTS");
    in[0] = cells(&memory, "1,2;3,1e200");
    refused("allocate", in, 3, OUT_OF_DOMAIN, "the losses are too large to be added or squared");
}

/* names that are missing or come twice still make labels that a lookup can tell apart */
static void labels_are_unique(void **state)
{
    (void)state;
    value in[] = { cells(&memory, "fire,Fire,;1,2,3;4,5,6;7,8,9") };
    assert_int_equal(call("report", in, 1), OK);
    labelled("mean fire");
    labelled("mean Fire (2)");
    labelled("TVaR line 3");
    in[0] = cells(&memory, "1,2;3,4");
    assert_int_equal(call("report", in, 1), OK);
    labelled("TVaR line 2");
    assert_true(marks_gap(at(labelled("seed"), 1)));
    assert_string_equal(word(labelled("scheme"), 1), "");
    assert_string_equal(word(labelled("notes"), 1),
                        "rows too few to tell the errors of VaR and TVaR");
}

/* functions.md: PRICE under plain equals REPORT(LOSSES(DRAW(...))) */
static void price_equals_report(void **state)
{
    (void)state;
    value in[6], draw_in[3], losses_in[2], report_in[4];
    price_arguments(in);
    draw_in[0] = in[0];
    draw_in[1] = number(20000);
    draw_in[2] = number(1);
    assert_int_equal(call("draw", draw_in, 3), OK);
    losses_in[0] = out;
    losses_in[1] = in[1];
    assert_int_equal(call("losses", losses_in, 2), OK);
    report_in[0] = out;
    report_in[1] = in[2];
    report_in[2] = nothing();
    report_in[3] = number(0.95);
    assert_int_equal(call("report", report_in, 4), OK);
    value reported = out;
    assert_int_equal(call("price", in, 5), OK);
    for (size_t i = 1; i <= 10; i++)
        for (size_t k = 1; k < 7; k++) {
            double x = at(i, k), y = reported.table.at[i * 7 + k];
            if (marks_gap(x)) assert_true(marks_gap(y));
            else assert_close(y, x, 1e-12);
        }
}

static void inputs_tell_changes(void **state)
{
    (void)state;
    value in[6];
    char first[17];
    size_t n = price_arguments(in);
    assert_int_equal(call("price", in, n), OK);
    strcpy(first, word(labelled("inputs"), 1));
    assert_int_equal(call("price", in, n), OK);
    assert_string_equal(word(labelled("inputs"), 1), first);
    in[1] = cells(&memory, "motor,lognormal,6,1;fire,gamma,2,300.0001");
    assert_int_equal(call("price", in, n), OK);
    assert_string_not_equal(word(labelled("inputs"), 1), first);
}

static void settings_and_refusals(void **state)
{
    (void)state;
    value in[6];
    size_t n = price_arguments(in);
    in[4] = cells(&memory, "rows,1000;Scheme,latin;seed,7");
    assert_int_equal(call("price", in, n), OK);
    assert_string_equal(word(labelled("scheme"), 1), "latin");
    assert_same(at(labelled("seed"), 1), 7);
    assert_same(at(labelled("level"), 1), 0.99);
    in[4] = cells(&memory, "rows,0");
    refused("price", in, n, OUT_OF_DOMAIN,
            "settings has 0 for rows, which must be a whole number from 1 to 20000000");
    in[4] = cells(&memory, "seed,1.5");
    assert_int_equal(call("price", in, n), OUT_OF_DOMAIN);
    in[4] = cells(&memory, "level,1");
    refused("price", in, n, OUT_OF_DOMAIN,
            "settings has 1 for level, which must be between 0 and 1");
    in[4] = cells(&memory, "level,high");
    refused("price", in, n, BAD_KIND,
            "settings has the text \"high\" for level, which must be a number");
    in[4] = cells(&memory, "scheme,sobol;rows,1024");
    assert_int_equal(call("price", in, n), OK);
    assert_string_equal(word(labelled("scheme"), 1), "sobol");
    in[4] = cells(&memory, "scheme,random");
    refused("price", in, n, BAD_KIND,
            "settings has the scheme \"random\", but it must be plain, antithetic, latin or sobol");
    in[4] = cells(&memory, "rows,20000000;level,0.5");
    assert_int_equal(call("price", in, n), OUT_OF_DOMAIN);
    in[4] = cells(&memory, "loops,3");
    assert_int_equal(call("price", in, n), BAD_KIND);
    in[4] = nothing();
    in[1] = cells(&memory, "lognormal,6,1;sample,1,");
    refused("price", in, n, BAD_KIND, "margins takes line 2 from a sample, but samples is missing");
    in[5] = cells(&memory, "5;100;900;2000");
    in[4] = cells(&memory, "rows,5000");
    assert_int_equal(call("price", in, 6), OK);
    assert_within(at(labelled("mean fire"), 1), 751.25, 4 * at(labelled("mean fire"), 2));
    in[2] = cells(&memory, "name,excess,limit,share;fire,500,1000,0.5;motor,400,,1");
    assert_int_equal(call("price", in, 6), BAD_KIND);
    in[2] = nothing();
    in[1] = cells(&memory, "motor,pareto,1.5,100;fire,lomax,0.9,100");
    assert_int_equal(call("price", in, n), OK);
    assert_string_equal(word(labelled("notes"), 1),
                        "motor has no finite sd; fire has no finite mean");
}

/* whichever piece of memory there is none for, the call says so */
static void memory_can_fail(void **state)
{
    (void)state;
    value in[6];
    size_t n = price_arguments(in);
    in[4] = cells(&memory, "rows,3500");
    status s = NO_MEMORY;
    for (size_t after = 1; s != OK; after++) {
        memory.fail_at = memory.taken + after;
        s = call("price", in, n);
        assert_true(s == OK || s == NO_MEMORY);
        assert_true(after < 2000);
    }
    memory.fail_at = 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_teardown(moments_in_a_row, done),
        cmocka_unit_test_teardown(quantiles_of_a_range, done),
        cmocka_unit_test_teardown(losses_keep_the_shape, done),
        cmocka_unit_test_teardown(fit_cells, done),
        cmocka_unit_test_teardown(one_row_a_level, done),
        cmocka_unit_test_teardown(layer_cells, done),
        cmocka_unit_test_teardown(ceded_cells, done),
        cmocka_unit_test_teardown(labels_of_the_block, done),
        cmocka_unit_test_teardown(too_large, done),
        cmocka_unit_test_teardown(labels_are_unique, done),
        cmocka_unit_test_teardown(price_equals_report, done),
        cmocka_unit_test_teardown(inputs_tell_changes, done),
        cmocka_unit_test_teardown(settings_and_refusals, done),
        cmocka_unit_test_teardown(memory_can_fail, done),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
