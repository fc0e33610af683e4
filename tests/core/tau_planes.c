/* Bit planes: what they hold, by definition. The counts are compared in tau_grid.c. */
#include "pairs.h"

#include "../../src/tau_planes.h"

/* Each row has the words from its own on; the whole is filled up to a multiple of eight. */
static void size_of_planes(void **state)
{
    (void)state;
    for (size_t rows = 0; rows < 700; rows++) {
        size_t want = 0, words = row_words(rows);
        for (size_t row = 0; row < 64 * words; row++) want += words - row / 64;
        assert_int_equal(plane_words(rows), (want + 7) / 8 * 8);
    }
}

static void bits_by_definition(void **state)
{
    (void)state;
    uint64_t random = 21;
    double x[300];
    for (size_t k = 0; k < effort(60); k++) {
        size_t n = 1 + random_below(&random, 300), words = plane_words(n), per_row = row_words(n);
        pool p = { 0 };
        ranking *r;
        struct rank_room *room;
        random_columns(x, n, 1, kind_of_case(k, &random), &random);
        assert_int_equal(new_rankings(n, 1, &r, &p), OK);
        assert_int_equal(new_rank_room(n, &room, &p), OK);
        rank_values(x, n, r, room);
        uint64_t *bits = pool_take(&p, 2 * words + 2 * per_row, sizeof *bits);
        struct planes planes = { bits, bits + words, bits + 2 * words };
        fill_planes(r, &planes, bits + 2 * words + per_row);

        size_t at = 0;                           /* of a row's own word */
        for (size_t i = 0; i < n; i++) {
            for (size_t j = i / 64 * 64; j < 64 * per_row; j++) {
                size_t word = at + j / 64 - i / 64;
                bool later = j > i && j < n;
                assert_int_equal(planes.above[word] >> j % 64 & 1, later && x[j] > x[i]);
                assert_int_equal(planes.below[word] >> j % 64 & 1, later && x[j] < x[i]);
            }
            assert_int_equal(planes.observed[i / 64] >> i % 64 & 1, !is_gap(x[i]));
            at += per_row - i / 64;
        }
        pool_empty(&p);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(size_of_planes), cmocka_unit_test(bits_by_definition),
    };
    return cmocka_run_group_tests_name("tau_planes", tests, NULL, NULL);
}
