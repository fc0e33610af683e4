/* scheme.c - draws whose rows are chosen to vary less than independent ones
 *
 * Method
 *   antithetic  Hammersley & Morton (1956), on the uniforms behind the columns and
 *               frailties; see draw_mirrored().
 *   latin       Latin hypercube with dependence (Stein 1987; Packham & Schmidt 2010): a plain draw
 *               gives the ranks R of each column, and the number becomes (R - 1 + v)/n with a
 *               fresh uniform v.
 *   sobol       Every number behind the columns, frailties and chi-squares, all by inversion, is
 *               one dimension of scrambled Sobol' points, see sobol.c.
 *
 * Special cases
 *   antithetic may start at any row, and rows need not be even in number: a pair is cut.
 *   latin: numbers of the plain draw that are equal are ranked in row order.
 *
 * Accuracy
 *   Bits do not depend on the machine.
 */
#include "scheme.h"

#include "draw.h"
#include "draw_block.h"
#include "ranks.h"

const char scheme_words[] = "plain antithetic latin sobol";

/* Pairs are drawn this many at a time. */
enum { PAIRS = 16 * ROWS_AT_ONCE };

/* Rows first + done and following of one block of pairs; returns how many there were. */
static size_t interleave(const double *even, const double *odd, size_t columns, size_t first,
                         size_t rows, double *u, size_t stride)
{
    size_t from = first % 2, n = 2 * PAIRS - from < rows ? 2 * PAIRS - from : rows;
    for (size_t j = 0; j < columns; j++)
        for (size_t i = 0; i < n; i++) {
            const double *half = (from + i) % 2 ? odd : even;
            u[j * stride + i] = half[j * PAIRS + (from + i) / 2];
        }
    return n;
}

static status draw_antithetic(const copula *c, uint64_t seed, size_t first, size_t rows, double *u,
                              size_t stride, pool *p)
{
    double *even = pool_take(p, c->dimension * PAIRS, sizeof *even);
    double *odd = pool_take(p, c->dimension * PAIRS, sizeof *odd);
    if (!even || !odd) return NO_MEMORY;
    for (size_t done = 0; done < rows;) {
        size_t at = first + done, left = (at % 2 + rows - done + 1) / 2;
        size_t pairs = left < PAIRS ? left : PAIRS;
        status s = draw(c, seed, at / 2, pairs, even, PAIRS, p);
        if (s == OK) s = draw_mirrored(c, seed, at / 2, pairs, odd, PAIRS, p);
        if (s != OK) return s;
        done += interleave(even, odd, c->dimension, at, rows - done, u + done, stride);
    }
    return OK;
}

/* Puts row order[k] of a column into stratum k, at the place v. */
static void stratify(const uint32_t *order, size_t rows, const double *v, double *u)
{
    for (size_t k = 0; k < rows; k++) {
        size_t i = order[k];
        u[i] = kept_inside(((double)k + v[i]) / (double)rows);
    }
}

static status draw_latin(const copula *c, uint64_t seed, size_t rows, double *u, size_t stride,
                         pool *p)
{
    struct rank_room *room;
    ranking *r;
    double *v = pool_take(p, rows + ROWS_AT_ONCE, sizeof *v), spare[ROWS_AT_ONCE];
    status s = v ? draw(c, seed, 0, rows, u, stride, p) : NO_MEMORY;
    if (s == OK) s = new_rank_room(rows, &room, p);
    if (s == OK) s = new_rankings(rows, 1, &r, p);
    for (size_t j = 0; s == OK && j < c->dimension; j++) {
        rank_values(u + j * stride, rows, r, room);
        for (size_t i = 0; i < rows; i += ROWS_AT_ONCE)
            uniforms_of_rows(seed, FOR_STRATA, i, (uint32_t)j, v + i, spare);
        stratify(r->order, rows, v, u + j * stride);
    }
    return s;
}

status draw_by_scheme(const copula *c, scheme how, uint64_t seed, size_t first, size_t rows,
                      double *u, size_t stride, pool *p)
{
    struct block *mark = p->last;
    status s = BAD_KIND;
    if (how == SCHEME_PLAIN) s = draw(c, seed, first, rows, u, stride, p);
    if (how == SCHEME_ANTITHETIC) s = draw_antithetic(c, seed, first, rows, u, stride, p);
    if (how == SCHEME_SOBOL) s = draw_sobol(c, seed, first, rows, u, stride, p);
    if (how == SCHEME_LATIN) s = first ? OUT_OF_DOMAIN : draw_latin(c, seed, rows, u, stride, p);
    pool_back_to(p, mark);
    return s;
}
