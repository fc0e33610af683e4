/* The rule is exact for powers to the 39th and no further. */
#include "table.h"

#include "../../src/quadrature.h"

static void powers(void **state)
{
    (void)state;
    for (int k = 0; k <= 39; k++) {
        double want = (pow(2, k + 1) - pow(0.5, k + 1)) / (k + 1);
        assert_close(integral_over(pow, k, 0.5, 2), want, 4e-15);
    }
    double beyond = (1 + pow(-1, 40)) / 41;
    assert_true(fabs(integral_over(pow, 40, -1, 1) - beyond) > 1e-13);
}

int main(void)
{
    const struct CMUnitTest tests[] = { cmocka_unit_test(powers) };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
