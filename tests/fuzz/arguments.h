/* arguments.h - random arguments for any parameter, good and bad.
 *
 * suiting() makes what a parameter takes most of the time, in each of the forms that a sheet has:
 * with and without headings, names, gaps; it is spoilt now and then. What belongs together in one
 * call (lines, their names, the length of columns) agrees most of the time, so that calls get past
 * the reading. anything() is anything at all, the results of earlier calls among it.
 */
#ifndef FUZZ_ARGUMENTS_H
#define FUZZ_ARGUMENTS_H

#include "../../addin/function.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

/* ---- random numbers: splitmix64, so that a seed means the same call everywhere ---- */

static uint64_t state;

static inline uint64_t next_bits(void)
{
    uint64_t z = state += UINT64_C(0x9e3779b97f4a7c15);
    z = (z ^ z >> 30) * UINT64_C(0xbf58476d1ce4e5b9);
    z = (z ^ z >> 27) * UINT64_C(0x94d049bb133111eb);
    return z ^ z >> 31;
}

static inline size_t below(size_t n) { return (size_t)(next_bits() % n); }
static inline double uniform(void) { return (double)(next_bits() >> 11) * 0x1p-53; }
static inline bool once_in(size_t n) { return below(n) == 0; }

/* ---- values ---- */

enum { KEPT = 64, MOST_TEXT = 40, MOST_LINES = 6, MOST_WORDS = 8 };

static value kept[KEPT];             /* results of earlier calls */
static size_t n_kept;

static inline value a_number(double x) { return (value){ .is = IS_NUMBER, .number = x }; }
static inline value a_text(const char *s) { return (value){ .is = IS_TEXT, .text = s }; }

static inline double any_number(void)
{
    static const double odd[] = { 0, -0.0, 1, -1, 0.5, 2, 3, 1e300, -1e300, 1e-300, 0.99, 1 - 1e-16,
                                  1e15, 4294967296.0, 2e9, INFINITY, -INFINITY, NAN };
    switch (below(4)) {
    case 0: return once_in(10) ? fault(OUT_OF_DOMAIN) : odd[below(sizeof odd / sizeof *odd)];
    case 1: return (double)below(20);
    case 2: return uniform();
    default: return (uniform() - 0.5) * exp(20 * uniform());
    }
}

static inline const char *any_text(pool *p)
{
    static const char *const known[] = {
        "", " ", "gumbel", "Clayton", "frank", "joe", "gaussian", "t", "independent", "copula",
        "dimension", "theta", "df", "matrix", "rotation", "lines", "notes", "normal", "lognormal",
        "gamma", "exponential", "weibull", "pareto", "lomax", "sample", "excess", "limit", "share",
        "with", "name", "hold", "pairs", "rows", "seed", "scheme", "level", "5", "3,5", "-1e5",
        "motor", "gumbel frank", "TAU", "upper", "lower", "distribution", "a", "error",
        "matrix error", "low", "high", "n/a", "mean", "%s%s%n",
    };
    if (!once_in(4)) return known[below(sizeof known / sizeof *known)];
    size_t n = below(MOST_TEXT);
    char *text = pool_take(p, n + 1, 1);
    if (!text) return "";
    for (size_t i = 0; i < n; i++) text[i] = (char)(1 + below(255));
    text[n] = 0;
    return text;
}

/* A table of gaps. */
static inline value empty_table(pool *p, size_t rows, size_t cols)
{
    value v = { .is = IS_TABLE, .table = { .rows = rows, .cols = cols } };
    v.table.at = pool_take(p, rows * cols, sizeof *v.table.at);
    v.table.words = pool_take_zeroed(p, rows * cols, sizeof *v.table.words);
    if (!v.table.at || !v.table.words) return (value){ .is = IS_NOTHING };
    for (size_t i = 0; i < rows * cols; i++) v.table.at[i] = gap();
    return v;
}

/* Fills a cell; an empty text is an empty cell, as in a sheet. */
static inline void put(value *v, size_t row, size_t col, double x, const char *word)
{
    if (v->is != IS_TABLE) return;
    size_t i = row * v->table.cols + col;
    v->table.at[i] = word ? gap() : x;
    v->table.words[i] = word && *word ? word : NULL;
}

/* One cell in gap_in is empty, one in text_in holds text; none when that is 0. */
static inline value a_table(pool *p, size_t rows, size_t cols, double (*number)(void),
                            size_t gap_in, size_t text_in)
{
    value v = empty_table(p, rows, cols);
    for (size_t i = 0; i < rows * cols; i++)
        if (text_in && once_in(text_in)) put(&v, i / cols, i % cols, 0, any_text(p));
        else if (!gap_in || !once_in(gap_in)) put(&v, i / cols, i % cols, number(), NULL);
    return v;
}

static inline value anything(pool *p)
{
    switch (below(5)) {
    case 0: return (value){ .is = IS_NOTHING };
    case 1: return a_number(any_number());
    case 2: return a_text(any_text(p));
    case 3: if (n_kept) return kept[below(n_kept)];
    /* fall through */
    default: return a_table(p, 1 + below(9), 1 + below(6), any_number, once_in(2) ? 5 : 0,
                            once_in(2) ? 3 : 0);
    }
}

/* One cell, now and then, holds what it should not. */
static inline value spoilt(value v, pool *p)
{
    if (v.is != IS_TABLE || !once_in(8)) return v;
    size_t row = below(v.table.rows), col = below(v.table.cols);
    put(&v, row, col, once_in(3) ? gap() : any_number(), once_in(2) ? any_text(p) : NULL);
    return v;
}

/* ---- what the arguments of one call have in common ---- */

struct common {
    pool *pool;
    size_t rows, lines;
};

/* The number of lines, most of the time. */
static inline size_t lines_for(const struct common *c)
{
    return once_in(5) ? 1 + below(MOST_LINES) : c->lines;
}

/* The name of a line, or once in a while no name, or another. */
static inline const char *name_of(const struct common *c, size_t line)
{
    static const char *const names[] = { "motor", "property", "Cargo ", "third party liability",
                                         "marine", "fire" };
    if (once_in(12)) return "";
    return once_in(20) ? any_text(c->pool) : names[line % MOST_LINES];
}

/* The table below a row of headings. */
static inline value below_names(const value *v, const struct common *c)
{
    size_t rows = v->table.rows, cols = v->table.cols;
    value to = empty_table(c->pool, rows + 1, cols);
    if (v->is != IS_TABLE || to.is != IS_TABLE) return *v;
    for (size_t j = 0; j < cols; j++) put(&to, 0, j, 0, name_of(c, j));
    memcpy(to.table.at + cols, v->table.at, rows * cols * sizeof *to.table.at);
    memcpy(to.table.words + cols, v->table.words, rows * cols * sizeof *to.table.words);
    return to;
}

/* ---- values that suit a parameter ---- */

static inline double loss(void) { return floor(1e4 * exp(2 * uniform())); }

static inline const char *one_word(pool *p, const char *words)
{
    char *copy = pool_text(p, words && *words ? words : "x"), *start = copy, *word = copy;
    if (!copy) return "";
    for (size_t n = 2; *start; start++)
        if (*start == ' ' && once_in(n++)) word = start + 1;
    word[strcspn(word, " ")] = 0;
    return word;
}

static inline double bounded(const param *q)
{
    if (q->low == 0 && q->high == 0) return (uniform() - 0.3) * 10;
    double low = isfinite(q->low) ? q->low : -100, high = isfinite(q->high) ? q->high : low + 100;
    if (high > low + 1000) high = low + 60;
    return low + (high - low) * uniform();
}

static inline value observations(const struct common *c, size_t cols, bool gaps)
{
    value v = a_table(c->pool, c->rows, cols, once_in(2) ? loss : uniform,
                      gaps && once_in(3) ? 6 : 0, 0);
    return once_in(2) ? below_names(&v, c) : v;
}

static inline value numbers(const param *q, const struct common *c)
{
    if (once_in(2)) return a_number(bounded(q));
    value v = empty_table(c->pool, 1 + below(5), 1 + below(2));
    for (size_t i = 0; v.is == IS_TABLE && i < v.table.rows * v.table.cols; i++)
        if (!once_in(4)) put(&v, i / v.table.cols, i % v.table.cols, bounded(q), NULL);
    return once_in(4) ? below_names(&v, c) : v;
}

/* Correlations in a part of a table, feasible more often than not. */
static inline void put_correlations(value *v, size_t row, size_t col, size_t d)
{
    double same = once_in(3) ? 0.9 * uniform() : 0, spread = once_in(4) ? 1 : 0.5;
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j <= i; j++) {
            double x = i == j ? 1 : same != 0 ? same : (uniform() - 0.4) * spread;
            put(v, row + i, col + j, x, NULL);
            put(v, row + j, col + i, x, NULL);
        }
}

static inline value a_correlation(const struct common *c)
{
    size_t d = lines_for(c), header = once_in(3), side = once_in(3);
    value v = empty_table(c->pool, d + header, d + side);
    for (size_t i = 0; i < d && header; i++) put(&v, 0, side + i, 0, name_of(c, i));
    for (size_t i = 0; i < d && side; i++) put(&v, header + i, 0, 0, name_of(c, i));
    put_correlations(&v, header, side, d);
    return v;
}

static inline void put_row(value *v, size_t row, const char *label, double x)
{
    put(v, row, 0, 0, label);
    put(v, row, 1, x, NULL);
}

/* A model block, its labels in their usual order, with or without names and rotation. */
static inline value a_model(const struct common *c)
{
    static const char *const families[] = { "gumbel", "clayton", "frank", "joe", "independent",
                                            "gaussian", "t" };
    size_t chosen = below(7), d = lines_for(c) < 2 ? 2 : lines_for(c), row = 2;
    bool named = once_in(3), rotated = once_in(4), grouped = once_in(2);
    bool has_theta = chosen < 4, has_matrix = chosen > 4, has_df = chosen > 5;
    size_t rows = 2u + named + rotated + has_theta + has_df + (has_matrix ? d : 0);
    value v = empty_table(c->pool, rows, named || has_matrix ? 1 + d : 2);
    put(&v, 0, 0, 0, "copula");
    put(&v, 0, 1, 0, families[chosen]);
    put_row(&v, 1, "dimension", (double)d);
    if (named) put(&v, row, 0, 0, "lines");
    for (size_t i = 0; named && i < d; i++) put(&v, row, 1 + i, 0, name_of(c, i));
    row += named;
    if (rotated) put_row(&v, row++, "rotation", d > 2 ? 180 : 90 * (double)below(4));
    if (has_theta) put_row(&v, row++, "theta", 1 + 4 * uniform());
    if (has_df) put_row(&v, row, "df", 0.5 + 9 * uniform());
    for (size_t i = 1; has_df && grouped && i < d; i++)
        put(&v, row, 1 + i, 0.5 + 9 * uniform(), NULL);
    row += has_df;
    if (has_matrix) put(&v, row, 0, 0, "matrix");
    if (has_matrix) put_correlations(&v, row, 1, d);
    return v;
}

/* ---- blocks whose columns have headings: margins, terms ---- */

/* The columns of a block by their words' places in a list. */
struct columns {
    size_t n, word[MOST_WORDS];
};

/* With a heading any of the words in any order, else all in their usual order; a blank heading over
 * a column and one of the wrong kind come as well. */
static inline value under_headings(const struct common *c, const char *const *words,
                                   struct columns *k, size_t rows, bool *headed)
{
    *headed = once_in(2);
    for (size_t i = 0; *headed && i < k->n; i++) {
        size_t other = below(k->n), word = k->word[i];
        k->word[i] = k->word[other];
        k->word[other] = word;
    }
    if (*headed && k->n > 1 && once_in(2)) k->n -= below(k->n - 1);
    value v = empty_table(c->pool, rows + *headed, k->n);
    for (size_t j = 0; *headed && j < k->n; j++)
        put(&v, 0, j, 0, once_in(12) ? "" : once_in(20) ? any_text(c->pool) : words[k->word[j]]);
    return v;
}

static inline value some_margins(const struct common *c)
{
    static const char *const words[] = { "name", "distribution", "a", "b" };
    static const char *const kinds[] = { "gamma", "lognormal", "exponential", "weibull", "lomax",
                                         "normal" };
    struct columns k = { 4, { 0, 1, 2, 3 } };
    if (once_in(2)) k = (struct columns){ 3, { 1, 2, 3 } };
    bool headed;
    size_t lines = lines_for(c);
    value v = under_headings(c, words, &k, lines, &headed);
    for (size_t i = 0; i < lines; i++) {
        size_t chosen = below(6);
        double a = 1 + 3 * uniform(), b = chosen == 2 ? gap() : 0.5 + uniform();
        for (size_t j = 0; j < k.n; j++) {
            const char *text = k.word[j] == 0 ? name_of(c, i)
                             : k.word[j] == 1 ? kinds[chosen] : NULL;
            put(&v, headed + i, j, k.word[j] == 2 ? a : b, text);
        }
    }
    return v;
}

enum { EXCESS_WORD, LIMIT_WORD, SHARE_WORD, NAME_WORD, WITH_WORD };
static const char *const TERM_HEADINGS[] = { "excess", "limit", "share", "name", "with" };

/* One line of a cover; one that follows another has no terms of its own. */
static inline void put_term(value *v, size_t row, const struct columns *k, const struct common *c,
                            size_t line, bool follows)
{
    size_t leader = below(c->lines + once_in(3));
    const char *with = once_in(2) ? name_of(c, leader) : NULL;
    for (size_t j = 0; j < k->n; j++) {
        size_t word = k->word[j];
        double own = word == SHARE_WORD ? uniform() : once_in(4) ? gap() : loss();
        if (word == NAME_WORD) put(v, row, j, 0, name_of(c, line));
        else if (word == WITH_WORD && follows) put(v, row, j, (double)(leader + 1), with);
        else if (word != WITH_WORD && !follows) put(v, row, j, own, NULL);
    }
}

static inline value some_terms(const struct common *c)
{
    struct columns k = { 3, { EXCESS_WORD, LIMIT_WORD, SHARE_WORD } };
    if (once_in(2))
        k = (struct columns){ 5, { EXCESS_WORD, LIMIT_WORD, SHARE_WORD, NAME_WORD, WITH_WORD } };
    else if (once_in(2))
        k = (struct columns){ 5, { NAME_WORD, EXCESS_WORD, LIMIT_WORD, SHARE_WORD, WITH_WORD } };
    else if (once_in(2))
        k = (struct columns){ 4, { EXCESS_WORD, LIMIT_WORD, SHARE_WORD, WITH_WORD } };
    bool headed;
    size_t lines = lines_for(c);
    value v = under_headings(c, TERM_HEADINGS, &k, lines, &headed);
    for (size_t i = 0; i < lines; i++) put_term(&v, headed + i, &k, c, i, once_in(3));
    return v;
}

static inline value an_aggregate(const struct common *c)
{
    struct columns k = { 3, { EXCESS_WORD, LIMIT_WORD, SHARE_WORD } };
    bool headed;
    value v = under_headings(c, TERM_HEADINGS, &k, 1, &headed);
    put_term(&v, headed, &k, c, 0, false);
    return v;
}

static inline value some_settings(pool *p, const char *words)
{
    size_t rows = 1 + below(3);
    value v = empty_table(p, rows, once_in(20) ? 3 : 2);
    for (size_t i = 0; i < rows; i++) {
        double x = once_in(3) ? uniform() : (double)(1 + below(200));
        put(&v, i, 0, 0, once_in(6) ? any_text(p) : one_word(p, words));
        put(&v, i, 1, once_in(8) ? gap() : x, once_in(6) ? any_text(p) : NULL);
    }
    return v;
}

static inline value unspoilt(const param *q, const struct common *c)
{
    pool *p = c->pool;
    switch (q->kind) {
    case NUMBER: return a_number(bounded(q));
    case WHOLE: return a_number(floor(bounded(q)));
    case WORD: return a_text(one_word(p, q->words));
    case WORDS: return a_text(once_in(2) && q->words ? one_word(p, q->words) : any_text(p));
    case NUMBERS: return numbers(q, c);
    case COLUMN: return observations(c, 1, true);
    case DATA: return observations(c, lines_for(c), true);
    case FULL_DATA: return observations(c, lines_for(c), false);
    case MATRIX: return a_correlation(c);
    case MODEL: return a_model(c);
    case MARGINS: return some_margins(c);
    case TERMS: return some_terms(c);
    case AGGREGATE: return an_aggregate(c);
    case SETTINGS: return some_settings(p, q->words);
    default: return once_in(2) ? a_correlation(c) : a_model(c);
    }
}

static inline value suiting(const param *q, const struct common *c)
{
    if (q->kind == RAW && once_in(2)) return anything(c->pool);
    return spoilt(unspoilt(q, c), c->pool);
}

#endif
