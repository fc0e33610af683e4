/* Inversions against their definition, for numbers of one to four digits. */
#include "table.h"

#include "../../src/tau_inversions.h"

static uint64_t by_definition(const uint32_t *seq, size_t n)
{
    uint64_t count = 0;
    for (size_t l = 0; l < n; l++)
        for (size_t k = 0; k < l; k++) count += seq[k] > seq[l];
    return count;
}

static void equals_definition(void **state)
{
    (void)state;
    uint64_t random = 5;
    uint32_t seq[2000], spare[2000];
    const size_t bounds[] = { 1, 2, 16, 17, 256, 257, 5000, 65536, 65537, 1 << 24, (1 << 24) + 1,
                              UINT32_MAX };
    for (size_t k = 0; k < effort(600); k++) {
        size_t n = k < 60 ? k : random_below(&random, 2000), bound = bounds[k % 12];
        for (size_t i = 0; i < n; i++) seq[i] = (uint32_t)random_below(&random, bound);
        if (k % 3 == 0)
            for (size_t i = 1; i < n; i++) seq[i] = (seq[i] & 15) + (seq[i - 1] & ~15u);
        uint64_t want = by_definition(seq, n);
        assert_int_equal(count_inversions(seq, n, bound, spare), want);
    }
}

/* Rising, falling and constant sequences, by definition. */
static void known(void **state)
{
    (void)state;
    size_t n = 300000;
    uint32_t *seq = malloc(2 * n * sizeof *seq), *spare = seq + n;
    for (size_t i = 0; i < n; i++) seq[i] = (uint32_t)i;
    assert_int_equal(count_inversions(seq, n, n, spare), 0);
    for (size_t i = 0; i < n; i++) seq[i] = (uint32_t)(n - 1 - i);
    assert_int_equal(count_inversions(seq, n, n, spare), (uint64_t)n * (n - 1) / 2);
    for (size_t i = 0; i < n; i++) seq[i] = 7;
    assert_int_equal(count_inversions(seq, n, 8, spare), 0);
    assert_int_equal(count_inversions(seq, 0, 0, spare), 0);
    free(seq);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equals_definition), cmocka_unit_test(known),
    };
    return cmocka_run_group_tests_name("tau_inversions", tests, NULL, NULL);
}
