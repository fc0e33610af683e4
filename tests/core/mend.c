/* Tests of addin/functions/mend.c and addin/square.c: what comes back, and what WHY would say. */
#include "cells.h"

static const char CHAIN[] = "1,1,0;1,1,1;0,1,1";

/* firmness NULL: left out */
static status ask(const char *name, const char *matrix, double floor, const char *firmness,
                  value *out, report *r)
{
    value in[3] = { cells(r->pool, matrix), number(floor), nothing() };
    if (firmness) in[2] = cells(r->pool, firmness);
    *r->why = *r->facts = 0;
    return call_function(function_named(name), in, firmness ? 3 : 2, out, r);
}

/* Higham (2002), p. 334 */
static void the_nearest_matrix(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value out;
    assert_int_equal(ask("repair", CHAIN, 0, NULL, &out, &r), OK);
    assert_within(out.table.at[1], 0.7606898534022838, 1e-8);
    assert_within(out.table.at[2], 0.1572981061383760, 1e-8);
    assert_string_equal(r.facts, "repaired, changing entries by up to 0.23931 (row 1, column 2)");
    assert_int_equal(ask("repair", "a,b;1,0.3;0.3,1", 0, NULL, &out, &r), OK);
    assert_same(out.table.at[1], 0.3);
    assert_string_equal(r.facts, "header of matrix skipped (\"a\", ...); no repair needed");
    pool_empty(&p);
}

static void refused(const char *matrix, double floor, const char *firmness, status want,
                    const char *why)
{
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value out;
    assert_int_equal(ask("repair", matrix, floor, firmness, &out, &r), want);
    assert_string_equal(r.why, why);
    pool_empty(&p);
}

static void refusals_name_the_cell(void **unused)
{
    (void)unused;
    refused("1,0.5;0.6,1", 0, NULL, BAD_KIND, "matrix is not symmetric: 0.5 stands in row 1, "
                                              "column 2, but 0.6 in the opposite cell");
    refused("2,-1;-1,2", 0, NULL, OUT_OF_DOMAIN,
            "matrix has 2 on its diagonal, in row 1, column 1, where 1 must stand");
    refused(",a,b;a,1,-3;b,-3,1", 0, NULL, OUT_OF_DOMAIN,
            "matrix has -3 in row 2, column 3, outside [-1;1]");
    refused(CHAIN, 0, "1,2;2,1", BAD_KIND,
            "firmness is 2 x 2 cells, but must be 3 x 3 like the matrix");
    refused(CHAIN, 0, ",held,;,,;,,", BAD_KIND, "firmness has the text \"held\" in row 1, column "
                                                "2, but must have a number, hold or nothing");
    refused(CHAIN, 0, ",,0;,,;,,", OUT_OF_DOMAIN,
            "firmness is 0 in row 1, column 3, but must be above 0");
    refused(CHAIN, 0, ",,;,,;,helt,", BAD_KIND, "firmness has the text \"helt\" in row 3, column "
                                                "2, but must have a number, hold or nothing");
    refused("a,b;1,0.5;0.5,1", 0, "b,a;,hold;,", BAD_KIND,
            "firmness names line 1 \"b\" in row 1, column 1, but matrix names it \"a\"");
    refused("1,0.9;0.9,1", 0.2, ",hold;,", OUT_OF_DOMAIN,
            "the entries held in firmness cannot stand together with the floor 0.2; look at those "
            "among lines 1, 2, or lower the floor");
    refused(CHAIN, 0, ",2,;3,,;,,", BAD_KIND, "firmness has different entries in row 1, column 2 "
                                              "and in the opposite cell");
    refused(CHAIN, 0, ",hold,hold;,,hold;,,", OUT_OF_DOMAIN, "the entries held in firmness cannot "
                                                             "stand together; look at those among "
                                                             "lines 1, 2, 3");
}

/* Rounding, up to 1e-9, is removed and told. */
static void rounding_is_no_asymmetry(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value out;
    assert_int_equal(ask("repair", "1,0.5;0.5000000004,1", 0, NULL, &out, &r), OK);
    assert_same(out.table.at[1], out.table.at[2]);
    assert_within(out.table.at[1], 0.5000000002, 1e-15);
    assert_string_equal(r.facts, "differences of up to 1e-9 in matrix taken as rounding and "
                                 "removed; no repair needed");
    pool_empty(&p);
}

/* Firmness that is alike changes nothing; two entries held leave the third where Stanley & Wang
 * (1969) say; a triangle with a header and names will do. */
static void firmness_decides_what_moves(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value plain, out;
    assert_int_equal(ask("repair", CHAIN, 0, NULL, &plain, &r), OK);
    assert_int_equal(ask("repair", CHAIN, 0, ",7,7;,,7;,,", &out, &r), OK);
    for (size_t i = 0; i < 9; i++) assert_same(out.table.at[i], plain.table.at[i]);
    const char *holds = ",a,b,c; a,1,,; b, Hold,,; c,,HOLD,";
    assert_int_equal(ask("repair", "1,0.5,1;0.5,1,0.7;1,0.7,1", 0, holds, &out, &r), OK);
    assert_same(out.table.at[1], 0.5);
    assert_same(out.table.at[5], 0.7);
    assert_within(out.table.at[2], 0.968465843842649, 1e-10);
    assert_int_equal(ask("repair", CHAIN, 0, ",1,100;,,1;,,", &out, &r), OK);
    assert_true(out.table.at[2] < 0.01 && out.table.at[1] < plain.table.at[1]);
    pool_empty(&p);
}

/* Distance and largest change of high02 in nearest_correlation_summary.csv */
static void notes_of_a_repair(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value out;
    assert_int_equal(ask("repairnote", CHAIN, 0, NULL, &out, &r), OK);
    const char *labels[] = { "lowest before", "lowest after", "distance", "largest change",
                             "moved by 0.01", "moved by 0.05", "iterations", "duality gap" };
    const double want[] = { 1 - sqrt(2), 0, 0.52779046358182837, 0.2393101465977162, 3, 3 };
    assert_int_equal(out.table.rows, 8);
    assert_int_equal(out.table.cols, 4);
    for (size_t k = 0; k < 8; k++) assert_string_equal(out.table.words[4 * k], labels[k]);
    for (size_t k = 0; k < 6; k++) assert_within(out.table.at[4 * k + 1], want[k], 1e-8);
    assert_same(out.table.at[14], 1);
    assert_true(out.table.at[15] == 2 && out.table.at[25] > 0);
    assert_within(out.table.at[29], 0, 1e-12);
    assert_int_equal(ask("repairnote", "1,0.3;0.3,1", 0, NULL, &out, &r), OK);
    assert_same(out.table.at[25], 0);
    assert_same(out.table.at[29], 0);
    assert_true(marks_gap(out.table.at[14]));
    pool_empty(&p);
}

static void mirrored(const char *triangle, const char *want)
{
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value in = cells(&p, triangle), full = cells(&p, want), out;
    assert_int_equal(call_function(function_named("mirror"), &in, 1, &out, &r), OK);
    assert_int_equal(out.table.rows, full.table.rows);
    assert_int_equal(out.table.cols, full.table.cols);
    for (size_t i = 0; i < full.table.rows * full.table.cols; i++) {
        const char *word = full.table.words ? full.table.words[i] : NULL;
        if (word) assert_string_equal(out.table.words[i], word);
        else assert_same(out.table.at[i], full.table.at[i]);
    }
    pool_empty(&p);
}

static void a_triangle_becomes_a_square(void **unused)
{
    (void)unused;
    mirrored("1,0.3,0.2;,1,0.1;,,1", "1,0.3,0.2;0.3,1,0.1;0.2,0.1,1");
    mirrored(",,;0.3,,;0.2,,", "1,0.3,0.2;0.3,1,;0.2,,1");
    mirrored(",a,b;a,,0.3;b,,", "1,0.3;0.3,1");
    mirrored("a,b;1,;0.3,1", "1,0.3;0.3,1");
    mirrored("a,1,;b,0.3,1", "1,0.3;0.3,1");
    mirrored(",hold,low;,,;,,", "1,hold,low;hold,1,;low,,1");
    mirrored("7", "7");
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value in = cells(&p, "9,1,0.5; 7,0.5,1"), out;
    assert_int_equal(call_function(function_named("mirror"), &in, 1, &out, &r), BAD_KIND);
    assert_non_null(strstr(r.why, "row 1, column 1 must be a name or empty"));
    r = (report){ .pool = &p };
    in = cells(&p, "1,0.3;0.2,1");
    assert_int_equal(call_function(function_named("mirror"), &in, 1, &out, &r), BAD_KIND);
    assert_string_equal(r.why, "triangle has different entries in row 1, column 2 and in the "
                               "opposite cell");
    in = cells(&p, "1,0.3,4;0.2,1,4;1,1,1;1,1,1;1,1,1");
    r = (report){ .pool = &p };
    assert_int_equal(call_function(function_named("mirror"), &in, 1, &out, &r), BAD_KIND);
    assert_string_equal(r.why, "triangle is 5 x 3 cells, but must be square");
    pool_empty(&p);
}

static void memory_may_end_anywhere(void **unused)
{
    (void)unused;
    const char *names[] = { "repair", "repairnote", "mirror" };
    const char *firmness[] = { NULL, ",1,2;,,1;,,", ",hold,hold;,,hold;,," };
    for (size_t k = 0; k < 9; k++) {
        status s = NO_MEMORY;
        for (size_t fail = 1; s == NO_MEMORY; fail++) {
            pool p = { .last = NULL };
            report r = { .pool = &p };
            value in[3] = { cells(&p, CHAIN), number(0), nothing() }, out;
            if (firmness[k / 3]) in[2] = cells(&p, firmness[k / 3]);
            p.taken = 0;
            p.fail_at = fail;
            s = call_function(function_named(names[k % 3]), in, k % 3 == 2 ? 1 : 3, &out, &r);
            if (s == NO_MEMORY) assert_true(fail < 60);
            pool_empty(&p);
        }
        assert_int_equal(s, k / 3 == 2 && k % 3 < 2 ? OUT_OF_DOMAIN : OK);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_nearest_matrix),
        cmocka_unit_test(refusals_name_the_cell),
        cmocka_unit_test(rounding_is_no_asymmetry),
        cmocka_unit_test(firmness_decides_what_moves),
        cmocka_unit_test(notes_of_a_repair),
        cmocka_unit_test(a_triangle_becomes_a_square),
        cmocka_unit_test(memory_may_end_anywhere),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
