/* call.c - calls every function with random values, good and bad, for a bounded time.
 *
 *     call [--seconds N] [--calls N]
 *
 * Arguments are made to suit their parameter most of the time (arguments.h), and are anything at
 * all otherwise; results become arguments of later calls. In some calls memory runs out at a random
 * place. What must hold of every call: the status is one of ours; a refusal says a sentence; a
 * result is a number, text or table whose numbers are finite, gaps or faults. Built with sanitizers
 * by `make check-all`. A failure prints the number of its call; --calls with it repeats all calls
 * up to there, the same every time.
 */
#include "arguments.h"

#include <stdio.h>
#include <stdlib.h>
#include <time.h>

enum { SLOW = 20 };

static pool kept_memory;             /* of the results in kept[] */

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
    if (r->undefined) return "a number that is undefined without a reason";
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

/* KENDALLOF takes a second by design, as long as thousands of other calls. */
static bool too_often(const function *f)
{
    return !strcmp(f->name, "kendallOf") && !once_in(30);
}

static const function *any_function(void)
{
    size_t n = 0;
    const function *chosen = NULL;
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++)
            if (once_in(++n)) chosen = f;
    return too_often(chosen) ? any_function() : chosen;
}

static bool one_call(uint64_t seed, size_t *fine)
{
    state = seed;
    pool memory = { 0 };
    value in[MAX_PARAMS + 4], out = { .is = IS_NOTHING };
    report r = { .pool = &memory };
    const function *f = any_function();
    size_t n = count_params(f);
    struct common common = { &memory, 1 + below(once_in(5) ? 60 : 15), 1 + below(MOST_LINES) };
    for (size_t i = 0; i < n; i++)
        in[i] = f->params[i].optional && once_in(2) ? (value){ .is = IS_NOTHING }
              : once_in(6) ? anything(&memory) : suiting(f->params + i, &common);
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
