/* Student's t and its chi-square: closed forms at 1, 2 and 4 degrees of freedom, quadrature in
 * long double and GSL at others, and the normal distribution at very many. */
#include "table.h"

#include "../../src/elementary.h"
#include "../../src/normal.h"
#include "../../src/student.h"

#include <gsl/gsl_cdf.h>
#include <gsl/gsl_errno.h>

static const double many_df[] = { 0.05, 0.1, 0.3, 0.5, 1, 1.7, 2, 3, 4, 5.5, 10, 37, 200, 3000,
                                  1e6 };
enum { MANY = sizeof many_df / sizeof *many_df };

static const long double PI_LONG = 3.14159265358979323846264338327950288L;

/* the density at 0: Gamma((df+1)/2) / (sqrt(pi df) Gamma(df/2)), for many df as a series in 1/df */
static long double density_at_0(long double v)
{
    if (v > 1000) {
        long double series = 1 / 8.0L + (5 / 32.0L - 21 / (512 * v)) / v;
        return (1 - (1 - series / v) / (4 * v)) / sqrtl(2 * PI_LONG);
    }
    return expl(lgammal((v + 1) / 2) - lgammal(v / 2)) / sqrtl(v * PI_LONG);
}

/* The tail by the double exponential formula (Takahasi & Mori 1974) in long double, with t = -x +
 * (1 - x) exp(pi/2 sinh s). GSL's own function is off by 2e-8 at 37 degrees of freedom. */
static double tail_by_quadrature(double x, double df)
{
    long double sum = 0, step = 1 / 64.0L;
    for (int k = -400; k <= 590; k++) {
        long double s = k * step, u = (1 - x) * expl(PI_LONG / 2 * sinhl(s)), t = u - x;
        sum += PI_LONG / 2 * coshl(s) * u * expl(-(df + 1.0L) / 2 * log1pl(t / df * t));
    }
    return (double)(sum * step * density_at_0(df));
}

/* P(T <= x) for x < 0 */
static double exact_lower_tail(double x, double df)
{
    long double t = x;
    if (df == 1) return (double)(atanl(-1 / t) / PI_LONG);
    if (df == 2) {
        long double root = sqrtl(2 + t * t);
        return (double)(1 / (root * (root - t)));
    }
    if (df == 4) {
        long double s = t / sqrtl(4 + t * t), away = 4 / ((4 + t * t) * (1 - s));   /* 1 + s */
        return (double)(away * away * (2 - s) / 4);
    }
    return tail_by_quadrature(x, df);
}

/* Relative, down to probabilities of 1e-15. */
static void tail_is_close(void **state)
{
    (void)state;
    gsl_set_error_handler_off();
    for (size_t k = 0; k < MANY; k++) {
        pool p = { 0 };
        struct student s;
        double df = many_df[k];
        assert_int_equal(student_tables(&s, df, &p), OK);
        for (double u = 0.49; u > 1e-15; u *= 0.83) {
            double x = gsl_cdf_tdist_Pinv(u, df);
            if (!(x > -1e140)) break;                    /* GSL overflows */
            assert_close(student_probability(&s, x), exact_lower_tail(x, df), 1e-12);
            assert_close(student_probability(&s, -x), 1 - exact_lower_tail(x, df), 1e-14);
        }
        assert_within(student_probability(&s, 0), 0.5, 1.2e-16);
        assert_same(student_probability(&s, -INFINITY), 0x1p-53);
        assert_same(student_probability(&s, INFINITY), 1 - 0x1p-53);
        assert_same(student_probability(&s, NAN), NAN);
        pool_empty(&p);
    }
}

/* The chi-square quantile put back into GSL's incomplete gamma function, which itself is good to
 * 1e-12 here for at most 200 degrees of freedom. */
static void chi_square_is_close(void **state)
{
    (void)state;
    gsl_set_error_handler_off();
    for (size_t k = 0; k < MANY && many_df[k] <= 200; k++) {
        pool p = { 0 };
        struct student s;
        double df = many_df[k];
        assert_int_equal(student_tables(&s, df, &p), OK);
        for (double z = -8.2; z < 8.2; z += 0.0931) {
            double log_chi = log_chi_square(&s, z);
            if (log_chi < -690) continue;
            double chi = exp(log_chi);
            if (z < 0) assert_close(gsl_cdf_chisq_P(chi, df), normal_probability(z), 1e-11);
            else assert_close(gsl_cdf_chisq_Q(chi, df), normal_probability(-z), 1e-11);
        }
        pool_empty(&p);
    }
}

/* Far down, P(chi2 <= x) = (x/2)^(df/2) / Gamma(df/2 + 1): also where x itself underflows. */
static void chi_square_of_few_df(void **state)
{
    (void)state;
    static const double df[] = { 1e-4, 0.01, 0.05, 0.5 };
    for (size_t k = 0; k < 4; k++) {
        pool p = { 0 };
        struct student s;
        assert_int_equal(student_tables(&s, df[k], &p), OK);
        for (double z = -8.2; z < -7.8; z += 0.013) {
            double want = 2 / df[k] * (log(normal_probability(z)) + lgamma(df[k] / 2 + 1)) + log(2);
            assert_close(log_chi_square(&s, z), want, 1e-12);
        }
        pool_empty(&p);
    }
}

/* Wilson & Hilferty (1931): with many degrees of freedom the cube root of a chi-square is normal,
 * for |z| < 6 to within 10/df standard deviations (their error falls as 1/df). */
static void chi_square_of_many_df(void **state)
{
    (void)state;
    static const double df[] = { 1e6, 1e9, 1e12 };
    for (size_t k = 0; k < 3; k++) {
        pool p = { 0 };
        struct student s;
        double v = df[k];
        assert_int_equal(student_tables(&s, v, &p), OK);
        for (double z = -6; z < 6; z += 0.0931) {
            double third = 2 / (9 * v), log_chi = log(v) + 3 * log1p(z * sqrt(third) - third);
            double apart = (log_chi_square(&s, z) - log_chi) * sqrt(v / 2);
            assert_within(apart, 0, 10 / v + 6e-14 * sqrt(v));
        }
        pool_empty(&p);
    }
}

/* At both ends of the scores: chi-square with df 2 is exponential, its quantile at Phi(z) is
 * -2 log Phi(-z). The scores of uniforms stay inside them. */
static void chi_square_to_the_ends(void **state)
{
    (void)state;
    pool p = { 0 };
    struct student s;
    assert_int_equal(student_tables(&s, 2, &p), OK);
    double low = log_chi_square(&s, -8.24), high = log_chi_square(&s, 8.24);
    assert_close(low, log(erfc(8.24 / sqrt(2))), 1e-12);
    assert_close(high, log(-2 * log(0.5 * erfc(8.24 / sqrt(2)))), 1e-12);
    assert_true(normal_quantile(0x1p-53) > -8.24 && normal_quantile(1 - 0x1p-53) < 8.24);
    pool_empty(&p);
}

/* Both tables are continuous where their segments meet, at z = 0 where the marches meet too. */
static void segments_meet(void **state)
{
    (void)state;
    for (size_t k = 0; k < MANY; k++) {
        pool p = { 0 };
        struct student s;
        assert_int_equal(student_tables(&s, many_df[k], &p), OK);
        for (int n = -131; n <= 131; n++) {
            double z = n / 16.0, size = fabs(log_chi_square(&s, z));
            double slope = (log_chi_square(&s, z + 1e-3) - log_chi_square(&s, z - 1e-3)) / 2e-3;
            double jump = log_chi_square(&s, z + 1e-13) - log_chi_square(&s, z - 1e-13);
            assert_within(jump, 2e-13 * slope, 1e-13 * slope + 4e-15 * size + 1e-14);
        }
        for (size_t n = 1; n < s.segments; n++) {
            double below = 0, above = 0, half = 0.5;
            for (int m = STUDENT_TERMS - 1; m >= 0; m--) {
                below = below * half + s.tail[n - 1][m];
                above = above * -half + s.tail[n][m];
            }
            assert_close(above, below, 2e-15);
        }
        pool_empty(&p);
    }
}

static void many_at_a_time(void **state)
{
    (void)state;
    uint64_t pick = 6;
    for (size_t k = 0; k < MANY; k++) {
        pool p = { 0 };
        struct student s;
        assert_int_equal(student_tables(&s, many_df[k], &p), OK);
        double score[ROWS_AT_ONCE], log_chi[ROWS_AT_ONCE], x[ROWS_AT_ONCE], u[ROWS_AT_ONCE];
        for (int i = 0; i < ROWS_AT_ONCE; i++) {
            score[i] = random_normal(&pick);
            u[i] = x[i] = 3 * random_normal(&pick);
        }
        log_chi_squares_of_rows(&s, score, log_chi);
        u[0] = 0, u[1] = 30, u[2] = -30;
        student_probabilities_of_rows(&s, log_chi, u);
        assert_within(u[0], 0.5, 1.2e-16);
        for (int i = 3; i < ROWS_AT_ONCE; i++) {
            assert_same(log_chi[i], log_chi_square(&s, score[i]));
            assert_close(u[i], student_probability(&s, x[i] / sqrt(exp(log_chi[i]) / s.df)), 1e-12);
        }
        pool_empty(&p);
    }
}

/* As df grows T becomes Phi. */
static void becomes_normal(void **state)
{
    (void)state;
    pool p = { 0 };
    struct student s;
    assert_int_equal(student_tables(&s, 1e300, &p), OK);
    for (double x = -8.2; x < 8.2; x += 0.0317) {
        assert_close(student_probability(&s, x), normal_probability(x), 1e-13);
        assert_within(log_chi_square(&s, x), log(1e300), 1e-12);
    }
    pool_empty(&p);
}

static void df_outside_its_domain(void **state)
{
    (void)state;
    pool p = { 0 };
    struct student s;
    assert_int_equal(student_tables(&s, 0, &p), OUT_OF_DOMAIN);
    assert_int_equal(student_tables(&s, -1, &p), OUT_OF_DOMAIN);
    assert_int_equal(student_tables(&s, NAN, &p), OUT_OF_DOMAIN);
    assert_int_equal(student_tables(&s, INFINITY, &p), OUT_OF_DOMAIN);
    for (size_t n = 1; n <= 2; n++) {
        pool failing = { .fail_at = n };
        assert_int_equal(student_tables(&s, 4, &failing), NO_MEMORY);
        pool_empty(&failing);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(tail_is_close),
        cmocka_unit_test(chi_square_is_close),
        cmocka_unit_test(chi_square_of_few_df),
        cmocka_unit_test(chi_square_of_many_df),
        cmocka_unit_test(chi_square_to_the_ends),
        cmocka_unit_test(segments_meet),
        cmocka_unit_test(many_at_a_time),
        cmocka_unit_test(becomes_normal),
        cmocka_unit_test(df_outside_its_domain),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
