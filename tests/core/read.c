/* Reading arguments: the conventions of the reference, each with the sentence that WHY gives. */
#include "cells.h"

#include "../../addin/read.h"

static pool p;
static report r;

static int start(void **state)
{
    (void)state;
    r = (report){ .pool = &p };
    return 0;
}

static int end(void **state)
{
    (void)state;
    pool_empty(&p);
    p = (pool){ 0 };
    return 0;
}

static argument read_as(param what, value v, status want)
{
    argument a;
    value *kept = pool_take(&p, 1, sizeof *kept);
    param *description = pool_take(&p, 1, sizeof *description);
    *kept = v;
    *description = what;
    assert_int_equal(read_argument(description, kept, NULL, &a, &r), want);
    return a;
}

/* reads, expects a refusal, and looks for these words in the sentence */
static void refused(param what, value v, status want, const char *words)
{
    r = (report){ .pool = &p };
    read_as(what, v, want);
    if (!strstr(r.why, words)) fail_msg("\"%s\" does not say \"%s\"", r.why, words);
}

static const param x = { .name = "x", .kind = COLUMN }, data = { .name = "data", .kind = DATA },
                   full = { .name = "losses", .kind = FULL_DATA },
                   matrix = { .name = "matrix", .kind = MATRIX },
                   level = { .name = "level",
                             .kind = NUMBER,
                             .low = 0,
                             .high = 1,
                             .open = BOTH_OPEN },
                   seed = { .name = "seed", .kind = WHOLE, .low = 0, .high = 0x1p53 },
                   word = { .name = "gaps", .kind = WORD, .optional = true, .words = "pairs rows" },
                   numbers = { .name = "tau", .kind = NUMBERS, .low = -1, .high = 1 },
                   optional = { .name = "floor", .kind = NUMBER, .optional = true, .otherwise = 7 };

static void columns(void **state)
{
    (void)state;
    argument a = read_as(x, cells(&p, "1;;3;"), OK);
    assert_int_equal(a.data.rows, 4);
    assert_int_equal(a.filled, 3);
    assert_true(is_gap(a.data.at[1]));
    assert_same(a.data.at[2], 3);
    a = read_as(x, cells(&p, "1,2,3"), OK);
    assert_int_equal(a.data.rows, 3);
    a = read_as(x, cells(&p, "motor;1;2"), OK);
    assert_true(a.header);
    assert_int_equal(a.data.rows, 2);
    assert_string_equal(a.data.names[0], "motor");
    assert_same(a.data.at[0], 1);
}

static void columns_refused(void **state)
{
    (void)state;
    refused(x, number(3), BAD_KIND, "x is one value, but must be one column");
    refused(x, number(3), BAD_KIND, "Ctrl+Shift+Enter");
    refused(x, text("a"), BAD_KIND, "x is the text \"a\"");
    refused(x, nothing(), BAD_KIND, "x is missing");
    refused(x, cells(&p, "1,2;3,4"), BAD_KIND, "x is 2 x 2 cells");
    refused(x, cells(&p, ";;"), TOO_FEW, "x has no observations");
    refused(x, cells(&p, "$5;1;2"), BAD_KIND, "\"$5\" in row 1");
    refused(x, cells(&p, "1;a;2"), BAD_KIND, "x has the text \"a\" in row 2, column 1");
    refused(x, cells(&p, "\"12\";1;2"), BAD_KIND, "\"12\" in row 1");
    refused(x, cells(&p, "\"3.5\";1;2"), BAD_KIND, "\"3.5\" in row 1");
    refused(x, cells(&p, "inf;1"), OUT_OF_DOMAIN, "x has no finite number in row 1");
    refused(x, cells(&p, "1;nan"), OUT_OF_DOMAIN, "x has no finite number in row 2");
    value v = cells(&p, "1;2");
    v.table.at[1] = fault(NO_VARIATION);
    refused(x, v, NO_VARIATION, "x has an error in row 2");
}

static void data_with_headers_and_gaps(void **state)
{
    (void)state;
    argument a = read_as(data, cells(&p, "motor,cargo; 1,2; ,4; , "), OK);
    assert_int_equal(a.data.rows, 3);
    assert_int_equal(a.data.cols, 2);
    assert_int_equal(a.filled, 2);
    assert_string_equal(a.data.names[1], "cargo");
    assert_same(column(&a.data, 1)[1], 4);
    assert_true(is_gap(column(&a.data, 0)[1]));
    a = read_as(data, cells(&p, "motor,; 1,2"), OK);
    assert_string_equal(a.data.names[1], "");
    a = read_as(data, cells(&p, "1,2;3,4"), OK);
    assert_null(a.data.names);
    refused(data, cells(&p, "motor,2018; 1,2"), BAD_KIND, "\"motor\" in row 1, column 1");
    refused(data, cells(&p, "motor,\"2018\"; 1,2"), BAD_KIND, "\"motor\" in row 1");
    refused(data, cells(&p, "a,b; 1,2; 3,x"), BAD_KIND, "\"x\" in row 3, column 2");
}

static void full_data_has_no_gaps_but_may_end_early(void **state)
{
    (void)state;
    argument a = read_as(full, cells(&p, "a,b; 1,2; 3,4; ,; ,"), OK);
    assert_int_equal(a.data.rows, 2);
    assert_same(column(&a.data, 1)[1], 4);
    refused(full, cells(&p, "a,b; ,"), TOO_FEW, "losses has no observations");
    refused(data, cells(&p, ",; ,"), TOO_FEW, "data has no observations");
    refused(full, cells(&p, "1,2; ,4; 5,6"), BAD_KIND,
            "losses has an empty cell in row 2, column 1");
}

static void matrices(void **state)
{
    (void)state;
    static const char *const shapes[] = {
        "1,0.5; 0.25,1",
        "a,b; 1,0.5; 0.25,1",
        ",a,b; a,1,0.5; b,0.25,1",
        "a,1,0.5; b,0.25,1",
    };
    for (size_t i = 0; i < 4; i++) {
        argument a = read_as(matrix, cells(&p, shapes[i]), OK);
        assert_int_equal(a.data.rows, 2);
        assert_int_equal(a.data.cols, 2);
        assert_same(a.data.at[2], 0.5); /* row 1, column 2 */
        assert_same(a.data.at[1], 0.25);
        if (i)
            assert_string_equal(a.data.names[1], "b");
        else
            assert_null(a.data.names);
    }
    assert_int_equal(read_as(matrix, number(1), BAD_KIND).data.rows, 0);
    refused(matrix, cells(&p, "q,a,b; b,1,0.5; a,0.5,1"), BAD_KIND,
            "headed \"a\" in column 2, but \"b\" stands beside row 2");
    refused(matrix, cells(&p, "1,2,3;4,5,6"), BAD_KIND, "must be square");
    refused(matrix, cells(&p, "1,0.5; ,1"), BAD_KIND, "an empty cell in row 2, column 1");
    refused(matrix, cells(&p, ",a,b; a,1,; b,0.25,1"), BAD_KIND, "row 2, column 3");
}

static void single_numbers(void **state)
{
    (void)state;
    assert_same(read_as(level, number(0.5), OK).number, 0.5);
    assert_same(read_as(level, cells(&p, "0.25"), OK).number, 0.25);
    assert_same(read_as(optional, nothing(), OK).number, 7);
    assert_same(read_as(optional, text(""), OK).number, 7);
    assert_false(read_as(optional, nothing(), OK).given);
    refused(level, number(1), OUT_OF_DOMAIN, "level is 1, but must be above 0 and below 1");
    refused(level, number(INFINITY), OUT_OF_DOMAIN, "finite");
    refused(level, text("0.5"), BAD_KIND, "level is the text \"0.5\", but must be one number");
    refused(level, text(""), BAD_KIND, "level is empty");
    refused(level, nothing(), BAD_KIND, "level is missing");
    refused(level, cells(&p, "1;2"), BAD_KIND, "2 x 1 cells");
    refused(seed, number(1.5), OUT_OF_DOMAIN, "seed is 1.5, but must be a whole number");
    refused(seed, number(-1), OUT_OF_DOMAIN, "at least 0");
}

static void words_from_a_list(void **state)
{
    (void)state;
    assert_int_equal(read_as(word, text(" ROWS "), OK).word, 1);
    assert_int_equal(read_as(word, nothing(), OK).word, 0);
    refused(word, text("row"), BAD_KIND, "gaps is \"row\", but must be pairs or rows");
    refused(word, number(1), BAD_KIND, "gaps is the number 1, but must be a word");
}

static status half(double from, const void *with, double *to)
{
    (void)with;
    *to = from / 2;
    return from == 0 ? NO_VARIATION : OK;
}

static void each_number_keeps_its_place(void **state)
{
    (void)state;
    value out;
    argument a = read_as(numbers, number(0.5), OK);
    a.data.at = &a.number; /* `a` was copied */
    assert_int_equal(each_number(&a, half, NULL, &out, &r), OK);
    assert_same(out.number, 0.25);
    a = read_as(numbers, cells(&p, "a,b; 1,; 0,2"), OK);
    assert_int_equal(each_number(&a, half, NULL, &out, &r), OK);
    assert_int_equal(out.table.rows, 3);
    assert_string_equal(out.table.words[1], "b");
    assert_same(out.table.at[2], 0.5);
    assert_true(marks_gap(out.table.at[3]));
    assert_int_equal(fault_in(out.table.at[4]), NO_VARIATION);
    assert_int_equal(fault_in(out.table.at[5]), OUT_OF_DOMAIN);
    refused(numbers, number(2), OUT_OF_DOMAIN, "tau is 2, but must be at least -1 and at most 1");
}

static void lengths_and_names_must_fit(void **state)
{
    (void)state;
    static const param y = { .name = "y", .kind = COLUMN, .fits = "x" };
    argument a = read_as(x, cells(&p, "h;1;2;3"), OK), b;
    value v = cells(&p, "1;2;3;4");
    assert_int_equal(read_argument(&y, &v, &a, &b, &r), BAD_KIND);
    assert_string_equal(r.why,
                        "y is 4 long, but x is 3 long (x has a header, which is not counted, "
                        "and y has none)");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(columns, start, end),
        cmocka_unit_test_setup_teardown(columns_refused, start, end),
        cmocka_unit_test_setup_teardown(data_with_headers_and_gaps, start, end),
        cmocka_unit_test_setup_teardown(full_data_has_no_gaps_but_may_end_early, start, end),
        cmocka_unit_test_setup_teardown(matrices, start, end),
        cmocka_unit_test_setup_teardown(single_numbers, start, end),
        cmocka_unit_test_setup_teardown(words_from_a_list, start, end),
        cmocka_unit_test_setup_teardown(each_number_keeps_its_place, start, end),
        cmocka_unit_test_setup_teardown(lengths_and_names_must_fit, start, end),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
