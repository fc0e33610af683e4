/* asked.h - asking copulas at points, for tests. */
#ifndef TESTS_ASKED_H
#define TESTS_ASKED_H

#include "draws.h"

#include "../../src/evaluate.h"

enum asked { CDF, LOG_DENSITY, CONDITIONAL, FROM_CONDITIONAL };

/* The status instead of a failure; a number: the conditional ones are about the last column. */
static inline status try_to_ask(const copula *c, enum asked what, const double *u, double *value)
{
    pool p = { 0 };
    struct evaluation e;
    double x[50] = { 0 }, error;
    status s = evaluation_of(c, &e, &p);
    assert_int_equal(s, OK);
    if (what == CDF) s = cdf_at(&e, u, x, &error);
    if (what == LOG_DENSITY) s = log_density_at(&e, u, x);
    if (what == CONDITIONAL) s = conditional_at(&e, u, x);
    if (what == FROM_CONDITIONAL) s = from_conditional_at(&e, u, x);
    pool_empty(&p);
    *value = what == CDF || what == LOG_DENSITY ? x[0] : x[c->dimension - 1];
    return s;
}

static inline double ask(const copula *c, enum asked what, const double *u)
{
    double x;
    assert_int_equal(try_to_ask(c, what, u, &x), OK);
    return x;
}

static inline double ask_pair(const copula *c, enum asked what, double u, double v)
{
    return ask(c, what, (double[]){ u, v });
}

/* the numbers of a text, blanks between them; how many */
static inline size_t numbers_in(const char *text, double *u)
{
    size_t n = 0;
    for (char *end; *text; text = end + (*end == ' ')) u[n++] = strtod(text, &end);
    return n;
}

#endif
