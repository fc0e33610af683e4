/* The normal and the t copula at points: published log-densities, pairs in the tails, boxes,
 * correlations of 1 and -1. Several degrees of freedom: grouped_points.c. */
#include "asked.h"

#include "../../src/evaluation_work.h"

#include <gsl/gsl_errno.h>

static size_t split(const char *text, double *u)
{
    size_t n = 0;
    for (char *end; *text; text = end + (*end == ' ')) u[n++] = strtod(text, &end);
    return n;
}

/* copula_logdensity_multivariate.csv: by definition, mpmath */
static void published_log_densities(void **state)
{
    (void)state;
    struct csv *t = csv_read("copula_logdensity_multivariate.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        double u[4];
        size_t d = split(csv_text(t, i, "u"), u);
        bool normal = csv_is(t, i, "family", "normal");
        copula *c = normal ? elliptical(&s, "gaussian", d, 0.4, 0)
                           : elliptical(&s, "t", d, 0.4, csv_number(t, i, "nu"));
        if (d == 3) {
            set_correlation(&s, 0, 1, 0.5);
            set_correlation(&s, 0, 2, 0.3);
            set_correlation(&s, 1, 2, -0.2);
        }
        assert_within(ask(c, LOG_DENSITY, u), csv_number(t, i, "log_density"), 1e-9);
    }
    assert_int_equal(t->rows, 20);
    csv_free(t);
}

/* student_pair.csv, written by copula_points.py with mpmath: the arcsine-angle integral, for df
 * 0.5, 5.5 and 1e6 down to 1e-140 */
static void pairs_in_the_tails(void **state)
{
    (void)state;
    struct csv *t = csv_read("student_pair.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        copula *c = elliptical(&s, "t", 2, csv_number(t, i, "correlation"), csv_number(t, i, "df"));
        const double u[2] = { csv_number(t, i, "u"), csv_number(t, i, "v") };
        assert_close(ask(c, CDF, u), csv_number(t, i, "C"), 1e-10);
    }
    assert_int_equal(t->rows, 54);
    csv_free(t);
}

/* Sheppard (1899): C(1/2, 1/2) = 1/4 + asin(correlation)/(2 pi), for correlations to the ends */
static void sheppard(void **state)
{
    (void)state;
    uint64_t r = 3;
    for (size_t i = 0; i < effort(200); i++) {
        struct sample_copula s;
        double sign = random_below(&r, 2) ? 1 : -1;
        double correlation = sign * (1 - pow(10, -12 * random_uniform(&r)));
        double want = acos(-correlation) / (2 * acos(-1));
        const double u[2] = { 0.5, 0.5 };
        copula *c = elliptical(&s, "gaussian", 2, correlation, 0);
        assert_close(ask(c, CDF, u), want, 1e-10);
        elliptical(&s, "t", 2, correlation, pow(10, 6 * random_uniform(&r) - 0.3));
        assert_close(ask(c, CDF, u), want, 1e-10);
    }
}

static void perfect_dependence(void **state)
{
    (void)state;
    const double u[2] = { 0.3, 0.8 };
    struct sample_copula s;
    copula *c = elliptical(&s, "t", 2, 1, 4);
    assert_same(ask(c, CDF, u), 0.3);
    elliptical(&s, "gaussian", 2, -1, 0);
    assert_close(ask(c, CDF, u), 0.1, 1e-15);
    pool p = { 0 };
    struct evaluation e;
    double x[2];
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    assert_non_null(evaluation_limit(&e, ASK_DENSITY));
    assert_int_equal(log_density_at(&e, u, x), OUT_OF_DOMAIN);
    assert_int_equal(conditional_at(&e, u, x), OUT_OF_DOMAIN);
    assert_null(evaluation_limit(&e, ASK_CDF));
    /* with several df these are not perfectly dependent, so that min(u, v) is not the answer */
    assert_int_equal(evaluation_of(elliptical(&s, "t", 2, 1, 4), &e, &p), OK);
    s.df[0] = 9;
    assert_int_equal(evaluation_of(&s.c, &e, &p), OK);
    assert_null(evaluation_limit(&e, ASK_CDF));
    assert_int_equal(cdf_at(&e, u, x, x + 1), OK);
    assert_true(x[0] < 0.3 && x[0] > 0.29);
    pool_empty(&p);
}

/* As few degrees of freedom as 1e-6 are refused, not answered, but for the Kendall distribution. */
static void too_few_degrees(void **state)
{
    (void)state;
    struct sample_copula s;
    pool p = { 0 };
    struct evaluation e;
    for (enum question q = ASK_CDF; q <= ASK_KENDALL; q++) {
        assert_int_equal(evaluation_of(elliptical(&s, "t", 2, 0.5, 1e-6), &e, &p), OK);
        assert_int_equal(evaluation_limit(&e, q) != NULL, q != ASK_KENDALL);
        assert_int_equal(evaluation_of(elliptical(&s, "t", 2, 0.5, 0.001), &e, &p), OK);
        assert_null(evaluation_limit(&e, q));
    }
    pool_empty(&p);
}

static double box(const copula *c, const double *u, double *error)
{
    pool p = { 0 };
    struct evaluation e;
    double value;
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    assert_int_equal(cdf_at(&e, u, &value, error), OK);
    pool_empty(&p);
    return value;
}

/* orthant_probability.csv: Sheppard (1899), David (1953), Gupta (1963): 1/(d+1) at correlation 1/2,
 * for the normal and every t alike, grouped ones too; within five standard errors, which are small
 * */
static void orthants(void **state)
{
    (void)state;
    static const double half[] = { 0.5, 0.5, 0.5, 0.5, 0.5, 0.5, 0.5, 0.5, 0.5 };
    for (size_t d = 3; d <= 9; d++) {
        struct sample_copula s;
        double error, value, want = 1 / ((double)d + 1);
        copula *c = elliptical(&s, "gaussian", d, 0.5, 0);
        value = box(c, half, &error);
        assert_within(value, want, 5 * error);
        assert_true(error > 0 && error < 1e-4);
        elliptical(&s, "t", d, 0.5, 4);
        value = box(c, half, &error);
        assert_within(value, want, 5 * error);
        s.df[1] = 30;
        value = box(c, half, &error);
        assert_within(value, want, 5 * error);
        assert_true(error < 1e-4);
    }
}

/* With one column at 1 the box is that of the others, which the pair's integral knows. */
static void boxes_of_pairs(void **state)
{
    (void)state;
    uint64_t r = 8;
    for (size_t i = 0; i < effort(20); i++) {
        struct sample_copula three, two;
        double df = pow(10, 3 * random_uniform(&r) - 2.3), error;
        bool normal = random_below(&r, 2);
        const char *word = normal ? "gaussian" : "t";
        copula *c = elliptical(&three, word, 3, 0.6, df);
        copula *pair = elliptical(&two, word, 2, 0.6, df);
        const double u[3] = { random_uniform(&r), 1, random_uniform(&r) }, v[2] = { u[0], u[2] };
        double value = box(c, u, &error);
        assert_within(value, ask(pair, CDF, v), 5 * error + 1e-12);
    }
}

static void every_take_can_fail(void **state)
{
    (void)state;
    static const double u[3] = { 0.2, 0.5, 0.7 };
    for (int kind = 0; kind < 3; kind++)
        for (size_t fail_at = 1;; fail_at++) {
            struct sample_copula s;
            copula *c = elliptical(&s, kind ? "t" : "gaussian", 3, 0.5, 4);
            if (kind == 2) s.df[2] = 9;
            pool p = { .fail_at = fail_at };
            struct evaluation e;
            double value, error;
            status done = evaluation_of(c, &e, &p);
            if (done == OK) done = cdf_at(&e, u, &value, &error);
            bool failed = p.taken >= fail_at;
            pool_empty(&p);
            assert_int_equal(done, failed ? NO_MEMORY : OK);
            if (!failed) break;
        }
}

/* Row i of a table with columns d, df, correlation, u and C: all columns alike, up to 500. */
static double equal_box(const struct csv *t, size_t i, bool fewer, double *error)
{
    static double matrix[500 * 500], df[500], u[500];
    size_t d = (size_t)csv_number(t, i, "d");
    bool normal = csv_is(t, i, "df", "");
    for (size_t k = 0; k < d * d; k++)
        matrix[k] = k % (d + 1) ? csv_number(t, i, "correlation") : 1;
    for (size_t j = 0; j < d; j++) {
        u[j] = csv_number(t, i, "u");
        df[j] = normal ? 0 : csv_number(t, i, "df");
    }
    copula c = { .family = family_named(normal ? "gaussian" : "t"), .dimension = d,
                 .matrix = matrix, .df = df };
    pool p = { 0 };
    struct evaluation e;
    double value;
    assert_int_equal(evaluation_of(&c, &e, &p), OK);
    for (size_t n = 1; fewer && box_points(&e) > 4096; n *= 2) with_fewer_box_points(&e, n);
    assert_int_equal(cdf_at(&e, u, &value, error), OK);
    pool_empty(&p);
    return value;
}

/* equicorrelated.csv, SciPy: as integrals over what the columns share. Beyond 130 columns random
 * numbers take part; of eight means twice the standard error is exceeded once in twelve times, but
 * all rows share their points. */
static void boxes_of_many_columns(void **state)
{
    (void)state;
    struct csv *t = csv_read("equicorrelated.csv");
    size_t beyond = 0;
    for (size_t i = 0; i < t->rows; i++) {
        double error, value = equal_box(t, i, true, &error), want = csv_number(t, i, "C");
        assert_within(value, want, 6 * error);
        assert_true(error < sqrt(want * (1 - want) / 4096));       /* that of counting points */
        beyond += fabs(value - want) > 2 * error;
    }
    assert_int_equal(t->rows, 54);
    assert_true(beyond <= 10);
    csv_free(t);
}

/* small_boxes.csv likewise: points are drawn where the mass is, so that the error stays a small
 * part of the probability. */
static void small_boxes(void **state)
{
    (void)state;
    struct csv *t = csv_read("small_boxes.csv");
    for (size_t i = 0; i < t->rows; i++) {
        double error, value = equal_box(t, i, false, &error), want = csv_number(t, i, "C");
        assert_within(value, want, 6 * error);
        assert_true(error < 0.004 * want);
    }
    assert_int_equal(t->rows, 15);
    csv_free(t);
}

/* Uncorrelated columns multiply, with no error. */
static void many_uncorrelated(void **state)
{
    (void)state;
    static double matrix[300 * 300], u[300];
    double want = 1, value, error;
    pool p = { 0 };
    struct evaluation e;
    for (size_t j = 0; j < 300; j++) {
        matrix[301 * j] = 1;
        want *= u[j] = 1 - 1e-5 * (double)(j + 1);
    }
    copula c = { .family = family_named("gaussian"), .dimension = 300, .matrix = matrix };
    assert_int_equal(evaluation_of(&c, &e, &p), OK);
    assert_int_equal(cdf_at(&e, u, &value, &error), OK);
    assert_close(value, want, 1e-12);
    assert_true(error < 1e-14);
    pool_empty(&p);
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_log_densities), cmocka_unit_test(pairs_in_the_tails),
        cmocka_unit_test(sheppard), cmocka_unit_test(perfect_dependence),
        cmocka_unit_test(too_few_degrees), cmocka_unit_test(orthants),
        cmocka_unit_test(boxes_of_pairs), cmocka_unit_test(boxes_of_many_columns),
        cmocka_unit_test(small_boxes),
        cmocka_unit_test(many_uncorrelated), cmocka_unit_test(every_take_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
