/* The adaptors of addin/functions/measure.c: what cells give, where errors go, and what WHY says.
 * Expected numbers are worked by hand unless a source is named. */
#include "measured.h"

static void tau(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value x = cells(&p, "motor; 1; 2; ; 4; 5; "), y = cells(&p, "cargo; 1; 3; 9; 2; ; ");
    assert_close(CALL("tau", OK, x, y).number, 1 / 3.0, 1e-15);
    assert_non_null(strstr(r.facts, "3 rows used, 2 dropped for gaps"));

    value w = cells(&p, "1; 0; 1; 1; 1; ");
    assert_same(CALL("tau", BAD_KIND, x, y, cells(&p, "1; 2")).number, 0);
    assert_non_null(strstr(r.why, "weights"));
    assert_same(CALL("tau", OK, x, y, w).number, 1);
    assert_non_null(strstr(r.facts, "2 rows used, 3 dropped for gaps or weight 0"));
    CALL("tau", OUT_OF_DOMAIN, x, y, cells(&p, "w; 1; -2; 1; 1; 1; "));
    assert_string_equal(r.why, "weights has -2 in row 3, but must not be negative");

    CALL("tau", TOO_FEW, cells(&p, "1; ; 3"), cells(&p, "1; 2; "));
    assert_string_equal(r.why, "x and y have 1 row in common, but tau needs at least 2");
    CALL("tau", NO_VARIATION, cells(&p, "1; 2; 3"), cells(&p, "4; 4; 4"));
    assert_string_equal(r.why, "y is the same in all 3 rows used, and tau is undefined");
    CALL("tau", NO_VARIATION, cells(&p, "1; 1; 3"), cells(&p, "4; 5; 6"), cells(&p, "1; 1; 0"));
    assert_string_equal(r.why, "x is the same in all 2 rows used, and tau with weights above 0 is "
                                "undefined");
    pool_empty(&p);
}

/* Column 3 is constant where column 4 has values; 4 has one row in common with 2. */
static const char mixed[] = "a, b, c, d; 1, 1, 7, 5; 2, 3, 7, 6; 3, 2, 7, ; 4, , 8, 7; 5, , 8, ";

static void grid(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value data = cells(&p, "1, 1, 7, 5; 2, 3, 7, ; 3, 2, 7, 4; 4, , 8, ");
    value g = CALL("tauGrid", OK, data);
    assert_int_equal(g.table.rows, 4);
    assert_int_equal(g.table.cols, 4);
    for (size_t i = 0; i < 4; i++) assert_same(at(&g, i, i), 1);
    assert_close(at(&g, 0, 1), 1 / 3.0, 1e-15);
    assert_close(at(&g, 0, 2), 3 / sqrt(18), 1e-15);
    assert_int_equal(fault_in(at(&g, 2, 3)), NO_VARIATION);
    assert_int_equal(fault_in(at(&g, 3, 2)), NO_VARIATION);
    assert_int_equal(fault_in(at(&g, 1, 2)), NO_VARIATION);
    assert_same(at(&g, 3, 0), -1);

    g = CALL("tauGrid", OK, data, nothing(), nothing(), text("count"));
    assert_same(at(&g, 0, 0), 4);
    assert_same(at(&g, 3, 1), 2);
    g = CALL("tauGrid", OK, data, text("rows"), nothing(), text("count"));
    assert_same(at(&g, 0, 0), 2);
    assert_non_null(strstr(r.facts, "2 rows used, 2 dropped for gaps"));

    value w = cells(&p, "1; 1; 1; 0");
    g = CALL("tauGrid", OK, data, nothing(), w);
    assert_close(at(&g, 1, 0), 1 / 3.0, 1e-15);
    assert_int_equal(fault_in(at(&g, 0, 2)), NO_VARIATION);
    assert_int_equal(fault_in(at(&g, 2, 2)), NO_VARIATION);
    g = CALL("tauGrid", OK, data, text("rows"), w, text("count"));
    assert_same(at(&g, 0, 1), 2);
    CALL("tauGrid", BAD_KIND, data, nothing(), w, text("error"));
    assert_non_null(strstr(r.why, "figure is \"error\", which has no agreed meaning with weights"));

    g = CALL("tauGrid", OK, cells(&p, mixed));
    assert_int_equal(fault_in(at(&g, 1, 2)), NO_VARIATION);
    assert_close(at(&g, 2, 3), 2 / sqrt(6), 1e-15);
    g = CALL("tauGrid", OK, cells(&p, mixed), nothing(), nothing(), text("error"));
    assert_int_equal(fault_in(at(&g, 1, 3)), TOO_FEW);
    assert_int_equal(fault_in(at(&g, 1, 2)), NO_VARIATION);
    pool_empty(&p);
}

/* A standard error and its limits: Hollander & Wolfe's (1973) nine tuna lightness scores and panel
 * scores, values of tau_variance_estimates.csv and tau_confidence_intervals.csv. */
static void errors_and_limits(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value data = cells(&p, "44.4, 2.6; 45.9, 3.1; 41.9, 2.5; 53.3, 5.0; 44.7, 3.6; 44.1, 4.0; "
                           "50.7, 5.2; 45.2, 2.8; 60.1, 3.8");
    struct csv *t = csv_read("tau_variance_estimates.csv");
    struct csv *limits = csv_read("tau_confidence_intervals.csv");
    value g = CALL("tauGrid", OK, data, nothing(), nothing(), text("error"));
    value low = CALL("tauGrid", OK, data, nothing(), nothing(), text("low"));
    value high = CALL("tauGrid", OK, data, nothing(), nothing(), text("high"));
    assert_same(at(&g, 0, 0), 0);
    assert_same(at(&low, 1, 1), 1);
    size_t found = 0;
    for (size_t k = 0; k < t->rows; k++) {
        if (!csv_is(t, k, "dataset", "tuna9")) continue;
        if (!csv_is(t, k, "estimator", "consistent_hollander_wolfe")) continue;
        assert_close(at(&g, 0, 1), csv_number(t, k, "sd"), 1e-11);
        assert_same(at(&g, 1, 0), at(&g, 0, 1));
        found++;
    }
    for (size_t k = 0; k < limits->rows; k++) {
        if (!csv_is(limits, k, "dataset", "tuna9")) continue;
        if (csv_number(limits, k, "level") != 0.95) continue;
        if (!csv_is(limits, k, "method", "wald_hollander_wolfe")) continue;
        assert_within(at(&low, 0, 1), fmax(-1, csv_number(limits, k, "lower")), 1e-10);
        assert_within(at(&high, 0, 1), fmin(1, csv_number(limits, k, "upper")), 1e-10);
        found++;
    }
    assert_int_equal(found, 2);
    csv_free(t);
    csv_free(limits);
    pool_empty(&p);
}

static void ranks(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value data = cells(&p, "a, b; 30, 1; 10, ; 20, 1; , 0");
    value u = CALL("ranks", OK, data);
    assert_int_equal(u.table.rows, 5);
    assert_string_equal(u.table.words[1], "b");
    assert_same(at(&u, 1, 0), 0.75);
    assert_same(at(&u, 2, 0), 0.25);
    assert_true(marks_gap(at(&u, 4, 0)));
    assert_same(at(&u, 1, 1), 0.625);
    assert_non_null(strstr(r.facts, "4 rows of data, each column with those that it has; "
                                    "2 gaps not ranked"));
    CALL("ranks", OK, cells(&p, "motor; 30; ; 20; "));
    assert_non_null(strstr(r.facts, "2 rows used, 1 dropped for gaps"));
    CALL("ranks", OK, cells(&p, "3, 1; 4, 2; , "));
    assert_string_equal(r.facts, "2 rows used, none dropped");
    u = CALL("ranks", OK, data, text("High"));
    assert_same(at(&u, 3, 1), 0.75);
    u = CALL("ranks", OK, data, text("random"), number(5));
    assert_same(at(&u, 1, 1) + at(&u, 3, 1), 1.25);
    CALL("ranks", BAD_KIND, data, text("random"));
    assert_non_null(strstr(r.why, "seed"));
    u = CALL("ranks", OK, cells(&p, "5, 3, 4"));           /* one row: three columns of one */
    assert_int_equal(u.table.cols, 3);
    assert_same(at(&u, 0, 0), 0.5);
    pool_empty(&p);
}

/* The reference calls a seed what it is if left out, unless the default is no number. */
static void random_ties_have_no_seed(void **state)
{
    (void)state;
    const param *seed = &function_named("ranks")->params[2];
    assert_string_equal(seed->name, "seed");
    assert_true(isnan(seed->otherwise));
}

/* Functions that take seconds over a range are kept in the cache. */
static void costly_functions(void **state)
{
    (void)state;
    const char *const names[] = { "thetaRho", "tauOf", "rhoOf", "tauGrid" };
    for (size_t i = 0; i < sizeof names / sizeof *names; i++)
        assert_true(function_named(names[i])->costly);
}

static void memory(void **state)
{
    (void)state;
    pool given = { 0 };
    value x = cells(&given, "1; 3; 2; 5"), w = cells(&given, "1; 2; 1; 1");
    value data = cells(&given, "1, 2, 5; 3, 4, ; 2, 9, 1; 4, 1, 3");
    survives_no_memory("tau", 2, (value[]){ x, x });
    survives_no_memory("tau", 3, (value[]){ x, x, w });
    survives_no_memory("tauGrid", 1, &data);
    survives_no_memory("tauGrid", 3, (value[]){ data, text("rows"), w });
    survives_no_memory("tauGrid", 4, (value[]){ data, nothing(), nothing(), text("low") });
    survives_no_memory("ranks", 1, &data);
    pool_empty(&given);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(tau), cmocka_unit_test(grid), cmocka_unit_test(errors_and_limits),
        cmocka_unit_test(ranks), cmocka_unit_test(memory),
        cmocka_unit_test(random_ties_have_no_seed), cmocka_unit_test(costly_functions),
    };
    return cmocka_run_group_tests_name("measure", tests, NULL, NULL);
}
