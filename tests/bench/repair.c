/* repair.c - times the nearest correlation matrix on matrices of pairwise tau with gaps.
 *
 * Prints one line a measurement: name, tab, seconds. repair.py reads them.
 */
#include "../../src/linear.h"
#include "../../src/firm_repair.h"

#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

static double seconds(void)
{
    struct timespec t;
    timespec_get(&t, TIME_UTC);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

/* splitmix64 (Steele, Lea & Flood 2014); repair.py draws the same numbers */
static double uniform(uint64_t *state)
{
    uint64_t z = *state += 0x9E3779B97F4A7C15u;
    z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9u;
    z = (z ^ (z >> 27)) * 0x94D049BB133111EBu;
    return ((double)((z ^ (z >> 31)) >> 12) + 0.5) * 0x1p-52;
}

/* Kendall's tau of each pair of lines in its own 30 of 40 years, a common factor among the lines,
 * put through Greiner's sine: what gaps make of a correlation matrix. */
static void pairwise(double *matrix, size_t d)
{
    enum { YEARS = 40, USED = 30 };
    uint64_t state = 20020329 + d;
    double *x = malloc(d * YEARS * sizeof *x), common[YEARS];
    for (size_t t = 0; t < YEARS; t++) common[t] = uniform(&state) - 0.5;
    for (size_t i = 0; i < d * YEARS; i++)
        x[i] = uniform(&state) - 0.5 + common[i % YEARS];
    for (size_t i = 0; i < d; i++) {
        matrix[i * d + i] = 1;
        for (size_t j = 0; j < i; j++) {
            size_t from = (size_t)(uniform(&state) * (YEARS - USED + 1));
            double *a = x + i * YEARS + from, *b = x + j * YEARS + from, sum = 0;
            for (size_t s = 0; s < USED; s++)
                for (size_t t = 0; t < s; t++) sum += (a[s] > a[t]) == (b[s] > b[t]) ? 1 : -1;
            double tau = sum / (USED * (USED - 1) / 2);
            matrix[i * d + j] = matrix[j * d + i] = sin(1.5707963267948966 * tau);
        }
    }
    free(x);
}

static void print_time(const char *what, size_t d, double t)
{
    printf("%s %zu\t%.9f\n", what, d, t);
    fflush(stdout);
}

static void check(status s, const char *what)
{
    if (s == OK) return;
    fprintf(stderr, "%s: status %d\n", what, (int)s);
    exit(1);
}

static double best_eigen(const double *matrix, size_t d, int rounds, pool *p)
{
    eigen_room room;
    check(make_eigen_room(&room, d, true, p), "room");
    double *copy = pool_take(p, d, d * sizeof *copy), *values = pool_take(p, d, sizeof *values);
    double best = 1e9;
    for (int round = 0; round < rounds; round++) {
        memcpy(copy, matrix, d * d * sizeof *copy);
        double before = seconds();
        check(eigen(copy, values, &room), "eigen");
        best = fmin(best, seconds() - before);
    }
    return best;
}

/* The same with a firmness between 1 and 10 for each entry. */
static double best_weighted(const double *matrix, size_t d, int rounds, pool *p)
{
    uint64_t state = d;
    double *firmness = pool_take(p, d, d * sizeof *firmness), best = 1e9;
    double *nearest = pool_take(p, d, d * sizeof *nearest);
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j <= i; j++)
            firmness[i * d + j] = firmness[j * d + i] = pow(10, uniform(&state));
    for (int round = 0; round < rounds; round++) {
        double before = seconds();
        check(nearest_firm(matrix, firmness, d, 0, nearest, NULL, NULL, NULL, p), "weighted");
        best = fmin(best, seconds() - before);
    }
    return best;
}

int main(void)
{
    const size_t sizes[] = { 10, 50, 100, 250, 500, 1000 };
    for (size_t k = 0; k < sizeof sizes / sizeof *sizes; k++) {
        size_t d = sizes[k];
        int rounds = d > 250 ? 2 : d > 50 ? 10 : 200;
        pool p = { .last = NULL };
        double *matrix = pool_take(&p, d, d * sizeof *matrix);
        double *nearest = pool_take(&p, d, d * sizeof *nearest);
        pairwise(matrix, d);
        double best = 1e9;
        for (int round = 0; round < rounds; round++) {
            double before = seconds();
            check(nearest_correlation(matrix, d, 0, nearest, NULL, &p), "repair");
            best = fmin(best, seconds() - before);
        }
        print_time("repair", d, best);
        print_time("eigen", d, best_eigen(matrix, d, rounds, &p));
        if (d <= 250) print_time("weighted", d, best_weighted(matrix, d, 3, &p));
        pool_empty(&p);
    }
    return 0;
}
