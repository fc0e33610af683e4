/* All pairs: every way of counting against the definition and against each other, at the sizes
 * where the ways change, and the memory of a large grid. */
#include "pairs.h"

#include "../../src/tau_grid.h"

static void assert_grid(const samples *s, counting how, bool by_definition)
{
    pool p = { 0 };
    struct tau_grid *grid;
    assert_int_equal(new_tau_grid(s, how, &grid, &p), OK);
    for (size_t i = 0; i < s->cols; i++) {
        for (size_t j = 0; j <= i; j++) {
            struct tau_counts got, want;
            tau_grid_counts(grid, i, j, &got);
            if (by_definition) want = counts_by_definition(column(s, i), column(s, j), s->rows);
            else assert_int_equal(tau_count(column(s, i), column(s, j), s->rows, &want, &p), OK);
            assert_same_counts(got, want);
        }
    }
    pool_empty(&p);
}

static void equals_definition(void **state)
{
    (void)state;
    uint64_t random = 99;
    double at[300 * 6];
    for (size_t k = 0; k < effort(160); k++) {
        size_t rows = k < 70 ? k : random_below(&random, 301), cols = 1 + k % 6;
        random_columns(at, rows, cols, kind_of_case(k / 6, &random), &random);
        if (k % 5 == 0)
            for (size_t i = 0; i < rows * cols; i++)
                if (!is_gap(at[i])) at[i] = adversarial(i / (rows + 1) + k, &random);
        samples s = { rows, cols, at, NULL };
        assert_grid(&s, COUNT_AS_SUITS, true);
        assert_grid(&s, COUNT_BY_PLANES, true);
        assert_grid(&s, COUNT_BY_RANKS, true);
    }
}

/* Around the sizes at which the way of counting changes, against single pairs. */
static void ways_agree(void **state)
{
    (void)state;
    const size_t sizes[] = { 63, 64, 65, 128, 799, 800, 801, 1599, 1600, 1601, 3000 };
    uint64_t random = 4;
    double *at = malloc(3000 * 5 * sizeof *at);
    for (size_t k = 0; k < 11; k++) {
        for (size_t kind = 0; kind < 4; kind++) {
            samples s = { sizes[k], 5, at, NULL };
            random_columns(at, s.rows, s.cols, kind_of_case(kind, &random), &random);
            assert_grid(&s, COUNT_AS_SUITS, false);
            assert_grid(&s, COUNT_BY_PLANES, false);
        }
    }
    free(at);
}

/* A constant column and one of gaps spoil their own pairs only. By definition. */
static void spoiled_columns(void **state)
{
    (void)state;
    double at[] = { 1, 2, 3, 4, 7, 7, 7, 7, NAN, NAN, NAN, NAN, 4, 3, 2, 1 }, tau;
    samples s = { 4, 4, at, NULL };
    for (counting how = COUNT_AS_SUITS; how <= COUNT_BY_RANKS; how++) {
        pool p = { 0 };
        struct tau_grid *grid;
        struct tau_counts c;
        assert_int_equal(new_tau_grid(&s, how, &grid, &p), OK);
        tau_grid_counts(grid, 0, 1, &c);
        assert_int_equal(tau_b(&c, &tau), NO_VARIATION);
        tau_grid_counts(grid, 2, 0, &c);
        assert_int_equal(tau_b(&c, &tau), TOO_FEW);
        tau_grid_counts(grid, 3, 0, &c);
        assert_int_equal(tau_b(&c, &tau), OK);
        assert_same(tau, -1);
        pool_empty(&p);
    }
}

static void memory(void **state)
{
    (void)state;
    uint64_t random = 1;
    double at[100 * 4];
    samples s = { 100, 4, at, NULL };
    random_columns(at, 100, 4, (struct kind_of_pair){ true, true, 0.3 }, &random);
    for (counting how = COUNT_AS_SUITS; how <= COUNT_BY_RANKS; how++) {
        pool p = { 0 };
        struct tau_grid *grid;
        assert_int_equal(new_tau_grid(&s, how, &grid, &p), OK);
        pool_empty(&p);
        for (size_t k = 1; k <= p.taken; k++) {
            pool failing = { .fail_at = k };
            assert_int_equal(new_tau_grid(&s, how, &grid, &failing), NO_MEMORY);
            pool_empty(&failing);
        }
    }
}

/* 1,048,576 x 10 needs at most 200 bytes a row beside the data; planes stay below 64 MB. */
static void budget(void **state)
{
    (void)state;
    size_t rows = 1048576, cols = 10;
    double *at = malloc(rows * cols * sizeof *at);
    for (size_t i = 0; i < rows * cols; i++) at[i] = (double)(i * 2654435761u % 4294967291u);
    samples s = { rows, cols, at, NULL };
    pool p = { 0 };
    struct tau_grid *grid;
    assert_int_equal(new_tau_grid(&s, COUNT_AS_SUITS, &grid, &p), OK);
    assert_in_range(p.bytes, 1, 200 * rows);
    pool_empty(&p);
    s = (samples){ 1500, 500, at, NULL };
    assert_int_equal(new_tau_grid(&s, COUNT_AS_SUITS, &grid, &p), OK);
    assert_in_range(p.bytes, 1, (64u << 20) + 16 * 1500 * 500);
    pool_empty(&p);
    free(at);
}

/* The ranks of four lines over six years, and the tau of each pair as recomputed with mpmath: the
 * taus that greiner_needs_repair.csv starts from. */
static void ranks_of_four_lines(void **state)
{
    (void)state;
    struct csv *data = csv_read("greiner_needs_repair_data.csv");
    struct csv *want = csv_read("greiner_needs_repair.csv");
    double at[24];
    samples s = { .rows = data->rows, .cols = 4, .at = at };
    assert_int_equal(s.rows, 6);
    for (size_t j = 0; j < 4; j++)
        for (size_t i = 0; i < 6; i++)
            column(&s, j)[i] = csv_number(data, i, data->cells[j + 1]);
    pool p = { 0 };
    struct tau_grid *grid;
    assert_int_equal(new_tau_grid(&s, COUNT_AS_SUITS, &grid, &p), OK);
    for (size_t k = 0; k < want->rows; k++) {
        struct tau_counts c;
        double tau;
        tau_grid_counts(grid, (size_t)csv_number(want, k, "i") - 1,
                        (size_t)csv_number(want, k, "j") - 1, &c);
        assert_int_equal(tau_b(&c, &tau), OK);
        assert_within(tau, csv_number(want, k, "tau"), 1e-15);
    }
    assert_int_equal(want->rows, 6);
    pool_empty(&p);
    csv_free(data);
    csv_free(want);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(equals_definition), cmocka_unit_test(ways_agree),
        cmocka_unit_test(ranks_of_four_lines),
        cmocka_unit_test(spoiled_columns), cmocka_unit_test(memory), cmocka_unit_test(budget),
    };
    return cmocka_run_group_tests_name("tau_grid", tests, NULL, NULL);
}
