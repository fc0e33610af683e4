/* memory.h - the one place where the core gets memory.
 *
 * A pool belongs to one call and one thread. Everything taken from it is given
 * back at once by pool_empty(), so no function in src/ ever frees anything.
 * Every take can fail; tests make it fail with fail_at.
 */
#ifndef MEMORY_H
#define MEMORY_H

#include <stddef.h>

typedef struct pool {
    struct block *last;
    size_t taken;        /* how many takes so far, failed ones included */
    size_t bytes;        /* what the live blocks hold */
    size_t fail_at;      /* tests: this take and every later one fails; 0 never */
} pool;

/* room for n objects of `size` bytes, 64-byte aligned, not cleared; NULL if there is none */
void *pool_take(pool *p, size_t n, size_t size);

/* the same, cleared */
void *pool_take_zeroed(pool *p, size_t n, size_t size);

/* a copy of a text */
char *pool_text(pool *p, const char *text);

/* gives back everything taken since `mark`, which is an earlier value of p->last */
void pool_back_to(pool *p, struct block *mark);

void pool_empty(pool *p);

#endif
