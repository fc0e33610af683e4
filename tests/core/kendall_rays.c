/* The Kendall distribution by rays: closed forms, curves of pairs, tau, simulations by NumPy. */
#include "asked.h"

#include "../../src/kendall_rays.h"
#include "../../src/pair_measures.h"
#include "../../src/quadrature.h"

#include <gsl/gsl_errno.h>

enum { MOST = 160 };

static void by_rays(const copula *c, size_t rays, const double *w, size_t n, double *k,
                    double *error)
{
    pool p = { 0 };
    struct evaluation e;
    struct rays r;
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    assert_null(evaluation_limit(&e, ASK_KENDALL));
    assert_int_equal((c->matrix ? elliptical_rays : survival_rays)(&e, &r, &p), OK);
    assert_int_equal(kendall_by_rays(&r, rays, w, n, k, error, &p), OK);
    pool_empty(&p);
}

static const double levels[] = { 0.001, 0.01, 0.03, 0.1, 0.2, 0.35, 0.5, 0.65, 0.8, 0.9, 0.97 };
enum { LEVELS = sizeof levels / sizeof *levels };

/* Columns without dependence: w times the first d terms of exp(-log w) (Barbe et al. 1996). The
 * error is one of eight values, with 7 degrees of freedom, and the largest: within 5 of those. */
static void independent_columns(void **state)
{
    (void)state;
    const struct { size_t d; double most; } cases[] = { { 3, 1e-3 }, { 6, 4e-3 }, { 20, 5e-3 } };
    for (int i = 0; i < 3; i++) {
        struct sample_copula s;
        double k[LEVELS], error;
        by_rays(elliptical(&s, "gaussian", cases[i].d, 0, 0), 64, levels, LEVELS, k, &error);
        assert_true(error < cases[i].most);
        for (int j = 0; j < LEVELS; j++) {
            double term = levels[j], known = term;
            for (size_t q = 1; q < cases[i].d; q++)
                known += term *= -log(levels[j]) / (double)q;
            assert_within(k[j], known, 5 * error);
        }
    }
}

/* What kendall_at() has from a curve, to 1e-9, and beside the errors what places on a ray leave. */
static void pair_like_its_curve(const copula *c)
{
    pool p = { 0 };
    struct evaluation e;
    double known[LEVELS], k[LEVELS], error, none;
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    assert_int_equal(kendall_at(&e, levels, LEVELS, known, &none, &p), OK);
    assert_same(none, 0);
    pool_empty(&p);
    by_rays(c, 256, levels, LEVELS, k, &error);
    assert_true(error < 5e-4);
    for (int j = 0; j < LEVELS; j++) assert_within(k[j], known[j], 4 * error + 5e-5);
}

static void pairs(void **state)
{
    (void)state;
    struct sample_copula s;
    pair_like_its_curve(elliptical(&s, "gaussian", 2, 0.6, 0));
    pair_like_its_curve(elliptical(&s, "gaussian", 2, -0.7, 0));
    pair_like_its_curve(elliptical(&s, "t", 2, 0.3, 5));
    pair_like_its_curve(elliptical(&s, "t", 2, 0.8, 1));
    const struct { const char *word; double theta; } any[] = {
        { "clayton", 3 }, { "frank", 20 }, { "gumbel", 1.5 }, { "joe", 4 },
    };
    for (size_t i = 0; i < sizeof any / sizeof *any; i++) {
        copula *c = one_parameter(&s, any[i].word, 2, any[i].theta);
        c->rotation = 180;
        pair_like_its_curve(c);
    }
}

/* With so many degrees of freedom a t copula is the normal one. */
static void many_degrees_of_freedom(void **state)
{
    (void)state;
    struct sample_copula s;
    double k[LEVELS], known[LEVELS], error, other;
    by_rays(elliptical(&s, "gaussian", 3, 0.4, 0), 128, levels, LEVELS, known, &other);
    copula *c = elliptical(&s, "t", 3, 0.4, 1e9);
    s.df[1] = 1e8;
    by_rays(c, 128, levels, LEVELS, k, &error);
    for (int j = 0; j < LEVELS; j++) assert_within(k[j], known[j], 4 * hypot(error, other));
}

/* With next to none the columns are as far out as each other, and only their signs differ: both
 * positive with probability p (Sheppard 1899), and at a magnitude that a share f does not exceed C
 * is p (1 - f), unless both are positive: p + (1 - p) f. */
static void few_degrees_of_freedom(void **state)
{
    (void)state;
    struct sample_copula s;
    const double correlations[] = { -0.3, 0.5 };
    for (int i = 0; i < 2; i++) {
        double k[LEVELS], error, p = 0.25 + asin(correlations[i]) / (2 * 3.14159265358979);
        by_rays(elliptical(&s, "t", 2, correlations[i], 1e-6), 256, levels, LEVELS, k, &error);
        for (int j = 0; j < LEVELS; j++) {
            double w = levels[j], both = fmax(0, (w - p) / (1 - p));
            assert_within(k[j], (1 - p) * fmin(1, w / p) + p * both, 5 * error + 1e-5);
        }
    }
}

/* tau = 3 - 4 int K (Genest & Rivest 1993) of a pair with several degrees of freedom, whose tau is
 * an integral (grouped_t.c). */
static void mean_is_tau(void **state)
{
    (void)state;
    struct sample_copula s;
    pool p = { 0 };
    double w[MOST], weight[MOST], k[MOST], tau, error, sum = 0;
    static const double ends[] = { 0, 0.001, 0.01, 0.05, 0.2, 0.5, 0.9, 0.99, 1 };
    copula *c = elliptical(&s, "t", 2, 0.5, 2);
    s.df[1] = 12;
    for (int i = 0; i < 8; i++)
        quadrature_points(ends[i], ends[i + 1], w + 20 * i, weight + 20 * i);
    by_rays(c, 256, w, MOST, k, &error);
    for (int i = 0; i < MOST; i++) sum += weight[i] * k[i];
    assert_int_equal(tau_of_pair(c, 0, 1, &tau, &p), OK);
    assert_within(3 - 4 * sum, tau, 12 * error);
    pool_empty(&p);
}

/* ---- kendall_distribution.csv ---- */

/* Numbers in a text, separated by blanks. */
static size_t numbers_of(const char *text, double *to)
{
    size_t n = 0;
    char *end;
    for (double x = strtod(text, &end); end != text; x = strtod(text, &end)) {
        to[n++] = x;
        text = end;
    }
    return n;
}

static copula *simulated_copula(const struct csv *t, size_t row, struct sample_copula *s)
{
    double a[50];
    size_t d = (size_t)csv_number(t, row, "dimension"), n;
    const char *word = csv_text(t, row, "family");
    n = numbers_of(csv_text(t, row, "parameters"), a);
    if (csv_number(t, row, "rotation") > 0) {
        copula *c = one_parameter(s, word, d, a[0]);
        c->rotation = 180;
        return c;
    }
    assert_int_equal(n, d);
    copula *c = elliptical(s, word, d, 0, 0);
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j < i; j++) set_correlation(s, i, j, a[i] * a[j]);
    if (numbers_of(csv_text(t, row, "df"), s->df) > 0) c->df = s->df;
    return c;
}

enum { ROWS_OF_A_CASE = 7 };

static void simulations(void **state)
{
    (void)state;
    struct csv *t = csv_read("kendall_distribution.csv");
    assert_int_equal(t->rows % ROWS_OF_A_CASE, 0);
    for (size_t row = 0; row < t->rows; row += ROWS_OF_A_CASE) {
        struct sample_copula s;
        double w[ROWS_OF_A_CASE], k[ROWS_OF_A_CASE], error;
        copula *c = simulated_copula(t, row, &s);
        for (size_t i = 0; i < ROWS_OF_A_CASE; i++) w[i] = csv_number(t, row + i, "w");
        by_rays(c, c->dimension > 5 ? 64 : 128, w, ROWS_OF_A_CASE, k, &error);
        assert_true(error < 3e-3);
        for (size_t i = 0; i < ROWS_OF_A_CASE; i++)
            assert_within(k[i], csv_number(t, row + i, "k"),
                          5 * hypot(error, csv_number(t, row + i, "error")));
    }
    csv_free(t);
}

/* ---- what always holds ---- */

static void ask_all(const copula *c, const double *w, size_t n, double *k, double *error)
{
    pool p = { 0 };
    struct evaluation e;
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    assert_null(evaluation_limit(&e, ASK_KENDALL));
    assert_int_equal(kendall_at(&e, w, n, k, error, &p), OK);
    pool_empty(&p);
}

/* K rises from 0 to 1 and not below w, and a value is the same alone. */
static void laws(void **state)
{
    (void)state;
    struct sample_copula s;
    copula *c = one_parameter(&s, "gumbel", 4, 3);
    double w[MOST + 1], k[MOST + 1], alone, error, of_one;
    c->rotation = 180;
    for (int i = 0; i <= MOST; i++) w[i] = pow(i / (double)MOST, 3);
    ask_all(c, w, MOST + 1, k, &error);
    assert_true(error > 0 && error < 1e-3);
    assert_same(k[0], 0);
    assert_same(k[MOST], 1);
    for (int i = 1; i <= MOST; i++) assert_true(k[i] >= k[i - 1] && k[i] >= w[i]);
    ask_all(c, w + 70, 1, &alone, &of_one);
    assert_same(alone, k[70]);
    assert_true(of_one <= error);
}

/* Columns that never rise together have C = 0, equal ones C = U. */
static void perfect_dependence(void **state)
{
    (void)state;
    struct sample_copula s;
    const double w[3] = { 0, 0.01, 0.4 };
    double k[3], error;
    ask_all(elliptical(&s, "gaussian", 3, -0.5, 0), w, 3, k, &error);
    for (int i = 0; i < 3; i++) assert_same(k[i], 1);
    copula *c = elliptical(&s, "t", 3, 0.5, 4);
    set_correlation(&s, 0, 1, -1);
    set_correlation(&s, 0, 2, 0);
    set_correlation(&s, 1, 2, 0);
    ask_all(c, w, 3, k, &error);
    for (int i = 0; i < 3; i++) assert_same(k[i], 1);
    ask_all(elliptical(&s, "gaussian", 4, 1, 0), w, 3, k, &error);
    for (int i = 0; i < 3; i++) assert_within(k[i], w[i], 1e-6);
}

/* Beyond the dimensions of Sobol' points; in independent columns C is next to nothing. */
static void wide(void **state)
{
    (void)state;
    static struct sample_copula s;
    static double matrix[140 * 140];
    const double w = 1e-9;
    double k, error;
    copula *c = elliptical(&s, "gaussian", 2, 0, 0);
    for (size_t i = 0; i < 140; i++)
        for (size_t j = 0; j < 140; j++) matrix[i * 140 + j] = i == j ? 1 : 0.9;
    c->matrix = matrix;
    c->dimension = 140;
    by_rays(c, 1, &w, 1, &k, &error);
    assert_true(k >= w && k < 0.05);
    for (size_t i = 0; i < 140; i++)
        for (size_t j = 0; j < i; j++) matrix[i * 140 + j] = matrix[j * 140 + i] = 0;
    by_rays(c, 1, &w, 1, &k, &error);
    assert_within(k, 1, 1e-6);
}

static void memory(void **state)
{
    (void)state;
    struct sample_copula s;
    const double w = 0.3;
    for (size_t fail = 1;; fail++) {
        pool p = { .fail_at = fail };
        struct evaluation e;
        double k, error;
        copula *c = elliptical(&s, "t", 3, 0.5, 3);
        s.df[2] = 8;
        status got = evaluation_of(c, &e, &p);
        if (got == OK) got = kendall_at(&e, &w, 1, &k, &error, &p);
        bool failed = p.taken >= fail;
        pool_empty(&p);
        assert_int_equal(got, failed ? NO_MEMORY : OK);
        if (!failed) break;
    }
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(independent_columns), cmocka_unit_test(pairs),
        cmocka_unit_test(many_degrees_of_freedom),
        cmocka_unit_test(few_degrees_of_freedom), cmocka_unit_test(mean_is_tau),
        cmocka_unit_test(simulations), cmocka_unit_test(laws),
        cmocka_unit_test(perfect_dependence), cmocka_unit_test(wide), cmocka_unit_test(memory),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
