/* Kendall's tau and the parameter of every family, both ways, and what else the rows promise. */
#include "family_rows.h"

#include "../../src/draw.h"

#include <float.h>
#include <gsl/gsl_errno.h>
#include <gsl/gsl_sf_debye.h>
#include <gsl/gsl_sf_psi.h>

/* tau_to_parameter.csv: Greiner (1909), Genest (1987), Joe (1997, 2014), Nelsen (2006) */
static void theta_from_published_tau(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_to_parameter.csv");
    size_t checked = 0;
    for (size_t i = 0; i < t->rows; i++) {
        const family *f = family_in_row(t, i);
        if (!f) continue;
        double theta, want = csv_number(t, i, "parameter");
        assert_int_equal(f->theta_from_tau(csv_number(t, i, "tau"), &theta), OK);
        close_or_fail(theta, want, allowed(t, i, want), f->word, __FILE__, __LINE__);
        close_or_fail(theta, want, 1e-12 * fabs(want), f->word, __FILE__, __LINE__);
        checked++;
    }
    assert_int_equal(checked, 252);
    csv_free(t);
}

/* parameter_to_tau.csv: the same sources, the hard spots of frank and joe among them */
static void tau_from_published_theta(void **state)
{
    (void)state;
    struct csv *t = csv_read("parameter_to_tau.csv");
    size_t checked = 0;
    for (size_t i = 0; i < t->rows; i++) {
        const family *f = family_in_row(t, i);
        if (!f) continue;
        double slope = strcmp(f->word, "joe") ? 1 : 0.5797362673929056;
        double lost = f->theta_low == 1 ? lost_to_rounding(csv_text(t, i, "parameter"), slope) : 0;
        double tau, want = csv_number(t, i, "tau");
        assert_int_equal(f->tau_from_theta(csv_number(t, i, "parameter"), &tau), OK);
        close_or_fail(tau + lost, want, allowed(t, i, want), f->word, __FILE__, __LINE__);
        checked++;
    }
    assert_int_equal(checked, 139);
    csv_free(t);
}

/* "gumbel" or "survival_gumbel", whose corners are exchanged */
static bool is_survival(const char **word)
{
    bool survival = !strncmp(*word, "survival_", 9);
    if (survival) *word += 9;
    return survival;
}

/* tail_dependence.csv: Embrechts, McNeil & Straumann (2002), McNeil, Frey & Embrechts (2005) */
static void published_tails(void **state)
{
    (void)state;
    struct csv *t = csv_read("tail_dependence.csv");
    size_t checked = 0;
    for (size_t i = 0; i < t->rows; i++) {
        const char *word = csv_text(t, i, "family");
        bool survival = is_survival(&word), is_t = !strcmp(word, "student_t");
        const family *f = family_named(is_t ? "t" : strcmp(word, "normal") ? word : "gaussian");
        if (!f) continue;
        double parameter = csv_number(t, i, "parameter_or_nu");
        double theta = is_t ? csv_number(t, i, "rho") : parameter, df = is_t ? parameter : 0;
        double lower = csv_number(t, i, "lambda_lower"), upper = csv_number(t, i, "lambda_upper");
        bool exact = csv_is(t, i, "tolerance", "exact");
        double got_lower = f->tail(theta, df, survival ? UPPER : LOWER);
        double got_upper = f->tail(theta, df, survival ? LOWER : UPPER);
        assert_within(got_lower, lower, exact ? 0 : allowed(t, i, lower));
        assert_within(got_upper, upper, exact ? 0 : allowed(t, i, upper));
        checked++;
    }
    assert_int_equal(checked, 226);
    csv_free(t);
}

/* tau within the family's reach, on all scales towards 0 and towards 1; for elliptical families to
 * 0.99 only, since above the correlation is too near 1 for its last digit to tell one tau from the
 * next */
static double random_tau(const family *f, uint64_t *s)
{
    double nearest_to_one = f->has_matrix ? 0.01 : 1e-10;
    double tau = random_below(s, 2) ? pow(10, -10 * random_uniform(s))
                                    : 1 - pow(nearest_to_one, random_uniform(s));
    if (f->has_matrix && tau > 0.99) tau = 0.99;
    if (f->tau_low < 0 && random_below(s, 2)) return tau * -f->tau_low * -1;
    return tau * f->tau_high;
}

/* Near theta = 1 its last digit is worth more than 1e-12 of tau, hence the absolute part. */
static void round_trips(void **state)
{
    (void)state;
    uint64_t s = 5;
    for (const family *const *f = families; *f; f++) {
        if ((*f)->tau_low == (*f)->tau_high) continue;
        for (size_t i = 0; i < effort(3000); i++) {
            double tau = random_tau(*f, &s), theta, back;
            assert_int_equal((*f)->theta_from_tau(tau, &theta), OK);
            assert_int_equal((*f)->tau_from_theta(theta, &back), OK);
            double most = 1e-12 * fabs(tau) + (about_one(*f) ? 2.3e-16 : 0);
            close_or_fail(back, tau, most, (*f)->word, __FILE__, __LINE__);
        }
    }
}

static void theta_grows_with_tau(void **state)
{
    (void)state;
    uint64_t s = 6;
    for (const family *const *f = families; *f; f++) {
        if ((*f)->tau_low == (*f)->tau_high) continue;
        for (size_t i = 0; i < effort(1000); i++) {
            double a = random_tau(*f, &s), low, high;
            double b = a + fmin(a - (*f)->tau_low + 0.01, (*f)->tau_high - a) * 1e-4;
            assert_int_equal((*f)->theta_from_tau(a, &low), OK);
            assert_int_equal((*f)->theta_from_tau(b, &high), OK);
            assert_true(low < high);
        }
    }
}

/* frank by GSL's Debye function and joe by its digamma function, where those hold */
static void library_functions_agree(void **state)
{
    (void)state;
    const family *frank = family_named("frank"), *joe = family_named("joe");
    uint64_t s = 7;
    for (size_t i = 0; i < effort(2000); i++) {
        double theta = 1 + 60 * random_uniform(&s), tau;
        assert_int_equal(frank->tau_from_theta(theta, &tau), OK);
        assert_close(tau, 1 - 4 / theta * (1 - gsl_sf_debye_1(theta)), 2e-14);
        assert_int_equal(frank->tau_from_theta(-theta, &tau), OK);
        assert_close(-tau, 1 - 4 / theta * (1 - gsl_sf_debye_1(theta)), 2e-14);

        theta = 2.2 + 60 * random_uniform(&s);
        assert_int_equal(joe->tau_from_theta(theta, &tau), OK);
        double difference = gsl_sf_psi(2) - gsl_sf_psi(2 / theta + 1);
        assert_close(tau, 1 + 2 / (2 - theta) * difference, 5e-14);
    }
}

/* Both forms of frank meet at theta = 2, those of joe at 3, those of their inverses in between:
 * a step of one unit there moves the result by no more than a few. */
static void forms_meet(void **state)
{
    (void)state;
    const struct { const char *word; double theta, tau; } seams[] = {
        { "frank", 2, 0.2 }, { "frank", -2, -0.2 }, { "joe", 3, 0.5 }, { "gumbel", 2, 0.5 },
        { "amh", 0.7, 0.195 }, { "amh", -0.7, -0.13 }, { "plackett", 2, 0.153 },
    };
    for (size_t i = 0; i < sizeof seams / sizeof *seams; i++) {
        const family *f = family_named(seams[i].word);
        double at, below;
        assert_int_equal(f->tau_from_theta(seams[i].theta, &at), OK);
        assert_int_equal(f->tau_from_theta(nextafter(seams[i].theta, 0), &below), OK);
        assert_close(below, at, 2e-15);
        assert_int_equal(f->theta_from_tau(seams[i].tau, &at), OK);
        assert_int_equal(f->theta_from_tau(nextafter(seams[i].tau, 0), &below), OK);
        assert_close(below, at, 4e-15);
    }
}

static void exact_values(void **state)
{
    (void)state;
    const struct { const char *word; double tau, theta; } exact[] = {
        { "gaussian", -1, -1 }, { "gaussian", 0, 0 }, { "t", 1, 1 }, { "clayton", -1, -1 },
        { "clayton", 0, 0 }, { "gumbel", 0, 1 }, { "frank", 0, 0 }, { "joe", 0, 1 },
        { "independent", 0, 0 }, { "amh", 0, 0 }, { "amh", 1.0 / 3, 1 }, { "plackett", 0, 1 },
        { "fgm", 0, 0 }, { "fgm", -2.0 / 9, -1 }, { "fgm", 2.0 / 9, 1 },
    };
    for (size_t i = 0; i < sizeof exact / sizeof *exact; i++) {
        const family *f = family_named(exact[i].word);
        double x;
        assert_int_equal(f->theta_from_tau(exact[i].tau, &x), OK);
        assert_same(x, exact[i].theta);
        assert_int_equal(f->tau_from_theta(exact[i].theta, &x), OK);
        assert_same(x, exact[i].tau);
    }
}

/* The reach of tau in the row is the reach of the function, open ends and all. */
static void reach(void **state)
{
    (void)state;
    for (const family *const *f = families; *f; f++) {
        const family *it = *f;
        double x;
        assert_int_equal(it->theta_from_tau(it->tau_low, &x),
                         it->tau_open & 1 ? OUT_OF_DOMAIN : OK);
        assert_int_equal(it->theta_from_tau(it->tau_high, &x),
                         it->tau_open & 2 ? OUT_OF_DOMAIN : OK);
        assert_int_equal(it->theta_from_tau(nextafter(it->tau_low, -9), &x), OUT_OF_DOMAIN);
        assert_int_equal(it->theta_from_tau(nextafter(it->tau_high, 9), &x), OUT_OF_DOMAIN);
        assert_int_equal(it->theta_from_tau(NAN, &x), OUT_OF_DOMAIN);
        if (!it->has_theta) continue;
        assert_int_equal(it->tau_from_theta(NAN, &x), OUT_OF_DOMAIN);
        if (isfinite(it->theta_low))
            assert_int_equal(it->tau_from_theta(nextafter(it->theta_low, -9), &x), OUT_OF_DOMAIN);
        assert_true(it->theta_low_beyond_pairs >= it->theta_low);
    }
}

/* tau near both ends of what doubles can say */
static void extremes(void **state)
{
    (void)state;
    for (const family *const *f = families; *f; f++) {
        if ((*f)->tau_low == (*f)->tau_high) continue;
        double theta, back, close_to_one = fmin((*f)->tau_high, 1 - 0x1p-53);
        assert_int_equal((*f)->theta_from_tau(close_to_one, &theta), OK);
        assert_int_equal((*f)->tau_from_theta(theta, &back), OK);
        assert_within(back, close_to_one, 0x1p-53);
        assert_int_equal((*f)->theta_from_tau(1e-300, &theta), OK);
        assert_true(isfinite(theta));
    }
}

static void words(void **state)
{
    (void)state;
    const char *rest = family_words;
    for (const family *const *f = families; *f; f++) {
        size_t n = strlen((*f)->word);
        assert_memory_equal(rest, (*f)->word, n);
        assert_true(rest[n] == (f[1] ? ' ' : 0));
        rest += n + 1;
        assert_ptr_equal(family_named((*f)->word), *f);
    }
    assert_null(family_named("normal"));
    assert_null(family_named(""));
}

/* Kendall's tau of a draw from disjoint pairs of rows, so that their signs are independent. */
static double drawn_tau(const copula *c, size_t n)
{
    pool p = { 0 };
    double *u = pool_take(&p, 2 * n, sizeof *u), sum = 0;
    assert_int_equal(draw(c, 12, 0, n, u, n, &p), OK);
    for (size_t i = 0; i + 1 < n; i += 2) {
        assert_true(u[i] > 0 && u[i] < 1 && u[n + i] > 0 && u[n + i] < 1);
        double agree = (u[i] - u[i + 1]) * (u[n + i] - u[n + i + 1]);
        sum += agree > 0 ? 1 : agree < 0 ? -1 : 0;
    }
    pool_empty(&p);
    return sum / (double)(n / 2);
}

/* Draws have the tau that theta stands for, negative ones and those near independence too. */
static void draws_have_their_tau(void **state)
{
    (void)state;
    const struct { const char *word; double theta; } cases[] = {
        { "clayton", -0.999 }, { "clayton", -0.7 }, { "clayton", -0.2 }, { "clayton", -1e-9 },
        { "clayton", 0 }, { "clayton", 1e-12 }, { "clayton", 3 }, { "clayton", 500 },
        { "frank", -40 }, { "frank", -5 }, { "frank", -1e-12 }, { "frank", 0 }, { "frank", 1e-12 },
        { "frank", 5 }, { "frank", 800 }, { "gumbel", 1 }, { "gumbel", 3 }, { "gumbel", 500 },
        { "joe", 1 }, { "joe", 3 }, { "joe", 500 },
        { "amh", -1 }, { "amh", 0.5 }, { "amh", 1 }, { "fgm", -1 }, { "fgm", 0.7 },
        { "plackett", 1e-120 }, { "plackett", 0.03 }, { "plackett", 1 }, { "plackett", 20 },
        { "plackett", 1e9 },
    };
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        copula c = { .family = family_named(cases[i].word), .dimension = 2,
                     .theta = cases[i].theta };
        size_t n = effort(40000);
        double want, tau = drawn_tau(&c, n);
        assert_int_equal(c.family->tau_from_theta(c.theta, &want), OK);
        double most = 4 * sqrt((1 - want * want) / (double)(n / 2));   /* standard errors */
        close_or_fail(tau, want, most, c.family->word, __FILE__, __LINE__);
    }
}

/* Uniform to the highest theta of its row: its first two moments are 1/2 and 1/3, their standard
 * deviations sqrt(1/12) and sqrt(4/45). Every tau below 1 has its theta within the row. */
static void uniform_at_the_highest_theta(void **state)
{
    (void)state;
    for (const family *const *f = families; *f; f++) {
        if (!(*f)->has_theta) continue;
        copula c = { .family = *f, .dimension = 2, .theta = fmin((*f)->theta_high, DBL_MAX) };
        pool p = { 0 };
        size_t n = effort(20000);
        double *u = pool_take(&p, 2 * n, sizeof *u), theta;
        assert_int_equal(draw(&c, 12, 0, n, u, n, &p), OK);
        for (size_t j = 0; j < 2; j++) {
            double sum = 0, squares = 0;
            for (size_t i = j * n; i < (j + 1) * n; i++) {
                sum += u[i];
                squares += u[i] * u[i];
            }
            double root = sqrt((double)n);
            close_or_fail(sum / (double)n, 0.5, 4 * sqrt(1.0 / 12) / root, (*f)->word, __FILE__,
                          __LINE__);
            close_or_fail(squares / (double)n, 1.0 / 3, 4 * sqrt(4.0 / 45) / root, (*f)->word,
                          __FILE__, __LINE__);
        }
        if ((*f)->theta_from_tau(1 - 0x1p-53, &theta) == OK) assert_true(theta <= (*f)->theta_high);
        pool_empty(&p);
    }
}

/* clayton at -1 is v = 1 - u; in [-1;0) all mass is where u^a + v^a >= 1, a = -theta. */
static void support_of_negative_clayton(void **state)
{
    (void)state;
    enum { ROWS = 5000 };
    static double u[2 * ROWS];
    const double thetas[] = { -1, -0.9999, -0.5, -0.01 };
    for (size_t k = 0; k < 4; k++) {
        pool p = { 0 };
        copula c = { .family = family_named("clayton"), .dimension = 2, .theta = thetas[k] };
        assert_int_equal(draw(&c, 5, 0, ROWS, u, ROWS, &p), OK);
        for (size_t i = 0; i < ROWS; i++) {
            assert_true(pow(u[i], -thetas[k]) + pow(u[ROWS + i], -thetas[k]) > 1 - 1e-14);
            if (k == 0) assert_same(u[ROWS + i], 1 - u[i]);
        }
        pool_empty(&p);
    }
}

/* psi is the Laplace transform the header of each file states. */
static void laplace_transforms(void **state)
{
    (void)state;
    uint64_t s = 31;
    for (size_t i = 0; i < effort(3000); i++) {
        double t = exp(3 * random_normal(&s)), theta = 1 + 8 * random_uniform(&s);
        double p = -expm1(-theta), q = p * exp(-t);
        assert_close(family_named("clayton")->psi(log(t), theta), pow(1 + t, -1 / theta), 1e-13);
        assert_close(family_named("gumbel")->psi(log(t), theta), exp(-pow(t, 1 / theta)), 1e-12);
        assert_close(family_named("frank")->psi(log(t), theta), -log1p(-q) / theta, 1e-12);
        double joe = -expm1(log1p(-exp(-t)) / theta);
        assert_close(family_named("joe")->psi(log(t), theta), joe, 1e-12);
    }
}

int main(void)
{
    gsl_set_error_handler_off();                             /* as the add-in does at load */
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(theta_from_published_tau), cmocka_unit_test(tau_from_published_theta),
        cmocka_unit_test(round_trips), cmocka_unit_test(theta_grows_with_tau),
        cmocka_unit_test(library_functions_agree), cmocka_unit_test(forms_meet),
        cmocka_unit_test(exact_values), cmocka_unit_test(reach), cmocka_unit_test(extremes),
        cmocka_unit_test(words), cmocka_unit_test(published_tails),
        cmocka_unit_test(draws_have_their_tau),
        cmocka_unit_test(uniform_at_the_highest_theta),
        cmocka_unit_test(support_of_negative_clayton), cmocka_unit_test(laplace_transforms),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
