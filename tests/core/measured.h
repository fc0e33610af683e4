/* measured.h - calling the functions that measure dependence, for tests of their adaptors. */
#ifndef TESTS_MEASURED_H
#define TESTS_MEASURED_H

#include "cells.h"

#include "../../addin/cache.h"

static inline value called(pool *p, const char *name, status want, report *r, size_t n,
                           const value *in)
{
    value out = nothing();
    *r = (report){ .pool = p };
    assert_non_null(function_named(name));
    assert_int_equal(call_function(function_named(name), in, n, &out, r), want);
    return out;
}

/* with a pool p and a report r */
#define CALL(name, want, ...) \
    called(&p, name, want, &r, sizeof (value[]){ __VA_ARGS__ } / sizeof(value), \
           (value[]){ __VA_ARGS__ })

static inline double at(const value *v, size_t row, size_t col)
{
    assert_int_equal(v->is, IS_TABLE);
    assert_in_range(row, 0, v->table.rows - 1);
    assert_in_range(col, 0, v->table.cols - 1);
    return v->table.at[row * v->table.cols + col];
}

/* The call succeeds, and fails without harm when any of its takes fails. */
static inline void survives_no_memory(const char *name, size_t n, const value *in)
{
    pool p = { 0 };
    report r;
    cache_empty();
    called(&p, name, OK, &r, n, in);
    size_t takes = p.taken;
    pool_empty(&p);
    for (size_t k = 1; k <= takes; k++) {
        pool failing = { .fail_at = k };
        cache_empty();
        called(&failing, name, NO_MEMORY, &r, n, in);
        pool_empty(&failing);
    }
}

/* Nine tuna lightness and panel scores, Hollander & Wolfe (1973) p.187f. */
static const char TUNA_X[] = "44.4; 45.9; 41.9; 53.3; 44.7; 44.1; 50.7; 45.2; 60.1";
static const char TUNA_Y[] = "2.6; 3.1; 2.5; 5.0; 3.6; 4.0; 5.2; 2.8; 3.8";

#endif
