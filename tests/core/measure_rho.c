/* RHO, RHOGRID and NORMALSCOREGRID as a cell calls them; numbers worked by hand. */
#include "measured.h"

static void rho(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value x = cells(&p, "1; 2; ; 3; 4"), y = cells(&p, "1; 3; 9; 2; 4");
    assert_close(CALL("rho", OK, x, y).number, 0.8, 1e-15);
    assert_non_null(strstr(r.facts, "4 rows used, 1 dropped for gaps"));
    CALL("rho", TOO_FEW, cells(&p, "1; "), cells(&p, "1; 2"));
    assert_string_equal(r.why, "x and y have 1 row in common, but rho needs at least 2");
    CALL("rho", NO_VARIATION, cells(&p, "1; 2"), cells(&p, "2; 2"));
    assert_string_equal(r.why, "y is the same in all 2 rows used, and rho is undefined");
    pool_empty(&p);
}

/* Row 4 is missing in column 2, and column 3 is constant elsewhere. */
static void grids(void **state)
{
    (void)state;
    pool p = { 0 };
    report r;
    value data = cells(&p, "1, 1, 7; 2, 3, 7; 3, 2, 7; 9, , 8");
    value g = CALL("rhoGrid", OK, data);
    assert_close(at(&g, 0, 1), 0.5, 1e-15);
    assert_same(at(&g, 1, 0), at(&g, 0, 1));
    assert_close(at(&g, 0, 2), 3 / sqrt(15), 1e-15);         /* ranks 1 2 3 4 and 2 2 2 4 */
    assert_int_equal(fault_in(at(&g, 1, 2)), NO_VARIATION);
    for (size_t i = 0; i < 3; i++) assert_same(at(&g, i, i), 1);
    g = CALL("rhoGrid", OK, data, text("rows"));
    assert_int_equal(fault_in(at(&g, 0, 2)), NO_VARIATION);
    assert_int_equal(fault_in(at(&g, 2, 2)), NO_VARIATION);
    assert_non_null(strstr(r.facts, "3 rows used, 1 dropped for gaps"));

    g = CALL("normalScoreGrid", OK, data);
    assert_close(at(&g, 0, 1), 0.5, 1e-14);                  /* scores -a 0 a, -a a 0 */
    assert_int_equal(fault_in(at(&g, 2, 1)), NO_VARIATION);
    assert_same(at(&g, 1, 1), 1);
    pool_empty(&p);
}

static void memory(void **state)
{
    (void)state;
    pool given = { 0 };
    value x = cells(&given, "1; 3; 2; 5"), data = cells(&given, "1, 2; 3, ; 2, 9; 4, 1");
    survives_no_memory("rho", 2, (value[]){ x, x });
    survives_no_memory("rhoGrid", 2, (value[]){ data, text("rows") });
    survives_no_memory("normalScoreGrid", 1, &data);
    pool_empty(&given);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(rho), cmocka_unit_test(grids), cmocka_unit_test(memory),
    };
    return cmocka_run_group_tests_name("measure_rho", tests, NULL, NULL);
}
