/* Tests of addin/checksum.c. */
#include "cells.h"

#include "../../addin/checksum.h"

static uint64_t of(value v)
{
    return checksum_of(&v, 1);
}

/* FNV-1a of nothing is its offset basis (Fowler, Noll & Vo), written as 16 digits */
static void known_answers(void **state)
{
    (void)state;
    pool p = { 0 };
    assert_true(checksum_of(NULL, 0) == UINT64_C(0xcbf29ce484222325));
    assert_string_equal(checksum_text(NULL, 0, &p), "cbf29ce484222325");
    p.fail_at = p.taken + 1;
    assert_null(checksum_text(NULL, 0, &p));
    pool_empty(&p);
}

static void every_cell_counts(void **state)
{
    (void)state;
    pool p = { 0 };
    uint64_t plain = of(cells(&p, "1,2;3,4"));
    assert_true(plain == of(cells(&p, "1,2;3,4")));
    assert_true(plain != of(cells(&p, "1,2;3,5")));
    assert_true(plain != of(cells(&p, "1,2,3,4")));
    assert_true(plain != of(cells(&p, "1,3;2,4")));
    assert_true(plain != of(cells(&p, "1,2;3,\"4\"")));
    assert_true(plain != of(cells(&p, "1,2;3,")));
    assert_true(of(cells(&p, "a;b")) != of(cells(&p, "ab;")));
    pool_empty(&p);
}

static void what_does_not_count(void **state)
{
    (void)state;
    pool p = { 0 };
    assert_true(of(number(3)) == of(cells(&p, "3")));
    assert_true(of(text("plain")) == of(cells(&p, "plain")));
    assert_true(of(number(-0.0)) == of(number(0)));
    const value two[] = { number(1), nothing() }, shifted[] = { nothing(), number(1) };
    assert_true(checksum_of(two, 2) == checksum_of(two, 1));
    assert_true(checksum_of(shifted, 2) != checksum_of(two, 1));
    pool_empty(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(known_answers),
        cmocka_unit_test(every_cell_counts),
        cmocka_unit_test(what_does_not_count),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
