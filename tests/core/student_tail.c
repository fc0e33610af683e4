/* Student's t far into its tails, against integrals at 40 digits and GSL. */
#include "table.h"

#include "../../src/student_tail.h"

#include <gsl/gsl_cdf.h>
#include <gsl/gsl_errno.h>

/* student_tail.csv, written by copula_points.py with mpmath. What y loses when it is rounded to a
 * double is df tanh(y) times its last digit. */
static void published_tails(void **state)
{
    (void)state;
    struct csv *t = csv_read("student_tail.csv");
    for (size_t i = 0; i < t->rows; i++) {
        double df = csv_number(t, i, "df"), y = csv_number(t, i, "y"), p = csv_number(t, i, "tail");
        double most = 1e-12 + 1.2e-16 * y * df * tanh(y);
        assert_close(student_below(-y, df), p, most);
        assert_within(student_below(y, df), 1 - p, 1e-15 + most * p);
        assert_within(student_log_tail(y, df), log(p), most);
        if (p > 0.499) continue;                         /* there p says little of y */
        assert_close(student_quantile(p, df), -y, 2e-13);
        if (p > 1e-10) assert_close(student_quantile(1 - p, df), y, 3e-15 / p);
    }
    csv_free(t);
}

/* GSL where it is accurate */
static void library_agrees(void **state)
{
    (void)state;
    uint64_t s = 4;
    for (size_t i = 0; i < effort(3000); i++) {
        double df = pow(10, 3 * random_uniform(&s) - 0.5), x = 6 * random_normal(&s);
        double y = asinh(x / sqrt(df)), want = gsl_cdf_tdist_P(x, df);
        if (want > 1e-8) assert_close(student_below(y, df), want, 1e-10);
    }
}

static void there_and_back(void **state)
{
    (void)state;
    uint64_t s = 5;
    for (size_t i = 0; i < effort(5000); i++) {
        double df = pow(10, 12 * random_uniform(&s) - 3), u = random_uniform(&s);
        if (random_below(&s, 2)) u = pow(10, -300 * u);
        double y = student_quantile(u, df);
        assert_close(student_below(y, df), u, 4e-13 + 1e-15 * df * fabs(y) * fabs(tanh(y)));
    }
    assert_same(student_quantile(0.5, 3), 0);
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_tails), cmocka_unit_test(library_agrees),
        cmocka_unit_test(there_and_back),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
