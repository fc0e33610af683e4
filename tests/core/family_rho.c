/* Spearman's rho of every family, and back. */
#include "family_rows.h"

#include <gsl/gsl_errno.h>

/* Spearman's rho beside tau in both files: Pearson (1907), Nelsen (2006), 50 digits */
static void published_rho(void **state)
{
    (void)state;
    const char *files[] = { "tau_to_parameter.csv", "parameter_to_tau.csv" };
    size_t checked = 0;
    for (size_t k = 0; k < 2; k++) {
        struct csv *t = csv_read(files[k]);
        for (size_t i = 0; i < t->rows; i++) {
            const family *f = family_in_row(t, i);
            double rho, want = csv_number(t, i, "rho_spearman");
            if (!f || isnan(want)) continue;
            double lost = f->theta_low == 1
                              ? lost_to_rounding(csv_text(t, i, "parameter"), 1.5) : 0;
            assert_int_equal(f->rho_from_theta(csv_number(t, i, "parameter"), 0, &rho), OK);
            close_or_fail(rho + lost, want, 1e-12 * fabs(want), f->word, __FILE__, __LINE__);
            checked++;
        }
        csv_free(t);
    }
    assert_int_equal(checked, 238);
}

/* rho_spearman_clayton_joe.csv and rho_spearman_student_t.csv, by two-dimensional quadrature */
static void rho_by_quadrature(void **state)
{
    (void)state;
    struct csv *t = csv_read("rho_spearman_clayton_joe.csv");
    double rho;
    for (size_t i = 0; i < t->rows; i++) {
        const family *f = family_in_row(t, i);
        assert_int_equal(f->rho_from_theta(csv_number(t, i, "parameter"), 0, &rho), OK);
        assert_within(rho, csv_number(t, i, "rho_spearman"), csv_number(t, i, "tolerance"));
    }
    csv_free(t);
    t = csv_read("rho_spearman_student_t.csv");
    const family *f = family_named("t");
    for (size_t i = 0; i < t->rows; i++) {
        double correlation = csv_number(t, i, "rho"), want = csv_number(t, i, "rho_spearman");
        assert_int_equal(f->rho_from_theta(correlation, csv_number(t, i, "nu"), &rho), OK);
        assert_within(rho, want, csv_number(t, i, "tolerance"));
    }
    csv_free(t);
}

/* The correlation of a t falls back to that of the normal, and -rho to -correlation. */
static void rho_of_t(void **state)
{
    (void)state;
    const family *t = family_named("t"), *gaussian = family_named("gaussian");
    uint64_t s = 8;
    for (size_t i = 0; i < effort(20); i++) {
        double correlation = random_uniform(&s), rho, turned, normal;
        assert_int_equal(t->rho_from_theta(correlation, 1e9, &rho), OK);
        assert_int_equal(gaussian->rho_from_theta(correlation, 0, &normal), OK);
        assert_within(rho, normal, 1e-9);
        assert_int_equal(t->rho_from_theta(correlation, 3, &rho), OK);
        assert_int_equal(t->rho_from_theta(-correlation, 3, &turned), OK);
        assert_within(turned, -rho, 1e-15);
        assert_true(rho < normal);
    }
}

/* What rho of plackett loses when theta, in decimals just below 1, is rounded to a double */
static double lost_below_one(const char *theta)
{
    size_t nines = strspn(theta, "0.9") - 2;
    if (strncmp(theta, "0.99", 4) || theta[nines + 2]) return 0;
    return ((1 - strtod(theta, NULL)) - pow(10, -(double)nines)) / 3;
}

/* plackett_rho_spearman.csv: Mardia (1970), 50 digits, and inverses; plackett_tau.csv by
 * two-dimensional quadrature */
static void plackett(void **state)
{
    (void)state;
    const family *f = family_named("plackett");
    struct csv *t = csv_read("plackett_rho_spearman.csv");
    for (size_t i = 0; i < t->rows; i++) {
        const char *text = csv_text(t, i, "parameter");
        double theta = csv_number(t, i, "parameter"), rho = csv_number(t, i, "rho_spearman"), x;
        if (csv_is(t, i, "family", "plackett inverse")) {
            assert_int_equal(f->theta_from_spearman(rho, &x), OK);
            assert_within(x, theta, allowed(t, i, theta));
            continue;
        }
        double lost = strncmp(text, "1.0", 3) ? lost_below_one(text)
                                              : lost_to_rounding(text, 1.0 / 3);
        assert_int_equal(f->rho_from_theta(theta, 0, &x), OK);
        assert_within(x + lost, rho, allowed(t, i, rho));
    }
    csv_free(t);
    t = csv_read("plackett_tau.csv");
    for (size_t i = 0; i < t->rows; i++) {
        double tau;
        assert_int_equal(f->tau_from_theta(csv_number(t, i, "parameter"), &tau), OK);
        assert_within(tau, csv_number(t, i, "tau"), csv_number(t, i, "tolerance"));
    }
    csv_free(t);
}

/* Families whose rho is inverted by themselves: there and back, over all that they reach; 33 - 48
 * log 2 and 4 pi^2 - 39 are the ends of amh (Nelsen 2006). */
static void rho_both_ways(void **state)
{
    (void)state;
    uint64_t s = 10;
    for (const family *const *f = families; *f; f++) {
        if (!(*f)->theta_from_spearman) continue;
        double low = (*f)->rho_low, high = (*f)->rho_high, theta, back;
        if (low == 0 && high == 0) low = -1, high = 1;
        for (size_t i = 0; i < effort(2000); i++) {
            double part = pow(10, -7 * random_uniform(&s)), end = random_below(&s, 2) ? low : high;
            double rho = end * (random_below(&s, 2) ? part : 1 - part * part);
            assert_int_equal((*f)->theta_from_spearman(rho, &theta), OK);
            assert_int_equal((*f)->rho_from_theta(theta, 0, &back), OK);
            double most = 1e-12 * fabs(rho) + (about_one(*f) ? 2.3e-16 : 0);
            close_or_fail(back, rho, most, (*f)->word, __FILE__, __LINE__);
        }
        assert_int_equal((*f)->theta_from_spearman(nextafter(low, -2), &theta), OUT_OF_DOMAIN);
        assert_int_equal((*f)->theta_from_spearman(nextafter(high, 2), &theta), OUT_OF_DOMAIN);
        assert_int_equal((*f)->theta_from_spearman(NAN, &theta), OUT_OF_DOMAIN);
    }
    double rho;
    assert_int_equal(family_named("amh")->rho_from_theta(-1, 0, &rho), OK);
    assert_within(rho, 33 - 48 * log(2), 1e-14);
    assert_int_equal(family_named("amh")->rho_from_theta(1, 0, &rho), OK);
    assert_within(rho, 4 * acos(-1) * acos(-1) - 39, 1e-14);
}

/* Pairs of clayton below 0: at -1/2 the integral of C = max(sqrt u + sqrt v - 1, 0)^2 is 19/90, so
 * rho is -7/15; the rest by NumPy with Gauss and Legendre's rule on 200 x 200 points. */
static void rho_of_negative_clayton(void **state)
{
    (void)state;
    const family *f = family_named("clayton");
    const struct { double theta, rho, most; } known[] = {
        { -1, -1, 1e-15 }, { -0.5, -7.0 / 15, 1e-14 }, { -0.9, -0.8979949453, 2e-10 },
        { -0.2, -0.16551702265985, 5e-14 },
        { -0.05, -0.03844856297165, 5e-14 }, { -0.01, -0.00753759279113, 5e-14 },
    };
    double rho, below;
    for (size_t i = 0; i < sizeof known / sizeof *known; i++) {
        assert_int_equal(f->rho_from_theta(known[i].theta, 0, &rho), OK);
        assert_within(rho, known[i].rho, known[i].most);
    }
    for (int side = -1; side <= 1; side += 2) {              /* where the forms meet */
        assert_int_equal(f->rho_from_theta(0.025 * side, 0, &rho), OK);
        assert_int_equal(f->rho_from_theta(nextafter(0.025 * side, 0), 0, &below), OK);
        assert_within(below, rho, 1e-15);
    }
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_rho), cmocka_unit_test(rho_by_quadrature),
        cmocka_unit_test(rho_of_t), cmocka_unit_test(plackett),
        cmocka_unit_test(rho_both_ways), cmocka_unit_test(rho_of_negative_clayton),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
