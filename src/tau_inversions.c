/* tau_inversions.c - counting inversions by radix.
 *
 * Method
 *   Two numbers out of order differ first in some digit. So: count the pairs out of
 *   order by the leading digit of eight bits, part the numbers by that digit without
 *   changing the order of equals, and go on within each part with the next digit.
 *   For one digit, walk through the numbers and keep for each digit how many larger
 *   ones have passed. These 256 running totals are kept in two steps of 16, so that
 *   one number changes 16 coarse and 16 fine totals, each by one vector addition. The first
 *   digit is the leading eight bits, the last one the lowest eight, so that they may overlap;
 *   bits that all numbers of a part share do no harm.
 *
 * Special cases
 *   Equal numbers are no inversion. Few numbers are compared directly.
 *
 * Accuracy
 *   Exact for n below 2^32. The work is 8 n for each digit of `bound`, whatever
 *   the numbers are.
 */
#include "tau_inversions.h"
#include "random.h"

#include <string.h>

enum { DIGIT_BITS = 8, DIGITS = 1 << DIGIT_BITS, FEW = 24 };

typedef uint32_t lanes __attribute__((vector_size(64)));     /* 16 totals */

/* coarse[h]: how many passed whose digit is above 16 h + 15; fine[h][l]: how many of those with the
 * digits 16 h to 16 h + 15 are above 16 h + l */
struct totals {
    lanes coarse, fine[16];
};

/* what a digit d adds to the totals of 0..15: one to those below it */
#define ONES_BELOW(d) { 0 < d, 1 < d, 2 < d, 3 < d, 4 < d, 5 < d, 6 < d, 7 < d, \
                        8 < d, 9 < d, 10 < d, 11 < d, 12 < d, 13 < d, 14 < d, 15 < d }
static const lanes ones_below[16] = {
    ONES_BELOW(0), ONES_BELOW(1), ONES_BELOW(2), ONES_BELOW(3),
    ONES_BELOW(4), ONES_BELOW(5), ONES_BELOW(6), ONES_BELOW(7),
    ONES_BELOW(8), ONES_BELOW(9), ONES_BELOW(10), ONES_BELOW(11),
    ONES_BELOW(12), ONES_BELOW(13), ONES_BELOW(14), ONES_BELOW(15)
};

/* the lane of a digit */
#define BITS_IF(d, k) ((d) == (k) ? UINT32_MAX : 0)
#define ALL_BITS_OF(d) { BITS_IF(d, 0), BITS_IF(d, 1), BITS_IF(d, 2), BITS_IF(d, 3), \
                         BITS_IF(d, 4), BITS_IF(d, 5), BITS_IF(d, 6), BITS_IF(d, 7), \
                         BITS_IF(d, 8), BITS_IF(d, 9), BITS_IF(d, 10), BITS_IF(d, 11), \
                         BITS_IF(d, 12), BITS_IF(d, 13), BITS_IF(d, 14), BITS_IF(d, 15) }
static const lanes all_bits_of[16] = {
    ALL_BITS_OF(0), ALL_BITS_OF(1), ALL_BITS_OF(2), ALL_BITS_OF(3),
    ALL_BITS_OF(4), ALL_BITS_OF(5), ALL_BITS_OF(6), ALL_BITS_OF(7),
    ALL_BITS_OF(8), ALL_BITS_OF(9), ALL_BITS_OF(10), ALL_BITS_OF(11),
    ALL_BITS_OF(12), ALL_BITS_OF(13), ALL_BITS_OF(14), ALL_BITS_OF(15)
};

static uint64_t inversions_of_few(const uint32_t *seq, size_t n)
{
    uint64_t count = 0;
    for (size_t l = 1; l < n; l++)
        for (size_t k = 0; k < l; k++) count += seq[k] > seq[l];
    return count;
}

/* The coarse totals stay in registers: the one wanted is picked by a mask into sixteen sums, which
 * are emptied before they can overflow. */
FOR_EACH_PROCESSOR
static uint64_t inversions_in_digit(const uint32_t *seq, size_t n, int shift, struct totals *t)
{
    uint64_t count = 0;
    lanes coarse = { 0 };
    size_t safe = UINT32_MAX / n;
    memset(t, 0, sizeof *t);
    for (size_t from = 0, to; from < n; from = to) {
        lanes picked = { 0 };
        to = n - from < safe ? n : from + safe;
        for (size_t k = from; k < to; k++) {
            uint32_t high = seq[k] >> (shift + 4) & 15, low = seq[k] >> shift & 15;
            picked += coarse & all_bits_of[high];
            coarse += ones_below[high];
            count += t->fine[high][low];
            t->fine[high] += ones_below[low];
        }
        for (int h = 0; h < 16; h++) count += picked[h];
    }
    t->coarse = coarse;
    return count;
}

/* Parts seq by the digit into `into`, equals in their order, and leaves where each part ends. The
 * totals say how many are above each digit, and so where it ends. */
static void part_by_digit(const uint32_t *seq, size_t n, int shift, const struct totals *t,
                          uint32_t *into, size_t *ends)
{
    size_t next[DIGITS];
    for (size_t d = 0; d < DIGITS; d++)
        ends[d] = n - t->coarse[d / 16] - t->fine[d / 16][d % 16];
    next[0] = 0;
    memcpy(next + 1, ends, (DIGITS - 1) * sizeof *next);
    for (size_t k = 0; k < n; k++) into[next[seq[k] >> shift & (DIGITS - 1)]++] = seq[k];
}

static uint64_t inversions_from(uint32_t *seq, size_t n, int shift, uint32_t *spare)
{
    if (n <= FEW) return inversions_of_few(seq, n);
    struct totals t;
    uint64_t count = inversions_in_digit(seq, n, shift, &t);
    if (shift == 0) return count;

    int next_shift = shift > DIGIT_BITS ? shift - DIGIT_BITS : 0;
    size_t ends[DIGITS], from = 0;
    part_by_digit(seq, n, shift, &t, spare, ends);
    for (size_t d = 0; d < DIGITS && from < n; d++) {
        count += inversions_from(spare + from, ends[d] - from, next_shift, seq + from);
        from = ends[d];
    }
    return count;
}

uint64_t count_inversions(uint32_t *seq, size_t n, size_t bound, uint32_t *spare)
{
    int shift = 0;
    while (bound > 1 && (bound - 1) >> (shift + DIGIT_BITS)) shift++;
    return inversions_from(seq, n, shift, spare);
}
