/* Leaving out rows: by hand, and what is left complete. */
#include "table.h"

#include "../../src/gaps.h"

static void pairs_by_hand(void **state)
{
    (void)state;
    double x[] = { 1, NAN, 3, 4, 5 }, y[] = { 9, 8, NAN, 6, 5 }, w[] = { 1, 1, 1, 0, 2 };
    double a[5], b[5], c[5];
    assert_int_equal(complete_pairs(x, y, NULL, 5, a, b, NULL), 3);
    assert_same(a[1], 4);
    assert_same(b[2], 5);
    assert_int_equal(complete_pairs(x, y, w, 5, a, b, c), 2);
    assert_same(a[1], 5);
    assert_same(c[1], 2);
    w[0] = NAN;
    assert_int_equal(complete_pairs(x, y, w, 5, x, y, w), 1);    /* in place */
    assert_same(x[0], 5);
}

static void rows_by_hand(void **state)
{
    (void)state;
    double at[] = { 1, NAN, 3, 4, NAN, 5, 6, 7, NAN, NAN };      /* 5 x 2 */
    samples s = { 5, 2, at, NULL }, complete;
    pool p = { 0 };
    assert_int_equal(complete_rows(&s, &complete, &p), OK);
    assert_int_equal(complete.rows, 2);
    assert_same(column(&complete, 0)[1], 3);
    assert_same(column(&complete, 1)[1], 7);
    s.rows = 1;
    at[1] = 2;                                                    /* 1 x 2 without a gap */
    assert_int_equal(complete_rows(&s, &complete, &p), OK);
    assert_ptr_equal(complete.at, at);
    at[0] = NAN;
    assert_int_equal(complete_rows(&s, &complete, &p), OK);
    assert_int_equal(complete.rows, 0);
    for (size_t k = 1; k <= 2; k++) {
        pool failing = { .fail_at = k };
        assert_int_equal(complete_rows(&s, &complete, &failing), NO_MEMORY);
        pool_empty(&failing);
    }
    pool_empty(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(pairs_by_hand), cmocka_unit_test(rows_by_hand),
    };
    return cmocka_run_group_tests_name("gaps", tests, NULL, NULL);
}
