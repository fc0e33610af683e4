/* table.h - what every test of the core uses: published values from
 * tests/values, closeness, random numbers and effort.
 *
 *     struct csv *t = csv_read("kendall_examples.csv");
 *     for (size_t i = 0; i < t->rows; i++)
 *         assert_close(f(csv_number(t, i, "n")), csv_number(t, i, "tau_b"), 1e-12);
 *     csv_free(t);
 *
 * Include it instead of cmocka.h. A file or a column that is not there ends the
 * test program at once: a test that finds no values must not pass.
 */
#ifndef TESTS_TABLE_H
#define TESTS_TABLE_H

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <cmocka.h>

#include <math.h>
#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#ifndef VALUES_DIR
#define VALUES_DIR "tests/values"
#endif

/* The header row is not counted: row 0 is the first row of values. */
struct csv {
    const char *name;
    size_t rows, columns;
    char *bytes;             /* the file, cut up in place */
    const char **cells;      /* header first, then row by row */
};

static inline void csv_stop(const char *name, const char *what, const char *which)
{
    fprintf(stderr, "%s/%s: %s %s\n", VALUES_DIR, name, what, which);
    exit(2);
}

static inline char *csv_bytes(const char *name)
{
    char path[4096];
    snprintf(path, sizeof path, "%s/%s", VALUES_DIR, name);
    FILE *f = fopen(path, "rb");
    if (!f) csv_stop(name, "cannot be read", "");
    size_t used = 0, room = 1 << 16;
    char *bytes = malloc(room);
    for (size_t got; bytes && (got = fread(bytes + used, 1, room - used - 2, f)) > 0;) {
        used += got;
        if (used + 2 >= room) bytes = realloc(bytes, room *= 2);
    }
    fclose(f);
    if (!bytes) csv_stop(name, "no memory", "");
    if (used && bytes[used - 1] != '\n') bytes[used++] = '\n';
    bytes[used] = 0;
    return bytes;
}

/* Cuts one cell off in place, quotes undone, and moves *at behind it. Returns the
 * character that ended it: a comma or a line end. */
static inline char csv_cell(char **at, const char **cell)
{
    char *from = *at, *to = *at;
    *cell = to;
    for (bool quoted = false; *from; from++) {
        if (*from == '"') {
            if (quoted && from[1] == '"') *to++ = *from++;
            else quoted = !quoted;
        } else if (!quoted && (*from == ',' || *from == '\n')) {
            break;
        } else if (*from != '\r') {
            *to++ = *from;
        }
    }
    char end = *from;
    *at = end ? from + 1 : from;
    *to = 0;
    return end;
}

static inline struct csv *csv_read(const char *name)
{
    struct csv *t = calloc(1, sizeof *t);
    if (!t) csv_stop(name, "no memory", "");
    t->name = name;
    t->bytes = csv_bytes(name);
    t->cells = malloc((strlen(t->bytes) + 1) * sizeof *t->cells);
    if (!t->cells) csv_stop(name, "no memory", "");

    size_t n = 0, in_row = 0;
    for (char *at = t->bytes; *at;) {
        char end = csv_cell(&at, &t->cells[n++]);
        in_row++;
        if (end == ',') continue;
        if (!t->columns) t->columns = in_row;
        if (in_row != t->columns) csv_stop(name, "has a row of another length, beginning",
                                           t->cells[n - in_row]);
        in_row = 0;
    }
    if (!t->columns || n == t->columns) csv_stop(name, "holds no values", "");
    t->rows = n / t->columns - 1;
    return t;
}

static inline void csv_free(struct csv *t)
{
    free(t->bytes);
    free(t->cells);
    free(t);
}

/* where a column stands; the program ends when there is none of this name */
static inline size_t csv_column(const struct csv *t, const char *column)
{
    for (size_t j = 0; j < t->columns; j++)
        if (!strcmp(t->cells[j], column)) return j;
    csv_stop(t->name, "has no column", column);
    return 0;
}

static inline const char *csv_text(const struct csv *t, size_t row, const char *column)
{
    return t->cells[(row + 1) * t->columns + csv_column(t, column)];
}

/* NaN when the cell is empty or does not begin with a number */
static inline double csv_number(const struct csv *t, size_t row, const char *column)
{
    const char *text = csv_text(t, row, column);
    char *end;
    double x = strtod(text, &end);
    return end == text ? NAN : x;
}

static inline bool csv_is(const struct csv *t, size_t row, const char *column, const char *text)
{
    return !strcmp(csv_text(t, row, column), text);
}

/* The numbers of a column where the column `where` holds this text (where NULL: all rows). Leaves
 * how many in *n; the caller frees them. */
static inline double *csv_numbers(const struct csv *t, const char *column, const char *where,
                                  const char *is, size_t *n)
{
    double *x = malloc((t->rows + 1) * sizeof *x);
    *n = 0;
    for (size_t i = 0; x && i < t->rows; i++)
        if (!where || csv_is(t, i, where, is)) x[(*n)++] = csv_number(t, i, column);
    if (!*n) csv_stop(t->name, "has no rows for", is ? is : column);
    return x;
}

/* Relative and absolute closeness. Both print what was got and wanted; NaN is close to nothing. */
static inline void close_or_fail(double got, double want, double most, const char *what,
                                 const char *file, int line)
{
    if (got == want || fabs(got - want) <= most) return;
    print_error("%s: got %.17g, want %.17g, apart %.3g, allowed %.3g\n",
                what, got, want, got - want, most);
    _fail(file, line);
}

#define assert_close(got, want, relative) \
    close_or_fail((got), (want), (relative) * fabs((double)(want)), #got, __FILE__, __LINE__)
#define assert_within(got, want, absolute) \
    close_or_fail((got), (want), (absolute), #got, __FILE__, __LINE__)

/* The same bits, -0 and 0 told apart; any NaN is like any other. */
static inline void same_bits_or_fail(double got, double want, const char *what,
                                     const char *file, int line)
{
    if (!memcmp(&got, &want, sizeof got) || (got != got && want != want)) return;
    print_error("%s: got %.17g, want exactly %.17g\n", what, got, want);
    _fail(file, line);
}

#define assert_same(got, want) same_bits_or_fail((got), (want), #got, __FILE__, __LINE__)

/* How many random cases: `cases` times the environment's EFFORT, which is 1 unless said. */
static inline size_t effort(size_t cases)
{
    const char *text = getenv("EFFORT");
    double times = text ? strtod(text, NULL) : 1;
    double many = times > 0 ? times * (double)cases : (double)cases;
    return many < 1 ? 1 : (size_t)many;
}

/* Random numbers for tests: splitmix64 (Steele, Lea & Flood 2014). Start from any seed. */
static inline uint64_t random_bits(uint64_t *state)
{
    uint64_t z = *state += 0x9E3779B97F4A7C15u;
    z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9u;
    z = (z ^ (z >> 27)) * 0x94D049BB133111EBu;
    return z ^ (z >> 31);
}

/* strictly inside (0;1) */
static inline double random_uniform(uint64_t *state)
{
    return ((double)(random_bits(state) >> 12) + 0.5) * 0x1p-52;
}

/* 0 to below */
static inline size_t random_below(uint64_t *state, size_t below)
{
    return (size_t)(random_uniform(state) * (double)below);
}

static inline double random_normal(uint64_t *state)
{
    double u = random_uniform(state), v = random_uniform(state);
    return sqrt(-2 * log(u)) * cos(6.283185307179586 * v);
}

#endif
