/* scheme.h - the ways of choosing the rows of a draw.
 */
#ifndef SCHEME_H
#define SCHEME_H

#include "copula.h"
#include "memory.h"
#include "status.h"

#include <stdint.h>

/* In the order of scheme_words. */
typedef enum { SCHEME_PLAIN, SCHEME_ANTITHETIC, SCHEME_LATIN, SCHEME_SOBOL } scheme;

extern const char scheme_words[];         /* "plain antithetic latin sobol" */

/* As draw() in draw.h, under a scheme:
 *   plain       independent rows
 *   antithetic  row 2k + 1 opposes row 2k: made from 1 - u where that was made from u
 *   latin       all rows together put exactly one number of each column into each of the `rows`
 *               equal strata of (0;1); first must be 0
 *   sobol       made from scrambled Sobol' points, which fill the cube of the uniforms behind the
 *               columns and the frailty evenly; best with 2^m rows
 * OUT_OF_DOMAIN for latin with first > 0, and for sobol with more than SOBOL_COLUMNS columns. */
enum { SOBOL_COLUMNS = 128 };
status draw_by_scheme(const copula *c, scheme how, uint64_t seed, size_t first, size_t rows,
                      double *u, size_t stride, pool *p);

#endif
