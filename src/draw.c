/* draw.c - draws from a copula: the rotation, and the copulas that need no factor or frailty
 *
 * Method
 *   The family fills the rows, then the columns that the rotation turns are replaced by 1 - u,
 *   which is exact enough to be strictly inside (0;1) because every u is at least 2^-53.
 *   All rows are worked on in blocks of ROWS_AT_ONCE that start where the caller asks, and every
 *   number depends on its own row only, so blocks leave no trace in the results.
 *
 * Special cases
 *   No rows: nothing is done.
 *
 * Accuracy
 *   Bits do not depend on the machine: nothing here calls the system's mathematics.
 */
#include "draw.h"

#include "draw_block.h"
#include "random.h"
#include "sobol.h"

/* Sobol' points have the dimensions of what all columns share first. */
enum { SHARED = 2 };

static void turn(double *u, size_t rows)
{
    for (size_t i = 0; i < rows; i++) u[i] = 1.0 - u[i];
}

static bool turned(int rotation, size_t column)
{
    return rotation == 180 || (rotation == 90 && column == 0) || (rotation == 270 && column == 1);
}

static status draw_where(const copula *c, const struct draw_rows *where, pool *p)
{
    struct block *mark = p->last;
    status s = c->family->draw(c, where, p);
    pool_back_to(p, mark);
    if (s != OK) return s;
    for (size_t j = 0; j < c->dimension; j++)
        if (turned(c->rotation, j)) turn(where->u + j * where->stride, where->rows);
    return OK;
}

status draw_sobol(const copula *c, uint64_t seed, size_t first, size_t rows, double *u,
                  size_t stride, pool *p)
{
    struct sobol points;
    struct draw_rows where = { .seed = seed, .first = first, .rows = rows, .u = u, .stride = stride,
                               .sobol = &points };
    struct block *mark = p->last;
    status s = sobol_prepare(&points, SHARED + c->dimension, seed, p);
    if (s == OK) s = draw_where(c, &where, p);
    pool_back_to(p, mark);
    return s;
}

status draw_mirrored(const copula *c, uint64_t seed, size_t first, size_t rows, double *u,
                     size_t stride, pool *p)
{
    struct draw_rows where = { .seed = seed, .first = first, .rows = rows, .u = u, .stride = stride,
                               .mirrored = true };
    return draw_where(c, &where, p);
}

status draw(const copula *c, uint64_t seed, size_t first, size_t rows, double *u, size_t stride,
            pool *p)
{
    struct draw_rows where = { .seed = seed, .first = first, .rows = rows, .u = u,
                               .stride = stride };
    return draw_where(c, &where, p);
}

/* Numbers 2b and 2b + 1 of a purpose, which are dimensions from `dimension` on of Sobol' points. */
static void numbers_of_block(const struct draw_rows *where, size_t start, enum purpose purpose,
                             size_t dimension, uint32_t b, double *even, double *odd)
{
    uint64_t first = where->first + start;
    if (where->sobol) {
        sobol_of_rows(where->sobol, dimension + 2 * b, first, even);
        if (dimension + 2 * b + 1 < where->sobol->dimensions)
            sobol_of_rows(where->sobol, dimension + 2 * b + 1, first, odd);
    } else {
        uniforms_of_rows(where->seed, purpose, first, b, even, odd);
    }
    if (where->mirrored) {
        turn(even, ROWS_AT_ONCE);
        turn(odd, ROWS_AT_ONCE);
    }
}

void uniforms_of_block(const struct draw_rows *where, size_t start, size_t columns,
                       double (*u)[ROWS_AT_ONCE])
{
    double spare[ROWS_AT_ONCE] = { 0 };
    for (size_t j = 0; j < columns; j += 2)
        numbers_of_block(where, start, FOR_DRAW, SHARED, (uint32_t)(j / 2), u[j],
                         j + 1 < columns ? u[j + 1] : spare);
}

void mixing_of_block(const struct draw_rows *where, size_t start, double *a, double *b)
{
    numbers_of_block(where, start, FOR_MIXING, 0, 0, a, b);
}

void store_block(const struct draw_rows *where, size_t start, size_t columns,
                 double (*u)[ROWS_AT_ONCE])
{
    size_t rows = rows_in_block(where, start);
    for (size_t j = 0; j < columns; j++)
        memcpy(where->u + j * where->stride + start, u[j], rows * sizeof **u);
}

status draw_independent(const copula *c, const struct draw_rows *where, pool *p)
{
    double (*u)[ROWS_AT_ONCE] = pool_take(p, c->dimension, sizeof *u);
    if (!u) return NO_MEMORY;
    for (size_t start = 0; start < where->rows; start += ROWS_AT_ONCE) {
        uniforms_of_block(where, start, c->dimension, u);
        store_block(where, start, c->dimension, u);
    }
    return OK;
}

status draw_by_conditional(const copula *c, const struct draw_rows *where,
                           double (*quantile)(double u, double w, double theta))
{
    double u[2][ROWS_AT_ONCE];
    for (size_t start = 0; start < where->rows; start += ROWS_AT_ONCE) {
        uniforms_of_block(where, start, 2, u);
        for (int i = 0; i < ROWS_AT_ONCE; i++)
            u[1][i] = kept_inside(quantile(u[0][i], u[1][i], c->theta));
        store_block(where, start, 2, u);
    }
    return OK;
}
