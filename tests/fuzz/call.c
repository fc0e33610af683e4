/* call.c - calls every function with random values, good and bad, for a bounded time.
 *
 *     call [--seconds N] [--calls N]
 *
 * Arguments are made to suit their parameter most of the time, so that calls get past the reading,
 * and are anything at all otherwise; results become arguments of later calls. In some calls memory
 * runs out at a random place. What must hold of every call: the status is one of ours; a refusal
 * says a sentence; a result is a number, text or table whose numbers are finite, gaps or faults.
 * Built with sanitizers by `make check-all`. A failure prints the number of its
 * call; --calls with it repeats all calls up to there, the same every time.
 */
#include "../../addin/function.h"

#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

enum { KEPT = 64, MOST_TEXT = 40, SLOW = 20 };

/* ---- random numbers: splitmix64, so that a seed means the same call everywhere ---- */

static uint64_t state;

static uint64_t next_bits(void)
{
    uint64_t z = state += UINT64_C(0x9e3779b97f4a7c15);
    z = (z ^ z >> 30) * UINT64_C(0xbf58476d1ce4e5b9);
    z = (z ^ z >> 27) * UINT64_C(0x94d049bb133111eb);
    return z ^ z >> 31;
}

static size_t below(size_t n) { return (size_t)(next_bits() % n); }
static double uniform(void) { return (double)(next_bits() >> 11) * 0x1p-53; }
static bool once_in(size_t n) { return below(n) == 0; }

/* ---- values ---- */

static pool kept_memory;
static value kept[KEPT];
static size_t n_kept;

static double any_number(void)
{
    static const double odd[] = { 0, -0.0, 1, -1, 0.5, 2, 3, 1e300, -1e300, 1e-300, 0.99, 1 - 1e-16,
                                  1e15, 4294967296.0, 1e9, INFINITY, -INFINITY, NAN };
    switch (below(4)) {
    case 0: return odd[below(sizeof odd / sizeof *odd)];
    case 1: return (double)below(20);
    case 2: return uniform();
    default: return (uniform() - 0.5) * exp(20 * uniform());
    }
}

static const char *any_text(pool *p)
{
    static const char *const known[] = {
        "", " ", "gumbel", "Clayton", "frank", "joe", "gaussian", "t", "independent", "copula",
        "dimension", "theta", "df", "matrix", "rotation", "lines", "notes", "normal", "lognormal",
        "gamma", "exponential", "weibull", "pareto", "lomax", "sample", "excess", "limit", "share",
        "with", "name", "hold", "pairs", "rows", "seed", "scheme", "level", "5", "3,5", "-1e5",
        "motor", "gumbel frank", "TAU", "upper", "lower",
    };
    if (!once_in(4)) return known[below(sizeof known / sizeof *known)];
    size_t n = below(MOST_TEXT);
    char *text = pool_take(p, n + 1, 1);
    if (!text) return "";
    for (size_t i = 0; i < n; i++) text[i] = (char)(1 + below(255));
    text[n] = 0;
    return text;
}

/* One cell in gap_in is empty, one in text_in holds text; none when that is 0. */
static value a_table(pool *p, size_t rows, size_t cols, double (*number)(void), size_t gap_in,
                     size_t text_in)
{
    value v = { .is = IS_TABLE, .table = { .rows = rows, .cols = cols } };
    v.table.at = pool_take(p, rows * cols, sizeof *v.table.at);
    v.table.words = text_in ? pool_take_zeroed(p, rows * cols, sizeof *v.table.words) : NULL;
    if (!v.table.at || (text_in && !v.table.words)) return (value){ .is = IS_NOTHING };
    for (size_t i = 0; i < rows * cols; i++) {
        v.table.at[i] = gap_in && once_in(gap_in) ? gap() : number();
        if (!text_in || !once_in(text_in)) continue;
        v.table.at[i] = gap();
        v.table.words[i] = any_text(p);
        if (!*v.table.words[i]) v.table.words[i] = NULL;
    }
    return v;
}

static value a_number(double x) { return (value){ .is = IS_NUMBER, .number = x }; }
static value a_text(const char *s) { return (value){ .is = IS_TEXT, .text = s }; }

static value anything(pool *p)
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

/* ---- values that suit a parameter ---- */

static double loss(void) { return floor(1e4 * exp(2 * uniform())); }

static value one_word(pool *p, const char *words)
{
    char *copy = pool_text(p, words && *words ? words : "x"), *start = copy, *word = copy;
    if (!copy) return (value){ .is = IS_NOTHING };
    for (size_t n = 2; *start; start++)
        if (*start == ' ' && once_in(n++)) word = start + 1;
    word[strcspn(word, " ")] = 0;
    return a_text(word);
}

static double bounded(const param *q)
{
    if (q->low == 0 && q->high == 0) return (uniform() - 0.3) * 10;
    double low = isfinite(q->low) ? q->low : -100, high = isfinite(q->high) ? q->high : low + 100;
    if (high > low + 1000) high = low + 60;
    return low + (high - low) * uniform();
}

static value a_correlation(pool *p)
{
    size_t d = 2 + below(4);
    value v = a_table(p, d, d, uniform, 0, 0);
    if (v.is != IS_TABLE) return v;
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j <= i; j++) {
            double x = i == j ? 1 : (uniform() - 0.3) * 0.8;
            v.table.at[i * d + j] = v.table.at[j * d + i] = x;
        }
    return v;
}

static value a_block(pool *p, size_t rows, size_t cols, const char *const *texts,
                     const double *numbers)
{
    value v = a_table(p, rows, cols, uniform, 0, 1000000);
    if (v.is != IS_TABLE) return v;
    for (size_t i = 0; i < rows * cols; i++) {
        v.table.words[i] = texts[i];
        v.table.at[i] = texts[i] || isnan(numbers[i]) ? gap() : numbers[i];
    }
    return v;
}

static value a_model(pool *p)
{
    static const char *const families[] = { "gumbel", "clayton", "frank", "joe", "independent" };
    const char *chosen = families[below(5)];
    bool with_theta = strcmp(chosen, "independent") != 0;
    const char *texts[] = { "copula", chosen, "dimension", NULL, "theta", NULL };
    double numbers[] = { 0, 0, 0, (double)(2 + below(3)), 0, 1 + 4 * uniform() };
    return a_block(p, with_theta ? 3 : 2, 2, texts, numbers);
}

static value some_margins(pool *p)
{
    static const char *const words[] = { "gamma", "lognormal", "exponential", "weibull", "lomax",
                                         "normal" };
    const char *texts[12];
    double numbers[12];
    size_t lines = 1 + below(4);
    for (size_t i = 0; i < lines; i++) {
        texts[3 * i] = words[below(6)];
        texts[3 * i + 1] = texts[3 * i + 2] = NULL;
        numbers[3 * i + 1] = 1 + 3 * uniform();
        numbers[3 * i + 2] = 0.5 + uniform();
    }
    return a_block(p, lines, 3, texts, numbers);
}

static value some_settings(pool *p, const char *words)
{
    value word = one_word(p, words);
    const char *texts[2] = { word.text, NULL };
    double numbers[2] = { 0, once_in(3) ? uniform() : (double)(1 + below(200)) };
    return a_block(p, 1, 2, texts, numbers);
}

static value observations(pool *p, size_t rows, size_t cols, bool gaps)
{
    return a_table(p, rows, cols, once_in(2) ? loss : uniform, gaps && once_in(3) ? 6 : 0, 0);
}

static value suiting(const param *q, pool *p, size_t rows)
{
    switch (q->kind) {
    case NUMBER: return a_number(bounded(q));
    case WHOLE: return a_number(floor(bounded(q)));
    case WORD: return one_word(p, q->words);
    case WORDS: return once_in(2) && q->words ? one_word(p, q->words) : a_text(any_text(p));
    case NUMBERS: return once_in(2) ? a_number(bounded(q))
                                    : a_table(p, 1 + below(5), 1 + below(2), uniform, 4, 0);
    case COLUMN: return observations(p, rows, 1, true);
    case DATA: return observations(p, rows, 1 + below(4), true);
    case FULL_DATA: return observations(p, rows, 1 + below(4), false);
    case MATRIX: return a_correlation(p);
    case MODEL: return a_model(p);
    case MARGINS: return some_margins(p);
    case TERMS: return a_table(p, 1 + below(4), 3, uniform, once_in(3) ? 5 : 0, 0);
    case AGGREGATE: return a_table(p, 1, 3, uniform, 0, 0);
    case SETTINGS: return some_settings(p, q->words);
    default: return once_in(2) ? a_correlation(p) : anything(p);
    }
}

/* ---- checking and keeping results ---- */

static const char *fault_of_number(double x)
{
    if (isinf(x)) return "an infinite number";
    if (isnan(x) && !marks_gap(x) && fault_in(x) == OK) return "a NaN that is no gap and no fault";
    return NULL;
}

static const char *fault_of_result(const value *v)
{
    const char *wrong = NULL;
    switch (v->is) {
    case IS_NUMBER: return fault_of_number(v->number);
    case IS_TEXT: return v->text ? NULL : "a text that is missing";
    case IS_NOTHING: return "nothing";
    case IS_TABLE:
        if (!v->table.rows || !v->table.cols) return "a table without a cell";
        for (size_t i = 0; i < v->table.rows * v->table.cols && !wrong; i++)
            if (!v->table.words || !v->table.words[i]) wrong = fault_of_number(v->table.at[i]);
    }
    return wrong;
}

/* A copy that lives until the end, in the place of an earlier one; the memory of those is not
 * reused, so only small results are kept. */
static void keep(const value *v)
{
    size_t cells = v->table.rows * v->table.cols;
    if (v->is != IS_TABLE || cells > 400 || kept_memory.bytes > 50000000) return;
    value copy = *v;
    copy.table.at = pool_take(&kept_memory, cells, sizeof *copy.table.at);
    if (v->table.words)
        copy.table.words = pool_take_zeroed(&kept_memory, cells, sizeof *copy.table.words);
    memcpy(copy.table.at, v->table.at, cells * sizeof *copy.table.at);
    for (size_t i = 0; v->table.words && i < cells; i++)
        if (v->table.words[i]) copy.table.words[i] = pool_text(&kept_memory, v->table.words[i]);
    kept[n_kept < KEPT ? n_kept++ : below(KEPT)] = copy;
}

static const char *wrong_with(status s, const report *r, const value *out)
{
    if (s < OK || s > NO_MEMORY) return "a status that is none";
    if (s != OK) return *r->why ? NULL : "a refusal without a sentence";
    return fault_of_result(out);
}

/* ---- one call ---- */

static void print_cell(double x, const char *word)
{
    if (word) printf("\"%s\" ", word);
    else if (marks_gap(x)) printf("gap ");
    else printf("%.17g ", x);
}

static void print_value(const char *name, const value *v)
{
    printf("    %s: ", name);
    if (v->is == IS_NUMBER) print_cell(v->number, NULL);
    if (v->is == IS_TEXT) print_cell(0, v->text);
    for (size_t i = 0; v->is == IS_TABLE && i < v->table.rows && i < 10; i++, printf("| "))
        for (size_t j = 0; j < v->table.cols; j++)
            print_cell(v->table.at[i * v->table.cols + j],
                       v->table.words ? v->table.words[i * v->table.cols + j] : NULL);
    printf("\n");
}

static const function *any_function(void)
{
    size_t n = 0;
    const function *chosen = NULL;
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++)
            if (once_in(++n)) chosen = f;
    return chosen;
}

static bool one_call(uint64_t seed, size_t *fine)
{
    state = seed;
    pool memory = { 0 };
    value in[MAX_PARAMS + 4], out = { .is = IS_NOTHING };
    report r = { .pool = &memory };
    const function *f = any_function();
    size_t n = count_params(f), rows = 1 + below(once_in(5) ? 60 : 15);
    for (size_t i = 0; i < n; i++)
        in[i] = f->params[i].optional && once_in(2) ? (value){ .is = IS_NOTHING }
              : once_in(6) ? anything(&memory) : suiting(f->params + i, &memory, rows);
    if (once_in(12)) memory.fail_at = memory.taken + 1 + below(30);
    time_t start = time(NULL);
    status s = call_function(f, in, once_in(10) ? below(n + 1) : n, &out, &r);
    const char *wrong = wrong_with(s, &r, &out);
    if (time(NULL) - start > SLOW) wrong = "an answer after much too long";
    if (wrong) {
        printf("FAILED: %s gives %s (--calls %llu)\n", f->name, wrong, (unsigned long long)seed);
        for (size_t i = 0; i < n; i++) print_value(f->params[i].name, in + i);
    }
    if (s == OK && !wrong) keep(&out);
    *fine += s == OK;
    pool_empty(&memory);
    return !wrong;
}

static unsigned long long option(int argc, char **argv, const char *name,
                                 unsigned long long otherwise)
{
    for (int i = 1; i + 1 < argc; i++)
        if (!strcmp(argv[i], name)) return strtoull(argv[i + 1], NULL, 10);
    return otherwise;
}

int main(int argc, char **argv)
{
    unsigned long long most = option(argc, argv, "--calls", UINT64_MAX);
    unsigned long long seconds = option(argc, argv, "--seconds", most == UINT64_MAX ? 10 : 3600);
    size_t fine = 0, failed = 0;
    time_t start = time(NULL);
    uint64_t seed = 0;
    while (seed < most && (unsigned long long)(time(NULL) - start) < seconds && failed < 20)
        failed += !one_call(++seed, &fine);
    printf("fuzz: %llu calls, %zu of them answered, %zu failed\n", (unsigned long long)seed, fine,
           failed);
    pool_empty(&kept_memory);
    return failed ? 1 : 0;
}
