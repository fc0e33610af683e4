/* The t copula with several degrees of freedom at points: values by definition, far tails, many
 * columns, there and back. */
#include "asked.h"

#include "../../src/chi_square_score.h"
#include "../../src/student_tail.h"

#include <gsl/gsl_errno.h>

static copula *grouped(struct sample_copula *s, const char *df, double correlation)
{
    double each[50];
    size_t d = numbers_in(df, each);
    copula *c = elliptical(s, "t", d, correlation, 1);
    for (size_t j = 0; j < d; j++) s->df[j] = each[j];
    return c;
}

/* grouped_points.csv, by grouped_points.py with mpmath: pairs, three, five and twenty columns at
 * points from 1e-300 to 1 - 2^-53; conditional is that of the last column */
static void published(void **state)
{
    (void)state;
    struct csv *t = csv_read("grouped_points.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        double u[50], log_density = csv_number(t, i, "log_density");
        copula *c = grouped(&s, csv_text(t, i, "df"), csv_number(t, i, "correlation"));
        assert_int_equal(numbers_in(csv_text(t, i, "u"), u), c->dimension);
        assert_within(ask(c, LOG_DENSITY, u), log_density, 1e-10 * fmax(1, fabs(log_density)));
        assert_close(ask(c, CONDITIONAL, u), csv_number(t, i, "conditional"), 1e-10);
    }
    assert_int_equal(t->rows, 14);
    csv_free(t);
}

/* grouped_pair.csv likewise: to 1e-280, and correlations 1 and -1 */
static void pairs(void **state)
{
    (void)state;
    struct csv *t = csv_read("grouped_pair.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        const double u[2] = { csv_number(t, i, "u"), csv_number(t, i, "v") };
        copula *c = grouped(&s, csv_text(t, i, "df"), csv_number(t, i, "correlation"));
        assert_close(ask(c, CDF, u), csv_number(t, i, "C"), 1e-10);
    }
    assert_int_equal(t->rows, 11);
    csv_free(t);
}

/* A number in (0;1), often next to an end or in the middle. */
static double hard_number(uint64_t *r)
{
    double x = random_uniform(r);
    switch (random_below(r, 5)) {
    case 0: return pow(10, -300 * x);
    case 1: return fmin(1 - 0x1p-53, 1 - pow(10, -16 * x) / 2);
    case 2: return 0.5 + 1e-3 * (x - 0.5);
    case 3: return pow(10, -20 * x);
    default: return x;
    }
}

/* df that differ by nothing to speak of: the integrals against the closed forms of one df. A plain
 * t scales all its columns alike, so that the far ones must not overflow beside the near ones. */
static void nearly_one_df(void **state)
{
    (void)state;
    uint64_t r = 9;
    for (size_t i = 0; i < effort(150); i++) {
        struct sample_copula one, many;
        size_t d = i % 10 == 9 ? 40 : 2 + random_below(&r, 5);
        double df = pow(10, 5.3 * random_uniform(&r) - 1.3), u[40];
        double correlation = random_below(&r, 2) ? 0.5 : 0.95;
        copula *plain = elliptical(&one, "t", d, correlation, df);
        copula *c = elliptical(&many, "t", d, correlation, df);
        many.df[0] = df * (1 + 1e-14);
        assert_true(many.df[0] != df);
        for (size_t j = 0; j < d; j++) {
            u[j] = hard_number(&r);
            if (df < 3) u[j] = fmax(u[j], exp(-290 * df));
        }
        double want = ask(plain, LOG_DENSITY, u);
        assert_within(ask(c, LOG_DENSITY, u), want, 1e-10 * fmax(1, fabs(want)));
        want = ask(plain, CONDITIONAL, u);
        if (want > 1e-290) assert_close(ask(c, CONDITIONAL, u), want, 1e-9);
        if (d > 2) continue;
        want = ask(plain, CDF, u);
        if (want > 1e-290) assert_close(ask(c, CDF, u), want, 1e-10);
    }
}

/* All central, the chi-squares lie far above, all next to an end far below: the closed form */
static void many_columns(void **state)
{
    (void)state;
    static const double at[] = { 0.5, 0.4999, 1e-300, 1e-14, 1 - 0x1p-53 };
    for (size_t k = 0; k < sizeof at / sizeof *at; k++)
        for (double df = 0.5; df < 1e6; df *= 30) {
            struct sample_copula one, many;
            double u[50];
            copula *plain = elliptical(&one, "t", 50, 0.3, df);
            copula *c = elliptical(&many, "t", 50, 0.3, df);
            many.df[3] = df * (1 + 1e-14);
            for (size_t j = 0; j < 50; j++) u[j] = at[k];
            double want = ask(plain, LOG_DENSITY, u);
            assert_within(ask(c, LOG_DENSITY, u), want, 1e-10 * fmax(1, fabs(want)));
        }
}

/* Any df and any point inside has a density, which is a number. */
static void any_point(void **state)
{
    (void)state;
    uint64_t r = 12;
    for (size_t i = 0; i < effort(60); i++) {
        struct sample_copula s;
        size_t d = 2 + random_below(&r, 9);
        double u[11], x;
        copula *c = elliptical(&s, "t", d, random_below(&r, 2) ? 0.9 : 0.2, 3);
        for (size_t j = 0; j < d; j++) {
            s.df[j] = pow(10, 7.3 * random_uniform(&r) - 1.3);
            u[j] = hard_number(&r);
        }
        assert_int_equal(try_to_ask(c, LOG_DENSITY, u, &x), OK);
        assert_true(isfinite(x));
        assert_int_equal(try_to_ask(c, CONDITIONAL, u, &x), OK);
        assert_true(x > 0 && x < 1);
    }
}

/* Rows of the model, and uniforms in the tails, are answered without exception, and the one
 * question undoes the other. */
static void there_and_back(void **state)
{
    (void)state;
    uint64_t r = 10;
    for (size_t k = 0; k < 4; k++) {
        struct sample_copula s;
        enum { COLUMNS = 20 };
        size_t rows = effort(60);
        copula *c = elliptical(&s, "t", COLUMNS, k % 2 ? 0.9 : 0.4, 3);
        for (size_t j = 0; j < COLUMNS; j++)
            s.df[j] = pow(10, (k < 2 ? 3 : 6.3) * random_uniform(&r) - (k < 2 ? 0 : 1.3));
        double *rows_of_model = drawn(c, 7, 0, rows);
        pool p = { 0 };
        struct evaluation e;
        assert_int_equal(evaluation_of(c, &e, &p), OK);
        for (size_t i = 0; i < rows; i++) {
            double w[COLUMNS], u[COLUMNS], back[COLUMNS];
            for (size_t j = 0; j < COLUMNS; j++) u[j] = rows_of_model[j * rows + i];
            assert_int_equal(conditional_at(&e, u, w), OK);
            assert_int_equal(from_conditional_at(&e, w, back), OK);
            assert_int_equal(conditional_at(&e, back, u), OK);
            for (size_t j = 0; j < COLUMNS; j++) assert_within(u[j], w[j], 1e-10);
        }
        free(rows_of_model);
        pool_empty(&p);
    }
}

/* Far out, where Newton's steps overshoot to where the event is next to impossible and must find
 * back: roots of the conditional probability by definition, with mpmath, 40 digits, by the
 * trapezoid rule with steps of 0.05 and 0.025 in z, which agree to 20 digits. */
static void back_from_far_out(void **state)
{
    (void)state;
    static const struct {
        const char *df;
        double correlation, u, w, v;
    } at[] = { { "255 0.8", 0.9887026601689517, 7.632927951572116e-12, 1 - 0x1p-53,
                 0.22264043303183927426 },
               { "255 3", -0.988364735536173, 6.619657689665211e-06, 1e-30,
                 0.79977759120218488889 } };
    for (size_t k = 0; k < sizeof at / sizeof *at; k++) {
        struct sample_copula s;
        copula *c = grouped(&s, at[k].df, at[k].correlation);
        assert_close(ask_pair(c, FROM_CONDITIONAL, at[k].u, at[k].w), at[k].v, 1e-11);
    }
}

/* The log-density of three columns of equal correlation by a sum over a million scores z. */
static double by_brute_force(const copula *c, const double *u)
{
    enum { NODES = 1000000 };
    double r = c->matrix[1], most = -HUGE_VAL, sum = 0, x[3], from = -50, step = 60.0 / NODES;
    double determinant = (1 - r) * (1 - r) * (1 + 2 * r), margins = log(2 * acos(-1)) / 2;
    double *log_term = malloc(NODES * sizeof *log_term);
    struct chi_square_score score[3];
    pool p = { 0 };
    assert_non_null(log_term);
    for (size_t j = 0; j < 3; j++) {
        double df = c->df[j], a = student_quantile(u[j], df);
        assert_int_equal(chi_square_score_prepare(&score[j], df, &p), OK);
        x[j] = sqrt(df) * sinh(a);
        margins += student_log_peak(df) - log(df) / 2 - (df + 1) * log_cosh_of(a)
                   + log(2 * acos(-1)) / 2;
    }
    for (size_t k = 0; k < NODES; k++) {
        double z = from + step * (double)k, total = 0, squares = 0, logs = 0;
        for (size_t j = 0; j < 3; j++) {
            double log_scale = log_chi_square_scale(&score[j], z), y = x[j] * exp(log_scale);
            total += y;
            squares += y * y;
            logs += log_scale;
        }
        double form = (squares - r / (1 + 2 * r) * total * total) / (1 - r);
        log_term[k] = -z * z / 2 + logs - form / 2;
        most = fmax(most, log_term[k]);
    }
    for (size_t k = 0; k < NODES; k++) sum += exp(log_term[k] - most);
    free(log_term);
    pool_empty(&p);
    return most + log(sum * step) - log(determinant) / 2 - margins;
}

/* Where three columns are as far out as each other for very different chi-squares: the first of two
 * peaks is found first, the other lies where the column of least df runs away. */
static void hidden_peak(void **state)
{
    (void)state;
    static const double at[][3] = { { 2.2e-91, 2.2e-91, 2.2e-91 }, { 1e-60, 1e-60, 1e-60 },
                                    { 1e-120, 1e-110, 1e-120 }, { 1e-30, 1e-40, 0.3 } };
    for (size_t k = 0; k < sizeof at / sizeof *at; k++) {
        struct sample_copula s;
        copula *c = grouped(&s, "6.1 54 1.75", 0.9866);
        double want = by_brute_force(c, at[k]);
        assert_within(ask(c, LOG_DENSITY, at[k]), want, 1e-9 * fmax(1, fabs(want)));
    }
}

/* The derivative of C(u, v) by u is the conditional probability: by differences over h to an error
 * of h^4. */
static void derivative_of_cdf(void **state)
{
    (void)state;
    for (double correlation = -0.9; correlation < 1; correlation += 0.6)
        for (double u = 1e-9; u < 1; u = u < 0.1 ? 100 * u : u + 0.3) {
            struct sample_copula s;
            copula *c = grouped(&s, "2.5 11", correlation);
            double v = fmin(0.9, sqrt(u)), h = 0.01 * fmin(u, 1 - u);
            double near = ask_pair(c, CDF, u + h, v) - ask_pair(c, CDF, u - h, v);
            double far = ask_pair(c, CDF, u + 2 * h, v) - ask_pair(c, CDF, u - 2 * h, v);
            assert_close((8 * near - far) / (12 * h), ask_pair(c, CONDITIONAL, u, v), 1e-6);
        }
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published), cmocka_unit_test(pairs), cmocka_unit_test(nearly_one_df),
        cmocka_unit_test(many_columns), cmocka_unit_test(any_point),
        cmocka_unit_test(there_and_back), cmocka_unit_test(back_from_far_out),
        cmocka_unit_test(hidden_peak), cmocka_unit_test(derivative_of_cdf),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
