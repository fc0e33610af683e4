/* TAIL, TAILCURVE and KENDALLCURVE as a cell calls them. */
#include "measured.h"

#include "pairs.h"

/* Losses and expenses (Frees & Valdez 1998): counts of tail_dependence_empirical.csv, NumPy. */
static void published(void **state)
{
    (void)state;
    struct csv *t = csv_read("tail_dependence_empirical.csv");
    size_t n, compared = 0;
    double *x = dataset("loss_alae", &n);
    value in_x = { .is = IS_TABLE, .table = { n, 1, x, NULL } };
    value in_y = { .is = IS_TABLE, .table = { n, 1, x + n, NULL } };
    pool p = { 0 };
    report r;
    for (size_t k = 0; k < t->rows; k++) {
        if (!csv_is(t, k, "dataset", "loss_alae")) continue;
        value fraction = number(csv_number(t, k, "k") / (double)n);
        value upper = CALL("tail", OK, in_x, in_y, text("upper"), fraction);
        value lower = CALL("tail", OK, in_x, in_y, text("lower"), fraction);
        assert_within(at(&upper, 0, 0), csv_number(t, k, "lambda_upper_count"), 1e-12);
        assert_within(at(&lower, 0, 0), csv_number(t, k, "lambda_lower_count"), 1e-12);
        assert_same(at(&upper, 0, 2), csv_number(t, k, "count_upper"));
        assert_true(marks_gap(at(&lower, 0, 1)) == (csv_number(t, k, "count_lower") < 10));
        compared++;
    }
    assert_in_range(compared, 5, 18);
    value curve = CALL("tailCurve", OK, in_x, in_y, number(10));
    assert_int_equal(curve.table.rows, 10);
    for (size_t i = 0; i < 10; i++) {
        value fraction = number(at(&curve, i, 0));
        value lower = CALL("tail", OK, in_x, in_y, text("lower"), fraction);
        value upper = CALL("tail", OK, in_x, in_y, text("upper"), fraction);
        assert_close(fraction.number, 0.05 * (double)(i + 1), 1e-15);
        assert_same(at(&curve, i, 1), at(&lower, 0, 0));
        assert_same(at(&curve, i, 2), at(&upper, 0, 0));
    }
    free(x);
    csv_free(t);
    pool_empty(&p);
}

/* By hand: W of four rows is 1/4, 2/4, 2/4, 4/4. */
static void kendall_curve(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value x = cells(&p, "1; 2; 3; 4; "), y = cells(&p, "1; 3; 2; 4; 1");
    value c = CALL("kendallCurve", OK, x, y, number(4));
    double want[] = { 0.25, 0.75, 0.75, 1 };
    for (size_t i = 0; i < 4; i++) {
        assert_same(at(&c, i, 0), (double)(i + 1) / 4);
        assert_same(at(&c, i, 1), want[i]);
    }
    assert_non_null(strstr(r.facts, "4 rows used, 1 dropped for gaps"));
    pool_empty(&p);
}

static void refusals(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value x = cells(&p, "1; "), y = cells(&p, "1; 2");
    CALL("tail", TOO_FEW, x, y, text("upper"), number(0.1));
    assert_string_equal(r.why,
                        "x and y have 1 row in common, but tail dependence needs at least 2");
    CALL("tail", OUT_OF_DOMAIN, y, y, text("upper"), number(0));
    CALL("tail", BAD_KIND, y, y, text("left"), number(0.1));
    CALL("kendallCurve", TOO_FEW, cells(&p, "1; "), cells(&p, " ; 2"));
    pool_empty(&p);
}

static void memory(void **state)
{
    (void)state;
    pool given = { 0 };
    value x = cells(&given, "1; 3; 2; 5");
    survives_no_memory("tail", 4, (value[]){ x, x, text("upper"), number(0.5) });
    survives_no_memory("tailCurve", 2, (value[]){ x, x });
    survives_no_memory("kendallCurve", 2, (value[]){ x, x });
    pool_empty(&given);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published), cmocka_unit_test(kendall_curve), cmocka_unit_test(refusals),
        cmocka_unit_test(memory),
    };
    return cmocka_run_group_tests_name("measure_tail", tests, NULL, NULL);
}
