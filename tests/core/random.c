/* The counter-based generator: published blocks, streams against bulk, bounds. */
#include "table.h"

#include "../../src/random.h"

static void read_words(const char *text, uint32_t *word, size_t n)
{
    for (size_t i = 0; i < n; i++) {
        char *end;
        word[i] = (uint32_t)strtoul(text, &end, 16);
        text = end;
    }
}

/* counter_rng_known_answers.csv: Salmon, Moraes, Dror & Shaw (2011) */
static void published_blocks(void **state)
{
    (void)state;
    struct csv *t = csv_read("counter_rng_known_answers.csv");
    size_t checked = 0;
    for (size_t i = 0; i < t->rows; i++) {
        if (!csv_is(t, i, "generator", "philox4x32, 10 rounds")) continue;
        uint32_t counter[4], key[2], want[4], got[4];
        read_words(csv_text(t, i, "counter_words_hex"), counter, 4);
        read_words(csv_text(t, i, "key_words_hex"), key, 2);
        read_words(csv_text(t, i, "output_words_hex"), want, 4);
        philox(counter, key, got);
        assert_memory_equal(got, want, sizeof got);
        checked++;
    }
    assert_int_equal(checked, 7);
    csv_free(t);
}

/* The first number of a stream is the first two words of its block. */
static void streams_are_blocks(void **state)
{
    (void)state;
    uint64_t seed = 0x0000002500000007u, row = 0x0000000900000003u;
    struct stream s = stream_of(seed, FOR_RANKS, row);
    for (uint32_t b = 0; b < 3; b++) {
        uint32_t counter[4] = { 3, 9, b, FOR_RANKS }, key[2] = { 7, 0x25 }, out[4];
        philox(counter, key, out);
        assert_true(stream_bits(&s) == ((uint64_t)out[1] << 32 | out[0]));
        assert_true(stream_bits(&s) == ((uint64_t)out[3] << 32 | out[2]));
    }
}

static void bulk_equals_streams(void **state)
{
    (void)state;
    uint64_t pick = 5;
    for (size_t k = 0; k < effort(20); k++) {
        uint64_t seed = random_bits(&pick) >> 11, first = random_bits(&pick);
        first >>= 12 + random_below(&pick, 40);
        if (k == 0) first = 0xffffff80u;                       /* the row passes 2^32 */
        uint32_t b = (uint32_t)random_below(&pick, 30);
        double even[ROWS_AT_ONCE], odd[ROWS_AT_ONCE];
        uniforms_of_rows(seed, FOR_MIXING, first, b, even, odd);
        for (uint64_t i = 0; i < ROWS_AT_ONCE; i++) {
            struct stream s = stream_of(seed, FOR_MIXING, first + i);
            for (uint32_t n = 0; n < 2 * b; n++) stream_bits(&s);
            assert_same(even[i], stream_uniform(&s));
            assert_same(odd[i], stream_uniform(&s));
        }
    }
}

static void uniforms_are_inside(void **state)
{
    (void)state;
    for (uint64_t i = 0; i < effort(20000); i++) {
        struct stream s = stream_of(3, FOR_DRAW, i);
        double u = stream_uniform(&s);
        assert_true(u >= 0x1p-53 && u <= 1 - 0x1p-53);
        assert_same((1 - u) + u, 1.0);
        assert_same(1 - (1 - u), u);
        assert_same(fmod(u, 0x1p-52), 0x1p-53);
    }
}

/* Pearson's chi-square with 6 degrees of freedom: 22.46 is exceeded once in a thousand. */
static void whole_numbers_without_bias(void **state)
{
    (void)state;
    size_t n = effort(70000), count[7] = { 0 };
    struct stream s = stream_of(11, FOR_RESAMPLING, 0);
    for (size_t i = 0; i < n; i++) {
        uint64_t k = stream_below(&s, 7);
        assert_true(k < 7);
        count[k]++;
    }
    double chi = 0;
    for (int k = 0; k < 7; k++) {
        double apart = (double)count[k] - (double)n / 7;
        chi += apart * apart * 7 / (double)n;
    }
    assert_true(chi < 22.46);
    for (int i = 0; i < 100; i++) assert_int_equal(stream_below(&s, 1), 0);
    /* three quarters of 2^64: a biased method would return the lower half twice as often */
    uint64_t most = (uint64_t)3 << 62, low = 0;
    for (size_t i = 0; i < 10000; i++) low += stream_below(&s, most) < most / 2;
    assert_true(fabs((double)low - 5000) < 4 * 50);
}

/* Different seeds, purposes and rows have nothing in common. */
static void streams_differ(void **state)
{
    (void)state;
    uint64_t first[4];
    struct stream s[4] = { stream_of(1, FOR_DRAW, 1), stream_of(2, FOR_DRAW, 1),
                           stream_of(1, FOR_MIXING, 1), stream_of(1, FOR_DRAW, 2) };
    for (int i = 0; i < 4; i++) first[i] = stream_bits(&s[i]);
    for (int i = 0; i < 4; i++)
        for (int j = 0; j < i; j++) assert_true(first[i] != first[j]);
    assert_true(seed_of_replicate(1, 0) != seed_of_replicate(1, 1));
    assert_true(seed_of_replicate(1, 0) != seed_of_replicate(2, 0));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_blocks),
        cmocka_unit_test(streams_are_blocks),
        cmocka_unit_test(bulk_equals_streams),
        cmocka_unit_test(uniforms_are_inside),
        cmocka_unit_test(whole_numbers_without_bias),
        cmocka_unit_test(streams_differ),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
