/* Archimedean copulas in many dimensions against their generators at many digits. */
#include "asked.h"

#include "../../src/archimedean.h"

#include <float.h>
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

/* What rounding may leave: log t is given to the last bit but one, so that t^order and what is
 * exponential in t^(1/theta) for gumbel, in t for the others, are off by that; near independence
 * frank has sums of (theta exp(-t))^k over theta. */
static double rounding(const char *word, double theta, double order, double log_t)
{
    double log_x = strcmp(word, "gumbel") ? log_t : log_t / theta;
    double of_power = order * (4 + fabs(log_t) + log(order)), near = 0;
    if (!strcmp(word, "frank")) near = fmax(0, -log(theta));
    return DBL_EPSILON * (of_power + exp(log_x) * (1 + fabs(log_x)) + near);
}

/* generator_derivatives.csv, by Cauchy's integral with mpmath: orders to 2049, from t = 1e-300 to
 * that of every column at 1e-300, parameters near independence and near perfect dependence */
static void published_derivatives(void **state)
{
    (void)state;
    struct csv *t = csv_read("generator_derivatives.csv");
    for (size_t i = 0; i < t->rows; i++) {
        char what[100];
        pool p = { 0 };
        void *prepared = NULL;
        const char *word = csv_text(t, i, "family");
        const struct generator *g = family_named(word)->generator;
        double theta = csv_number(t, i, "theta"), log_t = csv_number(t, i, "log_t");
        double want = csv_number(t, i, "log_derivative"), n = csv_number(t, i, "order");
        assert_int_equal(g->prepare(theta, (size_t)n, &p, &prepared), OK);
        snprintf(what, sizeof what, "%s %g, order %g, log t %g", word, theta, n, log_t);
        close_or_fail(g->log_derivative(prepared, (size_t)n, log_t, theta), want,
                      rounding(word, theta, n, log_t) + DBL_EPSILON * fabs(want), what,
                      __FILE__, __LINE__);
        pool_empty(&p);
    }
    assert_int_equal(t->rows, 963);
    csv_free(t);
}

/* What is kept from one question to the next changes no answer, whatever was asked before. */
static void any_sequence(void **state)
{
    (void)state;
    static const size_t orders[] = { 4000, 2049, 2060, 2, 2060, 2048, 2061, 3000 };
    const struct generator *g = family_named("gumbel")->generator;
    pool p = { 0 };
    void *kept = NULL;
    assert_int_equal(g->prepare(2, 4000, &p, &kept), OK);
    for (size_t i = 0; i < 48; i++) {
        pool once = { 0 };
        void *fresh = NULL;
        double log_t = log(i % 5 < 3 ? 4e8 : 25);
        size_t order = orders[i * 5 / 3 % 8];
        assert_int_equal(g->prepare(2, 4000, &once, &fresh), OK);
        assert_same(g->log_derivative(kept, order, log_t, 2),
                    g->log_derivative(fresh, order, log_t, 2));
        pool_empty(&once);
    }
    pool_empty(&p);
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

enum { MANY = 300 };

static void there_and_back(const copula *c, bool independent, const double *w)
{
    struct evaluation e;
    pool p = { 0 };
    double u[MANY], back[MANY], log_density;
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    assert_int_equal(from_conditional_at(&e, w, u), OK);
    assert_int_equal(conditional_at(&e, u, back), OK);
    assert_int_equal(log_density_at(&e, u, &log_density), OK);
    if (independent) assert_within(log_density, 0, 1e-4);
    for (size_t j = 0; j < MANY; j++) {
        close_or_fail(back[j], w[j], 1e-10, c->family->word, __FILE__, __LINE__);
        if (independent) assert_within(u[j], w[j], 1e-6);
    }
    pool_empty(&p);
}

/* Both transforms are inverse in 300 columns, and next to independence change nothing. */
static void transforms_of_many(void **state)
{
    (void)state;
    static const struct { const char *word; double theta; bool independent; } any[] = {
        { "gumbel", 1 + 1e-9, true }, { "gumbel", 1.3, false }, { "gumbel", 4, false },
        { "frank", 1e-9, true }, { "frank", 3, false }, { "frank", 30, false },
        { "joe", 1 + 1e-9, true }, { "joe", 1.5, false }, { "joe", 5, false },
        { "clayton", 1e-9, true }, { "clayton", 2, false },
    };
    uint64_t r = 24;
    for (size_t k = 0; k < sizeof any / sizeof *any; k++)
        for (size_t i = 0; i < effort(3); i++) {
            struct sample_copula s;
            double w[MANY];
            for (size_t j = 0; j < MANY; j++) w[j] = random_uniform(&r);
            there_and_back(one_parameter(&s, any[k].word, MANY, any[k].theta),
                           any[k].independent, w);
        }
}

/* Where theta has left nothing but the upper bound min(u, v) (Nelsen 2006, chapter 4) the columns
 * are the same, whatever w. */
static void upper_bound(void **state)
{
    (void)state;
    static const char *const words[] = { "clayton", "gumbel", "frank", "joe" };
    for (int k = 0; k < 24; k++) {
        struct sample_copula s;
        const double theta = pow(10, 15 + k / 4 % 3);
        const double w[3] = { k < 12 ? 0.3 : 0.999, k % 2 ? 0.9 : 1e-3, 0.5 };
        for (size_t d = 2; d <= 3; d++)
            assert_within(ask(one_parameter(&s, words[k % 4], d, theta), FROM_CONDITIONAL, w), w[0],
                          3e-14);
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

static void every_take_can_fail(void **state)
{
    (void)state;
    static const char *const words[] = { "clayton", "gumbel", "frank", "joe" };
    for (int k = 0; k < 8; k++)
        for (size_t fail_at = 1;; fail_at++) {
            struct sample_copula s;
            struct evaluation e;
            pool p = { .fail_at = fail_at };
            copula *c = one_parameter(&s, words[k / 2], k % 2 ? 2100 : 3, 2);
            status got = evaluation_of(c, &e, &p);
            bool failed = p.taken >= fail_at;
            pool_empty(&p);
            assert_int_equal(got, failed ? NO_MEMORY : OK);
            if (!failed) break;
        }
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_points), cmocka_unit_test(published_derivatives),
        cmocka_unit_test(any_sequence),
        cmocka_unit_test(many_columns), cmocka_unit_test(near_zero), cmocka_unit_test(independence),
        cmocka_unit_test(transforms_of_many), cmocka_unit_test(upper_bound),
        cmocka_unit_test(survival), cmocka_unit_test(every_take_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
