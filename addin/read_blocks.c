/* read_blocks.c - margins, terms and settings.
 *
 * A header decides the columns by its words, in any order; an unknown word is refused. Without a
 * header the columns stand as functions.md gives them: [name] distribution a b c, and excess limit
 * share name with, where a first column of text is the name.
 */
#include "read.h"
#include "words.h"

#include <math.h>
#include <string.h>

enum { MOST_COLUMNS = 8, ABSENT = 100 };

/* Where each of a block's words stands: column[k] for word k of the list, ABSENT where it has none.
 */
struct layout {
    const char *words;
    size_t first; /* first row of content */
    size_t rows;  /* rows of content */
    size_t column[MOST_COLUMNS];
};

static bool column_is_empty(const table *t, size_t col)
{
    for (size_t i = 0; i < t->rows; i++)
        if (!empty_at(t, i, col)) return false;
    return true;
}

static status layout_from_header(const char *name, const table *t, struct layout *l, report *r)
{
    l->first = 1;
    for (size_t j = 0; j < t->cols; j++) {
        const char *word = word_at(t, 0, j);
        if (!word && column_is_empty(t, j)) continue;
        int place = word_in(l->words, word ? word : "name");
        if (place < 0 || l->column[place] != ABSENT) {
            const char *known = listed(r->pool, l->words);
            if (!known) return NO_MEMORY;
            if (place >= 0)
                return refuse(r, BAD_KIND, "%s has two columns for \"%s\"", name,
                              word ? word : "name");
            return refuse(r, BAD_KIND, "%s has the heading \"%s\" in column %zu, but knows only %s",
                          name, word ? word : "", j + 1, known);
        }
        l->column[place] = j;
    }
    return OK;
}

/* Columns in their usual order, given as places in the list of words. */
static status layout_in_order(const char *name, const table *t, const size_t *order, size_t n,
                              struct layout *l, report *r)
{
    l->first = 0;
    for (size_t j = 0; j < t->cols; j++) {
        if (j < n)
            l->column[order[j]] = j;
        else if (!column_is_empty(t, j))
            return refuse(r, BAD_KIND, "%s has %zu columns, but takes at most %zu", name, t->cols,
                          n);
    }
    return OK;
}

static void start_layout(struct layout *l, const char *words)
{
    *l = (struct layout){ .words = words };
    for (size_t k = 0; k < MOST_COLUMNS; k++) l->column[k] = ABSENT;
}

static status count_rows(const char *name, const table *t, struct layout *l, report *r)
{
    size_t filled = filled_rows(t);
    l->rows = filled > l->first ? filled - l->first : 0;
    if (!l->rows) return refuse(r, BAD_KIND, "%s has no rows below its header", name);
    return OK;
}

static const char *text_of(const table *t, const struct layout *l, size_t line, size_t word)
{
    return l->column[word] >= t->cols ? NULL : word_at(t, l->first + line, l->column[word]);
}

static status number_of(const char *name, const table *t, const struct layout *l, size_t line,
                        size_t word, double *x, report *r)
{
    *x = gap();
    if (l->column[word] >= t->cols) return OK;
    return number_at(name, t, l->first + line, l->column[word], x, r);
}

static status read_names(const char *name, const table *t, const struct layout *l, size_t word,
                         const char ***names, report *r)
{
    *names = NULL;
    if (l->column[word] >= t->cols) return OK;
    *names = pool_take(r->pool, l->rows, sizeof **names);
    if (!*names) return NO_MEMORY;
    for (size_t i = 0; i < l->rows; i++) {
        const char *text = text_of(t, l, i, word);
        (*names)[i] = text ? text : "";
        if (!text && !empty_at(t, l->first + i, l->column[word]))
            return refuse(
                r, BAD_KIND,
                "%s has a number in row %zu, column %zu, where the name of a line is needed", name,
                l->first + i + 1, l->column[word] + 1);
    }
    return OK;
}

/* ---- margins ----------------------------------------------------------------------------------
 */

static const char margin_words[] = "name distribution a b c";
enum { MARGIN_NAME, MARGIN_DISTRIBUTION, MARGIN_A };

static const distribution *distribution_at(const table *t, size_t row, size_t col, pool *p)
{
    const char *word = word_at(t, row, col), *tidy = word ? tidy_words(p, word) : NULL;
    return tidy ? distribution_named(tidy) : NULL;
}

static bool row_names_distribution(const table *t, pool *p)
{
    for (size_t j = 0; j < t->cols; j++)
        if (distribution_at(t, 0, j, p)) return true;
    return false;
}

static status margin_layout(const char *name, const table *t, struct layout *l, report *r)
{
    static const size_t order[] = { 0, 1, 2, 3, 4 };
    start_layout(l, margin_words);
    bool header = header_in(t) && !row_names_distribution(t, r->pool);
    size_t unnamed = distribution_at(t, 0, 0, r->pool) != NULL;
    status s = header ? layout_from_header(name, t, l, r)
                      : layout_in_order(name, t, order + unnamed, 5 - unnamed, l, r);
    if (s == OK && l->column[MARGIN_DISTRIBUTION] >= t->cols)
        return refuse(r, BAD_KIND, "%s has no column for the distribution", name);
    return s == OK ? count_rows(name, t, l, r) : s;
}

static status all_distributions(const char *name, const char *word, size_t row, report *r)
{
    char known[256] = "";
    for (const distribution *const *d = distributions; *d; d++) {
        if (strlen(known) + strlen((*d)->word) + 2 > sizeof known) break;
        if (*known) strcat(known, " ");
        strcat(known, (*d)->word);
    }
    const char *list = listed(r->pool, known);
    if (!list) return NO_MEMORY;
    if (!word)
        return refuse(r, BAD_KIND, "%s names no distribution in row %zu; it knows %s", name, row,
                      list);
    return refuse(r, BAD_KIND, "%s has the distribution \"%s\" in row %zu, but knows only %s", name,
                  word, row, list);
}

static status refuse_margin(const char *name, const margin *m, size_t which, status s, size_t row,
                            report *r)
{
    const struct parameter *p = m->distribution->parameter + which;
    static const char *const letters[] = { "a", "b", "c" };
    double x = which == 0 ? m->a : which == 1 ? m->b : m->c;
    const char *word = m->distribution->word;
    if (s == BAD_KIND && !p->name)
        return refuse(r, s, "%s gives %s in row %zu, but %s has no such parameter", name,
                      letters[which], row, word);
    if (s == BAD_KIND)
        return refuse(r, s, "%s lacks %s, the %s of the %s, in row %zu", name, letters[which],
                      p->name, word, row);
    if (p->whole)
        return refuse(r, s, "%s has %s %g in row %zu, but it must be a whole number from %g on",
                      name, p->name, x, row, p->low);
    return refuse(r, s, "%s has %s %g in row %zu, but the %s needs it %s %g", name, p->name, x, row,
                  word, p->low_open ? "above" : "at least", p->low);
}

static status read_margin(const char *name, const table *t, const struct layout *l, size_t line,
                          margin *m, report *r)
{
    size_t row = l->first + line, column = l->column[MARGIN_DISTRIBUTION];
    double *const parameters[] = { &m->a, &m->b, &m->c };
    m->distribution = distribution_at(t, row, column, r->pool);
    if (!m->distribution) return all_distributions(name, word_at(t, row, column), row + 1, r);
    for (size_t k = 0; k < 3; k++) {
        status s = number_of(name, t, l, line, MARGIN_A + k, parameters[k], r);
        if (s != OK) return s;
    }
    size_t which;
    status s = margin_check(m, &which);
    return s == OK ? OK : refuse_margin(name, m, which, s, row + 1, r);
}

status read_margins(const char *name, const value *v, struct margins *m, report *r)
{
    const table *t;
    struct layout l;
    status s = table_of(name, v, "a block of margins, one line a row: [name] distribution a b c",
                        &t, r);
    if (s == OK) s = margin_layout(name, t, &l, r);
    if (s != OK) return s;
    *m = (struct margins){ .lines = l.rows, .of = pool_take(r->pool, l.rows, sizeof *m->of) };
    if (!m->of) return NO_MEMORY;
    if (!l.first && !row_names_distribution(t, r->pool))
        return all_distributions(name, word_at(t, 0, l.column[MARGIN_DISTRIBUTION]), 1, r);
    s = read_names(name, t, &l, MARGIN_NAME, &m->names, r);
    for (size_t i = 0; i < l.rows && s == OK; i++) s = read_margin(name, t, &l, i, m->of + i, r);
    return s;
}

/* ---- terms ------------------------------------------------------------------------------------
 */

static const char term_words[] = "excess limit share name with",
                  aggregate_words[] = "excess limit share name";
enum { TERM_EXCESS, TERM_LIMIT, TERM_SHARE, TERM_NAME, TERM_WITH };

static status term_layout(const char *name, const table *t, bool aggregate, struct layout *l,
                          report *r)
{
    static const size_t as_given[] = { 0, 1, 2, 3, 4 }, name_first[] = { 3, 0, 1, 2, 4 };
    start_layout(l, aggregate ? aggregate_words : term_words);
    bool named = word_at(t, 0, 0);
    status s = header_in(t) ? layout_from_header(name, t, l, r)
                            : layout_in_order(name, t, named ? name_first : as_given,
                                              aggregate ? 4 : 5, l, r);
    if (s == OK) s = count_rows(name, t, l, r);
    if (s == OK && aggregate && l->rows != 1)
        return refuse(r, BAD_KIND, "%s has %zu rows, but must be one row: excess limit share", name,
                      l->rows);
    return s;
}

/* The line that this one follows, by name or number, as 1 + its place; 0 for none. */
static status read_with(const char *name, const table *t, const struct layout *l, size_t line,
                        const struct terms *all, const char **names, size_t *with, report *r)
{
    size_t row = l->first + line + 1;
    const char *text = text_of(t, l, line, TERM_WITH);
    *with = 0;
    for (size_t i = 0; text && names && i < all->lines; i++) {
        if (!*names[i] || !same_word(names[i], text)) continue;
        if (*with)
            return refuse(r, BAD_KIND, "%s has \"%s\" under with in row %zu, but lines %zu and %zu "
                          "have that name", name, text, row, *with, i + 1);
        *with = i + 1;
    }
    if (text && !*with)
        return refuse(r, BAD_KIND, "%s has \"%s\" under with in row %zu, but no line of that name",
                      name, text, row);
    double x = gap();
    status s = text ? OK : number_of(name, t, l, line, TERM_WITH, &x, r);
    if (s != OK || is_gap(x)) return s;
    if (x != floor(x) || x < 1 || x > (double)all->lines)
        return refuse(r, OUT_OF_DOMAIN,
                      "%s has %g under with in row %zu, but lines are numbered from 1 to %zu", name,
                      x, row, all->lines);
    *with = (size_t)x;
    return OK;
}

static status read_term(const char *name, const table *t, const struct layout *l, size_t line,
                        term *to, report *r)
{
    status s = number_of(name, t, l, line, TERM_EXCESS, &to->excess, r);
    if (s == OK) s = number_of(name, t, l, line, TERM_LIMIT, &to->limit, r);
    if (s == OK) s = number_of(name, t, l, line, TERM_SHARE, &to->share, r);
    if (s != OK) return s;
    if (is_gap(to->excess)) to->excess = 0;
    if (is_gap(to->limit)) to->limit = INFINITY;
    return OK;
}

static status refuse_term(const char *name, const term *t, terms_fault fault, status s, size_t row,
                          report *r)
{
    switch (fault) {
    case EXCESS_BELOW_ZERO:
        return refuse(r, s, "%s has the excess %g in row %zu, but it must be at least 0", name,
                      t->excess, row);
    case LIMIT_NOT_POSITIVE:
        return refuse(r, s,
                      "%s has the limit %g in row %zu, but it must be above 0, or empty for none",
                      name, t->limit, row);
    case SHARE_OUTSIDE:
        return refuse(r, s, "%s has the share %g in row %zu, but it must be from 0 to 1", name,
                      t->share, row);
    case FOLLOWS_NO_LINE:
        return refuse(r, s, "%s lets the line in row %zu follow a line that is not there", name,
                      row);
    case FOLLOWS_ITSELF:
        return refuse(r, s, "%s lets the line in row %zu follow itself", name, row);
    case FOLLOWER_HAS_OWN_SHARE:
        return refuse(r, s,
                      "%s gives the share %g in row %zu, but this line follows another, and its "
                      "share with it",
                      name, t->share, row);
    case FOLLOWS_IN_CIRCLE:
        return refuse(r, s, "%s lets the line in row %zu follow in a circle", name, row);
    default:
        return refuse(r, s,
                      "%s gives an excess or a limit in row %zu, but this line follows another",
                      name, row);
    }
}

/* Lines without a name of their own take those known from elsewhere, when these are as many; when
 * they are not, the terms do not fit, which is said later. */
static status read_term_names(const char *name, const table *t, const struct layout *l,
                              const struct line_names *known, struct terms *to, report *r)
{
    status s = read_names(name, t, l, TERM_NAME, &to->names, r);
    if (s != OK || !known || !known->names || known->lines != to->lines) return s;
    if (!to->names) to->names = known->names;
    for (size_t i = 0; i < to->lines; i++)
        if (!*to->names[i]) to->names[i] = known->names[i];
    return OK;
}

static status read_followers(const char *name, const table *t, const struct layout *l,
                             struct terms *to, report *r)
{
    for (size_t i = 0; i < to->lines; i++) {
        status s = read_with(name, t, l, i, to, to->names, &to->of[i].with, r);
        if (s != OK) return s;
        if (is_gap(to->of[i].share) && !to->of[i].with)
            return refuse(r, BAD_KIND, "%s gives no share in row %zu", name, l->first + i + 1);
        if (is_gap(to->of[i].share)) to->of[i].share = 1;
    }
    return OK;
}

static status check_terms(const char *name, const struct layout *l, const struct terms *t,
                          report *r)
{
    size_t line;
    terms_fault fault;
    status s = terms_check(t, &line, &fault);
    return s == OK ? OK : refuse_term(name, t->of + line, fault, s, l->first + line + 1, r);
}

static status read_rows(const char *name, const table *t, const struct layout *l, struct terms *to,
                        report *r)
{
    *to = (struct terms){ .lines = l->rows,
                          .of = pool_take_zeroed(r->pool, l->rows, sizeof *to->of) };
    if (!to->of) return NO_MEMORY;
    status s = OK;
    for (size_t i = 0; i < l->rows && s == OK; i++) s = read_term(name, t, l, i, to->of + i, r);
    return s;
}

status read_terms(const char *name, const value *v, const struct line_names *known,
                  struct terms *to, report *r)
{
    const table *t;
    struct layout l;
    status s = table_of(name, v, "a block of terms, one line a row: excess limit share", &t, r);
    if (s == OK) s = term_layout(name, t, false, &l, r);
    if (s == OK) s = read_rows(name, t, &l, to, r);
    if (s == OK) s = read_term_names(name, t, &l, known, to, r);
    if (s == OK) s = read_followers(name, t, &l, to, r);
    return s == OK ? check_terms(name, &l, to, r) : s;
}

status read_aggregate(const char *name, const value *v, struct terms *to, report *r)
{
    const table *t;
    struct layout l;
    status s = table_of(name, v, "one row: excess limit share", &t, r);
    if (s == OK) s = term_layout(name, t, true, &l, r);
    if (s == OK) s = read_rows(name, t, &l, to, r);
    if (s == OK && is_gap(to->of[0].share)) to->of[0].share = 1;
    return s == OK ? check_terms(name, &l, to, r) : s;
}

/* ---- settings ---------------------------------------------------------------------------------
 */

status read_settings(const param *p, const value *v, const setting **settings, report *r)
{
    const table *t;
    status s = table_of(p->name, v, "two columns, labels and values", &t, r);
    if (s != OK) return s;
    if (t->cols != 2)
        return refuse(r, BAD_KIND,
                      "%s is %zu x %zu cells, but must be two columns, labels and values", p->name,
                      t->rows, t->cols);
    setting *to = pool_take_zeroed(r->pool, MAX_SETTINGS, sizeof *to);
    if (!to) return NO_MEMORY;
    *settings = to;
    for (size_t i = 0; i < t->rows; i++) {
        if (empty_at(t, i, 0) && empty_at(t, i, 1)) continue;
        const char *label = word_at(t, i, 0);
        if (!label) return refuse(r, BAD_KIND, "%s has no label in row %zu", p->name, i + 1);
        int place = word_in(p->words, label);
        if (place < 0) {
            const char *known = listed(r->pool, p->words);
            if (!known) return NO_MEMORY;
            return refuse(r, BAD_KIND, "%s has the label \"%s\" in row %zu, but knows only %s",
                          p->name, label, i + 1, known);
        }
        if (to[place].given)
            return refuse(r, BAD_KIND, "%s has the label \"%s\" twice", p->name, label);
        to[place].text = word_at(t, i, 1);
        if (!to[place].text && (s = number_at(p->name, t, i, 1, &to[place].number, r)) != OK)
            return s;
        to[place].given = to[place].text || !is_gap(to[place].number);
    }
    return OK;
}
