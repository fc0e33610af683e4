/* Archimedean copulas in many dimensions against Taylor coefficients of their generators. */
#include "asked.h"

#include "../../src/archimedean.h"

#include <gsl/gsl_errno.h>

/* archimedean_points.csv, written by copula_points.py with mpmath at 400 digits. Numbers that are
 * tiny differences of large ones lose what their doubles do not hold: clayton with theta = 1e-9
 * stands near the density 1. */
static void published_points(void **state)
{
    (void)state;
    struct csv *t = csv_read("archimedean_points.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        double u[20], theta = csv_number(t, i, "theta"), most = csv_number(t, i, "tolerance");
        size_t d = numbers_in(csv_text(t, i, "u"), u);
        copula *c = one_parameter(&s, csv_text(t, i, "family"), d, theta);
        assert_close(ask(c, CDF, u), csv_number(t, i, "C"), most);
        assert_within(ask(c, LOG_DENSITY, u), csv_number(t, i, "log_density"), most);
        assert_close(ask(c, CONDITIONAL, u), csv_number(t, i, "conditional"), most);
    }
    assert_int_equal(t->rows, 104);
    csv_free(t);
}

/* clayton with theta = 1: 1/(1/u_1 + ... + 1/u_d - d + 1), whose derivatives are elementary */
static void many_columns(void **state)
{
    (void)state;
    enum { D = 50 };
    struct sample_copula s;
    copula *c = one_parameter(&s, "clayton", D, 1);
    double u[D], sum = 1 - (double)D, log_density = 0;
    for (size_t j = 0; j < D; j++) {
        u[j] = ((double)j + 0.5) / D;
        sum += 1 / u[j];
        log_density += log((double)j + 1) - 2 * log(u[j]);
    }
    assert_close(ask(c, CDF, u), 1 / sum, 1e-13);
    assert_within(ask(c, LOG_DENSITY, u), log_density - (D + 1) * log(sum), 1e-11);
}

/* clayton with theta = 2 at u = v: C^-2 = 2 u^-2 - 1, so that C is u/sqrt(2) where u is tiny, and
 * given U = u the probability is (C/u)^3 */
static void near_zero(void **state)
{
    (void)state;
    struct sample_copula s;
    copula *c = one_parameter(&s, "clayton", 2, 2);
    static const double us[] = { 1e-300, 1e-200, 1e-12 };
    for (int k = 0; k < 3; k++) {
        assert_close(ask_pair(c, CDF, us[k], us[k]), us[k] / sqrt(2), 1e-12);
        assert_close(ask_pair(c, CONDITIONAL, us[k], us[k]), pow(2, -1.5), 1e-12);
        double want = log(3) + 5 * log(us[k] / sqrt(2)) - 6 * log(us[k]);
        assert_within(ask_pair(c, LOG_DENSITY, us[k], us[k]), want, 1e-12);
    }
}

/* Independence in disguise: frank, clayton at 0, gumbel and joe at 1 */
static void independence(void **state)
{
    (void)state;
    const struct { const char *word; double theta; } any[] = {
        { "frank", 0 }, { "clayton", 0 }, { "gumbel", 1 }, { "joe", 1 }
    };
    for (size_t k = 0; k < 4; k++)
        for (size_t d = 2; d <= 20; d += 6) {
            struct sample_copula s;
            copula *c = one_parameter(&s, any[k].word, d, any[k].theta);
            double u[20], product = 1;
            for (size_t j = 0; j < d; j++) product *= u[j] = ((double)j + 0.7) / 21;
            assert_close(ask(c, CDF, u), product, 1e-12);
            assert_within(ask(c, LOG_DENSITY, u), 0, 1e-12);
            assert_close(ask(c, CONDITIONAL, u), u[d - 1], 1e-12);
        }
}

/* Rotation by 180 in three dimensions is the sum over all subsets, written out. */
static void survival(void **state)
{
    (void)state;
    struct sample_copula s;
    copula *c = one_parameter(&s, "gumbel", 3, 2);
    const double u[3] = { 0.4, 0.6, 0.7 }, v[3] = { 1 - u[0], 1 - u[1], 1 - u[2] };
    double triple = ask(c, CDF, v), pairs = 0;
    for (int j = 0; j < 3; j++)
        pairs += exp(-hypot(log(v[j]), log(v[(j + 1) % 3])));
    c->rotation = 180;
    assert_within(ask(c, CDF, u), 1 - v[0] - v[1] - v[2] + pairs - triple, 1e-15);
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_points), cmocka_unit_test(many_columns),
        cmocka_unit_test(near_zero), cmocka_unit_test(independence),
        cmocka_unit_test(survival),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
