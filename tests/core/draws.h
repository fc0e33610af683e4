/* draws.h - copulas and draws for the tests of drawing. */
#ifndef TESTS_DRAWS_H
#define TESTS_DRAWS_H

#include "table.h"

#include "../../src/draw.h"

/* A copula of this family with room for its matrix and df. Nothing needs freeing. */
struct sample_copula {
    copula c;
    double matrix[50 * 50], df[50];
};

static inline copula *one_parameter(struct sample_copula *s, const char *word, size_t d,
                                    double theta)
{
    s->c = (copula){ .family = family_named(word), .dimension = d, .theta = theta };
    return &s->c;
}

/* every correlation alike; df is ignored but for t */
static inline copula *elliptical(struct sample_copula *s, const char *word, size_t d,
                                 double correlation, double df)
{
    s->c = (copula){ .family = family_named(word), .dimension = d, .matrix = s->matrix,
                     .df = df > 0 ? s->df : NULL };
    for (size_t i = 0; i < d; i++) {
        s->df[i] = df;
        for (size_t j = 0; j < d; j++) s->matrix[i * d + j] = i == j ? 1 : correlation;
    }
    return &s->c;
}

/* puts one correlation into the matrix, on both sides of the diagonal */
static inline void set_correlation(struct sample_copula *s, size_t i, size_t j, double correlation)
{
    size_t d = s->c.dimension;
    s->matrix[i * d + j] = s->matrix[j * d + i] = correlation;
}

/* column by column, stride = rows; the caller frees */
static inline double *drawn(const copula *c, uint64_t seed, size_t first, size_t rows)
{
    pool p = { 0 };
    double *u = malloc(rows * c->dimension * sizeof *u);
    assert_non_null(u);
    assert_int_equal(draw(c, seed, first, rows, u, rows, &p), OK);
    assert_null(p.last);
    for (size_t i = 0; i < rows * c->dimension; i++)
        if (!(u[i] >= 0x1p-53 && u[i] <= 1 - 0x1p-53)) fail_msg("%g is not inside (0;1)", u[i]);
    return u;
}

/* the share of rows in which every column is below (or, with a negative bound, above) its bound */
static inline double share_beyond(const double *u, size_t rows, size_t columns, double bound)
{
    size_t count = 0;
    for (size_t i = 0; i < rows; i++) {
        size_t beyond = 0;
        for (size_t j = 0; j < columns; j++)
            beyond += bound < 0 ? u[j * rows + i] > -bound : u[j * rows + i] <= bound;
        count += beyond == columns;
    }
    return (double)count / (double)rows;
}

/* four standard errors of a share of n rows */
static inline double four_errors(double probability, size_t n)
{
    return 4 * sqrt(probability * (1 - probability) / (double)n);
}

#endif
