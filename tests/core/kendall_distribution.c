/* The Kendall distribution: closed forms, its mean, which is tau, and the curve of a draw. */
#include "asked.h"

#include "../../src/quadrature.h"

#include <gsl/gsl_errno.h>

static double kendall(const copula *c, double w)
{
    pool p = { 0 };
    struct evaluation e;
    double k, error;
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    assert_null(evaluation_limit(&e, ASK_KENDALL));
    assert_int_equal(kendall_at(&e, &w, 1, &k, &error, &p), OK);
    assert_same(error, 0);
    pool_empty(&p);
    return k;
}

/* Genest & Rivest (1993), table 1: w - w log(w)/theta for gumbel, w + w (1 - w^theta)/theta for
 * clayton; three independent columns w (1 - log w + log(w)^2/2) (Barbe et al. 1996) */
static void closed_forms(void **state)
{
    (void)state;
    struct sample_copula s;
    for (double w = 0.05; w < 1; w += 0.1) {
        double l = log(w);
        assert_within(kendall(one_parameter(&s, "gumbel", 2, 2.5), w), w - w * l / 2.5, 1e-14);
        double clayton = w + w * (1 - w * w) / 2, three = w * (1 - l + l * l / 2);
        assert_within(kendall(one_parameter(&s, "clayton", 2, 2), w), clayton, 1e-14);
        assert_within(kendall(one_parameter(&s, "independent", 3, 0), w), three, 1e-14);
        assert_within(kendall(one_parameter(&s, "gumbel", 3, 1), w), three, 1e-14);
        double negative = w - (w - sqrt(w)) / 0.5;          /* w - (w - w^(1-a))/a, a = 1/2 */
        assert_within(kendall(one_parameter(&s, "clayton", 2, -0.5), w), negative, 1e-9);
        assert_within(kendall(elliptical(&s, "gaussian", 2, 0, 0), w), w - w * l, 1e-9);
        assert_within(kendall(one_parameter(&s, "amh", 2, 1), w), w + w * (1 - w), 1e-9);
        assert_within(kendall(one_parameter(&s, "fgm", 2, 0), w), w - w * l, 1e-9);
        assert_within(kendall(one_parameter(&s, "plackett", 2, 1), w), w - w * l, 1e-9);
        assert_same(kendall(elliptical(&s, "t", 2, 1, 3), w), w);
        assert_same(kendall(elliptical(&s, "t", 2, -1, 3), w), 1);
        assert_same(kendall(one_parameter(&s, "clayton", 2, -1), w), 1);
    }
}

/* K(x^4) 4 x^3 */
static double weighted(double x, const void *with)
{
    return kendall(with, x * x * x * x) * 4 * x * x * x;
}

/* tau = 3 - 4 int K (Genest & Rivest 1993), over w^(1/4) */
static void mean_is_tau(const copula *c, double tau, double most)
{
    static const double ends[] = { 0, 0.5, 0.75, 0.9, 0.97, 0.99, 0.999, 1 };
    double sum = 0;
    for (int k = 0; k < 7; k++) sum += integral_of(weighted, c, ends[k], ends[k + 1]);
    assert_within(3 - 4 * sum, tau, most);
}

/* tau of a t does not depend on its degrees of freedom (Lindskog, McNeil & Schmock 2003). */
static void mean_of_heavy_tails(void **state)
{
    (void)state;
    struct sample_copula s;
    const copula *c = elliptical(&s, "t", 2, 0.5, 0.5);
    double sum = integral_of(weighted, c, 0, 0.7) + integral_of(weighted, c, 0.7, 1);
    assert_within(3 - 4 * sum, 1.0 / 3, 1e-8);
}

static void means(void **state)
{
    (void)state;
    const struct { const char *word; double theta; int rotation; } any[] = {
        { "frank", 5, 0 }, { "frank", -5, 0 }, { "joe", 3, 0 }, { "amh", -0.8, 0 },
        { "plackett", 7, 0 }, { "fgm", -1, 0 }, { "gumbel", 2, 180 }, { "clayton", 1, 90 },
        { "joe", 2, 270 },
    };
    for (size_t k = 0; k < sizeof any / sizeof *any; k++) {
        struct sample_copula s;
        copula *c = one_parameter(&s, any[k].word, 2, any[k].theta);
        double tau;
        c->rotation = any[k].rotation;
        assert_int_equal(c->family->tau_from_theta(c->theta, &tau), OK);
        mean_is_tau(c, c->rotation % 180 ? -tau : tau, 2e-9);
    }
    struct sample_copula s;
    mean_is_tau(elliptical(&s, "gaussian", 2, 0.5, 0), 1.0 / 3, 2e-9);
    mean_is_tau(elliptical(&s, "gaussian", 2, 0.99, 0), asin(0.99) / asin(1), 2e-9);
}

/* By definition, the integral over the first normal score, with mpmath, 22 digits. */
static void strong_dependence(void **state)
{
    (void)state;
    struct sample_copula s;
    double known = 0.01140003669861097831;
    assert_within(kendall(elliptical(&s, "gaussian", 2, 0.996, 0), 0.01), known, 1e-9);
}

/* elliptical pairs with t: K of a draw, within 4.5 standard errors of a share */
static void curve_of_a_draw(void **state)
{
    (void)state;
    struct sample_copula s;
    copula *c = elliptical(&s, "t", 2, 0.6, 3);
    size_t n = effort(1000);
    double *u = drawn(c, 5, 0, n), known = kendall(c, 0.3), count = 0;
    for (size_t i = 0; i < n; i++) {
        const double point[2] = { u[i], u[n + i] };
        count += ask(c, CDF, point) <= 0.3;
    }
    assert_within(count / (double)n, known, 4.5 * sqrt(known * (1 - known) / (double)n));
    free(u);
}

static void ends(void **state)
{
    (void)state;
    struct sample_copula s;
    assert_same(kendall(one_parameter(&s, "gumbel", 2, 2), 0), 0);
    assert_same(kendall(one_parameter(&s, "plackett", 2, 2), 1), 1);
}

/* All at once as one by one. */
static void many(void **state)
{
    (void)state;
    struct sample_copula s;
    pool p = { 0 };
    struct evaluation e;
    const double w[3] = { 0.7, 0, 0.2 };
    double k[3], error;
    copula *c = one_parameter(&s, "joe", 2, 2);
    c->rotation = 90;
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    assert_int_equal(kendall_at(&e, w, 3, k, &error, &p), OK);
    for (int i = 0; i < 3; i++) assert_same(k[i], kendall(c, w[i]));
    pool_empty(&p);
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(closed_forms), cmocka_unit_test(means),
        cmocka_unit_test(mean_of_heavy_tails), cmocka_unit_test(strong_dependence),
        cmocka_unit_test(curve_of_a_draw), cmocka_unit_test(ends), cmocka_unit_test(many),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
