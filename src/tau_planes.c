/* tau_planes.c - counting pairs of rows 64 at a time
 *
 * Method
 *   Take the rows from the highest value down and keep one bit for each that has
 *   passed: when a row comes, these are the rows above it. The same from the
 *   lowest up gives those below. Of each row only the words from its own on are
 *   kept, and of its own word the bits of later rows, so that each pair of rows has
 *   one bit. A pair of rows is concordant when the later is above in both columns or
 *   below in both. Without gaps and ties not above is below, and one plane is enough.
 *
 * Special cases
 *   A row with a gap has no bits and is in no other row's bits. Tied pairs have no
 *   bit in either plane.
 *
 * Accuracy
 *   Exact.
 */
#include "tau_planes.h"

#include <string.h>

enum { MOST_LANES = 8 };                /* words that the widest instruction counts at once */

size_t row_words(size_t rows)
{
    return (rows + 63) / 64;
}

/* where the words of a row begin in a plane: block b has 64 rows of `words` - b words each */
static size_t plane_start(size_t row, size_t words)
{
    size_t block = row / 64;
    return 64 * (block * words - block * (block - 1) / 2) + row % 64 * (words - block);
}

/* up to a whole number of vectors, the rest 0 */
size_t plane_words(size_t rows)
{
    size_t words = plane_start(64 * row_words(rows), row_words(rows));
    return (words + MOST_LANES - 1) / MOST_LANES * MOST_LANES;
}

static void put_later(uint64_t *plane, size_t row, size_t words, const uint64_t *passed)
{
    size_t block = row / 64;
    uint64_t *to = plane + plane_start(row, words);
    to[0] = passed[block] & ~(UINT64_C(1) << row % 64) & UINT64_MAX << row % 64;
    memcpy(to + 1, passed + block + 1, (words - block - 1) * sizeof *to);
}

static void pass(uint64_t *passed, size_t row)
{
    passed[row / 64] |= UINT64_C(1) << row % 64;
}

/* Walks the order from one end; rows that tie all come before any of them passes. */
static void fill_plane(const ranking *r, bool downward, uint64_t *plane, uint64_t *passed)
{
    size_t words = row_words(r->rows), n = r->observed, waiting = 0;
    memset(passed, 0, words * sizeof *passed);
    for (size_t k = 0; k < n; k++) {
        size_t row = r->order[downward ? n - 1 - k : k];
        for (; waiting < k; waiting++) {
            size_t earlier = r->order[downward ? n - 1 - waiting : waiting];
            if (r->rank[earlier] == r->rank[row]) break;
            pass(passed, earlier);
        }
        put_later(plane, row, words, passed);
    }
}

/* The same for up to 64 rows, whose bits fit into one word: without branches, which ties and gaps
 * would make hard to foresee. */
static void fill_short_plane(const ranking *r, bool downward, uint64_t *plane)
{
    uint64_t passed = 0, waiting = 0;
    uint32_t rank = NO_RANK;
    for (size_t k = 0, n = r->observed; k < n; k++) {
        uint32_t row = r->order[downward ? n - 1 - k : k];
        bool tie = r->rank[row] == rank;
        rank = r->rank[row];
        passed |= tie ? 0 : waiting;
        waiting = (tie ? waiting : 0) | UINT64_C(1) << row;
        plane[row] = passed & UINT64_MAX << row;
    }
}

static void fill_either(const ranking *r, bool downward, uint64_t *plane, uint64_t *passed)
{
    memset(plane, 0, plane_words(r->rows) * sizeof *plane);
    if (r->rows <= 64) fill_short_plane(r, downward, plane);
    else fill_plane(r, downward, plane, passed);
}

void fill_planes(const ranking *r, struct planes *planes, uint64_t *passed)
{
    fill_either(r, true, planes->above, passed);
    if (planes->below) fill_either(r, false, planes->below, passed);
    memset(planes->observed, 0, row_words(r->rows) * sizeof *planes->observed);
    for (size_t k = 0; k < r->observed; k++) pass(planes->observed, r->order[k]);
}

/* What there is to count over the words of two columns. */
struct bits {
    uint64_t concordant, discordant, shared;
};

typedef enum { PLAIN, WITH_GAPS, WITH_TIES } care;

static inline __attribute__((always_inline)) uint64_t ones(uint64_t word)
{
    return (uint64_t)__builtin_popcountll(word);
}

static inline __attribute__((always_inline)) uint64_t sum_of(const uint64_t *sums, size_t n)
{
    uint64_t sum = 0;
    for (size_t k = 0; k < n; k++) sum += sums[k];
    return sum;
}

/* Inlined into one function for each way in which processors count bits; `lanes` words at a
 * time. */
static inline __attribute__((always_inline))
struct bits count_bits(const struct planes *x, const struct planes *y, size_t rows, care with,
                       size_t lanes)
{
    uint64_t concordant[MOST_LANES] = { 0 }, discordant[MOST_LANES] = { 0 }, shared = 0;
    const uint64_t *above_x = x->above, *below_x = x->below;
    const uint64_t *above_y = y->above, *below_y = y->below;
    size_t words = plane_words(rows);
    if (with == PLAIN) {
        for (size_t k = 0; k < words; k += lanes)
            for (size_t l = 0; l < lanes; l++)
                discordant[l] += ones(above_x[k + l] ^ above_y[k + l]);
        return (struct bits){ 0, sum_of(discordant, lanes), 0 };
    }
    for (size_t k = 0; k < words; k += lanes)
        for (size_t l = 0; l < lanes; l++)
            concordant[l] += ones((above_x[k + l] & above_y[k + l])
                                  | (below_x[k + l] & below_y[k + l]));
    for (size_t k = 0; with == WITH_TIES && k < words; k += lanes)
        for (size_t l = 0; l < lanes; l++)
            discordant[l] += ones((above_x[k + l] & below_y[k + l])
                                  | (below_x[k + l] & above_y[k + l]));
    for (size_t k = 0; k < row_words(rows); k++) shared += ones(x->observed[k] & y->observed[k]);
    return (struct bits){ sum_of(concordant, lanes), sum_of(discordant, lanes), shared };
}

typedef struct bits counter(const struct planes *x, const struct planes *y, size_t rows, care with);

static struct bits bits_portably(const struct planes *x, const struct planes *y, size_t rows,
                                 care with)
{
    return count_bits(x, y, rows, with, 1);
}

#if defined __x86_64__ && !defined ONE_PROCESSOR
__attribute__((target("popcnt")))
static struct bits bits_by_word(const struct planes *x, const struct planes *y, size_t rows,
                                care with)
{
    return count_bits(x, y, rows, with, 1);
}

__attribute__((target("avx512f,avx512vpopcntdq,popcnt,prefer-vector-width=512")))
static struct bits bits_by_vector(const struct planes *x, const struct planes *y, size_t rows,
                                  care with)
{
    return count_bits(x, y, rows, with, MOST_LANES);
}

static counter *best_counter(void)
{
    if (__builtin_cpu_supports("avx512vpopcntdq")) return bits_by_vector;
    return __builtin_cpu_supports("popcnt") ? bits_by_word : bits_portably;
}
#else
static counter *best_counter(void) { return bits_portably; }
#endif

void tau_count_planes(const ranking *x, const struct planes *in_x,
                      const ranking *y, const struct planes *in_y, struct tau_counts *c)
{
    bool complete = x->observed == x->rows && y->observed == y->rows;
    care with = x->tied_pairs || y->tied_pairs ? WITH_TIES : complete ? PLAIN : WITH_GAPS;
    struct bits b = best_counter()(in_x, in_y, x->rows, with);
    uint64_t n = complete ? x->rows : b.shared;
    *c = (struct tau_counts){ .rows = n, .pairs = pairs_among(n),
                              .concordant = b.concordant, .discordant = b.discordant };
    if (with == PLAIN) {
        c->concordant = c->pairs - c->discordant;
    } else if (with == WITH_GAPS) {
        c->discordant = c->pairs - c->concordant;
    } else {
        c->tied_x = tied_pairs_shared(x, y);
        c->tied_y = tied_pairs_shared(y, x);
        c->tied_both = c->concordant + c->discordant + c->tied_x + c->tied_y - c->pairs;
    }
}
