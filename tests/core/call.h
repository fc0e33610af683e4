/* call.h - one call of a cell function with all that is left of it. */
#ifndef TESTS_CALL_H
#define TESTS_CALL_H

#include "cells.h"

struct call {
    pool pool;
    report report;
    value out;
    status s;
};

static inline struct call *call(struct call *c, const char *name, size_t n, const value *in)
{
    const function *f = function_named(name);
    assert_non_null(f);
    c->report = (report){ .pool = &c->pool };
    c->s = call_function(f, in, n, &c->out, &c->report);
    return c;
}

#endif
