/* The pool: alignment, counting, giving back, failing on demand. */
#include "table.h"

#include "../../src/memory.h"

static void aligned_and_counted(void **state)
{
    (void)state;
    pool p = { 0 };
    for (size_t n = 1; n < 300; n += 7) {
        double *x = pool_take(&p, n, sizeof *x);
        assert_non_null(x);
        assert_int_equal((uintptr_t)x % 64, 0);
        for (size_t i = 0; i < n; i++) x[i] = (double)i;
    }
    assert_int_equal(p.taken, 43);
    assert_true(p.bytes >= 43 * 64);
    pool_empty(&p);
    assert_int_equal(p.bytes, 0);
    assert_null(p.last);
}

static void cleared(void **state)
{
    (void)state;
    pool p = { 0 };
    memset(pool_take(&p, 1000, 1), 0xff, 1000);
    pool_empty(&p);
    unsigned char *x = pool_take_zeroed(&p, 1000, 1);
    for (size_t i = 0; i < 1000; i++) assert_int_equal(x[i], 0);
    pool_empty(&p);
}

static void back_to_a_mark(void **state)
{
    (void)state;
    pool p = { 0 };
    char *kept = pool_text(&p, "kept");
    struct block *mark = p.last;
    size_t bytes = p.bytes;
    pool_take(&p, 10, 10);
    pool_take(&p, 10, 10);
    pool_back_to(&p, mark);
    assert_int_equal(p.bytes, bytes);
    assert_string_equal(kept, "kept");
    pool_empty(&p);
}

static void fails_on_demand_and_on_nonsense(void **state)
{
    (void)state;
    pool p = { .fail_at = 2 };
    assert_non_null(pool_take(&p, 1, 1));
    assert_null(pool_take(&p, 1, 1));
    assert_null(pool_text(&p, "x"));
    pool_empty(&p);
    pool q = { 0 };
    assert_null(pool_take(&q, SIZE_MAX / 4, 8));
    assert_null(pool_take(&q, SIZE_MAX, 1));
    pool_empty(&q);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(aligned_and_counted),
        cmocka_unit_test(cleared),
        cmocka_unit_test(back_to_a_mark),
        cmocka_unit_test(fails_on_demand_and_on_nonsense),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
