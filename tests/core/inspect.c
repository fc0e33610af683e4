/* Tests of addin/functions/inspect.c: what comes back, and what WHY would say. */
#include "cells.h"

static status ask(const char *name, const char *matrix, double a, double b, size_t n, value *out,
                  report *r)
{
    value in[3] = { cells(r->pool, matrix), number(a), number(b) };
    *r->why = *r->facts = 0;
    return call_function(function_named(name), in, n, out, r);
}

/* 2 - sqrt 2, 2, 2 + sqrt 2: the second difference matrix of order 3 */
static void eigenvalues_come_largest_first(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value out;
    assert_int_equal(ask("eigen", ",a,b,c; a,2,-1,0; b,-1,2,-1; c,0,-1,2", 0, 0, 1, &out, &r), OK);
    assert_int_equal(out.table.rows, 3);
    assert_int_equal(out.table.cols, 1);
    for (size_t k = 0; k < 3; k++)
        assert_close(out.table.at[k], 2 + (1 - (double)k) * sqrt(2), 1e-14);
    assert_int_equal(ask("eigen", "h,i; 1,2; 2.5,1", 0, 0, 1, &out, &r), BAD_KIND);
    assert_string_equal(r.why, "matrix is not symmetric: 2 stands in row 2, column 2, but 2.5 in "
                               "the opposite cell");
    pool_empty(&p);
}

static void assert_feasible(const char *matrix, double floor, double want, const char *facts)
{
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value out;
    assert_int_equal(ask("feasible", matrix, floor, 0, 2, &out, &r), OK);
    assert_same(out.number, want);
    assert_string_equal(r.facts, facts);
    pool_empty(&p);
}

static void feasible_says_why_not(void **unused)
{
    (void)unused;
    assert_feasible("1,0.9;0.9,1", 0, 1, "the lowest eigenvalue is 0.1");
    assert_feasible("1,0.9;0.9,1", 0.2, 0, "the lowest eigenvalue is 0.1");
    assert_feasible("1,0.9,0;0.9,1,0.9;0,0.9,1", 0, 0, "the lowest eigenvalue is -0.272792");
    assert_feasible("1,0.9;0.8,1", 0, 0, "matrix is not symmetric: 0.9 stands in row 1, column 2, "
                                         "but 0.8 in the opposite cell");
    assert_feasible("1,2;2,1", 0, 0, "matrix has 2 in row 1, column 2, outside [-1;1]");
    assert_feasible(",a,b;a,1,0;b,0,2", 0, 0,
                    "header of matrix skipped (\"a\", ...); matrix has 2 on its diagonal, in row "
                    "3, column 3, where 1 must stand");
}

/* The limits for 0.5 and 0.7 of Stanley & Wang (1969), as printed to eight digits. */
static void leeway_of_an_entry(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value out;
    const char *m = "1,0.5,0;0.5,1,0.7;0,0.7,1";
    assert_int_equal(ask("leeway", m, 1, 3, 3, &out, &r), OK);
    assert_within(out.table.at[0], -0.26846584, 1e-8);
    assert_within(out.table.at[1], 0.96846584, 1e-8);
    assert_int_equal(ask("leeway", m, 1, 4, 3, &out, &r), OUT_OF_DOMAIN);
    assert_string_equal(r.why, "column is 4, but matrix has only 3");
    assert_int_equal(ask("leeway", m, 2, 2, 3, &out, &r), OUT_OF_DOMAIN);
    assert_string_equal(r.why, "row and column are both 2, and the diagonal is always 1");
    m = "1,0,0,0;0,1,0.9,0;0,0.9,1,0.9;0,0,0.9,1";
    assert_int_equal(ask("leeway", m, 1, 2, 3, &out, &r), OUT_OF_DOMAIN);
    assert_string_equal(r.why, "no value of this entry makes the matrix feasible: without line 1 "
                               "or without line 2 it is not feasible either");
    pool_empty(&p);
}

/* Five lines all at -0.3 clash as a whole (1 - 4 x 0.3 < 0), but no three of them (1 - 2 x 0.3 >
 * 0). */
static void clashes_are_listed_worst_first(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    report r = { .pool = &p };
    value out;
    const char *m = "1,0.9,0,0;0.9,1,0.9,0;0,0.9,1,-0.8;0,0,-0.8,1";
    assert_int_equal(ask("clashes", m, 0, 0, 1, &out, &r), OK);
    assert_int_equal(out.table.rows, 2);
    assert_int_equal(out.table.cols, 6);
    const double first[] = { 1, 2, 3, 1 - 0.9 * sqrt(2), -sqrt(0.19), sqrt(0.19) };
    const double second[] = { 2, 3, 4, 1 - sqrt(0.81 + 0.64) };
    for (size_t k = 0; k < 6; k++) assert_within(out.table.at[k], first[k], 1e-14);
    for (size_t k = 0; k < 4; k++) assert_within(out.table.at[6 + k], second[k], 1e-14);
    assert_string_equal(r.facts, "2 triples cannot stand together");
    assert_int_equal(ask("clashes", m, 1, 0, 2, &out, &r), OK);
    assert_int_equal(out.table.rows, 1);
    m = "1,-.3,-.3,-.3,-.3;-.3,1,-.3,-.3,-.3;-.3,-.3,1,-.3,-.3;-.3,-.3,-.3,1,-.3;"
        "-.3,-.3,-.3,-.3,1";
    assert_int_equal(ask("clashes", m, 0, 0, 1, &out, &r), OK);
    assert_int_equal(out.table.rows, 1);
    for (size_t k = 0; k < 6; k++) assert_same(out.table.at[k], 0);
    assert_string_equal(r.facts, "each triple can stand, but the matrix as a whole cannot");
    pool_empty(&p);
}

static void memory_may_end_anywhere(void **unused)
{
    (void)unused;
    const char *names[] = { "eigen", "feasible", "leeway", "clashes" };
    const char *m = "1,0.9,0,0;0.9,1,0.9,0;0,0.9,1,-0.8;0,0,-0.8,1";
    for (size_t k = 0; k < 4; k++) {
        status s = NO_MEMORY;
        for (size_t fail = 1; s == NO_MEMORY; fail++) {
            pool p = { .last = NULL };
            report r = { .pool = &p };
            value in[3] = { cells(&p, m), number(1), number(1 + (double)k) }, out;
            p.taken = 0;
            p.fail_at = fail;
            s = call_function(function_named(names[k]), in, k == 0 ? 1 : k == 2 ? 3 : 2, &out, &r);
            if (s == NO_MEMORY) assert_true(fail < 60);
            pool_empty(&p);
        }
        assert_true(s == OK || s == OUT_OF_DOMAIN);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(eigenvalues_come_largest_first),
        cmocka_unit_test(feasible_says_why_not),
        cmocka_unit_test(leeway_of_an_entry),
        cmocka_unit_test(clashes_are_listed_worst_first),
        cmocka_unit_test(memory_may_end_anywhere),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
