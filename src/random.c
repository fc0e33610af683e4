/* random.c - a counter-based generator
 *
 * Method
 *   Philox 4x32-10, Salmon, Moraes, Dror & Shaw (2011), Parallel random numbers: as easy as
 *   1, 2, 3. Counter words: row (low, high), place of the block within the row, purpose. Key: the
 *   seed.
 *   A block is two numbers of 64 bits.
 *
 * Special cases
 *   None: every seed and row is as good as any other.
 *
 * Accuracy
 *   Exact, and equal to the known answers of the paper.
 */
#include "random.h"

#include "elementary.h"

static const uint64_t MULTIPLY_A = 0xD2511F53u, MULTIPLY_B = 0xCD9E8D57u;
static const uint32_t WEYL_A = 0x9E3779B9u, WEYL_B = 0xBB67AE85u;

void philox(const uint32_t counter[4], const uint32_t key[2], uint32_t out[4])
{
    uint32_t a = counter[0], b = counter[1], c = counter[2], d = counter[3];
    uint32_t k = key[0], l = key[1];
    for (int round = 0; round < 10; round++) {
        uint64_t p = MULTIPLY_A * a, q = MULTIPLY_B * c;
        a = (uint32_t)(q >> 32) ^ b ^ k;
        b = (uint32_t)q;
        c = (uint32_t)(p >> 32) ^ d ^ l;
        d = (uint32_t)p;
        k += WEYL_A;
        l += WEYL_B;
    }
    out[0] = a, out[1] = b, out[2] = c, out[3] = d;
}

struct stream stream_of(uint64_t seed, enum purpose purpose, uint64_t row)
{
    return (struct stream){ .seed = seed, .row = row, .purpose = (uint32_t)purpose };
}

uint64_t stream_bits(struct stream *s)
{
    if (s->next & 1) {
        s->next++;
        return s->second;
    }
    uint32_t counter[4] = { (uint32_t)s->row, (uint32_t)(s->row >> 32), s->next / 2, s->purpose };
    uint32_t key[2] = { (uint32_t)s->seed, (uint32_t)(s->seed >> 32) }, out[4];
    philox(counter, key, out);
    s->next++;
    s->second = (uint64_t)out[3] << 32 | out[2];
    return (uint64_t)out[1] << 32 | out[0];
}

/* The upper 52 bits become the fraction of a number in [1;2). */
IN_LOOPS double uniform_from(uint64_t bits)
{
    return from_bits(bits >> 12 | 0x3ff0000000000000u) - (1.0 - 0x1p-53);
}

double stream_uniform(struct stream *s)
{
    return uniform_from(stream_bits(s));
}

__extension__ typedef unsigned __int128 wide;

uint64_t stream_below(struct stream *s, uint64_t n)
{
    wide product = (wide)stream_bits(s) * n;
    if ((uint64_t)product < n) {
        uint64_t too_few = -n % n;                     /* 2^64 mod n */
        while ((uint64_t)product < too_few) product = (wide)stream_bits(s) * n;
    }
    return (uint64_t)(product >> 64);
}

double stream_exponential(struct stream *s)
{
    return -portable_log(stream_uniform(s));
}

uint64_t seed_of_replicate(uint64_t seed, uint64_t k)
{
    struct stream s = stream_of(seed, FOR_REPLICATES, k);
    return stream_bits(&s);
}

/* One half of a round on 64-bit lanes that hold 32-bit words, which vector units multiply well. */
IN_LOOPS void round_of(uint64_t *a, uint64_t *b, uint64_t *c, uint64_t *d, uint64_t k,
                            uint64_t l)
{
    uint64_t p = MULTIPLY_A * *a, q = MULTIPLY_B * *c, low = 0xffffffffu;
    *a = (q >> 32) ^ *b ^ k;
    *b = q & low;
    *c = (p >> 32) ^ *d ^ l;
    *d = p & low;
}

FOR_EACH_PROCESSOR
void uniforms_of_rows(uint64_t seed, enum purpose purpose, uint64_t first, uint32_t b,
                      double *restrict even, double *restrict odd)
{
    uint32_t k[10], l[10];
    for (uint32_t i = 0; i < 10; i++) {
        k[i] = (uint32_t)seed + i * WEYL_A;
        l[i] = (uint32_t)(seed >> 32) + i * WEYL_B;
    }
    for (uint64_t i = 0; i < ROWS_AT_ONCE; i++) {
        uint64_t row = first + i, w = row & 0xffffffffu, x = row >> 32, y = b, z = purpose;
        round_of(&w, &x, &y, &z, k[0], l[0]);
        round_of(&w, &x, &y, &z, k[1], l[1]);
        round_of(&w, &x, &y, &z, k[2], l[2]);
        round_of(&w, &x, &y, &z, k[3], l[3]);
        round_of(&w, &x, &y, &z, k[4], l[4]);
        round_of(&w, &x, &y, &z, k[5], l[5]);
        round_of(&w, &x, &y, &z, k[6], l[6]);
        round_of(&w, &x, &y, &z, k[7], l[7]);
        round_of(&w, &x, &y, &z, k[8], l[8]);
        round_of(&w, &x, &y, &z, k[9], l[9]);
        even[i] = uniform_from(x << 32 | w);
        odd[i] = uniform_from(z << 32 | y);
    }
}
