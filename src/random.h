/* random.h - random numbers that are a function of seed, purpose and row.
 *
 * The generator is Philox 4x32 with ten rounds: a bijection of a 128-bit counter
 * under a 64-bit key, with no state to carry along. The key is the seed; the
 * counter is the row, the purpose, and how far the row has got. So rows may be
 * drawn in any order, by anyone, and are the same on every machine.
 */
#ifndef RANDOM_H
#define RANDOM_H

#include <stddef.h>
#include <stdint.h>

/* Numbers for different purposes have nothing in common. Never renumber these: the
 * numbers users get depend on them. */
enum purpose {
    FOR_DRAW = 0,            /* the columns of a draw */
    FOR_MIXING = 1,          /* the chi-square or frailty that a row's columns share */
    FOR_RANKS = 2,           /* ties broken at random */
    FOR_RESAMPLING = 3,      /* bootstrap samples; row = replicate */
    FOR_REORDER = 4,
    FOR_REPLICATES = 5,      /* seeds of whole replicated draws */
    FOR_SCRAMBLING = 6,
    FOR_STRATA = 7,          /* places within the strata of a latin hypercube */
    FOR_CUBE = 8             /* dimensions that Sobol' points do not have */
};

/* The numbers of one row. */
struct stream {
    uint64_t seed, row;
    uint32_t purpose, next;  /* next: which number comes next, two to a block */
    uint64_t second;         /* the other half of the block last made */
};

/* the block of the generator with this counter and key */
void philox(const uint32_t counter[4], const uint32_t key[2], uint32_t out[4]);

struct stream stream_of(uint64_t seed, enum purpose purpose, uint64_t row);

/* 64 random bits */
uint64_t stream_bits(struct stream *s);

/* (k + 1/2) / 2^52 with k uniform on 0 .. 2^52 - 1: strictly inside (0;1), as is 1 - u, exactly */
double stream_uniform(struct stream *s);

/* uniform on 0 .. n - 1 without bias, n >= 1 (Lemire 2019) */
uint64_t stream_below(struct stream *s, uint64_t n);

/* -log of a uniform, the bits the same everywhere */
double stream_exponential(struct stream *s);

/* a seed for replicate k of something done under `seed` */
uint64_t seed_of_replicate(uint64_t seed, uint64_t k);

/* Numbers 2b and 2b + 1 of the streams of ROWS_AT_ONCE rows from `first`, which equal what
 * stream_uniform() gives, many at a time. */
enum { ROWS_AT_ONCE = 256 };
void uniforms_of_rows(uint64_t seed, enum purpose purpose, uint64_t first, uint32_t b,
                      double *restrict even, double *restrict odd);

/* Put before a function whose loops are to be compiled for several processors, the best being
 * taken at run time. The bits do not depend on which: nothing is contracted or reordered. */
#if defined __x86_64__ && defined __gnu_linux__ && defined __GNUC__ && !defined __clang__ \
    && !defined ONE_PROCESSOR
#define FOR_EACH_PROCESSOR \
    __attribute__((target_clones("arch=x86-64-v4", "arch=x86-64-v3", "arch=x86-64-v2", "default")))
#else
#define FOR_EACH_PROCESSOR
#endif

#endif
