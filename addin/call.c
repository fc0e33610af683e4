/* call.c - one call of a function: read, check, run, keep. */
#include "cache.h"
#include "function.h"
#include "read.h"
#include "words.h"

#include <math.h>
#include <string.h>

size_t count_params(const function *f)
{
    size_t n = 0;
    while (n < MAX_PARAMS && f->params[n].name) n++;
    return n;
}

const function *function_named(const char *name)
{
    name = without_prefix(name, "joint.");
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++)
            if (same_word(f->name, name)) return f;
    return NULL;
}

static const char *usual_sentence(status s)
{
    switch (s) {
    case BAD_KIND: return "an argument is of the wrong kind";
    case OUT_OF_DOMAIN: return "a number is outside its domain";
    case NO_VARIATION: return "undefined, because nothing varies";
    case TOO_FEW: return "there are too few observations";
    case NOT_SETTLED: return "the iteration did not settle";
    case NO_MEMORY: return "there is not enough memory";
    default: return "";
    }
}

static size_t place_of(const function *f, const char *name)
{
    size_t i = 0;
    while (strcmp(f->params[i].name, name)) i++;
    return i;
}

static status read_all(const function *f, const value *in, size_t n_in, argument *read, report *r)
{
    static const value nothing = { .is = IS_NOTHING };
    size_t n = f->rest ? 0 : count_params(f);
    for (size_t i = 0; i < n; i++) {
        const param *p = f->params + i;
        const argument *earlier = p->fits ? read + place_of(f, p->fits) : NULL;
        status s = read_argument(p, i < n_in ? in + i : &nothing, earlier, read + i, r);
        if (s != OK) return s;
    }
    return OK;
}

/* A result beyond what a number can hold is an error, in a table in its own cell only. One that is
 * undefined without saying why is our defect, which tests look for, but no number for the user. */
static bool is_none(double x, report *r)
{
    bool undefined = isnan(x) && !marks_gap(x) && fault_in(x) == OK;
    r->undefined = r->undefined || undefined;
    return undefined || isinf(x);
}

static status refuse_overflow(value *out, report *r)
{
    if (out->is == IS_NUMBER && is_none(out->number, r))
        return refuse(r, OUT_OF_DOMAIN, "the result is beyond the range of numbers");
    for (size_t i = 0; out->is == IS_TABLE && i < out->table.rows * out->table.cols; i++)
        if (is_none(out->table.at[i], r)) out->table.at[i] = fault(OUT_OF_DOMAIN);
    return OK;
}

/* An error in a cell of the result is no refusal, but the first fact that there is to tell. */
static void remark_faults(const value *out, report *r)
{
    if (out->is != IS_TABLE) return;
    size_t faults = 0, first = 0;
    for (size_t i = 0; i < out->table.rows * out->table.cols; i++)
        if (fault_in(out->table.at[i]) != OK && !faults++) first = i;
    if (!faults) return;
    char others[sizeof r->facts];
    memcpy(others, r->facts, sizeof others);
    *r->facts = 0;
    remark(r, "%zu cell%s of the result hold%s, the first in row %zu, column %zu: %s", faults,
           plural(faults), faults == 1 ? "s an error" : " errors", first / out->table.cols + 1,
           first % out->table.cols + 1,
           r->cause ? r->cause : usual_sentence(fault_in(out->table.at[first])));
    if (*others) remark(r, "%s", others);
}

static status run(const function *f, const value *in, size_t n_in, value *out, report *r)
{
    argument read[MAX_PARAMS];
    size_t most = count_params(f);
    if (n_in > most && !f->rest)
        return refuse(r, BAD_KIND, "%zu argument%s given, but at most %zu can be", n_in,
                      plural(n_in), most);
    status s = read_all(f, in, n_in, read, r);
    if (s != OK) return s;
    s = f->call(read, out, r);
    if (s == OK) s = refuse_overflow(out, r);
    if (s == OK) remark_faults(out, r);
    return s;
}

status call_function(const function *f, const value *in, size_t n_in, value *out, report *r)
{
    r->given = in;
    r->n_given = n_in;
    *out = (value){ .is = IS_NOTHING };
    if (f->costly && cache_finds(f, in, n_in, out, r)) return OK;
    status s = run(f, in, n_in, out, r);
    if (s != OK && !*r->why) refuse(r, s, "%s", usual_sentence(s));
    if (s == OK && f->costly) cache_keeps(f, in, n_in, out, r);
    return s;
}

static status one_number(const argument *a, double x, status (*g)(double, const void *, double *),
                         const void *with, double *y)
{
    const param *p = a->param;
    if (p->low != 0 || p->high != 0) {
        if (x < p->low || (x == p->low && p->open & LOW_OPEN)) return OUT_OF_DOMAIN;
        if (x > p->high || (x == p->high && p->open & HIGH_OPEN)) return OUT_OF_DOMAIN;
    }
    return g(x, with, y);
}

status each_number(const argument *a, status (*g)(double x, const void *with, double *y),
                   const void *with, value *out, report *r)
{
    const samples *in = &a->data;
    if (in->at == &a->number) {
        *out = (value){ .is = IS_NUMBER };
        return one_number(a, a->number, g, with, &out->number);
    }
    status s = new_table(r, in->rows + a->header, in->cols, out);
    for (size_t j = 0; s == OK && a->header && j < in->cols; j++)
        if (!empty_at(&a->raw->table, 0, j))
            s = put_text(r, out, 0, j, word_at(&a->raw->table, 0, j));
    for (size_t i = 0; s == OK && i < in->rows; i++)
        for (size_t j = 0; j < in->cols; j++) {
            double x = in->at[j * in->rows + i], y;
            if (is_gap(x)) continue;
            status one = one_number(a, x, g, with, &y);
            put_number(out, i + a->header, j, one == OK ? y : fault(one));
        }
    return s;
}

status table_from(const samples *from, value *out, report *r)
{
    status s = new_table(r, from->rows, from->cols, out);
    for (size_t i = 0; s == OK && i < from->rows; i++)
        for (size_t j = 0; j < from->cols; j++) {
            double x = from->at[j * from->rows + i];
            put_number(out, i, j, is_gap(x) && fault_in(x) == OK ? gap() : x);
        }
    return s;
}
