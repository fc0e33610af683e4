/* Tau, rho and tail dependence of two columns under rotation and grouped degrees of freedom, and
 * the searches that turn rho and tail dependence into parameters. */
#include "table.h"

#include "../../src/grouped_t.h"
#include "../../src/pair_measures.h"
#include "../../src/spearman_inverse.h"

#include <gsl/gsl_errno.h>

static double tau_of(const copula *c)
{
    pool p = { 0 };
    double tau;
    assert_int_equal(tau_of_pair(c, 0, 1, &tau, &p), OK);
    pool_empty(&p);
    return tau;
}

static double rho_of(const copula *c)
{
    pool p = { 0 };
    double rho;
    assert_int_equal(rho_of_pair(c, 0, 1, &rho, &p), OK);
    pool_empty(&p);
    return rho;
}

static double tail_of(const copula *c, enum corner corner)
{
    double lambda;
    assert_int_equal(tail_of_pair(c, 0, 1, corner, &lambda), OK);
    return lambda;
}

/* Turning one column round changes signs, turning both exchanges the corners. */
static void rotations(void **state)
{
    (void)state;
    for (const family *const *f = families; *f; f++) {
        if (!(*f)->has_theta) continue;
        copula c = { .family = *f, .dimension = 2, .theta = fmin(2.5, (*f)->theta_high) };
        double tau = tau_of(&c), rho = rho_of(&c);
        double lower = tail_of(&c, LOWER), upper = tail_of(&c, UPPER);
        assert_true(tau > 0.2 && rho > tau);
        c.rotation = 180;
        assert_same(tau_of(&c), tau);
        assert_same(rho_of(&c), rho);
        assert_same(tail_of(&c, LOWER), upper);
        assert_same(tail_of(&c, UPPER), lower);
        for (c.rotation = 90; c.rotation <= 270; c.rotation += 180) {
            assert_same(tau_of(&c), -tau);
            assert_same(rho_of(&c), -rho);
            assert_same(tail_of(&c, LOWER), 0);
        }
    }
    copula opposed = { .family = family_named("clayton"), .dimension = 2, .theta = -1,
                       .rotation = 90 };
    assert_same(tail_of(&opposed, UPPER), 1);                  /* U and U */
    assert_same(tau_of(&opposed), 1);
}

static copula t_pair(double correlation, double df1, double df2, double matrix[4], double df[2])
{
    matrix[0] = matrix[3] = 1;
    matrix[1] = matrix[2] = correlation;
    df[0] = df1;
    df[1] = df2;
    return (copula){ .family = family_named("t"), .dimension = 2, .matrix = matrix, .df = df };
}

/* Equal df through the integrals of the grouped t give what the plain t has. */
static void grouped_meets_plain(void **state)
{
    (void)state;
    uint64_t s = 21;
    for (size_t i = 0; i < effort(10); i++) {
        double df = exp(-4 + 8 * random_uniform(&s));
        double correlation = 1.9 * random_uniform(&s) - 0.95;
        double matrix[4], dfs[2], tau, rho;
        copula plain = t_pair(correlation, df, df, matrix, dfs);
        pool p = { 0 };
        assert_int_equal(tau_of_grouped(correlation, df, df, &tau, &p), OK);
        assert_int_equal(rho_of_grouped(correlation, df, df, &rho, &p), OK);
        assert_int_equal(p.bytes, 0);
        assert_within(tau, tau_of(&plain), 1e-10);
        assert_within(rho, rho_of(&plain), 1e-10);
        double nearly = tail_of_grouped(correlation, df, df * (1 + 1e-9));
        assert_within(nearly, tail_of(&plain, UPPER), 1e-8);
        pool_empty(&p);
    }
}

/* By SciPy: the same means over normal scores by Gauss and Legendre's rule, in 40 panels of the
 * logarithm of z - z', with chi-square quantiles from its inverse incomplete gamma functions and,
 * where they underflow, from the leading term of their series. */
static void grouped_of_few_df(void **state)
{
    (void)state;
    static const struct { double correlation, df1, df2, tau, rho; } known[] = {
        { 0.7, 1, 4, 0.4795599420885, 0.6389063043981 },
        { 0.5, 0.5, 4, 0.3131171770608, 0.4260903993157 },
        { 0.95, 0.2, 30, 0.5848768375117, 0.7960166976333 },
        { 0.5, 0.05, 4, 0.2789817087878, 0.3785330314784 },
        { 0.5, 0.01, 3, 0.2779861499159, 0.3723182128218 },
        { 0.5, 0.01, 0.3, 0.3190650697406, 0.3558744765842 },
        { -0.8, 0.001, 0.2, -0.566469327888, -0.6131289854233 },
    };
    for (size_t i = 0; i < sizeof known / sizeof *known; i++) {
        double correlation = known[i].correlation, df1 = known[i].df1, df2 = known[i].df2, tau, rho;
        pool p = { 0 };
        assert_int_equal(tau_of_grouped(correlation, df2, df1, &tau, &p), OK);
        assert_int_equal(rho_of_grouped(correlation, df1, df2, &rho, &p), OK);
        assert_within(tau, known[i].tau, 1e-10);
        assert_within(rho, known[i].rho, 1e-10);
        pool_empty(&p);
    }
}

/* As the df of a column tend to 0 there is a limit: what its rows are to each other is then told by
 * their scores alone. */
static void grouped_of_no_df(void **state)
{
    (void)state;
    pool p = { 0 };
    double near, at;
    assert_int_equal(tau_of_grouped(0.5, 1e-9, 3, &near, &p), OK);
    assert_int_equal(tau_of_grouped(0.5, 1e-300, 3, &at, &p), OK);
    assert_within(near, at, 1e-9);
    assert_int_equal(rho_of_grouped(0.5, 1e-9, 3, &near, &p), OK);
    assert_int_equal(rho_of_grouped(0.5, 1e-300, 3, &at, &p), OK);
    assert_within(near, at, 1e-9);
    assert_int_equal(tau_of_grouped(0.5, 0, 3, &at, &p), OUT_OF_DOMAIN);
    assert_int_equal(rho_of_grouped(0.5, 3, -1, &at, &p), OUT_OF_DOMAIN);
    pool_empty(&p);
}

/* P(X > x, Y > y)/q at q = 1e-12 by SciPy (bivariate normal probabilities, trapezoid rule in the
 * mixing variable): correlation 0.5, df 1 and 2 */
static void grouped_tail(void **state)
{
    (void)state;
    double matrix[4], df[2];
    copula c = t_pair(0.5, 1, 2, matrix, df);
    assert_within(tail_of(&c, UPPER), 0.420764705498, 2e-11);
    assert_same(tail_of(&c, LOWER), tail_of(&c, UPPER));
    c.rotation = 90;
    double crossed = tail_of(&c, UPPER);
    copula turned = t_pair(-0.5, 2, 1, matrix, df);
    assert_within(tail_of(&turned, UPPER), crossed, 1e-14);
    turned = t_pair(-1, 2, 1, matrix, df);
    assert_same(tail_of(&turned, UPPER), 0);
    turned = t_pair(0.5, 2, 200, matrix, df);
    assert_true(tail_of(&turned, UPPER) > 0 && tail_of(&turned, UPPER) < 1e-12);
}

/* With many degrees of freedom the integrand is a narrow peak. At correlation 1 mpmath, by
 * regularised incomplete gammas of h + 1 and l + 1 halves where z^l / m_l = z^h / m_h; below it
 * SciPy, Gauss and Legendre's rule over the bivariate normal density of
 * E min(Z_1^l / m_1, Z_2^h / m_2), split where the two are level. */
static void grouped_tail_of_many_df(void **state)
{
    (void)state;
    static const struct { double correlation, low, high, tail; } known[] = {
        { 1, 2, 5, 0.576693101263867 },          { 1, 100, 110, 0.730221122902169 },
        { 1, 200, 201, 0.980088163278369 },      { 1, 500, 501, 0.98739326886753 },
        { 1, 1000, 1001, 0.991082537990121 },    { 1, 1e5, 100001, 0.999107941101302 },
        { 0.5, 1, 2, 0.42076470549808 },         { 0.9, 30, 60, 0.030731666652497 },
        { 0.95, 100, 110, 0.095113522035235 },   { 0.99, 200, 201, 0.31534793016237 },
        { 0.999, 200, 201, 0.75045582055424 },   { 0.9999, 1000, 1001, 0.82275698095542 },
    };
    for (size_t i = 0; i < sizeof known / sizeof *known; i++) {
        double correlation = known[i].correlation, low = known[i].low, high = known[i].high;
        assert_within(tail_of_grouped(correlation, high, low), known[i].tail, 1e-12);
    }
    uint64_t s = 29;
    for (size_t i = 0; i < effort(30); i++) {
        double df = 300 * random_uniform(&s), more = df * (1 + 0.2 * random_uniform(&s));
        double whole = tail_of_grouped(1, df, more), matrix[4], dfs[2];
        assert_within(tail_of_grouped(1 - 4e-16, df, more), whole, 1e-6);
        double correlation = 1 - pow(10, -4 * random_uniform(&s));
        copula plain = t_pair(correlation, df, df, matrix, dfs);
        assert_within(tail_of_grouped(correlation, df, df * (1 + 1e-12)), tail_of(&plain, UPPER),
                      1e-10);
        assert_true(tail_of_grouped(correlation, df, more) < whole);
    }
}

/* A grouped t of 200,000 rows made here, by the definition: its sample rho and tau bracket what is
 * computed, four standard errors either way. */
static void grouped_by_definition(void **state)
{
    (void)state;
    double matrix[4], df[2], sum = 0, square = 0;
    copula c = t_pair(0.7, 1, 4, matrix, df);
    uint64_t s = 22;
    size_t n = effort(100000);
    for (size_t i = 0; i < n; i++) {
        double x[2], y[2];
        for (int k = 0; k < 2; k++) {
            /* chi-square quantiles in closed form: df 2 and 4 would need none; df 1 is the square
             * of a normal quantile, so both come from one uniform by bisection on erf and exp */
            double u = random_uniform(&s), low = 0, high = 60, root = 0;
            for (int j = 0; j < 60; j++) {
                double middle = (low + high) / 2;
                if (1 - exp(-middle / 2) * (1 + middle / 2) < u) low = middle;
                else high = middle;
            }
            double four = (low + high) / 2;
            low = 0, high = 9;
            for (int j = 0; j < 60; j++) {
                root = (low + high) / 2;
                if (erf(root / sqrt(2)) < u) low = root;
                else high = root;
            }
            double z = random_normal(&s), e = random_normal(&s);
            x[k] = z / root;
            y[k] = (0.7 * z + sqrt(1 - 0.49) * e) / sqrt(four / 4);
        }
        double agree = (x[0] - x[1]) * (y[0] - y[1]) > 0 ? 1 : -1;
        sum += agree;
        square += agree * agree;
    }
    double mean = sum / (double)n, error = sqrt((square / (double)n - mean * mean) / (double)n);
    assert_within(mean, tau_of(&c), 4 * error);
}

/* how far below 0 rho reaches */
static double greatest_minus(const family *f)
{
    return f->rho_low < 0 ? -f->rho_low : 1;
}

/* Back and forth through the cell function's search, on all scales */
static void theta_from_rho_and_back(void **state)
{
    (void)state;
    uint64_t s = 23;
    for (const family *const *f = families; *f; f++) {
        if ((*f)->tau_low == (*f)->tau_high) continue;
        for (size_t i = 0; i < effort(60); i++) {
            double rho = 0.98 * random_uniform(&s) * pow(10, -6 * random_uniform(&s)), theta, back;
            if ((*f)->rho_high > 0) rho *= (*f)->rho_high;
            if ((*f)->tau_low < 0 && random_below(&s, 2)) rho = -fmin(rho, greatest_minus(*f));
            assert_int_equal(theta_from_rho(*f, rho, 3.5, &theta), OK);
            assert_int_equal((*f)->rho_from_theta(theta, 3.5, &back), OK);
            close_or_fail(back, rho, 3e-15 + 1e-12 * fabs(rho), (*f)->word, __FILE__, __LINE__);
        }
        double theta, independent;
        assert_int_equal(theta_from_rho(*f, 0, 3, &theta), OK);
        assert_int_equal((*f)->theta_from_tau(0, &independent), OK);
        assert_same(theta, independent);
        assert_int_equal(theta_from_rho(*f, 1, 3, &theta), (*f)->has_matrix ? OK : OUT_OF_DOMAIN);
        assert_int_equal(theta_from_rho(*f, 1.1, 3, &theta), OUT_OF_DOMAIN);
    }
}

/* tau_to_parameter.csv read from its column of rho: the parameter to 1e-10 */
static void published_theta_from_rho(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_to_parameter.csv");
    size_t checked = 0;
    for (size_t i = 0; i < t->rows; i++) {
        const char *word = csv_text(t, i, "family");
        const family *f = family_named(strcmp(word, "normal") ? word : "gaussian");
        double rho = csv_number(t, i, "rho_spearman"), want = csv_number(t, i, "parameter"), theta;
        if (!f || isnan(rho) || fabs(rho) > 0.999) continue;
        assert_int_equal(theta_from_rho(f, rho, 0, &theta), OK);
        close_or_fail(theta, want, 1e-11 * fabs(want), f->word, __FILE__, __LINE__);
        checked++;
    }
    assert_true(checked > 90);
    csv_free(t);
}

/* tail_dependence.csv backwards: df from correlation and tail dependence */
static void published_df(void **state)
{
    (void)state;
    struct csv *t = csv_read("tail_dependence.csv");
    size_t checked = 0;
    for (size_t i = 0; i < t->rows; i++) {
        double correlation = csv_number(t, i, "rho"), lambda = csv_number(t, i, "lambda_upper");
        if (!csv_is(t, i, "family", "student_t") || fabs(correlation) == 1) continue;
        double df, highest, want = csv_number(t, i, "parameter_or_nu");
        assert_int_equal(df_from_tail(correlation, lambda, &df, &highest), OK);
        assert_close(df, want, 1e-11);
        checked++;
    }
    assert_true(checked > 100);
    csv_free(t);
    double df, highest;
    assert_int_equal(df_from_tail(0, 0.5, &df, &highest), OUT_OF_DOMAIN);
    assert_close(highest, 0.5, 1e-15);
    assert_int_equal(df_from_tail(0, 0, &df, &highest), OUT_OF_DOMAIN);
    assert_int_equal(df_from_tail(1, 0.5, &df, &highest), OUT_OF_DOMAIN);
}

int main(void)
{
    gsl_set_error_handler_off();                             /* as the add-in does at load */
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(rotations), cmocka_unit_test(grouped_meets_plain),
        cmocka_unit_test(grouped_of_few_df), cmocka_unit_test(grouped_of_no_df),
        cmocka_unit_test(grouped_tail), cmocka_unit_test(grouped_tail_of_many_df),
        cmocka_unit_test(grouped_by_definition),
        cmocka_unit_test(theta_from_rho_and_back), cmocka_unit_test(published_theta_from_rho),
        cmocka_unit_test(published_df),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
