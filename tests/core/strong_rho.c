/* The distance of rho from 1 for clayton and joe. */
#include "table.h"

#include "../../src/family.h"
#include "../../src/spearman_inverse.h"
#include "../../src/strong_rho.h"

static const double PI = 3.14159265358979323846;

/* rho as a hypergeometric series 3F2 at 1, after Thomae's transformation (DLMF 16.4.11), by mpmath
 * with 40 digits */
static const struct {
    double theta, clayton, joe;
} known[] = {
    { 2, 0.31776616671934371, 0.49579356506331409 },
    { 30, 0.0062079281294870035, 0.0065042015877530725 },
    { 1e3, 6.5462081053450847e-6, 6.555769585796409e-6 },
    { 1e5, 6.5793997044474509e-10, 6.5794958634800796e-10 },
    { 1e6, 6.5797026099294956e-12, 6.5797122263295226e-12 },
};

static void by_hypergeometric_series(void **state)
{
    (void)state;
    const family *clayton = family_named("clayton"), *joe = family_named("joe");
    for (size_t i = 0; i < sizeof known / sizeof *known; i++) {
        double theta = known[i].theta, rho;
        assert_close(one_minus_rho_of_clayton(theta), known[i].clayton, 1e-13);
        assert_close(one_minus_rho_of_joe(theta), known[i].joe, 1e-13);
        assert_int_equal(clayton->rho_from_theta(theta, 0, &rho), OK);
        assert_within(rho, 1 - known[i].clayton,
                      theta > 10 ? 1.2e-16 + 1e-13 * known[i].clayton : 2e-14);
        assert_int_equal(joe->rho_from_theta(theta, 0, &rho), OK);
        assert_within(rho, 1 - known[i].joe,
                      theta > 10 ? 1.2e-16 + 1e-13 * known[i].joe : 2e-14);
    }
}

/* theta from rho is as good as the double that holds rho: moved by half its last place, theta moves
 * by 3e-17 / (1 - rho) of itself. */
static void theta_near_one(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof known / sizeof *known; i++) {
        double theta, most = 1e-11 + 1.2e-16 / known[i].joe;
        assert_int_equal(theta_from_rho(family_named("clayton"), 1 - known[i].clayton, 0, &theta),
                         OK);
        assert_close(theta, known[i].theta, most);
        assert_int_equal(theta_from_rho(family_named("joe"), 1 - known[i].joe, 0, &theta), OK);
        assert_close(theta, known[i].theta, most);
    }
}

/* As theta grows 1 - rho tends to (2 pi^2/3) / theta^2: 24/theta^2 times a third of the integral of
 * log(1 + exp(-p)), which is pi^2/12. */
static void limit(void **state)
{
    (void)state;
    for (double theta = 1e8; theta < 1e17; theta *= 10) {
        double want = 2 * PI * PI / 3 / (theta * theta);
        assert_close(one_minus_rho_of_clayton(theta), want, 1e-7);
        assert_close(one_minus_rho_of_joe(theta), want, 1e-7);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = { cmocka_unit_test(by_hypergeometric_series),
                                        cmocka_unit_test(theta_near_one),
                                        cmocka_unit_test(limit) };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
