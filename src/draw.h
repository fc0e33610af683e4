/* draw.h - draws from a copula that depend on seed, row and model alone.
 *
 * Row i of a draw depends neither on how many rows are asked for nor on where a
 * draw begins nor on the machine. Every number lies within [2^-53; 1 - 2^-53], so
 * that 1 - u, too, is strictly inside (0;1).
 */
#ifndef DRAW_H
#define DRAW_H

#include "copula.h"
#include "family.h"

#include <stdint.h>

/* Rows first to first + rows - 1 of the draw under this seed: row first + i of column j goes into
 * u[j * stride + i], stride >= rows. Rotation is applied. NO_MEMORY; whatever the family
 * answers. */
status draw(const copula *c, uint64_t seed, size_t first, size_t rows, double *u, size_t stride,
            pool *p);

/* The same rows made from 1 - u wherever a column or a frailty takes a uniform u: each row has the
 * distribution of the copula, and opposes that of draw(). Elliptical copulas keep their chi-squares
 * and give exactly 1 - u. */
status draw_mirrored(const copula *c, uint64_t seed, size_t first, size_t rows, double *u,
                     size_t stride, pool *p);

/* Rows made from scrambled Sobol' points, see sobol.h, in place of random numbers: each row has the
 * distribution of the copula, and 2^m rows from a multiple of 2^m on fill it evenly. OUT_OF_DOMAIN
 * for more than 128 columns. */
status draw_sobol(const copula *c, uint64_t seed, size_t first, size_t rows, double *u,
                  size_t stride, pool *p);

/* What the rows of the families point to; the rotation is not yet applied. */
status draw_independent(const copula *c, const struct draw_rows *where, pool *p);

/* Normal copula: Cholesky factor times normal numbers by inversion, Phi of the result. A matrix
 * that is only semidefinite is drawn from on its lower dimension. */
status draw_gaussian(const copula *c, const struct draw_rows *where, pool *p);

/* t copula: the same divided by the root of a chi-square by inversion; with several df one uniform
 * drives the chi-squares of all columns. Equal df give the same numbers either way. */
status draw_t(const copula *c, const struct draw_rows *where, pool *p);

/* Archimedean families with a frailty: Marshall & Olkin (1988). */
status draw_by_frailty(const copula *c, const struct draw_rows *where, pool *p);

/* Pairs without a frailty: the second column from the first and a uniform w by
 * v = quantile(u, w, theta), the inverse of the conditional distribution of V given U = u. */
status draw_by_conditional(const copula *c, const struct draw_rows *where,
                           double (*quantile)(double u, double w, double theta));

#endif
