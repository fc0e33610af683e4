/* measures.c - what the adaptors for measures of dependence share. */
#include "measures.h"
#include "words.h"

#include <math.h>

void remark_rows(size_t used, size_t filled, const char *dropped_for, report *r)
{
    if (used == filled)
        remark(r, "%zu row%s used, none dropped", used, plural(used));
    else
        remark(r, "%zu row%s used, %zu dropped for %s", used, plural(used), filled - used,
               dropped_for);
}

void remark_grid_rows(bool by_rows, size_t used, size_t filled, report *r)
{
    if (by_rows)
        remark_rows(used, filled, "gaps", r);
    else
        remark(r, "%zu row%s of data, each pair with those that both columns have", filled,
               plural(filled));
}

size_t filled_in_either(const argument *x, const argument *y)
{
    return x->filled > y->filled ? x->filled : y->filled;
}

/* Whether x is the same wherever y is no gap. */
static bool is_constant(const double *x, const double *y, size_t n)
{
    double first = NAN;
    for (size_t i = 0; i < n; i++) {
        if (is_gap(x[i]) || is_gap(y[i])) continue;
        if (is_gap(first)) first = x[i];
        if (x[i] != first) return false;
    }
    return true;
}

status refuse_measure(status s, size_t used, size_t least, const argument *x, const argument *y,
                      const char *what, report *r)
{
    if (s == TOO_FEW)
        return refuse(r, s, "x and y have %zu row%s in common, but %s needs at least %zu", used,
                      plural(used), what, least);
    if (s != NO_VARIATION) return s;
    bool x_constant = is_constant(x->data.at, y->data.at, x->data.rows);
    if (!x_constant && !is_constant(y->data.at, x->data.at, x->data.rows))
        return refuse(r, s, "x or y varies in too few of the %zu rows used for %s", used, what);
    return refuse(r, s, "%s is the same in all %zu rows used, and %s is undefined",
                  x_constant ? "x" : "y", used, what);
}

status symmetric_grid(size_t d, status (*figure)(void *with, size_t i, size_t j, double *x),
                      void *with, value *out, report *r)
{
    status s = new_table(r, d, d, out);
    for (size_t i = 0; i < d && s == OK; i++) {
        for (size_t j = 0; j <= i && s == OK; j++) {
            double x = 0;
            status one = figure(with, i, j, &x);
            if (one == NO_MEMORY) s = one;
            put_number(out, i, j, one == OK ? x : fault(one));
            put_number(out, j, i, one == OK ? x : fault(one));
        }
    }
    return s;
}
