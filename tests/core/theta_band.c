/* The band of a parameter against that of tau, mapped by the inverse of the family. */
#include "table.h"

#include "../../src/theta_band.h"

/* Slopes known in closed form: gumbel 1/(1-tau)^2, clayton 2/(1-tau)^2, gaussian pi/2 cos(pi
 * tau/2), fgm 9/2; frank, joe, amh and plackett by the inverse of d tau / d theta. */
static double slope_by_inverse(const family *f, double tau)
{
    double theta, up, down;
    assert_int_equal(f->theta_from_tau(tau, &theta), OK);
    double step = 1e-4 * theta;
    assert_int_equal(f->tau_from_theta(theta + step, &up), OK);
    assert_int_equal(f->tau_from_theta(theta - step, &down), OK);
    return 2 * step / (up - down);
}

static void slopes(void **state)
{
    (void)state;
    const double pi = acos(-1);
    for (double tau = 0.0007; tau < 0.995; tau += 0.031) {
        double slope, square = (1 - tau) * (1 - tau);
        assert_int_equal(theta_slope(family_named("gumbel"), tau, &slope), OK);
        assert_close(slope, 1 / square, 2e-9);
        assert_int_equal(theta_slope(family_named("clayton"), tau, &slope), OK);
        assert_close(slope, 2 / square, 2e-9);
        assert_int_equal(theta_slope(family_named("gaussian"), tau, &slope), OK);
        assert_close(slope, pi / 2 * cos(pi / 2 * tau), 1e-6);
        assert_int_equal(theta_slope(family_named("t"), -tau, &slope), OK);
        assert_close(slope, pi / 2 * cos(pi / 2 * tau), 1e-6);
        static const char *const words[] = { "frank", "plackett" };
        for (int k = 0; k < 2; k++) {
            const family *f = family_named(words[k]);
            assert_int_equal(theta_slope(f, tau, &slope), OK);
            assert_close(slope, slope_by_inverse(f, tau), 1e-7);
        }
        if (tau > 0.33) continue;
        assert_int_equal(theta_slope(family_named("amh"), tau, &slope), OK);
        assert_close(slope, slope_by_inverse(family_named("amh"), tau), 1e-6);
        if (tau > 0.22) continue;
        assert_int_equal(theta_slope(family_named("fgm"), tau, &slope), OK);
        assert_close(slope, 4.5, 1e-9);
    }
    double slope;
    assert_int_equal(theta_slope(family_named("gumbel"), 0, &slope), OK);      /* an end */
    assert_close(slope, 1, 1e-7);
    assert_int_equal(theta_slope(family_named("gaussian"), 1, &slope), OK);
    assert_within(slope, 0, 1e-7);
    assert_int_equal(theta_slope(family_named("gumbel"), 0.99999999, &slope), OK);
    assert_close(slope, 1e16, 1e-6);
}

/* Hollander & Wolfe's (1973) nine pairs: tau 4/9, gumbel 9/5 */
static const double X[] = { 44.4, 45.9, 41.9, 53.3, 44.7, 44.1, 50.7, 45.2, 60.1 };
static const double Y[] = { 2.6, 3.1, 2.5, 5.0, 3.6, 4.0, 5.2, 2.8, 3.8 };

static void limits_are_mapped(void **state)
{
    (void)state;
    pool p = { 0 };
    struct theta_band b;
    struct tau_band tau;
    assert_int_equal(tau_band(X, Y, 9, 0.5, BAND_FREE, 1, &tau, &p), OK);
    assert_int_equal(theta_band(family_named("gumbel"), X, Y, 9, 0.5, BAND_FREE, 1, &b, &p), OK);
    assert_close(b.theta, 1.8, 1e-14);
    assert_close(b.low, 1 / (1 - tau.low), 1e-14);
    assert_close(b.high, 1 / (1 - tau.high), 1e-14);
    assert_close(b.error, tau.error * 3.24, 1e-9);
    assert_false(b.low_cut || b.high_cut);
    assert_int_equal(b.tau.used, 9);
    pool_empty(&p);
}

/* A wide band: the low end of tau is below 0, that of the high one at 1. */
static void limits_are_cut(void **state)
{
    (void)state;
    pool p = { 0 };
    struct theta_band b;
    assert_int_equal(theta_band(family_named("gumbel"), X, Y, 9, 0.999, BAND_FREE, 1, &b, &p), OK);
    assert_same(b.tau.high, 1);
    assert_true(b.low_cut && b.high_cut);
    assert_same(b.low, 1);
    assert_true(isnan(b.high));
    const family *gaussian = family_named("gaussian");
    assert_int_equal(theta_band(gaussian, X, Y, 9, 0.999, BAND_FREE, 1, &b, &p), OK);
    assert_same(b.high, 1);
    assert_false(b.low_cut || b.high_cut);
    assert_int_equal(theta_band(family_named("fgm"), X, Y, 9, 0.9, BAND_FREE, 1, &b, &p),
                     OUT_OF_DOMAIN);
    assert_close(b.tau.tau, 4.0 / 9, 1e-15);
    pool_empty(&p);
}

static void every_take_can_fail(void **state)
{
    (void)state;
    for (size_t fail_at = 1;; fail_at++) {
        pool p = { .fail_at = fail_at };
        struct theta_band b;
        status s = theta_band(family_named("joe"), X, Y, 9, 0.9, BAND_JACKKNIFE, 1, &b, &p);
        bool failed = p.taken >= fail_at;
        pool_empty(&p);
        assert_int_equal(s, failed ? NO_MEMORY : OK);
        if (!failed) break;
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(slopes), cmocka_unit_test(limits_are_mapped),
        cmocka_unit_test(limits_are_cut), cmocka_unit_test(every_take_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
