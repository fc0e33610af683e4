/* read.c - one reader for each kind of parameter, and what ties parameters together. */
#include "read.h"
#include "models.h"
#include "words.h"

#include <math.h>
#include <string.h>

static bool bounded(const param *p)
{
    return p->low != 0 || p->high != 0;
}

static bool in_bounds(const param *p, double x)
{
    if (!bounded(p)) return true;
    return (p->open & LOW_OPEN ? x > p->low : x >= p->low) &&
           (p->open & HIGH_OPEN ? x < p->high : x <= p->high);
}

static status refuse_bounds(const param *p, double x, report *r)
{
    bool low = p->low > -HUGE_VAL, high = p->high < HUGE_VAL;
    const char *above = p->open & LOW_OPEN ? "above" : "at least";
    const char *below = p->open & HIGH_OPEN ? "below" : "at most";
    const char *blank = x == 0 && p->optional
                            ? " (a blank cell counts as 0; leave the argument out instead)" : "";
    if (low && high)
        return refuse(r, OUT_OF_DOMAIN, "%s is %g, but must be %s %g and %s %g%s", p->name, x,
                      above, p->low, below, p->high, blank);
    if (low)
        return refuse(r, OUT_OF_DOMAIN, "%s is %g, but must be %s %g%s", p->name, x, above, p->low,
                      blank);
    return refuse(r, OUT_OF_DOMAIN, "%s is %g, but must be %s %g", p->name, x, below, p->high);
}

static status no_single(const param *p, const value *one, const char *wanted, report *r)
{
    if (one->is == IS_TABLE)
        return refuse(r, BAD_KIND, "%s is %zu x %zu cells, but must be %s", p->name,
                      one->table.rows, one->table.cols, wanted);
    if (one->is == IS_TEXT)
        return refuse(r, BAD_KIND, "%s is the text \"%s\", but must be %s", p->name, one->text,
                      wanted);
    if (one->is == IS_NUMBER)
        return refuse(r, BAD_KIND, "%s is the number %g, but must be %s", p->name, one->number,
                      wanted);
    return refuse(r, BAD_KIND, "%s is empty, but must be %s", p->name, wanted);
}

static status read_number(const param *p, const value *v, argument *a, report *r)
{
    value one = single_of(v);
    if (one.is == IS_NOTHING && p->optional) return OK;
    if (one.is != IS_NUMBER)
        return no_single(p, &one, p->kind == WHOLE ? "one whole number" : "one number", r);
    if (fault_in(one.number) != OK)
        return refuse(r, fault_in(one.number), "%s is an error", p->name);
    if (!isfinite(one.number))
        return refuse(r, OUT_OF_DOMAIN, "%s is not a finite number", p->name);
    if (!in_bounds(p, one.number)) return refuse_bounds(p, one.number, r);
    if (p->kind == WHOLE && one.number != floor(one.number))
        return refuse(r, OUT_OF_DOMAIN, "%s is %g, but must be a whole number", p->name,
                      one.number);
    a->given = true;
    a->number = one.number;
    return OK;
}

static status read_range(const param *p, const value *v, argument *a, report *r)
{
    status s = read_numbers(p->name, v, a, r);
    if (s != OK) return s;
    if (a->data.at == &a->number && !in_bounds(p, a->number)) return refuse_bounds(p, a->number, r);
    return OK;
}

static status read_word(const param *p, const value *v, argument *a, report *r)
{
    value one = single_of(v);
    if (one.is == IS_NOTHING && p->optional) return OK;
    if (one.is != IS_TEXT) return no_single(p, &one, "a word", r);
    int place = word_in(p->words, one.text);
    if (place < 0) {
        const char *words = listed(r->pool, p->words);
        return words ? refuse(r, BAD_KIND, "%s is \"%s\", but must be %s", p->name, one.text, words)
                     : NO_MEMORY;
    }
    a->given = true;
    a->word = (size_t)place;
    return OK;
}

/* Each of the words must be known, unless the list is empty. */
static status read_words(const param *p, const value *v, argument *a, report *r)
{
    value one = single_of(v);
    if (one.is == IS_NOTHING && p->optional) return OK;
    if (one.is != IS_TEXT) return no_single(p, &one, "a text of one or more words", r);
    char *text = tidy_words(r->pool, one.text), *copy = text ? pool_text(r->pool, text) : NULL;
    if (!copy) return NO_MEMORY;
    for (char *word = copy, *next; p->words && word && *word; word = next) {
        next = strchr(word, ' ');
        if (next) *next++ = '\0';
        if (word_in(p->words, word) >= 0) continue;
        const char *words = listed(r->pool, p->words);
        return words ? refuse(r, BAD_KIND, "%s has the word \"%s\", but knows only %s", p->name,
                              word, words)
                     : NO_MEMORY;
    }
    a->given = true;
    a->text = text;
    return OK;
}

/* How many lines an argument speaks of, and their names. */
static size_t lines_of(const argument *a, const char ***names)
{
    if (a->param->kind == MODEL) return *names = a->model->lines, a->model->dimension;
    if (a->param->kind == MARGINS) return *names = a->margins.names, a->margins.lines;
    if (a->param->kind == TERMS) return *names = a->terms.names, a->terms.lines;
    return *names = a->data.names, a->data.cols;
}

static status check_length(const argument *a, const argument *earlier, report *r)
{
    if (a->data.rows == earlier->data.rows) return OK;
    const char *name = a->param->name, *other = earlier->param->name;
    if (a->header == earlier->header)
        return refuse(r, BAD_KIND, "%s is %zu long, but %s is %zu long", name, a->data.rows, other,
                      earlier->data.rows);
    return refuse(r, BAD_KIND, "%s is %zu long, but %s is %zu long (%s has a header, which is not "
                  "counted, and %s has none)", name, a->data.rows, other, earlier->data.rows,
                  a->header ? name : other, a->header ? other : name);
}

/* Margins without names are those of the lines they fit, so that what fits them sees the names. */
static status adopt_names(struct margins *m, const char **names, report *r)
{
    if (!names) return OK;
    const char **own = pool_take(r->pool, m->lines, sizeof *own);
    if (!own) return NO_MEMORY;
    for (size_t i = 0; i < m->lines; i++)
        own[i] = m->names && *m->names[i] ? m->names[i] : names[i];
    m->names = own;
    return OK;
}

static status check_fit(argument *a, const argument *earlier, report *r)
{
    if (a->param->kind == COLUMN) return check_length(a, earlier, r);
    const char **names, **theirs;
    size_t lines = lines_of(a, &names), wanted = lines_of(earlier, &theirs);
    if (lines != wanted)
        return refuse(r, BAD_KIND, "%s has %zu line%s, but %s has %zu", a->param->name, lines,
                      plural(lines), earlier->param->name, wanted);
    status s = check_same_names(a->param->name, names, earlier->param->name, theirs, lines, r);
    if (s != OK) return s;
    return a->param->kind == MARGINS ? adopt_names(&a->margins, theirs, r) : OK;
}

static status read_given(const param *p, const value *v, const argument *earlier, argument *a,
                         report *r)
{
    struct line_names known = { 0 };
    if (earlier && earlier->given) known.lines = lines_of(earlier, &known.names);
    a->given = true;
    switch (p->kind) {
    case COLUMN: return read_column(p->name, v, a, r);
    case DATA: return read_data(p->name, v, true, a, r);
    case FULL_DATA: return read_data(p->name, v, false, a, r);
    case MATRIX: return read_matrix(v, p->name, &a->data, &a->header, r);
    case MODEL: return read_copula(v, p->name, &a->model, r);
    case MARGINS: return read_margins(p->name, v, &a->margins, r);
    case TERMS: return read_terms(p->name, v, &known, &a->terms, r);
    case AGGREGATE: return read_aggregate(p->name, v, &a->terms, r);
    case SETTINGS: return read_settings(p, v, &a->settings, r);
    default: return read_range(p, v, a, r);
    }
}

/* The adaptor reads what it takes, but a number that is none goes no further. */
static status read_raw(const param *p, const value *v, argument *a, report *r)
{
    a->given = true;
    if (v->is == IS_NUMBER && !isfinite(v->number))
        return refuse(r, OUT_OF_DOMAIN, "%s is not a finite number", p->name);
    const table *t = &v->table;
    for (size_t i = 0; v->is == IS_TABLE && i < t->rows * t->cols; i++) {
        double x = t->at[i];
        if (!isfinite(x) && !marks_gap(x))
            return number_at(p->name, t, i / t->cols, i % t->cols, &x, r);
    }
    return OK;
}

/* What counts as left out: an empty text, and a block without anything in it. */
static bool is_empty(const param *p, const value *v)
{
    bool block = p->kind == MARGINS || p->kind == TERMS || p->kind == AGGREGATE ||
                 p->kind == SETTINGS;
    if (v->is == IS_TEXT) return !*v->text;
    return block && v->is == IS_TABLE && !filled_rows(&v->table);
}

/* Quotes the first name, so that a stray text above the numbers does not pass unseen. */
static void remark_header(const argument *a, report *r)
{
    const table *t = &a->raw->table;
    for (size_t j = 0; j < t->cols; j++) {
        if (!word_at(t, 0, j)) continue;
        remark(r, "header of %s skipped (\"%s\"%s)", a->param->name, word_at(t, 0, j),
               j + 1 < t->cols ? ", ..." : "");
        return;
    }
}

status read_argument(const param *p, const value *v, const argument *earlier, argument *a,
                     report *r)
{
    *a = (argument){ .number = p->otherwise, .raw = v, .param = p };
    if (p->kind == WORD || p->kind == WORDS || p->kind == NUMBER || p->kind == WHOLE) {
        if (v->is == IS_NOTHING && !p->optional)
            return refuse(r, BAD_KIND, "%s is missing", p->name);
        if (p->kind == WORD) return read_word(p, v, a, r);
        return p->kind == WORDS ? read_words(p, v, a, r) : read_number(p, v, a, r);
    }
    if (v->is == IS_NOTHING || (p->optional && is_empty(p, v))) {
        if (p->optional) {
            static const setting none[MAX_SETTINGS];
            a->settings = none;
            return OK;
        }
        return refuse(r, BAD_KIND, "%s is missing", p->name);
    }
    if (p->kind == RAW) return read_raw(p, v, a, r);
    status s = read_given(p, v, earlier, a, r);
    if (s == OK && a->header) remark_header(a, r);
    return s == OK && earlier && earlier->given ? check_fit(a, earlier, r) : s;
}
