/* Copulas at points and of parameters where doubles are short of digits: near independence, with
 * strong dependence, few degrees of freedom, u down to 1e-305 and up to 1 - 2^-53. Values by
 * definition, from extreme_points.py. */
#include "asked.h"

#include "../../src/pair_measures.h"
#include "../../src/spearman_inverse.h"

#include <float.h>

static copula *copula_of(struct sample_copula *s, const struct csv *t, size_t i, double *u)
{
    const char *word = csv_text(t, i, "family");
    double parameter = csv_number(t, i, "parameter");
    size_t d = numbers_in(csv_text(t, i, "u"), u);
    return strcmp(word, "t") && strcmp(word, "gaussian")
         ? one_parameter(s, word, d, parameter)
         : elliptical(s, word, d, parameter, csv_number(t, i, "df"));
}

static void check(const struct csv *t, size_t i, const char *column, double got, double want,
                  double most)
{
    char what[300];
    snprintf(what, sizeof what, "%s, row %zu: %s %s %s at %s", column, i + 2,
             csv_text(t, i, "family"), csv_text(t, i, "parameter"), csv_text(t, i, "df"),
             csv_text(t, i, "u"));
    close_or_fail(got, want, most, what, __FILE__, __LINE__);
}

static void check_density(const struct csv *t, size_t i, const copula *c, const double *u)
{
    double got = ask(c, LOG_DENSITY, u), want = csv_number(t, i, "log_density");
    if (isinf(want)) check(t, i, "log_density", got, -HUGE_VAL, 0);
    else check(t, i, "log_density", got, want, 1e-11 * fmax(1, fabs(want)));
}

/* Back from w, whose rounding and 1e-12 of it the density says what they cost. Where w is 0 or 1 to
 * rounding nothing can be told. */
static void check_back(const struct csv *t, size_t i, const copula *c, const double *u, double w)
{
    double slope = exp(csv_number(t, i, "log_density")), asked[2] = { u[0], w };
    if (c->dimension > 2 || w < 1e-305 || w > 1 - 1e-9 || !(slope > 0)) return;
    double most = 1e-12 * w / slope + 1e-11 * u[1];
    check(t, i, "back", ask(c, FROM_CONDITIONAL, asked), u[1], most);
}

static void by_definition(void **state)
{
    (void)state;
    struct csv *t = csv_read("extreme_points.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        double u[50], w = csv_number(t, i, "conditional");
        copula *c = copula_of(&s, t, i, u);
        if (*csv_text(t, i, "C")) {
            double want = csv_number(t, i, "C"), got = ask(c, CDF, u);
            check(t, i, "C", got, want, fmax(1e-11 * want, DBL_MIN));
        }
        check_density(t, i, c, u);
        double kept = fmax(DBL_MIN, fmin(w, 1 - 0x1p-53));        /* what is answered */
        check(t, i, "conditional", ask(c, CONDITIONAL, u), kept, 1e-10 * kept);
        check_back(t, i, c, u, w);
    }
    assert_int_equal(t->rows, 970);
    csv_free(t);
}

/* extreme_rotated.csv: 1 less the conditional probability of the unrotated pair, also where that is
 * 1 to rounding */
static void rotated_by_definition(void **state)
{
    (void)state;
    struct csv *t = csv_read("extreme_rotated.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        char what[300];
        double want = fmax(DBL_MIN, fmin(csv_number(t, i, "conditional"), 1 - 0x1p-53));
        copula *c = one_parameter(&s, csv_text(t, i, "family"), 2, csv_number(t, i, "parameter"));
        c->rotation = (int)csv_number(t, i, "rotation");
        snprintf(what, sizeof what, "row %zu: %s %s", i + 2, c->family->word,
                 csv_text(t, i, "parameter"));
        double got = ask_pair(c, CONDITIONAL, csv_number(t, i, "u"), csv_number(t, i, "v"));
        close_or_fail(got, want, 1e-10 * want, what, __FILE__, __LINE__);
    }
    assert_int_equal(t->rows, 1800);
    csv_free(t);
}

/* To a model's columns and back, up to the first that is kept above 0 or that a double carries too
 * few digits of near 1. */
static void there_and_back(const copula *c, const double *w)
{
    pool p = { 0 };
    struct evaluation e;
    double u[50], back[50];
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    assert_int_equal(from_conditional_at(&e, w, u), OK);
    assert_int_equal(conditional_at(&e, u, back), OK);
    for (size_t j = 0; j < c->dimension && u[j] > DBL_MIN && u[j] < 1 - 1e-6; j++)
        assert_close(back[j], w[j], 1e-10);
    pool_empty(&p);
}

static void inverse_in_many_columns(void **state)
{
    (void)state;
    const struct { const char *word; double parameter; } models[] = {
        { "clayton", 1e-8 }, { "clayton", 2 }, { "clayton", 200 }, { "gumbel", 1.5 },
        { "gumbel", 50 }, { "frank", 1e-8 }, { "frank", 8 }, { "joe", 1.5 }, { "joe", 50 }
    };
    struct sample_copula s;
    uint64_t seed = 5;
    for (int round = 0; round < 20; round++) {
        double w[20];
        for (size_t j = 0; j < 20; j++) w[j] = random_uniform(&seed);
        for (size_t k = 0; k < sizeof models / sizeof *models; k++)
            there_and_back(one_parameter(&s, models[k].word, 20, models[k].parameter), w);
        for (size_t k = 0; k < 4; k++)
            there_and_back(elliptical(&s, k ? "t" : "gaussian", 20, 0.9,
                                      (double[]){ 0, 0.5, 5.5, 1e6 }[k]), w);
    }
}

static void few_degrees_of_freedom(void **state)
{
    (void)state;
    static const double points[][3] = { { 1e-300, 0.3, 0.6 }, { 0.3, 1e-300, 0.6 },
                                        { 0.3, 0.2, 1e-300 }, { 1e-300, 1e-300, 1e-300 },
                                        { 1e-300, 1 - 1e-12, 0.3 }, { 1e-100, 0.9, 1e-12 } };
    struct sample_copula s;
    for (size_t k = 0; k < 4; k++)
        for (size_t i = 0; i < sizeof points / sizeof *points; i++)
            there_and_back(elliptical(&s, "t", 3, 0.3, (double[]){ 0.05, 0.5, 1, 5.5 }[k]),
                           points[i]);
}

/* Small w of a column that is turned, as far as 1 - v of the answer carries them. */
static void rotated_pairs_and_back(void **state)
{
    (void)state;
    const struct { const char *word; double parameter; } models[] = {
        { "clayton", 2 }, { "clayton", -0.5 }, { "gumbel", 3 }, { "frank", 20 }, { "frank", -20 },
        { "joe", 3 }, { "amh", 0.9 }, { "plackett", 100 }, { "fgm", 0.9 }
    };
    static const double firsts[] = { 0.01, 0.5, 0.99 }, seconds[] = { 1e-4, 1e-8, 1e-12, 1e-18 };
    size_t checked = 0;
    for (size_t k = 0; k < sizeof models / sizeof *models; k++)
        for (size_t i = 0; i < 24; i++) {
            struct sample_copula s;
            copula *c = one_parameter(&s, models[k].word, 2, models[k].parameter);
            double u = firsts[i % 3], w = seconds[i / 3 % 4];
            c->rotation = i < 12 ? 180 : 270;
            double v = ask_pair(c, FROM_CONDITIONAL, u, w);
            if (v < 1e-5 || v > 1 - 1e-6) continue;
            assert_close(ask_pair(c, CONDITIONAL, u, v), w, 1e-10);
            checked++;
        }
    assert_true(checked >= 80);
}

/* extreme_rho.csv: the integral of C - uv */
static void rho_of_joe_near_independence(void **state)
{
    (void)state;
    struct csv *t = csv_read("extreme_rho.csv");
    for (size_t i = 0; i < t->rows; i++) {
        double rho;
        const family *f = family_named(csv_text(t, i, "family"));
        assert_int_equal(f->rho_from_theta(csv_number(t, i, "theta"), 0, &rho), OK);
        assert_close(rho, csv_number(t, i, "rho"), 1e-13);
    }
    assert_int_equal(t->rows, 6);
    csv_free(t);
}

/* extreme_theta_of_rho.csv; clayton and joe have 1 - rho from strong_rho.c, which has its test */
static void theta_of_strong_rho(void **state)
{
    (void)state;
    struct csv *t = csv_read("extreme_theta_of_rho.csv");
    for (size_t i = 0; i < t->rows; i++) {
        double theta, turned, rho = csv_number(t, i, "rho"), want = csv_number(t, i, "theta");
        const family *f = family_named(csv_text(t, i, "family"));
        const family *own[] = { family_named("clayton"), family_named("joe") };
        assert_int_equal(theta_from_rho(f, rho, 0, &theta), OK);
        assert_close(theta, want, 1e-12);
        if (f->theta_low < 0 && theta_from_rho(f, -rho, 0, &turned) == OK)
            assert_close(turned, -want, 1e-12);
        for (size_t k = 0; rho > 0.98 && k < 2; k++) {
            assert_int_equal(theta_from_rho(own[k], rho, 0, &theta), OK);
            assert_close(own[k]->one_minus_rho(theta), 1 - rho, 1e-12);
        }
    }
    assert_int_equal(t->rows, 15);
    csv_free(t);
}

/* extreme_tail.csv: the t distribution function of the textbooks */
static void tails_of_t(void **state)
{
    (void)state;
    struct csv *t = csv_read("extreme_tail.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        double lambda;
        copula *c = elliptical(&s, "t", 2, csv_number(t, i, "correlation"),
                               csv_number(t, i, "df"));
        assert_int_equal(tail_of_pair(c, 0, 1, UPPER, &lambda), OK);
        assert_close(lambda, csv_number(t, i, "lambda"), 2e-13);
    }
    assert_int_equal(t->rows, 27);
    csv_free(t);
}

/* Rotated clayton with theta next to -1, where 1 + 1/theta and 1 - w have no digits left: by
 * definition with mpmath, 60 digits, of the doubles that stand here. */
static void next_to_perfect(void **state)
{
    (void)state;
    static const double at[][4] = {
        { 0.3, 0.4, 1.9482015372832833405e-15, 8.466206339857443056e-15 },
        { 0.001, 0.002, 2.0014043860760602485e-20, 2.0024069269860217216e-17 },
        { 1e-9, 0.25, 2.8745213471359773873e-24, 2.8745213488013117478e-15 },
    };
    struct sample_copula s;
    copula *c = one_parameter(&s, "clayton", 2, -0.99999999999999);
    c->rotation = 180;
    for (size_t i = 0; i < sizeof at / sizeof *at; i++) {
        assert_close(ask_pair(c, CDF, at[i][0], at[i][1]), at[i][2], 1e-10);
        assert_close(ask_pair(c, CONDITIONAL, at[i][0], at[i][1]), at[i][3], 1e-10);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(by_definition),
        cmocka_unit_test(rotated_by_definition),
        cmocka_unit_test(inverse_in_many_columns),
        cmocka_unit_test(few_degrees_of_freedom),
        cmocka_unit_test(rotated_pairs_and_back),
        cmocka_unit_test(rho_of_joe_near_independence),
        cmocka_unit_test(theta_of_strong_rho),
        cmocka_unit_test(tails_of_t),
        cmocka_unit_test(next_to_perfect),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
