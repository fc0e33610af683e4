/* sobol.c - scrambled Sobol' points
 *
 * Method
 *   Sobol' (1967) with the direction numbers of Joe & Kuo (2008), continued to 52 bits by the
 *   recurrence of Bratley & Fox (1988). Points in the order of their index, not of its Gray code,
 *   so that each can be had by itself. Scrambling: a random linear matrix and a random shift for
 *   each dimension (Matousek 1998), which keep the net and make every point uniform.
 *
 * Special cases
 *   The first dimension is the van der Corput sequence: its directions are the powers of 1/2.
 *
 * Accuracy
 *   Exact; the bits do not depend on the machine.
 */
#include "sobol.h"

#include "elementary.h"

static int degree_of(unsigned polynomial)
{
    int degree = 0;
    while (polynomial >> (degree + 1)) degree++;
    return degree;
}

void sobol_columns(size_t dimension, uint64_t v[SOBOL_BITS])
{
    if (dimension == 0) {
        for (int k = 0; k < SOBOL_BITS; k++) v[k] = (uint64_t)1 << (SOBOL_BITS - 1 - k);
        return;
    }
    const struct sobol_direction *d = &sobol_directions[dimension - 1];
    int degree = degree_of(d->polynomial);
    for (int k = 0; k < degree; k++) v[k] = (uint64_t)d->initial[k] << (SOBOL_BITS - 1 - k);
    for (int k = degree; k < SOBOL_BITS; k++) {
        v[k] = v[k - degree] ^ (v[k - degree] >> degree);
        for (int j = 1; j < degree; j++)
            if (d->polynomial >> (degree - j) & 1) v[k] ^= v[k - j];
    }
}

/* 1 where an odd number of bits is set */
static uint64_t parity(uint64_t x)
{
    for (int shift = 32; shift >= 1; shift /= 2) x ^= x >> shift;
    return x & 1;
}

/* Multiplies the columns by a random lower triangular matrix with a unit diagonal: each bit
 * becomes the sum of itself and a random choice of those before it. */
static void scramble(struct stream *s, uint64_t v[SOBOL_BITS])
{
    uint64_t scrambled[SOBOL_BITS] = { 0 }, all = ((uint64_t)1 << SOBOL_BITS) - 1;
    for (int bit = SOBOL_BITS - 1; bit >= 0; bit--) {
        uint64_t one = (uint64_t)1 << bit, before = all & ~(2 * one - 1);
        uint64_t row = (stream_bits(s) & before) | one;
        for (int k = 0; k < SOBOL_BITS; k++) scrambled[k] |= parity(v[k] & row) << bit;
    }
    for (int k = 0; k < SOBOL_BITS; k++) v[k] = scrambled[k];
}

status sobol_prepare(struct sobol *s, size_t dimensions, uint64_t seed, pool *p)
{
    if (dimensions > SOBOL_DIMENSIONS) return OUT_OF_DOMAIN;
    s->dimensions = dimensions;
    s->column = pool_take(p, dimensions, sizeof *s->column);
    s->shift = pool_take(p, dimensions, sizeof *s->shift);
    if (!s->column || !s->shift) return NO_MEMORY;
    for (size_t j = 0; j < dimensions; j++) {
        struct stream random = stream_of(seed, FOR_SCRAMBLING, j);
        sobol_columns(j, s->column[j]);
        scramble(&random, s->column[j]);
        s->shift[j] = stream_bits(&random) >> (64 - SOBOL_BITS);
    }
    return OK;
}

/* From one index to the next the bits up to the lowest that is 0 change. */
void sobol_of_rows(const struct sobol *s, size_t dimension, uint64_t first, double *u)
{
    const uint64_t *v = s->column[dimension];
    uint64_t x = s->shift[dimension];
    for (int k = 0; k < SOBOL_BITS; k++)
        if (first >> k & 1) x ^= v[k];
    uint64_t sum[SOBOL_BITS + 1], total = 0;                 /* sum[k] of v[0] to v[k] */
    for (int k = 0; k < SOBOL_BITS; k++) sum[k] = total ^= v[k];
    sum[SOBOL_BITS] = total;
    for (uint64_t i = 0; i < ROWS_AT_ONCE; i++) {
        u[i] = from_bits(x | 0x3ff0000000000000u) - (1.0 - 0x1p-53);
        int lowest = 0;
        while ((first + i) >> lowest & 1) lowest++;
        x ^= sum[lowest];
    }
}
