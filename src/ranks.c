/* ranks.c - sorting columns and ranking them.
 *
 * Method
 *   Distributive partitioning (Dobosiewicz 1978): values are spread in proportion over
 *   four times as many buckets as there are values, and the few that share a bucket
 *   are put right by insertion. A bucket that holds many is spread again on its
 *   own, now by the bits of its numbers, which is nearly by their logarithm, then
 *   by value again; where most values lie near the lowest, the bits come first. So
 *   heavy tails cost nothing and one far outlier costs one or two passes.
 *
 * Special cases
 *   Spreading is tried MOST_SPREADS times; what is still crowded then, or lies too
 *   wide or too close to divide its range, is merged. So the work is at most
 *   O(n log n) whatever the values are. NaN is a gap and is left out. -0 is 0.
 *
 * Accuracy
 *   Exact: subtraction and multiplication by a positive number never change the
 *   order of two doubles, so a higher value never lands in a lower bucket.
 */
#include "ranks.h"
#include "random.h"

#include <math.h>
#include <string.h>

enum {
    MOST_SPREADS = 4,
    BUCKETS_PER_VALUE = 4,   /* so that few share one: exchanging them is what costs most */
    MOST_BUCKETS = 16384,    /* keeps the ends of all buckets in a near cache */
    FEW = 32                 /* so many are sorted by insertion */
};

typedef struct {
    double x;
    uint32_t row;
} entry;

struct rank_room {
    entry *entries, *spare;
    uint32_t *bucket;                                /* of each entry, while spreading */
    uint32_t *ends[MOST_SPREADS];                    /* of the buckets at each level */
};

static size_t buckets_for(size_t n)
{
    return n < MOST_BUCKETS / BUCKETS_PER_VALUE ? n * BUCKETS_PER_VALUE : MOST_BUCKETS;
}

status new_rank_room(size_t rows, struct rank_room **room, pool *p)
{
    if (rows >= NO_RANK) return OUT_OF_DOMAIN;
    struct rank_room *made = pool_take(p, 1, sizeof *made);
    size_t ends = buckets_for(rows) + 1;
    size_t bytes = rows * (2 * sizeof(entry) + sizeof(uint32_t))
                 + MOST_SPREADS * ends * sizeof(uint32_t);
    entry *entries = pool_take(p, bytes, 1);         /* one block: malloc keeps it for the next */
    if (!made || !entries) return NO_MEMORY;
    made->entries = entries;
    made->spare = entries + rows;
    made->bucket = (uint32_t *)(void *)(entries + 2 * rows);
    for (size_t level = 0; level < MOST_SPREADS; level++)
        made->ends[level] = made->bucket + rows + level * ends;
    *room = made;
    return OK;
}

status new_rankings(size_t rows, size_t columns, ranking **r, pool *p)
{
    if (rows >= NO_RANK) return OUT_OF_DOMAIN;
    ranking *made = pool_take_zeroed(p, columns, sizeof *made);
    uint32_t *numbers = pool_take(p, columns, 3 * rows * sizeof *numbers);
    if (!made || !numbers) return NO_MEMORY;
    for (size_t j = 0; j < columns; j++) {
        made[j].order = numbers + 3 * j * rows;
        made[j].rank = made[j].order + rows;
        made[j].tied = made[j].rank + rows;
    }
    *r = made;
    return OK;
}

static void insertion_sort(entry *e, size_t n)
{
    for (size_t i = 1; i < n; i++) {
        entry moving = e[i];
        size_t j = i;
        for (; j > 0 && moving.x < e[j - 1].x; j--) e[j] = e[j - 1];
        e[j] = moving;
    }
}

static void merge_sort(entry *e, size_t n, entry *spare)
{
    if (n <= FEW) {
        insertion_sort(e, n);
        return;
    }
    size_t half = n / 2, i = 0, j = half, k = 0;
    merge_sort(e, half, spare);
    merge_sort(e + half, n - half, spare);
    if (e[half - 1].x <= e[half].x) return;
    memcpy(spare, e, half * sizeof *e);
    while (i < half && j < n) e[k++] = e[j].x < spare[i].x ? e[j++] : spare[i++];
    memcpy(e + k, spare + i, (half - i) * sizeof *e);
}

/* The bits of a double as a whole number in the same order, -0 as 0, here as a double again:
 * conversion rounds, but rounding keeps the order too. */
static double by_bits(double x)
{
    int64_t bits;
    memcpy(&bits, &x, sizeof bits);
    return (double)(bits < 0 ? INT64_MIN - bits : bits);
}

/* Four at a time, as each comparison has to wait for the one before it. */
static void find_range(const entry *e, size_t n, double *low, double *high)
{
    double lows[4], highs[4];
    for (size_t k = 0; k < 4; k++) lows[k] = highs[k] = e[0].x;
    for (size_t i = 0; i + 4 <= n; i += 4) {
        for (size_t k = 0; k < 4; k++) {
            lows[k] = e[i + k].x < lows[k] ? e[i + k].x : lows[k];
            highs[k] = e[i + k].x > highs[k] ? e[i + k].x : highs[k];
        }
    }
    for (size_t i = n / 4 * 4; i < n; i++) {
        lows[0] = fmin(lows[0], e[i].x);
        highs[0] = fmax(highs[0], e[i].x);
    }
    *low = fmin(fmin(lows[0], lows[1]), fmin(lows[2], lows[3]));
    *high = fmax(fmax(highs[0], highs[1]), fmax(highs[2], highs[3]));
}

/* Whether most values lie in the lowest sixteenth of their range, as losses do. */
static bool crowded(const entry *e, size_t n, double low, double high)
{
    double edge = low + (high - low) / 16;
    size_t below = 0;
    for (size_t i = 0; i < n; i++) below += e[i].x < edge;
    return below > n / 2;
}

/* Finds the bucket of each entry and counts them in ends[bucket + 1]. Returns how many are in the
 * fullest, or 0 when the range cannot be divided. */
static uint32_t choose_buckets(const entry *e, size_t n, double low, double high, bool bits,
                               uint32_t *bucket, uint32_t *ends)
{
    if (bits) {
        low = by_bits(low);
        high = by_bits(high);
    }
    double width = high - low;
    if (!(width > 0x1p-900 && width < 0x1p1000)) return 0;

    /* a hair less than the number of buckets, so that rounding cannot reach past the last */
    size_t buckets = buckets_for(n);
    double scale = (double)buckets * (1 - 0x1p-40) / width;
    uint32_t fullest = 0;
    memset(ends, 0, (buckets + 1) * sizeof *ends);
    for (size_t i = 0; i < n; i++) {
        double x = bits ? by_bits(e[i].x) : e[i].x;
        bucket[i] = (uint32_t)(int32_t)((x - low) * scale);
        uint32_t now = ++ends[bucket[i] + 1];
        fullest = now > fullest ? now : fullest;
    }
    return fullest;
}

/* Moves the entries into their buckets; ends[b] becomes where bucket b ends. */
static void fill_buckets(entry *e, size_t n, struct rank_room *room, uint32_t *ends)
{
    for (size_t b = 0; b < buckets_for(n); b++) ends[b + 1] += ends[b];
    for (size_t i = 0; i < n; i++) room->spare[ends[room->bucket[i]]++] = e[i];
    memcpy(e, room->spare, n * sizeof *e);
}

/* Spreads by value at the even levels and by bits at the odd ones, or the other way round. */
static void spread_sort(entry *e, size_t n, struct rank_room *room, int level, bool bits)
{
    if (n <= FEW) {
        insertion_sort(e, n);
        return;
    }
    double low, high;
    find_range(e, n, &low, &high);
    if (level == 0) bits = crowded(e, n, low, high);
    uint32_t *ends = room->ends[level < MOST_SPREADS ? level : 0], fullest = 0;
    if (level < MOST_SPREADS)
        fullest = choose_buckets(e, n, low, high, bits, room->bucket, ends);
    if (fullest == 0) {
        merge_sort(e, n, room->spare);
        return;
    }
    fill_buckets(e, n, room, ends);
    for (size_t b = 0, from = 0; fullest > FEW && b < buckets_for(n); from = ends[b++])
        if (ends[b] - from > FEW) spread_sort(e + from, ends[b] - from, room, level + 1, !bits);
    insertion_sort(e, n);
}

void rank_values(const double *x, size_t n, ranking *r, struct rank_room *room)
{
    entry *e = room->entries;
    size_t observed = 0;
    for (size_t i = 0; i < n; i++) {
        r->rank[i] = NO_RANK;
        e[observed] = (entry){ x[i], (uint32_t)i };
        observed += !is_gap(x[i]);
    }
    spread_sort(e, observed, room, 0, false);

    uint32_t rank = 0;
    uint64_t tied_pairs = 0;
    size_t n_tied = 0, earlier = 0;                  /* earlier ones of the same value */
    for (size_t k = 0; k < observed; k++) {
        bool tie = k > 0 && e[k].x == e[k - 1].x;
        rank += k > 0 && !tie;
        r->order[k] = e[k].row;
        r->rank[e[k].row] = rank;
        earlier = tie ? earlier + 1 : 0;
        if (!tie) continue;
        if (earlier == 1) r->tied[n_tied++] = e[k - 1].row;
        r->tied[n_tied++] = e[k].row;
        tied_pairs += earlier;
    }
    r->rows = n;
    r->observed = observed;
    r->distinct = observed ? rank + 1 : 0;
    r->tied_pairs = tied_pairs;
    r->n_tied = n_tied;
}

/* How many rows from order[from] on share its value. */
static size_t run_length(const ranking *r, size_t from)
{
    uint32_t rank = r->rank[r->order[from]];
    size_t to = from + 1;
    while (to < r->observed && r->rank[r->order[to]] == rank) to++;
    return to - from;
}

static void fill_gaps(const ranking *r, double *u)
{
    for (size_t i = 0; i < r->rows; i++)
        if (r->rank[i] == NO_RANK) u[i] = NAN;
}

void mid_ranks(const ranking *r, double *mid)
{
    fill_gaps(r, mid);
    for (size_t from = 0, size; from < r->observed; from += size) {
        size = run_length(r, from);
        double rank = (double)from + (double)(size + 1) / 2;
        for (size_t k = from; k < from + size; k++) mid[r->order[k]] = rank;
    }
}

/* Puts tied rows of the order in one that the seed draws (Fisher & Yates 1938). */
static void shuffle(uint32_t *rows, size_t n, struct stream *s)
{
    for (size_t k = n; k > 1; k--) {
        size_t other = (size_t)stream_below(s, k);
        uint32_t row = rows[k - 1];
        rows[k - 1] = rows[other];
        rows[other] = row;
    }
}

static void shuffle_ties(const ranking *r, uint64_t seed, size_t column)
{
    struct stream s = stream_of(seed, FOR_RANKS, column);
    for (size_t from = 0, size; from < r->observed; from += size) {
        size = run_length(r, from);
        shuffle(r->order + from, size, &s);
    }
}

static void scale_ranks(const ranking *r, tie_rule how, double *u)
{
    double over = (double)r->observed + 1;
    fill_gaps(r, u);
    for (size_t from = 0, size; from < r->observed; from += size) {
        size = run_length(r, from);
        double low = (double)from + 1, high = (double)(from + size);
        for (size_t k = from; k < from + size; k++)
            u[r->order[k]] = (how == TIES_LOW ? low : how == TIES_HIGH ? high
                              : how == TIES_AVERAGE ? (low + high) / 2 : (double)k + 1) / over;
    }
}

status scaled_ranks(const samples *s, tie_rule how, uint64_t seed, double *u, pool *p)
{
    struct block *mark = p->last;
    ranking *r;
    struct rank_room *room;
    status made = new_rankings(s->rows, 1, &r, p);
    if (!made) made = new_rank_room(s->rows, &room, p);
    for (size_t j = 0; !made && j < s->cols; j++) {
        rank_values(column(s, j), s->rows, r, room);
        if (how == TIES_RANDOM) shuffle_ties(r, seed, j);
        scale_ranks(r, how, u + j * s->rows);
    }
    pool_back_to(p, mark);
    return made;
}
