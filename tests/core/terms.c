/* Tests of src/terms.c: the definitions of a cover worked by hand. */
#include "table.h"

#include "../../src/terms.h"

static const double none = INFINITY;

static cover covered(term *of, size_t lines, const term *aggregate, pool *p)
{
    static struct terms t;
    t = (struct terms){ of ? lines : 0, of, NULL };
    cover c;
    size_t line;
    terms_fault fault;
    assert_int_equal(terms_check(&t, &line, &fault), OK);
    assert_int_equal(cover_prepare(&t, lines, aggregate, p, &c), OK);
    return c;
}

/* share * min(max(loss - excess, 0), limit) at every corner */
static void one_layer(void **state)
{
    (void)state;
    pool p = { 0 };
    term of[] = { { 100, 200, 0.5, 0 } };
    const double loss[] = { -5, 0, 100, 101, 299, 300, 301, 1e9 };
    const double want[] = { 0, 0, 0, 0.5, 99.5, 100, 100, 100 };
    double ceded[8], before[8];
    cover c = covered(of, 1, NULL, &p);
    cede(&c, loss, 8, 8, ceded, before);
    for (size_t i = 0; i < 8; i++) {
        assert_same(ceded[i], want[i]);
        assert_same(before[i], want[i]);
    }
    pool_empty(&p);
}

/* expense follows its claim: own loss x (claim's ceded / claim's loss), through a chain */
static void followers(void **state)
{
    (void)state;
    pool p = { 0 };
    term of[] = { { 0, none, 1, 2 }, { 100, none, 1, 0 }, { 0, none, 1, 1 } };
    const double loss[] = { 60, 0, 40,   300, 300, 0,   10, 20, 30 };      /* rows of three lines */
    const double want[] = { 40, 0, 0,    200, 200, 0,    20.0 / 3, 40.0 / 3, 0 };
    double ceded[9];
    cover c = covered(of, 3, NULL, &p);
    cede(&c, loss, 3, 3, ceded, NULL);
    for (size_t i = 0; i < 9; i++) assert_close(ceded[i], want[i], 1e-15);
    pool_empty(&p);
}

/* the aggregate recovery is shared in proportion to what each line ceded */
static void aggregate_is_shared(void **state)
{
    (void)state;
    pool p = { 0 };
    term of[] = { { 0, none, 1, 0 }, { 50, 100, 1, 0 } };
    const term aggregate = { 100, 60, 0.5, 0 };
    const double loss[] = { 10, 100, 100, 0,   20, 90, 500, 0 };
    double ceded[8], before[4];
    cover c = covered(of, 2, &aggregate, &p);
    cede(&c, loss, 4, 4, ceded, before);
    assert_same(before[0], 10);
    assert_same(before[1], 140);
    assert_same(before[2], 200);
    assert_same(ceded[0] + ceded[4], 0);
    assert_close(ceded[1], 20 * 100.0 / 140, 1e-15);     /* 0.5 (140 - 100), by 100 : 40 */
    assert_close(ceded[5], 20 * 40.0 / 140, 1e-15);
    assert_close(ceded[2], 15, 1e-15);                   /* 0.5 x 60, by 100 : 100 */
    assert_close(ceded[6], 15, 1e-15);
    assert_same(ceded[3] + ceded[7], 0);
    pool_empty(&p);
}

static void without_terms(void **state)
{
    (void)state;
    pool p = { 0 };
    const double loss[] = { 30, 70 };
    const term aggregate = { 60, none, 1, 0 };
    double ceded[2];
    cover c = covered(NULL, 2, NULL, &p);
    cede(&c, loss, 1, 1, ceded, NULL);
    assert_same(ceded[0] + ceded[1], 0);
    c = covered(NULL, 2, &aggregate, &p);
    cede(&c, loss, 1, 1, ceded, NULL);
    assert_close(ceded[0], 12, 1e-15);
    assert_close(ceded[1], 28, 1e-15);
    pool_empty(&p);
}

/* A gain goes whole to the aggregate as well: of 100 - 30 = 70 it pays 20 beyond 50, which the
 * lines share as 100 to -30. */
static void gains_without_terms(void **state)
{
    (void)state;
    pool p = { 0 };
    const double loss[] = { 100, 10, -30, -30 };           /* two rows of two lines */
    const term aggregate = { 50, none, 1, 0 };
    double ceded[4], before[2];
    cover c = covered(NULL, 2, &aggregate, &p);
    cede(&c, loss, 2, 2, ceded, before);
    assert_same(before[0], 70);
    assert_close(ceded[0] + ceded[2], 20, 1e-15);
    assert_close(ceded[0], 20 * 100 / 70.0, 1e-15);
    assert_close(ceded[2], -20 * 30 / 70.0, 1e-15);
    assert_same(before[1], -20);
    assert_same(ceded[1], 0);
    assert_same(ceded[3], 0);
    pool_empty(&p);
}

/* what is ceded and kept adds up, and no line cedes more than its loss */
static void never_more_than_the_loss(void **state)
{
    (void)state;
    uint64_t random = 9;
    for (size_t round = 0; round < effort(500); round++) {
        pool p = { 0 };
        term of[3], aggregate = { 100 * random_uniform(&random), 300 * random_uniform(&random),
                                  random_uniform(&random), 0 };
        for (size_t j = 0; j < 3; j++)
            of[j] = (term){ 50 * random_uniform(&random), 100 * random_uniform(&random),
                            random_uniform(&random), 0 };
        of[2] = (term){ 0, none, 1, 1 };
        double loss[3], ceded[3], before;
        for (size_t j = 0; j < 3; j++) loss[j] = 200 * random_uniform(&random);
        cover c = covered(of, 3, &aggregate, &p);
        cede(&c, loss, 1, 1, ceded, &before);
        for (size_t j = 0; j < 3; j++)
            assert_true(ceded[j] >= 0 && ceded[j] <= loss[j] * (1 + 1e-14));
        double recovery =
            aggregate.share * fmin(fmax(before - aggregate.excess, 0), aggregate.limit);
        assert_close(ceded[0] + ceded[1] + ceded[2], recovery, 1e-14);
        pool_empty(&p);
    }
}

static void check_fault(term *of, size_t lines, status want, terms_fault want_fault,
                        size_t want_line)
{
    struct terms t = { lines, of, NULL };
    size_t line;
    terms_fault fault;
    assert_int_equal(terms_check(&t, &line, &fault), want);
    assert_int_equal(fault, want_fault);
    assert_int_equal(line, want_line);
}

static void faults(void **state)
{
    (void)state;
    check_fault((term[]){ { -1, none, 1, 0 } }, 1, OUT_OF_DOMAIN, EXCESS_BELOW_ZERO, 0);
    check_fault((term[]){ { 0, 0, 1, 0 } }, 1, OUT_OF_DOMAIN, LIMIT_NOT_POSITIVE, 0);
    check_fault((term[]){ { 0, none, 1.1, 0 } }, 1, OUT_OF_DOMAIN, SHARE_OUTSIDE, 0);
    check_fault((term[]){ { 0, none, NAN, 0 } }, 1, OUT_OF_DOMAIN, SHARE_OUTSIDE, 0);
    check_fault((term[]){ { 0, none, 1, 2 } }, 1, BAD_KIND, FOLLOWS_NO_LINE, 0);
    check_fault((term[]){ { 0, 1, 1, 0 }, { 0, none, 1, 2 } }, 2, BAD_KIND, FOLLOWS_ITSELF, 1);
    check_fault((term[]){ { 0, 1, 1, 0 }, { 0, 5, 1, 1 } }, 2, BAD_KIND, FOLLOWER_HAS_OWN_TERMS, 1);
    check_fault((term[]){ { 0, 1, 0.5, 0 }, { 0, none, 0.4, 1 } }, 2, BAD_KIND,
                FOLLOWER_HAS_OWN_SHARE, 1);
    check_fault((term[]){ { 0, 1, 0.5, 0 }, { 0, none, 0.5, 1 } }, 2, OK, TERMS_FINE, 2);
    check_fault((term[]){ { 0, 1, 1, 0 }, { 0, none, 1, 3 }, { 0, none, 1, 2 } }, 3, BAD_KIND,
                FOLLOWS_IN_CIRCLE, 1);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(one_layer),
        cmocka_unit_test(followers),
        cmocka_unit_test(aggregate_is_shared),
        cmocka_unit_test(without_terms),
        cmocka_unit_test(gains_without_terms),
        cmocka_unit_test(never_more_than_the_loss),
        cmocka_unit_test(faults),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
