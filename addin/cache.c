/* cache.c - a few whole calls, newest first. Each has a pool of its own. */
#include "cache.h"

#include <pthread.h>
#include <string.h>

enum { KEPT = 16 };
static const size_t MOST_BYTES = (size_t)128 << 20, MOST_BYTES_OF_ONE = (size_t)64 << 20;

struct kept {
    const function *f;
    size_t n_in;
    value *in, out;
    char facts[sizeof((report *)0)->facts];
    pool pool;
};

static struct kept calls[KEPT];
static size_t n_calls;
static pthread_mutex_t lock = PTHREAD_MUTEX_INITIALIZER;

static bool same_texts(const char *a, const char *b)
{
    return a == b || (a && b && !strcmp(a, b));
}

static bool same_value(const value *a, const value *b)
{
    if (a->is != b->is) return false;
    if (a->is == IS_NUMBER) return !memcmp(&a->number, &b->number, sizeof a->number);
    if (a->is == IS_TEXT) return !strcmp(a->text, b->text);
    if (a->is == IS_NOTHING) return true;
    const table *t = &a->table, *u = &b->table;
    size_t n = t->rows * t->cols;
    if (t->rows != u->rows || t->cols != u->cols || !t->words != !u->words) return false;
    if (memcmp(t->at, u->at, n * sizeof *t->at)) return false;
    for (size_t i = 0; t->words && i < n; i++)
        if (!same_texts(t->words[i], u->words[i])) return false;
    return true;
}

/* All texts of a table in one block, since each of the pool's has its own overhead. */
static bool copy_words(const char *const *from, const char **to, size_t n, pool *p)
{
    size_t bytes = 0;
    for (size_t i = 0; i < n; i++) bytes += from[i] ? strlen(from[i]) + 1 : 0;
    char *at = pool_take(p, bytes, 1);
    for (size_t i = 0; at && i < n; i++) {
        if (!from[i]) continue;
        to[i] = at;
        at += strlen(strcpy(at, from[i])) + 1;
    }
    return at;
}

static bool copy_table(const table *from, table *to, pool *p)
{
    size_t n = from->rows * from->cols;
    *to = *from;
    to->at = pool_take(p, n, sizeof *to->at);
    if (!to->at) return false;
    memcpy(to->at, from->at, n * sizeof *to->at);
    if (!from->words) return true;
    to->words = pool_take_zeroed(p, n, sizeof *to->words);
    return to->words && copy_words(from->words, to->words, n, p);
}

static bool copy_value(const value *from, value *to, pool *p)
{
    *to = *from;
    if (from->is == IS_TEXT) return (to->text = pool_text(p, from->text));
    return from->is != IS_TABLE || copy_table(&from->table, &to->table, p);
}

static bool same_call(const struct kept *k, const function *f, const value *in, size_t n_in)
{
    if (k->f != f || k->n_in != n_in) return false;
    for (size_t i = 0; i < n_in; i++)
        if (!same_value(k->in + i, in + i)) return false;
    return true;
}

static size_t bytes_kept(void)
{
    size_t bytes = 0;
    for (size_t i = 0; i < n_calls; i++) bytes += calls[i].pool.bytes;
    return bytes;
}

static void drop_oldest(void)
{
    pool_empty(&calls[--n_calls].pool);
}

bool cache_finds(const function *f, const value *in, size_t n_in, value *out, report *r)
{
    bool found = false;
    pthread_mutex_lock(&lock);
    for (size_t i = 0; i < n_calls && !found; i++) {
        if (!same_call(calls + i, f, in, n_in)) continue;
        found = copy_value(&calls[i].out, out, r->pool);
        memcpy(r->facts, calls[i].facts, sizeof r->facts);
        break;
    }
    pthread_mutex_unlock(&lock);
    return found;
}

static size_t size_of(const value *v)
{
    return v->is == IS_TABLE ? v->table.rows * v->table.cols * (sizeof(double) + sizeof(char *))
                             : sizeof *v;
}

void cache_keeps(const function *f, const value *in, size_t n_in, const value *out, const report *r)
{
    size_t bytes = size_of(out);
    for (size_t i = 0; i < n_in; i++) bytes += size_of(in + i);
    if (bytes > MOST_BYTES_OF_ONE) return;
    struct kept k = { .f = f, .n_in = n_in };
    bool whole = (k.in = pool_take(&k.pool, n_in, sizeof *k.in)) &&
                 copy_value(out, &k.out, &k.pool);
    for (size_t i = 0; whole && i < n_in; i++) whole = copy_value(in + i, k.in + i, &k.pool);
    if (!whole || k.pool.bytes > MOST_BYTES_OF_ONE) {
        pool_empty(&k.pool);
        return;
    }
    memcpy(k.facts, r->facts, sizeof k.facts);
    pthread_mutex_lock(&lock);
    while (n_calls && (n_calls == KEPT || bytes_kept() + k.pool.bytes > MOST_BYTES)) drop_oldest();
    memmove(calls + 1, calls, n_calls * sizeof *calls);
    calls[0] = k;
    n_calls++;
    pthread_mutex_unlock(&lock);
}

void cache_empty(void)
{
    pthread_mutex_lock(&lock);
    while (n_calls) drop_oldest();
    pthread_mutex_unlock(&lock);
}
