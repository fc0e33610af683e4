/* Tests of src/holds.c: groups against all subsets of lines. */
#include "matrices.h"

#include "../../src/holds.h"

/* whether the lines of this set of bits are held with each other, and the lowest eigenvalue of
 * their matrix */
static bool held_throughout(const double *m, const double *w, size_t d, unsigned set,
                            double *lowest)
{
    pool p = { .last = NULL };
    double part[64];
    size_t line[8], n = 0;
    for (size_t i = 0; i < d; i++)
        if (set >> i & 1) line[n++] = i;
    for (size_t a = 0; a < n; a++)
        for (size_t b = 0; b < n; b++) {
            if (a != b && !isinf(w[line[a] * d + line[b]])) return false;
            part[a * n + b] = m[line[a] * d + line[b]];
        }
    assert_int_equal(lowest_eigenvalue(part, n, lowest, &p), OK);
    return true;
}

/* The lowest eigenvalue of a group is at most that of its parts. So where groups do not overlap,
 * which is when being held is transitive, a clash is found exactly when some set of lines held
 * throughout has one. */
static void a_clash_is_found_when_some_set_has_one(void **unused)
{
    (void)unused;
    uint64_t state = 6;
    size_t clashes = 0, rounds = effort(200);
    for (size_t round = 0; round < rounds; round++) {
        pool p = { .last = NULL };
        enum { D = 8 };
        double *m = noisy_matrix(&state, D, 3, 0.3, &p), w[D * D], s[D * D], worst = 1, sum = 0;
        size_t team[D];
        for (size_t i = 0; i < D; i++) team[i] = random_below(&state, 3);
        for (size_t i = 0; i < D * D; i++) w[i] = team[i / D] == team[i % D] ? INFINITY : 1;
        for (unsigned set = 1; set < 1u << D; set++) {
            double lowest;
            if (held_throughout(m, w, D, set, &lowest)) worst = fmin(worst, lowest);
        }
        bool clash;
        assert_int_equal(clash_in_groups(m, w, D, 0.05, &clash, s, &p), OK);
        assert_int_equal(clash, worst < 0.05 - 8e-12);
        clashes += clash;
        for (size_t i = 0; clash && i < D * D; i++) {
            sum += s[i] * (m[i] - (i % (D + 1) ? 0 : 0.05));
            if (!isinf(w[i])) assert_same(s[i], 0);
        }
        assert_true(!clash || sum < 0);
        pool_empty(&p);
    }
    assert_in_range(clashes, rounds / 10, rounds - rounds / 10);
}

static void held_pairs_and_no_holds(void **unused)
{
    (void)unused;
    pool p = { .last = NULL };
    const double m[] = { 1, 1.5, 1.5, 1 }, w[] = { 1, 1, 1, 1 };
    const double hold[] = { 1, INFINITY, INFINITY, 1 };
    bool clash;
    assert_int_equal(clash_in_groups(m, hold, 2, 0, &clash, NULL, &p), OK);
    assert_true(clash);
    assert_int_equal(clash_in_groups(m, w, 2, 0, &clash, NULL, &p), OK);
    assert_false(clash);
    assert_null(p.last);
}

static void every_allocation_can_fail(void **unused)
{
    (void)unused;
    const double m[] = { 1, 1.5, 1.5, 1 }, hold[] = { 1, INFINITY, INFINITY, 1 };
    bool clash;
    for (size_t fail = 1; fail <= 6; fail++) {
        pool p = { .fail_at = fail };
        assert_int_equal(clash_in_groups(m, hold, 2, 0, &clash, NULL, &p), NO_MEMORY);
        assert_null(p.last);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_clash_is_found_when_some_set_has_one),
        cmocka_unit_test(held_pairs_and_no_holds),
        cmocka_unit_test(every_allocation_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
