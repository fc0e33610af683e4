/* memory.c - a pool is a list of malloc blocks, newest first. */
#include "memory.h"

#include <stdint.h>
#include <stdlib.h>
#include <string.h>

enum { ALIGNMENT = 64 };

struct block {
    struct block *before;
    size_t bytes;
};

void *pool_take(pool *p, size_t n, size_t size)
{
    p->taken++;
    if (p->fail_at && p->taken >= p->fail_at) return NULL;
    if (size && n > (SIZE_MAX - 2 * ALIGNMENT) / size) return NULL;
    size_t bytes = ALIGNMENT + (n * size + ALIGNMENT - 1) / ALIGNMENT * ALIGNMENT;
    struct block *b = aligned_alloc(ALIGNMENT, bytes);
    if (!b) return NULL;
    *b = (struct block){ p->last, bytes };
    p->last = b;
    p->bytes += bytes;
    return (char *)b + ALIGNMENT;
}

void *pool_take_zeroed(pool *p, size_t n, size_t size)
{
    void *room = pool_take(p, n, size);
    if (room) memset(room, 0, n * size);
    return room;
}

char *pool_text(pool *p, const char *text)
{
    size_t bytes = strlen(text) + 1;
    char *copy = pool_take(p, bytes, 1);
    return copy ? memcpy(copy, text, bytes) : NULL;
}

void pool_back_to(pool *p, struct block *mark)
{
    while (p->last != mark) {
        struct block *b = p->last;
        p->last = b->before;
        p->bytes -= b->bytes;
        free(b);
    }
}

void pool_empty(pool *p)
{
    pool_back_to(p, NULL);
}
