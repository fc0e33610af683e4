/* TAUBAND and TAUTEST as a cell calls them. */
#include "measured.h"

/* tau_confidence_intervals.csv and tau_variance_estimates.csv, mpmath by the formulas named
 * there. */
static void band(void **state)
{
    (void)state;
    static const char *const methods[][3] = {
        { "free", "wald_hollander_wolfe", "consistent_hollander_wolfe" },
        { "Jackknife", "wald_jackknife", "jackknife" },
        { "fisherz", "fisher_z_fieller", NULL },
    };
    struct csv *t = csv_read("tau_confidence_intervals.csv");
    struct csv *errors = csv_read("tau_variance_estimates.csv");
    pool p = { 0 };
    report r;
    value x = cells(&p, TUNA_X), y = cells(&p, TUNA_Y);
    size_t compared = 0;
    for (size_t m = 0; m < 3; m++) {
        value b;
        for (size_t k = 0; k < t->rows; k++) {
            if (!csv_is(t, k, "dataset", "tuna9")) continue;
            if (!csv_is(t, k, "method", methods[m][1])) continue;
            b = CALL("tauBand", OK, x, y, number(csv_number(t, k, "level")), text(methods[m][0]));
            assert_int_equal(b.table.rows, 1);
            assert_int_equal(b.table.cols, 5);
            assert_close(at(&b, 0, 0), 16 / 36.0, 1e-15);
            assert_within(at(&b, 0, 1), fmax(-1, csv_number(t, k, "lower")), 1e-10);
            assert_within(at(&b, 0, 2), fmin(1, csv_number(t, k, "upper")), 1e-10);
            assert_same(at(&b, 0, 4), 9);
            compared++;
        }
        for (size_t k = 0; methods[m][2] && k < errors->rows; k++) {
            if (!csv_is(errors, k, "dataset", "tuna9")) continue;
            if (!csv_is(errors, k, "estimator", methods[m][2])) continue;
            assert_close(at(&b, 0, 3), csv_number(errors, k, "sd"), 1e-11);
        }
    }
    assert_int_equal(compared, 9);
    value seven = CALL("tauBand", OK, x, y, nothing(), text("bootstrap"), number(7));
    value eight = CALL("tauBand", OK, x, y, nothing(), text("bootstrap"), number(8));
    assert_true(at(&seven, 0, 3) != at(&eight, 0, 3));
    assert_within(at(&seven, 0, 3), 0.24, 0.05);     /* near the other methods' 0.25 and 0.27 */
    csv_free(t);
    csv_free(errors);
    pool_empty(&p);
}

static void band_refusals(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value x = cells(&p, "1; 2; 3; 4"), y = cells(&p, "1; 3; 2; 4"), flat = cells(&p, "1; 1; 1; 1");
    CALL("tauBand", TOO_FEW, x, y, nothing(), text("fisherz"));
    assert_string_equal(r.why,
                        "x and y have 4 rows in common, but this interval needs at least 5");
    CALL("tauBand", NO_VARIATION, x, flat);
    assert_string_equal(r.why,
                        "y is the same in all 4 rows used, and this interval is undefined");
    CALL("tauBand", NO_VARIATION, x, cells(&p, "0; 0; 0; 1"), nothing(), text("jackknife"));
    assert_string_equal(r.why, "x or y varies in too few of the 4 rows used for this interval");
    CALL("tauBand", OUT_OF_DOMAIN, x, y, number(1));
    CALL("tauBand", BAD_KIND, x, y, nothing(), text("exact"));
    pool_empty(&p);
}

/* p-values of kendall_examples.csv: SciPy and exact integers. One-sided: Hollander & Wolfe print
 * 0.05972. */
static void test(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value x = cells(&p, TUNA_X), y = cells(&p, TUNA_Y);
    assert_close(CALL("tauTest", OK, x, y).number, 0.11943893298059964, 1e-12);
    assert_within(CALL("tauTest", OK, x, y, text("above")).number, 0.05972, 5e-6);
    assert_true(CALL("tauTest", OK, x, y, text("below")).number > 0.9);
    value tied_x = cells(&p, "x; 12; 2; 1; 12; ; 2"), tied_y = cells(&p, "y; 1; 4; 7; 1; 3; 0");
    assert_close(CALL("tauTest", OK, tied_x, tied_y).number, 0.28274545993277458161, 1e-12);
    assert_non_null(strstr(r.facts, "5 rows used, 1 dropped for gaps"));
    CALL("tauTest", TOO_FEW, cells(&p, "1; "), cells(&p, "2; 3"));
    CALL("tauTest", NO_VARIATION, cells(&p, "1; 1"), cells(&p, "1; 2"));
    assert_string_equal(r.why, "x is the same in all 2 rows used, and the test is undefined");
    pool_empty(&p);
}

static void memory(void **state)
{
    (void)state;
    pool given = { 0 };
    value in[] = { cells(&given, TUNA_X), cells(&given, TUNA_Y), nothing(), text("bootstrap") };
    survives_no_memory("tauBand", 2, in);
    survives_no_memory("tauBand", 4, in);
    survives_no_memory("tauTest", 2, in);
    pool_empty(&given);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(band), cmocka_unit_test(band_refusals), cmocka_unit_test(test),
        cmocka_unit_test(memory),
    };
    return cmocka_run_group_tests_name("measure_tau", tests, NULL, NULL);
}
