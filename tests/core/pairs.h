/* pairs.h - pairs of columns for tests of the measures of dependence, and those measures by
 * their definitions, in n^2 steps.
 */
#ifndef TESTS_PAIRS_H
#define TESTS_PAIRS_H

#include "table.h"

#include "../../src/samples.h"
#include "../../src/tau.h"

/* What random columns may be made of. */
struct kind_of_pair {
    bool ties, gaps;
    double dependence;
};

/* The kinds in turn, and a different dependence each time. */
static inline struct kind_of_pair kind_of_case(size_t k, uint64_t *state)
{
    return (struct kind_of_pair){ k % 2 == 1, k / 2 % 2 == 1, 2 * random_uniform(state) - 1 };
}

static inline void random_columns(double *at, size_t rows, size_t cols, struct kind_of_pair what,
                                  uint64_t *state)
{
    double steps = 1 + 20 * random_uniform(state);
    for (size_t i = 0; i < rows; i++) {
        double common = random_normal(state);
        for (size_t j = 0; j < cols; j++) {
            double x = what.dependence * common + random_normal(state);
            if (what.ties) x = floor(x * steps) + 0.0;
            if (what.gaps && random_uniform(state) < 0.15) x = NAN;
            at[j * rows + i] = x;
        }
    }
}

/* Values that sorting or comparing might get wrong: far outliers, denormals, zeros of both signs,
 * neighbours in the last place, whole orders of magnitude. */
static inline double adversarial(size_t which, uint64_t *state)
{
    double z = random_normal(state), u = random_uniform(state);
    switch (which % 8) {
    case 0: return u < 0.02 ? copysign(1.7e308, z) : 1 + z * 1e-12;
    case 1: return floor(z * 20) * 0x1p-1074;
    case 2: return u < 0.3 ? 0.0 : u < 0.6 ? -0.0 : floor(z);
    case 3: return 1 + floor(u * 50) * 0x1p-52;
    case 4: return exp(150 * z);
    case 5: return copysign(exp(600 * u), z);
    case 6: return u < 0.9 ? 5 : z;
    default: return u < 0.5 ? copysign(0x1p1023 * (1 + u), z) : z * 0x1p-1060;
    }
}

static inline int sign_of(double a, double b)
{
    return (a > b) - (a < b);
}

/* Kendall's counts by their definition. */
static inline struct tau_counts counts_by_definition(const double *x, const double *y, size_t n)
{
    struct tau_counts c = { 0 };
    for (size_t i = 0; i < n; i++) {
        if (is_gap(x[i]) || is_gap(y[i])) continue;
        c.rows++;
        for (size_t j = 0; j < i; j++) {
            if (is_gap(x[j]) || is_gap(y[j])) continue;
            int in_x = sign_of(x[i], x[j]), in_y = sign_of(y[i], y[j]);
            c.pairs++;
            c.concordant += in_x * in_y > 0;
            c.discordant += in_x * in_y < 0;
            c.tied_x += !in_x;
            c.tied_y += !in_y;
            c.tied_both += !in_x && !in_y;
        }
    }
    return c;
}

#define assert_same_counts(got, want) same_counts_or_fail(&(got), &(want), __FILE__, __LINE__)

static inline void same_counts_or_fail(const struct tau_counts *got, const struct tau_counts *want,
                                       const char *file, int line)
{
    if (!memcmp(got, want, sizeof *got)) return;
    const uint64_t *g = &got->rows, *w = &want->rows;
    print_error("rows, pairs, concordant, discordant, tied in x, y, both: got");
    for (int k = 0; k < 7; k++) print_error(" %llu", (unsigned long long)g[k]);
    print_error(", want");
    for (int k = 0; k < 7; k++) print_error(" %llu", (unsigned long long)w[k]);
    print_error("\n");
    _fail(file, line);
}

/* The data set of this name: from its own file, from the file of small ones, or by its formula as
 * given in kendall_examples.csv. x is followed by y; the caller frees it. An unknown name ends the
 * program. */
static inline double *dataset(const char *name, size_t *n)
{
    static const struct {
        const char *name;
        size_t n;
    } formulas[] = { { "seq_1000_mod1009", 1000 }, { "seq_1000_ties", 1000 },
                     { "seq_2000_mix", 2000 }, { "seq_20000_perm", 20000 } };
    for (size_t k = 0; k < 4; k++) {
        if (strcmp(name, formulas[k].name)) continue;
        *n = formulas[k].n;
        double *x = malloc(2 * *n * sizeof *x), *y = x + *n;
        for (size_t i = 1; x && i <= *n; i++) {
            size_t a = k == 0 ? i : k == 1 ? i % 7 : k == 2 ? 37 * i % 101 : 7919 * i % 20011;
            size_t b = k == 0 ? i * i % 1009 : k == 1 ? (3 * i + i / 5) % 11
                     : k == 2 ? 2 * a + i * i % 53 : 104729 * i % 20011 + a / 2;
            x[i - 1] = (double)a;
            y[i - 1] = (double)b;
        }
        return x;
    }

    char file[64];
    snprintf(file, sizeof file, "%s/data_%s.csv", VALUES_DIR, name);
    FILE *own = fopen(file, "rb");
    if (own) fclose(own);
    snprintf(file, sizeof file, "data_%s.csv", name);
    struct csv *t = csv_read(own ? file : "kendall_datasets_small.csv");
    double *x = csv_numbers(t, "x", own ? NULL : "dataset", name, n);
    double *y = csv_numbers(t, "y", own ? NULL : "dataset", name, n);
    csv_free(t);
    x = realloc(x, 2 * *n * sizeof *x);
    memcpy(x + *n, y, *n * sizeof *x);
    free(y);
    return x;
}

#endif
