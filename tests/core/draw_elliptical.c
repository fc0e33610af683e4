/* Draws of the normal and the t copula against published probabilities, and what is special to
 * matrices. */
#include "draws.h"
#include "matrices.h"

#include "../../src/normal.h"
#include "../../src/tau.h"

static double tau_of(const double *x, const double *y, size_t n)
{
    pool p = { 0 };
    struct tau_counts c;
    double tau;
    assert_int_equal(tau_count(x, y, n, &c, &p), OK);
    assert_int_equal(tau_b(&c, &tau), OK);
    pool_empty(&p);
    return tau;
}

/* "equicorrelated 0.5, dimension 4", "bivariate rho=0.3", "trivariate r12=0.5 r13=0.3 r23=0.2" */
static void matrix_of_case(struct sample_copula *s, const char *word, double df, const char *text,
                           size_t d)
{
    double r[3];
    if (sscanf(text, "equicorrelated %lf", r) == 1 || sscanf(text, "bivariate rho=%lf", r) == 1) {
        elliptical(s, word, d, r[0], df);
        return;
    }
    assert_int_equal(sscanf(text, "trivariate r12=%lf r13=%lf r23=%lf", r, r + 1, r + 2), 3);
    elliptical(s, word, 3, 0, df);
    set_correlation(s, 0, 1, r[0]);
    set_correlation(s, 0, 2, r[1]);
    set_correlation(s, 1, 2, r[2]);
}

/* orthant_probability.csv: Sheppard (1899), David (1953), Gupta (1963). The probability that all
 * are below 1/2 is the same for every df, also grouped. */
static void orthants(void **state)
{
    (void)state;
    struct csv *t = csv_read("orthant_probability.csv");
    size_t n = effort(250000);
    for (size_t i = 0; i < t->rows; i++)
        for (int k = 0; k < 4; k++) {
            struct sample_copula s;
            matrix_of_case(&s, k ? "t" : "gaussian", k == 1 ? 0.5 : 4, csv_text(t, i, "case"),
                           (size_t)csv_number(t, i, "dimension"));
            for (size_t j = 0; k == 3 && j < s.c.dimension; j++) s.df[j] = 1 + (double)j;
            double want = csv_number(t, i, "probability");
            double *u = drawn(&s.c, 100 * i + (uint64_t)k, 0, n);
            assert_within(share_beyond(u, n, s.c.dimension, 0.5), want, four_errors(want, n));
            free(u);
        }
    assert_int_equal(t->rows, 19);
    csv_free(t);
}

/* joint_exceedance.csv: McNeil, Frey & Embrechts (2005), table 5.2 */
static void joint_exceedances(void **state)
{
    (void)state;
    struct csv *t = csv_read("joint_exceedance.csv");
    size_t n = effort(1000000);
    for (size_t i = 0; i < t->rows;) {
        bool normal = csv_is(t, i, "family", "normal");
        double rho = csv_number(t, i, "rho"), nu = csv_number(t, i, "nu");
        struct sample_copula s;
        double *u = drawn(elliptical(&s, normal ? "gaussian" : "t", 2, rho, nu), i, 0, n);
        for (size_t same = i; i < t->rows && csv_number(t, i, "rho") == rho
                 && !strcmp(csv_text(t, i, "nu"), csv_text(t, same, "nu")); i++) {
            double level = csv_number(t, i, "level"), want = csv_number(t, i, "probability");
            assert_within(share_beyond(u, n, 2, level), want, four_errors(want, n));
            assert_within(share_beyond(u, n, 2, level - 1), want, four_errors(want, n));
        }
        free(u);
    }
    csv_free(t);
}

/* With df 1e6 a t copula is as good as the normal one; with equal df, grouped is the same as
 * common. */
static void df_of_all_sizes(void **state)
{
    (void)state;
    struct sample_copula normal, t;
    size_t n = 20000;
    double *a = drawn(elliptical(&normal, "gaussian", 3, 0.4, 0), 8, 0, n);
    double *b = drawn(elliptical(&t, "t", 3, 0.4, 1e6), 8, 0, n);
    for (size_t i = 0; i < 3 * n; i++) assert_within(b[i], a[i], 2e-3);
    for (size_t j = 0; j < 3; j++) t.df[j] = 4;
    double *common = drawn(&t.c, 8, 0, n);
    t.df[2] = 30;
    double *grouped = drawn(&t.c, 8, 0, n);
    assert_memory_equal(grouped, common, 2 * n * sizeof *common);
    size_t differ = 0;
    for (size_t i = 2 * n; i < 3 * n; i++) differ += grouped[i] != common[i];
    assert_int_equal(differ, n);
    free(a), free(b), free(common), free(grouped);
}

/* One chi-square drives a grouped row: with correlation 0 and few df, large values of both columns
 * still go together, as the tau of |U - 1/2| shows; it is 0 for the normal copula. */
static void one_chi_square_for_all(void **state)
{
    (void)state;
    struct sample_copula s;
    size_t n = 20000;
    elliptical(&s, "t", 2, 0, 1);
    s.df[1] = 3;
    for (int k = 0; k < 2; k++) {
        double *u = drawn(k ? &s.c : elliptical(&s, "gaussian", 2, 0, 0), 77, 0, n);
        for (size_t i = 0; i < 2 * n; i++) u[i] = fabs(u[i] - 0.5);
        double tau = tau_of(u, u + n, n), error = sqrt(4.0 / 9 / (double)n);
        if (k) assert_true(tau > 0.05);
        else assert_within(tau, 0, 4 * error);
        free(u);
        elliptical(&s, "t", 2, 0, 1);
        s.df[1] = 3;
    }
}

/* Greiner (1909): tau is 2 asin(correlation) / pi, whatever the df; its standard error is at most
 * 2/3 of sqrt((1 - tau^2) / n), here taken as that. */
static void tau_is_greiners(void **state)
{
    (void)state;
    static const double correlations[] = { -0.99, -0.3, 0, 0.6, 0.999 };
    size_t n = effort(40000);
    for (size_t k = 0; k < 5; k++)
        for (int t = 0; t < 2; t++) {
            struct sample_copula s;
            double *u = drawn(elliptical(&s, t ? "t" : "gaussian", 2, correlations[k], 3), k, 0, n);
            double want = 2 * asin(correlations[k]) / 3.14159265358979323846;
            assert_within(tau_of(u, u + n, n), want, 4 * sqrt((1 - want * want) / (double)n));
            free(u);
        }
}

/* Singular matrices: comonotone and opposite columns are exact, and a sum of two lines stays
 * one. */
static void singular_matrices(void **state)
{
    (void)state;
    struct sample_copula s;
    size_t n = 1000;
    elliptical(&s, "t", 3, 1, 4);
    set_correlation(&s, 0, 2, -1);
    set_correlation(&s, 1, 2, -1);
    double *u = drawn(&s.c, 1, 0, n);
    for (size_t i = 0; i < n; i++) {
        assert_same(u[n + i], u[i]);
        assert_within(u[2 * n + i], 1 - u[i], 2e-16);
    }
    free(u);

    elliptical(&s, "gaussian", 3, 0, 0);
    set_correlation(&s, 0, 2, 0.6);
    set_correlation(&s, 1, 2, 0.8);
    u = drawn(&s.c, 1, 0, n);
    for (size_t i = 0; i < n; i++) {
        double sum = 0.6 * normal_quantile(u[i]) + 0.8 * normal_quantile(u[n + i]);
        assert_within(normal_probability(sum), u[2 * n + i], 1e-14);
    }
    free(u);
}

/* What is feasible by its eigenvalues can be drawn from, however many of them are zero to
 * rounding. */
static void feasible_is_drawable(void **state)
{
    (void)state;
    uint64_t s = 5;
    size_t singular = 0;
    for (size_t i = 0; i < effort(600); i++) {
        pool p = { 0 };
        size_t d = 3 + random_below(&s, 45), factors = 1 + random_below(&s, d);
        double noise = pow(10, -10 - 6 * random_uniform(&s)), u[4 * 48];
        bool feasible, regular;
        double *matrix = noisy_matrix(&s, d, factors, noise, &p);
        assert_int_equal(matrix_feasible(matrix, d, 0, &feasible, &p), OK);
        assert_int_equal(lies_above(matrix, d, 0, &regular, &p), OK);
        singular += feasible && !regular;
        copula c = { .family = family_named("gaussian"), .dimension = d, .matrix = matrix };
        if (feasible) assert_int_equal(draw(&c, 1, 0, 4, u, 4, &p), OK);
        pool_empty(&p);
    }
    assert_true(singular > 100);
}

/* The correlation of normal scores drawn from each pair is the matrix's, five standard errors
 * either way, in a matrix that has no factor of its own: 30 lines of 28 factors and some noise. */
static void drawn_from_the_singular(void **state)
{
    (void)state;
    pool p = { 0 };
    copula c = { .family = family_named("gaussian"), .dimension = 30 };
    uint64_t s = 23;
    c.matrix = noisy_matrix(&s, 30, 28, 5e-13, &p);
    size_t n = effort(20000);
    double *u = drawn(&c, 6, 0, n);
    for (size_t i = 0; i < 30 * n; i++) u[i] = normal_quantile(u[i]);
    for (size_t j = 0; j < 30; j++)
        for (size_t k = 0; k < j; k++) {
            double sum = 0, want = c.matrix[j * 30 + k];
            for (size_t i = 0; i < n; i++) sum += u[j * n + i] * u[k * n + i];
            assert_within(sum / (double)n, want, 5 * sqrt((1 + want * want) / (double)n));
        }
    free(u);
    pool_empty(&p);
}

static void no_correlation_matrix(void **state)
{
    (void)state;
    struct sample_copula s;
    pool p = { 0 };
    double u[30];
    elliptical(&s, "gaussian", 3, -0.6, 0);
    assert_int_equal(draw(&s.c, 1, 0, 10, u, 10, &p), OUT_OF_DOMAIN);
    elliptical(&s, "t", 3, -0.5, 4);                                    /* just singular */
    assert_int_equal(draw(&s.c, 1, 0, 10, u, 10, &p), OK);
    s.df[1] = 0;
    assert_int_equal(draw(&s.c, 1, 0, 10, u, 10, &p), OUT_OF_DOMAIN);
    pool_empty(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(orthants),
        cmocka_unit_test(joint_exceedances),
        cmocka_unit_test(df_of_all_sizes),
        cmocka_unit_test(one_chi_square_for_all),
        cmocka_unit_test(tau_is_greiners),
        cmocka_unit_test(singular_matrices),
        cmocka_unit_test(feasible_is_drawable),
        cmocka_unit_test(drawn_from_the_singular),
        cmocka_unit_test(no_correlation_matrix),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
