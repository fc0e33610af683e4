/* How long questions are said to take, and quasi-Monte Carlo with fewer points. */
#include "asked.h"

#include "../../src/evaluation_work.h"

#include <gsl/gsl_errno.h>

static void ready(struct evaluation *e, const copula *c, pool *p)
{
    assert_int_equal(evaluation_of(c, e, p), OK);
}

/* David (1953): 1/4 at correlation 1/2 in three columns; a standard error grows with fewer. */
static void fewer_points(void **state)
{
    (void)state;
    struct sample_copula s;
    struct evaluation e;
    pool p = { 0 };
    const double half[3] = { 0.5, 0.5, 0.5 };
    double all, value, error;
    ready(&e, elliptical(&s, "gaussian", 3, 0.5, 0), &p);
    assert_int_equal(box_points(&e), 32768);
    assert_same(with_fewer_box_points(&e, 100), 100 * cdf_seconds(&e));
    assert_int_equal(box_points(&e), 32768);
    assert_int_equal(cdf_at(&e, half, &value, &all), OK);
    double seconds = cdf_seconds(&e);
    assert_true(with_fewer_box_points(&e, 1000) < 1);
    assert_int_equal(box_points(&e), 8192);
    assert_within(cdf_seconds(&e), seconds / 4, 1e-6);
    assert_true(with_fewer_box_points(&e, 1000000) > 100);
    assert_int_equal(box_points(&e), 2048);
    assert_int_equal(cdf_at(&e, half, &value, &error), OK);
    assert_true(error > 3 * all && error < 2e-3);
    assert_within(value, 0.25, 5 * error);
    pool_empty(&p);
}

/* Nothing to take fewer of. */
static void other_ways(void **state)
{
    (void)state;
    struct sample_copula s;
    struct evaluation e;
    pool p = { 0 };
    ready(&e, elliptical(&s, "t", 2, 0.5, 4), &p);
    assert_int_equal(box_points(&e), 0);
    assert_same(with_fewer_box_points(&e, 100000), 100000 * cdf_seconds(&e));
    ready(&e, one_parameter(&s, "gumbel", 5, 2), &p);
    assert_int_equal(box_points(&e), 0);
    assert_same(with_fewer_box_points(&e, 100000), 100000 * cdf_seconds(&e));
    pool_empty(&p);
}

/* Rows of many columns, in the order that was measured. Only gumbel's coefficients are not all
 * kept. */
static void many_columns(void **state)
{
    (void)state;
    struct sample_copula s;
    struct evaluation e;
    pool p = { 0 };
    ready(&e, one_parameter(&s, "gumbel", 2000, 2), &p);
    assert_true(conditional_seconds(&e) < 1e-2);
    assert_true(from_conditional_seconds(&e) > 1e-2);
    ready(&e, one_parameter(&s, "gumbel", 3000, 2), &p);
    assert_true(conditional_seconds(&e) > 0.2);
    assert_true(conditional_seconds(&e) < 2);
    assert_true(from_conditional_seconds(&e) > 3);
    ready(&e, one_parameter(&s, "gumbel", 16384, 2), &p);
    assert_true(density_seconds(&e) < 0.3);
    assert_true(kendall_seconds(&e, 1) < 0.3);
    assert_true(conditional_seconds(&e) > 100);
    ready(&e, one_parameter(&s, "joe", 16384, 2), &p);
    assert_true(from_conditional_seconds(&e) < 0.3);
    pool_empty(&p);
}

/* Of 10,000 rows each, in the order that was measured: seconds, or minutes. */
static void short_and_long(void **state)
{
    (void)state;
    struct sample_copula s;
    struct evaluation e;
    pool p = { 0 };
    ready(&e, one_parameter(&s, "gumbel", 200, 2), &p);
    assert_true(1e4 * cdf_seconds(&e) < 1);
    assert_true(1e4 * density_seconds(&e) < 3);
    assert_true(1e4 * conditional_seconds(&e) < 2);
    assert_true(1e4 * from_conditional_seconds(&e) > 3);
    assert_true(1e4 * from_conditional_seconds(&e) < 30);
    ready(&e, one_parameter(&s, "clayton", 200, 2), &p);
    assert_true(1e4 * conditional_seconds(&e) < 2);
    copula *c = one_parameter(&s, "joe", 16, 2);
    c->rotation = 180;
    ready(&e, c, &p);
    assert_true(1e4 * cdf_seconds(&e) > 0.6 && 1e4 * cdf_seconds(&e) < 6);
    c = one_parameter(&s, "gumbel", 2, 2);
    c->rotation = 180;
    ready(&e, c, &p);
    assert_true(1e4 * cdf_seconds(&e) < 0.5);
    c->rotation = 270;
    ready(&e, c, &p);
    assert_true(1e4 * cdf_seconds(&e) < 0.05);
    c = elliptical(&s, "t", 2, 0.5, 4);
    ready(&e, c, &p);
    assert_true(1e4 * cdf_seconds(&e) < 3);
    assert_true(kendall_seconds(&e, 10000) > 60);
    s.df[1] = 7;
    ready(&e, c, &p);
    assert_true(1e4 * cdf_seconds(&e) < 20);
    s.df[1] = 0.05;
    ready(&e, c, &p);
    assert_true(1e4 * cdf_seconds(&e) > 20);
    ready(&e, elliptical(&s, "t", 7, 0.5, 0.01), &p);
    assert_true(1e4 * density_seconds(&e) > 5);
    c = elliptical(&s, "t", 20, 0.5, 4);
    s.df[1] = 30;
    ready(&e, c, &p);
    assert_true(1e4 * conditional_seconds(&e) < 10);
    assert_true(1e4 * from_conditional_seconds(&e) < 20);
    assert_true(1e4 * from_conditional_seconds(&e) > 2);
    pool_empty(&p);
}

/* Rays are shared by all values of a Kendall distribution, and fewer where one takes longer. */
static void rays(void **state)
{
    (void)state;
    struct sample_copula s;
    struct evaluation e;
    pool p = { 0 };
    ready(&e, elliptical(&s, "t", 2, 0.5, 4), &p);
    assert_int_equal(kendall_rays(&e), 0);
    ready(&e, elliptical(&s, "gaussian", 3, 0.5, 0), &p);
    assert_int_equal(kendall_rays(&e), 4096);
    assert_true(kendall_seconds(&e, 1) > 0.3 && kendall_seconds(&e, 1000) < 3);
    ready(&e, elliptical(&s, "t", 40, 0.5, 3), &p);
    assert_true(kendall_rays(&e) >= 64 && kendall_rays(&e) < 1024);
    assert_true(kendall_seconds(&e, 1) > 1 && kendall_seconds(&e, 100) < 4);
    ready(&e, elliptical(&s, "t", 3, -0.5, 3), &p);
    assert_int_equal(kendall_rays(&e), 65536);
    copula *c = one_parameter(&s, "gumbel", 3, 2);
    ready(&e, c, &p);
    assert_int_equal(kendall_rays(&e), 0);
    c->rotation = 180;
    ready(&e, c, &p);
    assert_true(kendall_rays(&e) >= 256 && kendall_rays(&e) <= 4096);
    ready(&e, elliptical(&s, "t", 2, 0.5, 0.2), &p);
    assert_int_equal(kendall_rays(&e), 4096);
    ready(&e, elliptical(&s, "t", 2, -1, 0.2), &p);
    assert_int_equal(kendall_rays(&e), 0);
    pool_empty(&p);
}

/* Points that the model would hardly make take many times what others do, and are counted. */
static void spent(void **state)
{
    (void)state;
    struct sample_copula s;
    struct evaluation e;
    pool p = { 0 };
    double u[50], w[50];
    copula *c = elliptical(&s, "t", 50, 0.5, 0.01);
    for (size_t j = 0; j < 50; j++) s.df[j] = j % 2 ? 0.01 : 0.001;
    ready(&e, c, &p);
    assert_same(seconds_spent(&e), 0);
    for (size_t j = 0; j < 50; j++) u[j] = 0.3;
    assert_int_equal(conditional_at(&e, u, w), OK);
    double central = seconds_spent(&e);
    assert_true(central > 0 && central < 3 * conditional_seconds(&e));
    for (size_t j = 0; j < 50; j++) u[j] = j % 3 ? 1e-300 : 1 - 0x1p-53;
    assert_int_equal(conditional_at(&e, u, w), OK);
    assert_true(seconds_spent(&e) - central > 10 * conditional_seconds(&e));
    ready(&e, one_parameter(&s, "gumbel", 3, 2), &p);
    assert_same(seconds_spent(&e), 0);
    pool_empty(&p);
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(fewer_points), cmocka_unit_test(other_ways),
        cmocka_unit_test(many_columns), cmocka_unit_test(short_and_long), cmocka_unit_test(rays),
        cmocka_unit_test(spent),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
