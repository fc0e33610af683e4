/* What copulas say at points, against published definitions at 60 and more digits. */
#include "asked.h"

#include <float.h>
#include <gsl/gsl_errno.h>

static copula *copula_of(struct sample_copula *s, const struct csv *t, size_t i)
{
    const char *word = csv_text(t, i, "family");
    double parameter = csv_number(t, i, "parameter_or_rho");
    if (!strcmp(word, "normal")) return elliptical(s, "gaussian", 2, parameter, 0);
    if (!strcmp(word, "student_t")) return elliptical(s, "t", 2, parameter, csv_number(t, i, "nu"));
    return one_parameter(s, word, 2, parameter);
}

static double tolerance_of(const struct csv *t, size_t i, double want)
{
    const char *text = csv_text(t, i, "tolerance");
    if (!strncmp(text, "absolute ", 9)) return strtod(text + 9, NULL);
    double x = csv_number(t, i, "tolerance");
    assert_true(x > 0 && x <= 1e-9);
    /* central differences at 150 digits make 0 of 7e-170 */
    if (want == 0 && strstr(csv_text(t, i, "source"), "central differences")) return 1e-140;
    return strstr(text, "relative") ? x * fabs(want) : x;
}

static void check(const struct csv *t, size_t i, const char *column, double got)
{
    char what[200];
    double want = csv_number(t, i, column);
    double least = column[0] == 'd' && column[1] == 'C' ? DBL_MIN : 0;     /* it keeps above 0 */
    snprintf(what, sizeof what, "%s, row %zu: %s %s %s at %s %s", column, i + 2,
             csv_text(t, i, "family"), csv_text(t, i, "parameter_or_rho"), csv_text(t, i, "nu"),
             csv_text(t, i, "u"), csv_text(t, i, "v"));
    close_or_fail(got, fmax(want, least), tolerance_of(t, i, want), what, __FILE__, __LINE__);
}

/* What a decimal has beyond its double, seen from 1: "0.999999" is 1 - 1e-6, its double is not. */
static double lost(const char *decimal)
{
    char nines[40], *end;
    double u = strtod(decimal, NULL);
    if (u < 0.99) return 0;
    snprintf(nines, sizeof nines, "1e-%zu", strlen(decimal) - 2);
    double last = strtod(nines, &end);
    double wanted = last * (double)('9' - decimal[strlen(decimal) - 1] + 1);
    return (1 - u) - wanted;                  /* decimal = u + this */
}

/* The answer for the decimals: that for the doubles, moved along the slope. */
static double ask_decimals(const copula *c, enum asked what, const char *u, const char *v)
{
    double x[2] = { strtod(u, NULL), strtod(v, NULL) }, beyond[2] = { lost(u), lost(v) };
    double at = ask(c, what, x), sum = at;
    for (int j = 0; j < 2; j++) {
        if (beyond[j] == 0) continue;
        double up[2] = { x[0], x[1] }, down[2] = { x[0], x[1] }, step = 1e-4 * (1 - x[j]);
        up[j] += step;
        down[j] -= step;
        sum += (ask(c, what, up) - ask(c, what, down)) / (up[j] - down[j]) * beyond[j];
    }
    return sum;
}

/* copula_cdf_density.csv: the definitions, mpmath at 60 to 150 digits */
static void published_pairs(void **state)
{
    (void)state;
    struct csv *t = csv_read("copula_cdf_density.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        copula *c = copula_of(&s, t, i);
        assert_non_null(c->family);
        const char *u = csv_text(t, i, "u"), *v = csv_text(t, i, "v");
        check(t, i, "C", ask_decimals(c, CDF, u, v));
        check(t, i, "density", exp(ask_decimals(c, LOG_DENSITY, u, v)));
        check(t, i, "dC_du", ask_decimals(c, CONDITIONAL, u, v));
        check(t, i, "dC_dv", ask_decimals(c, CONDITIONAL, v, u));     /* all are exchangeable */
    }
    assert_int_equal(t->rows, 784);
    csv_free(t);
}

/* copula_conditional_quantile.csv: mpmath bisection */
static void published_quantiles(void **state)
{
    (void)state;
    struct csv *t = csv_read("copula_conditional_quantile.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        copula *c = copula_of(&s, t, i);
        check(t, i, "v", ask_pair(c, FROM_CONDITIONAL, csv_number(t, i, "u"),
                                  csv_number(t, i, "w")));
    }
    assert_int_equal(t->rows, 750);
    csv_free(t);
}

/* joint_exceedance.csv and joint_exceedance_matched_tau.csv, by definition of the families: both
 * above q is the probability of the model with rotation 180 at 1 - q, which cancels if it is taken
 * for the sum that it is. */
static void joint_exceedances(void **state)
{
    (void)state;
    struct csv *t = csv_read("joint_exceedance_matched_tau.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        const char *word = csv_text(t, i, "family");
        double parameter = csv_number(t, i, "parameter"), q = csv_number(t, i, "q");
        copula *c = !strcmp(word, "normal") ? elliptical(&s, "gaussian", 2, parameter, 0)
                  : !strcmp(word, "student_t")
                  ? elliptical(&s, "t", 2, parameter, csv_number(t, i, "nu"))
                  : one_parameter(&s, word, 2, parameter);
        double below = csv_number(t, i, "P_both_below_1_minus_q");
        assert_close(ask_pair(c, CDF, 1 - q, 1 - q), below, 1e-10);
        c->rotation = 180;
        assert_close(ask_pair(c, CDF, 1 - q, 1 - q), csv_number(t, i, "P_both_above_q"), 1e-10);
    }
    assert_int_equal(t->rows, 240);
    csv_free(t);
    t = csv_read("joint_exceedance.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        bool normal = csv_is(t, i, "family", "normal");
        copula *c = elliptical(&s, normal ? "gaussian" : "t", 2, csv_number(t, i, "rho"),
                               normal ? 0 : csv_number(t, i, "nu"));
        double q = csv_number(t, i, "level"), want = csv_number(t, i, "probability");
        assert_close(ask_pair(c, CDF, q, q), want, 1e-10);
    }
    csv_free(t);
}

/* rotated_cdf.csv: the definitions at 800 digits. */
static void rotated_pairs(void **state)
{
    (void)state;
    struct csv *t = csv_read("rotated_cdf.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        char what[100];
        double want = csv_number(t, i, "C"), u = csv_number(t, i, "u"), v = csv_number(t, i, "v");
        copula *c = one_parameter(&s, csv_text(t, i, "family"), 2, csv_number(t, i, "parameter"));
        c->rotation = (int)csv_number(t, i, "rotation");
        snprintf(what, sizeof what, "rotated_cdf.csv, line %zu", i + 2);
        close_or_fail(ask_pair(c, CDF, u, v), want, tolerance_of(t, i, want), what, __FILE__,
                      __LINE__);
    }
    assert_int_equal(t->rows, 22 * 3 * 34 + 13);
    csv_free(t);
}

/* survival_cdf.csv: rotation 180 by inclusion and exclusion, with digits enough, of 2 to 40 columns
 * from 1e-300 to 1 - 1e-10. */
static void survival(void **state)
{
    (void)state;
    struct csv *t = csv_read("survival_cdf.csv");
    for (size_t i = 0; i < t->rows; i++) {
        struct sample_copula s;
        char what[100];
        double u[50], want = csv_number(t, i, "C");
        size_t d = 0;
        const char *text = csv_text(t, i, "u");
        for (char *end; *text; text = end + (*end == ' ')) u[d++] = strtod(text, &end);
        copula *c = one_parameter(&s, csv_text(t, i, "family"), d, csv_number(t, i, "theta"));
        c->rotation = 180;
        snprintf(what, sizeof what, "survival_cdf.csv, line %zu, %zu columns", i + 2, d);
        close_or_fail(ask(c, CDF, u), want, tolerance_of(t, i, want), what, __FILE__, __LINE__);
    }
    assert_int_equal(t->rows, 588);
    csv_free(t);
}

/* What the files leave out: every family at the ends of what it takes, and beyond what doubles can
 * square. */
static const struct {
    const char *word;
    double theta, df;
} hard[] = {
    { "independent", 0, 0 }, { "gaussian", -0.9999, 0 }, { "gaussian", 0, 0 },
    { "gaussian", 0.99, 0 },
    { "t", 0.5, 0.5 }, { "t", -0.9, 5.5 }, { "t", 0.3, 1e6 }, { "t", 0.999, 2 }, { "t", 0, 0.05 },
    { "clayton", -0.999, 0 }, { "clayton", -0.5, 0 }, { "clayton", -1e-9, 0 }, { "clayton", 0, 0 },
    { "clayton", 2e-9, 0 }, { "clayton", 2, 0 }, { "clayton", 19998, 0 },
    { "gumbel", 1, 0 }, { "gumbel", 1.000000001, 0 }, { "gumbel", 2, 0 }, { "gumbel", 10000, 0 },
    { "frank", -700, 0 }, { "frank", -39996, 0 }, { "frank", -1e-9, 0 }, { "frank", 0, 0 },
    { "frank", 1e-12, 0 }, { "frank", 5, 0 }, { "frank", 700, 0 }, { "frank", 39996, 0 },
    { "joe", 1, 0 }, { "joe", 1.999999, 0 }, { "joe", 2, 0 }, { "joe", 20000, 0 },
    { "amh", -1, 0 }, { "amh", 0, 0 }, { "amh", 0.5, 0 }, { "amh", 1, 0 },
    { "plackett", 1e-9, 0 }, { "plackett", 1, 0 }, { "plackett", 5, 0 }, { "plackett", 1e9, 0 },
    { "fgm", -1, 0 }, { "fgm", 0, 0 }, { "fgm", 1, 0 },
};
enum { HARD = sizeof hard / sizeof *hard };

static copula *hard_pair(struct sample_copula *s, size_t k)
{
    return family_named(hard[k].word)->has_matrix
         ? elliptical(s, hard[k].word, 2, hard[k].theta, hard[k].df)
         : one_parameter(s, hard[k].word, 2, hard[k].theta);
}

/* Whether the unrotated family has mass nowhere near this point: then the log-density may be
 * -infinity. fgm and amh vanish in two corners, at the ends of their parameter. */
static bool may_vanish(const copula *c, double u, double v)
{
    double theta = c->theta;
    if (!strcmp(c->family->word, "clayton"))
        return theta < 0 && pow(u, -theta) + pow(v, -theta) <= 1 + 1e-10;
    bool ends = fabs(theta) == 1 && fmin(u, 1 - u) < 1e-15 && fmin(v, 1 - v) < 1e-15;
    return ends && (!strcmp(c->family->word, "fgm") || !strcmp(c->family->word, "amh"));
}

/* Finite log-densities within 1e-12 of the corners and edges, and at 1e-300. */
static void log_densities_are_finite(void **state)
{
    (void)state;
    static const double at[] = { 1e-300, 1e-12, 1e-5, 0.3, 0.5, 0.9, 1 - 1e-12 };
    enum { AT = sizeof at / sizeof *at };
    for (size_t k = 0; k < HARD; k++)
        for (int rotation = 0; rotation < 360; rotation += 90)
            for (size_t i = 0; i < AT * AT; i++) {
                struct sample_copula s;
                copula *c = hard_pair(&s, k);
                c->rotation = rotation;
                double u = at[i / AT], v = at[i % AT], x = ask_pair(c, LOG_DENSITY, u, v);
                bool vanishes = may_vanish(c, rotation == 90 || rotation == 180 ? 1 - u : u,
                                           rotation >= 180 ? 1 - v : v);
                if (!isfinite(x) && !(vanishes && x == -INFINITY))
                    fail_msg("%s %g, rotation %d at %g %g: %g", hard[k].word, hard[k].theta,
                             rotation, u, v, x);
            }
}

/* The bounds of Frechet (1951) and Hoeffding (1940), and probabilities that are probabilities. */
static void within_bounds(void **state)
{
    (void)state;
    uint64_t r = 21;
    for (size_t k = 0; k < HARD; k++)
        for (size_t i = 0; i < effort(60); i++) {
            struct sample_copula s;
            copula *c = hard_pair(&s, k);
            c->rotation = 90 * (int)random_below(&r, 4);
            double u = random_uniform(&r), v = random_uniform(&r), h;
            if (random_below(&r, 2)) u *= u * u * u * u;
            if (random_below(&r, 2)) v = u * (1 + 1e-3 * random_uniform(&r)) / 1.001;
            double value = ask_pair(c, CDF, u, v), small = 1e-15 * fmin(u, v);
            assert_true(value >= fmax(0, u - (1 - v)) - small - 1e-15);
            assert_true(value <= fmin(u, v) + small);
            h = ask_pair(c, CONDITIONAL, u, v);
            assert_true(h > 0 && h < 1);
        }
}

/* Either is in (0;1), for t unless its quantiles are beyond doubles. */
static void check_inside(const copula *c, enum asked what, const double *u)
{
    double w;
    status s = try_to_ask(c, what, u, &w);
    if (s == OUT_OF_DOMAIN && !strcmp(c->family->word, "t")) return;
    if (s != OK || !(w >= DBL_MIN && w < 1))
        fail_msg("%s %g, rotation %d at %.17g %.17g: %g", c->family->word, c->theta, c->rotation,
                 u[0], u[1], w);
}

/* Conditional probabilities round to 0 and 1, where they could not be asked again. */
static void conditionals_stay_inside(void **state)
{
    (void)state;
    static const double at[] = { 1e-100, 1e-16, 1e-3, 0.5, 0.75, 1 - 0x1p-52, 1 - 0x1p-53 };
    enum { AT = sizeof at / sizeof *at };
    for (size_t k = 0; k < HARD; k++)
        for (size_t i = 0; i < 4 * AT * AT; i++) {
            struct sample_copula s;
            copula *c = hard_pair(&s, k);
            const double u[2] = { at[i / AT % AT], at[i % AT] };
            c->rotation = (int)(90 * (i / (AT * AT)));
            check_inside(c, CONDITIONAL, u);
            check_inside(c, FROM_CONDITIONAL, u);
        }
}

/* The definition of the rotations, on densities and probabilities. */
static void rotations(void **state)
{
    (void)state;
    uint64_t r = 22;
    for (size_t k = 0; k < HARD; k++)
        for (size_t i = 0; i < effort(20); i++) {
            struct sample_copula s;
            copula *c = hard_pair(&s, k);
            double u = random_uniform(&r), v = random_uniform(&r);
            double direct = ask_pair(c, CDF, 1 - u, v), both = ask_pair(c, CDF, 1 - u, 1 - v);
            double density = ask_pair(c, LOG_DENSITY, 1 - u, v);
            double given = ask_pair(c, CONDITIONAL, 1 - u, v);
            double third = ask_pair(c, CDF, u, 1 - v);
            double third_given = ask_pair(c, CONDITIONAL, u, 1 - v);
            c->rotation = 90;
            assert_within(ask_pair(c, CDF, u, v), v - direct, 1e-10);
            double scale = 1e-7 * (1 + fabs(density));
            if (isfinite(density)) assert_within(ask_pair(c, LOG_DENSITY, u, v), density, scale);
            assert_within(ask_pair(c, CONDITIONAL, u, v), given, 1e-9);
            c->rotation = 180;
            assert_within(ask_pair(c, CDF, u, v), u + v - 1 + both, 1e-10);
            c->rotation = 270;
            assert_within(ask_pair(c, CDF, u, v), u - third, 1e-10);
            assert_within(ask_pair(c, CONDITIONAL, u, v), 1 - third_given, 1e-9);
        }
}

/* For every family in up to `most` columns: a random w through both transforms. */
static void there_and_back(copula *c, size_t times, uint64_t *r)
{
    pool p = { 0 };
    struct evaluation e;
    double w[50], u[50], back[50];
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    for (size_t i = 0; i < times; i++) {
        for (size_t j = 0; j < c->dimension; j++) w[j] = random_uniform(r);
        assert_int_equal(from_conditional_at(&e, w, u), OK);
        assert_int_equal(conditional_at(&e, u, back), OK);
        for (size_t j = 0; j < c->dimension; j++) {
            assert_true(u[j] > 0 && u[j] < 1);
            close_or_fail(back[j], w[j], 1e-10, c->family->word, __FILE__, __LINE__);
        }
    }
    pool_empty(&p);
}

static void transforms_are_inverse(void **state)
{
    (void)state;
    static const struct { const char *word; double theta, df; } any[] = {
        { "independent", 0, 0 }, { "gaussian", 0.4, 0 }, { "t", 0.6, 0.7 }, { "t", 0.3, 5.5 },
        { "t", 0.5, 1e6 }, { "clayton", 2e-9, 0 }, { "clayton", 1, 0 }, { "clayton", 6, 0 },
        { "gumbel", 1.01, 0 }, { "gumbel", 1.5, 0 }, { "gumbel", 3, 0 }, { "frank", 1e-9, 0 },
        { "frank", 5, 0 }, { "frank", 20, 0 }, { "joe", 1.01, 0 }, { "joe", 2, 0 }, { "joe", 4, 0 },
    };
    uint64_t r = 23;
    for (size_t k = 0; k < sizeof any / sizeof *any; k++)
        for (size_t d = 2; d <= 20; d += d < 6 ? 1 : 7) {
            struct sample_copula s;
            copula *c = family_named(any[k].word)->has_matrix
                      ? elliptical(&s, any[k].word, d, any[k].theta, any[k].df)
                      : one_parameter(&s, any[k].word, d, any[k].theta);
            there_and_back(c, effort(20), &r);
            c->rotation = 180;
            there_and_back(c, effort(5), &r);
        }
    for (size_t k = 0; k < HARD; k++) {
        struct sample_copula s;
        copula *c = hard_pair(&s, k);
        double tau = 0;
        if (c->family->has_theta) c->family->tau_from_theta(c->theta, &tau);
        if (fabs(tau) > 0.95) continue;        /* there the last digit of u is worth more */
        for (c->rotation = 0; c->rotation < 360; c->rotation += 90)
            there_and_back(c, effort(20), &r);
    }
}

/* Rosenblatt (1952): CONDITIONAL of a draw is uniform, column by column, and pairwise
 * independent: the correlation is within 4.5 standard errors of 0. */
static void draws_become_independent(copula *c)
{
    size_t n = effort(20000), d = c->dimension;
    pool p = { 0 };
    struct evaluation e;
    double *u = drawn(c, 77, 0, n), w[50], point[50], *sum = calloc(d * d, sizeof *sum);
    size_t (*bins)[20] = calloc(d, sizeof *bins);
    assert_int_equal(evaluation_of(c, &e, &p), OK);
    for (size_t i = 0; i < n; i++) {
        for (size_t j = 0; j < d; j++) point[j] = u[j * n + i];
        assert_int_equal(conditional_at(&e, point, w), OK);
        for (size_t j = 0; j < d; j++) {
            bins[j][(size_t)fmin(19, 20 * w[j])]++;
            for (size_t k = 0; k < j; k++) sum[j * d + k] += 12 * (w[j] - 0.5) * (w[k] - 0.5);
        }
    }
    for (size_t j = 0; j < d; j++) {
        double square = 0, expected = (double)n / 20;
        for (int b = 0; b < 20; b++) square += pow((double)bins[j][b] - expected, 2) / expected;
        /* the chi-square with 19 degrees of freedom exceeds 51 once in ten thousand times */
        close_or_fail(square, 0, 51, c->family->word, __FILE__, __LINE__);
        for (size_t k = 0; k < j; k++)
            close_or_fail(sum[j * d + k] / (double)n, 0, 4.5 / sqrt((double)n), c->family->word,
                          __FILE__, __LINE__);
    }
    free(u), free(sum), free(bins);
    pool_empty(&p);
}

static void conditional_of_draws(void **state)
{
    (void)state;
    static const struct {
        const char *word;
        size_t d;
        double theta, df, last;
        int rotation;
    } any[] = {
        { "independent", 3, 0, 0, 0, 0 }, { "gaussian", 5, 0.5, 0, 0, 0 },
        { "gaussian", 2, 0.5, 0, 0, 90 },
        { "t", 4, 0.5, 3, 0, 0 }, { "t", 2, 0.7, 0.5, 0, 270 }, { "t", 3, 0.5, 3, 30, 0 },
        { "t", 2, 0.6, 2, 8, 90 }, { "clayton", 4, 2, 0, 0, 180 }, { "clayton", 2, -0.5, 0, 0, 0 },
        { "clayton", 2, 1, 0, 0, 90 }, { "gumbel", 4, 2, 0, 0, 0 }, { "gumbel", 2, 3, 0, 0, 270 },
        { "frank", 4, 5, 0, 0, 0 }, { "frank", 2, -8, 0, 0, 90 }, { "joe", 4, 2.5, 0, 0, 180 },
        { "amh", 2, 0.9, 0, 0, 0 }, { "amh", 2, -1, 0, 0, 90 }, { "plackett", 2, 12, 0, 0, 0 },
        { "plackett", 2, 0.1, 0, 0, 180 }, { "fgm", 2, 1, 0, 0, 0 }, { "fgm", 2, -0.8, 0, 0, 270 },
    };
    for (size_t k = 0; k < sizeof any / sizeof *any; k++) {
        struct sample_copula s;
        copula *c = family_named(any[k].word)->has_matrix
                  ? elliptical(&s, any[k].word, any[k].d, any[k].theta, any[k].df)
                  : one_parameter(&s, any[k].word, any[k].d, any[k].theta);
        if (any[k].last > 0) s.df[any[k].d - 1] = any[k].last;
        c->rotation = any[k].rotation;
        draws_become_independent(c);
    }
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_pairs), cmocka_unit_test(published_quantiles),
        cmocka_unit_test(joint_exceedances), cmocka_unit_test(rotated_pairs),
        cmocka_unit_test(log_densities_are_finite),
        cmocka_unit_test(within_bounds), cmocka_unit_test(conditionals_stay_inside),
        cmocka_unit_test(survival), cmocka_unit_test(rotations),
        cmocka_unit_test(transforms_are_inverse), cmocka_unit_test(conditional_of_draws),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
