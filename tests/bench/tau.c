/* How long Kendall's tau takes: prints a name and the best time in seconds, one line each, which
 * tau.py sets beside SciPy. Largest first, so that the allocator behaves as in a program that has
 * run for a while. */
#define _POSIX_C_SOURCE 200809L

#include "../../src/tau_grid.h"
#include "../../src/tau_scores.h"
#include "../../src/tau_weighted.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

static double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

/* uniform on (0;1), by a plain congruential generator */
static double uniform(void)
{
    static uint64_t state = 1;
    state = state * 6364136223846793005u + 1442695040888963407u;
    return ((double)(state >> 12) + 0.5) * 0x1p-52;
}

static double normal(void)
{
    return sqrt(-2 * log(uniform())) * cos(6.283185307179586 * uniform());
}

enum kind { PLAIN, HEAVY_TAILS, TIES, GAPS_AND_TIES, OUTLIER, WEIGHTED };

static samples make(size_t rows, size_t cols, enum kind kind)
{
    samples s = { rows, cols, malloc(rows * cols * sizeof(double)), NULL };
    for (size_t i = 0; s.at && i < rows; i++) {
        double common = normal();
        for (size_t j = 0; j < cols; j++) {
            double x = 0.6 * common + 0.8 * normal();
            if (kind == HEAVY_TAILS) x = exp(3 * x);
            if (kind == OUTLIER) x = i ? 1 + 1e-9 * x : 1e300;
            if (kind == TIES || kind == GAPS_AND_TIES) x = floor(10 * x);
            if (kind == GAPS_AND_TIES && uniform() < 0.1) x = NAN;
            column(&s, j)[i] = kind == WEIGHTED && j == 2 ? uniform() : x;
        }
    }
    return s;
}

static volatile double sink;

static status one_tau(const samples *s, pool *p)
{
    struct tau_counts c;
    double tau;
    status made = tau_count(column(s, 0), column(s, 1), s->rows, &c, p);
    if (!made) made = tau_b(&c, &tau);
    if (!made) sink = tau;
    return made;
}

static status one_weighted(const samples *s, pool *p)
{
    double tau;
    size_t used;
    status made = tau_weighted(column(s, 0), column(s, 1), column(s, 2), s->rows, &tau, &used, p);
    if (!made) sink = tau;
    return made;
}

static status one_grid(const samples *s, pool *p)
{
    struct tau_grid *grid;
    status made = new_tau_grid(s, COUNT_AS_SUITS, &grid, p);
    for (size_t i = 0; !made && i < s->cols; i++) {
        for (size_t j = 0; j < i; j++) {
            struct tau_counts c;
            double tau;
            tau_grid_counts(grid, i, j, &c);
            if (!tau_b(&c, &tau)) sink = tau;
        }
    }
    return made;
}

static status one_error_grid(const samples *s, pool *p)
{
    struct tau_grid *grid;
    struct score_room *room;
    status made = new_tau_grid(s, COUNT_BY_RANKS, &grid, p);
    if (!made) made = new_score_room(s->rows, &room, p);
    for (size_t i = 0; !made && i < s->cols; i++) {
        for (size_t j = 0; j < i; j++) {
            struct tau_scores scores;
            double error;
            tau_scores_ranked(tau_grid_ranking(grid, i), tau_grid_ranking(grid, j), &scores, room);
            if (!tau_error_free(&scores, &error)) sink = error;
        }
    }
    return made;
}

/* Goes round many data sets, so that the processor cannot learn one by heart, and takes the best of
 * as many rounds as fit into about a fifth of a second, at least three. */
static void measure(const char *name, status (*run)(const samples *, pool *), size_t rows,
                    size_t cols, enum kind kind)
{
    enum { MOST = 200 };
    static samples sets[MOST];
    size_t n = 400000 / (rows * cols) + 1;
    if (n > MOST) n = MOST;
    for (size_t k = 0; k < n; k++) sets[k] = make(rows, cols, kind);

    double best = INFINITY, start = now();
    for (int round = 0; round < 3 || now() - start < 0.2; round++) {
        double from = now();
        for (size_t k = 0; k < n; k++) {
            pool p = { 0 };
            status made = sets[k].at ? run(&sets[k], &p) : NO_MEMORY;
            pool_empty(&p);
            if (made) {
                fprintf(stderr, "%s: failed\n", name);
                exit(1);
            }
        }
        double took = (now() - from) / (double)n;
        best = took < best ? took : best;
    }
    printf("%s\t%.9f\n", name, best);
    fflush(stdout);
    for (size_t k = 0; k < n; k++) free(sets[k].at);
}

int main(void)
{
    measure("tau 1000000", one_tau, 1000000, 2, PLAIN);
    measure("tau 100000", one_tau, 100000, 2, PLAIN);
    measure("tau 10000", one_tau, 10000, 2, PLAIN);
    measure("tau 1000", one_tau, 1000, 2, PLAIN);
    measure("tau 1000 ties", one_tau, 1000, 2, TIES);
    measure("tau 1000 heavy tails", one_tau, 1000, 2, HEAVY_TAILS);
    measure("tau 1000 outlier", one_tau, 1000, 2, OUTLIER);
    measure("tau 40", one_tau, 40, 2, PLAIN);
    measure("tau 1000 weights", one_weighted, 1000, 3, WEIGHTED);
    measure("grid 50 x 10000", one_grid, 10000, 50, PLAIN);
    measure("grid 50 x 10000 gaps and ties", one_grid, 10000, 50, GAPS_AND_TIES);
    measure("grid 50 x 1000", one_grid, 1000, 50, PLAIN);
    measure("grid 50 x 1000 gaps and ties", one_grid, 1000, 50, GAPS_AND_TIES);
    measure("grid 10 x 1000", one_grid, 1000, 10, PLAIN);
    measure("grid 10 x 1000 gaps and ties", one_grid, 1000, 10, GAPS_AND_TIES);
    measure("grid 20 x 40", one_grid, 40, 20, PLAIN);
    measure("grid 20 x 40 gaps and ties", one_grid, 40, 20, GAPS_AND_TIES);
    measure("errors 10 x 1000", one_error_grid, 1000, 10, PLAIN);
    return 0;
}
