/* margins.h - the margins that check values name. */
#ifndef TESTS_MARGINS_H
#define TESTS_MARGINS_H

#include "table.h"

#include "../../src/distribution.h"

static inline margin margin_of(const char *word, double a, double b)
{
    const distribution *d = distribution_named(word);
    assert_non_null(d);
    return (margin){ d, a, b, NAN };
}

/* the number behind a name in a text such as "mu=10 sigma=0.5" */
static inline double named_number(const char *text, const char *name)
{
    const char *at = strstr(text, name);
    assert_non_null(at);
    return strtod(at + strlen(name) + 1, NULL);
}

/* the margin in the columns distribution and parameters of a row */
static inline margin margin_in(const struct csv *t, size_t i)
{
    const char *word = csv_text(t, i, "distribution"), *text = csv_text(t, i, "parameters");
    if (!strcmp(word, "lognormal"))
        return margin_of(word, named_number(text, "mu"), named_number(text, "sigma"));
    if (!strcmp(word, "normal"))
        return margin_of(word, named_number(text, "mean"), named_number(text, "sd"));
    if (!strcmp(word, "pareto_II"))
        return margin_of("lomax", named_number(text, "alpha"), named_number(text, "theta"));
    return margin_of(word, named_number(text, "shape"), named_number(text, "scale"));
}

#endif
