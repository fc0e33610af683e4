/* draw.c - how long draws take.
 *
 * Prints "name<TAB>seconds" a line; draw.py reads them and times SciPy beside.
 */
#include "../../src/draw.h"
#include "../../src/student.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

enum { LINES = 5, ROWS = 100000, REPEATS = 7 };

static double now(void)
{
    struct timespec t;
    timespec_get(&t, TIME_UTC);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

/* Seconds of the best of several draws of this copula. */
static void time_draw(const char *name, const copula *c, double *u)
{
    double best = INFINITY;
    for (int i = 0; i < REPEATS; i++) {
        pool p = { 0 };
        double start = now();
        status s = draw(c, 1, 0, ROWS, u, ROWS, &p);
        best = s == OK ? fmin(best, now() - start) : NAN;
        pool_empty(&p);
    }
    printf("%s\t%.6f\n", name, best);
}

static void time_tables(void)
{
    double best = INFINITY;
    for (int i = 0; i < REPEATS; i++) {
        pool p = { 0 };
        struct student s;
        double start = now();
        if (student_tables(&s, 4, &p) == OK) best = fmin(best, now() - start);
        pool_empty(&p);
    }
    printf("tables of t\t%.6f\n", best);
}

int main(void)
{
    static const struct {
        const char *name, *word;
        double theta;
    } models[] = {
        { "independent", "independent", 0 }, { "gaussian", "gaussian", 0 }, { "t", "t", 0 },
        { "grouped t", "t", 0 }, { "clayton", "clayton", 2 }, { "gumbel", "gumbel", 2 },
        { "frank", "frank", 5.736 }, { "joe", "joe", 2.856 },
    };
    double *u = malloc(ROWS * LINES * sizeof *u), matrix[LINES * LINES], df[LINES];
    if (!u) return 1;
    for (int i = 0; i < LINES * LINES; i++) matrix[i] = i % (LINES + 1) ? 0.5 : 1;
    for (size_t k = 0; k < sizeof models / sizeof *models; k++) {
        for (int j = 0; j < LINES; j++) df[j] = k == 3 ? 3 + j : 4.2;
        copula c = { .family = family_named(models[k].word), .dimension = LINES,
                     .theta = models[k].theta, .matrix = matrix, .df = df };
        time_draw(models[k].name, &c, u);
    }
    time_tables();
    free(u);
    return 0;
}
