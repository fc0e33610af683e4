/* Spearman's rho of the t copula, down to df that are all but 0. */
#include "table.h"

#include "../../src/t_rho.h"

static const double PI = 3.14159265358979323846;

/* By mpmath, 22 digits: (6/pi) times the sum of c_k r^(2k+1) E (XY)^s, s = k + 1/2, c_k being the
 * coefficients of asin. Given G the moment of X, and that of Y, is
 * G^a Gamma(a+s)/Gamma(a) U(a+s, a+1, G) with Tricomi's U (DLMF 13.4.4); one integral is left, over
 * log G. */
static void by_tricomi(void **state)
{
    (void)state;
    static const struct { double correlation, df, rho; } known[] = {
        { 0.5, 0.9, 0.427905394942244 },  { 0.5, 0.05, 0.343631822829355 },
        { 0.5, 0.01, 0.335468204574411 }, { 0.5, 1e-6, 0.333333548710442 },
        { 0.5, 1, 0.432124769115842 },
    };
    for (size_t i = 0; i < sizeof known / sizeof *known; i++) {
        double rho = rho_of_t(known[i].correlation, known[i].df);
        assert_within(rho, known[i].rho, 2e-13);
        assert_within(rho_of_t(-known[i].correlation, known[i].df), -rho, 1e-15);
    }
}

/* Both methods meet at df 1. */
static void seam(void **state)
{
    (void)state;
    for (double correlation = -0.99; correlation < 1; correlation += 0.11) {
        double above = rho_of_t(correlation, 1), below = rho_of_t(correlation, nextafter(1, 0));
        assert_within(below, above, 2e-13);
    }
}

/* As df falls to 0 rho falls to tau = 2 asin(correlation) / pi; the number of steps does not grow,
 * or this would never end. */
static void no_freedom(void **state)
{
    (void)state;
    uint64_t s = 41;
    for (size_t i = 0; i < effort(10); i++) {
        double correlation = random_uniform(&s), tau = 2 * asin(correlation) / PI, last = 1;
        for (double df = 1; df > 1e-7; df /= 10) {
            double rho = rho_of_t(correlation, df);
            assert_true(rho > tau && rho < last);
            last = rho;
        }
        assert_within(rho_of_t(correlation, 1e-6), tau, 1e-6);
        assert_within(rho_of_t(correlation, 1e-15), tau, 1e-14);
        assert_within(rho_of_t(correlation, 1e-300), tau, 1e-14);
    }
    assert_same(rho_of_t(1, 1e-9), 1);
    assert_same(rho_of_t(-1, 1e-9), -1);
}

int main(void)
{
    const struct CMUnitTest tests[] = { cmocka_unit_test(by_tricomi), cmocka_unit_test(seam),
                                        cmocka_unit_test(no_freedom) };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
