/* models.h - model blocks: a copula as an array with labels down its first column.
 *
 *     copula     t
 *     dimension  3
 *     lines      motor  property  cargo
 *     df         4.2
 *     matrix     1      0.3    0.2
 *                0.3    1      0.1
 *                0.2    0.1    1
 *
 * One-parameter families have theta instead of df and matrix; rotation is 0 where it is missing.
 * Beside theta and df a fit may add the words error, low, high, each with its number to its right.
 */
#ifndef MODELS_H
#define MODELS_H

#include "report.h"
#include "../src/copula.h"

/* Reads a block and checks everything in it, so that what comes out can be computed with. Labels
 * may stand in any order; what a fit may add is skipped; any other unknown label, a label missing
 * or twice, or an inadmissible value is refused with a sentence that names the parameter, the row
 * of the block and the label. The copula lives in the report's pool. */
status read_copula(const value *block, const char *param_name, const copula **c, report *r);

/* Refuses a copula that is none: theta outside the family's range for this dimension, a dimension
 * below 2 or above the family's (16,384, with a matrix 4,000), a rotation that this dimension does
 * not have, df not in (0;1e9], a matrix that is not a feasible matrix of correlations. Leaves the
 * label of what is wrong in *label unless that is NULL. */
status check_copula(const copula *c, const char **label, report *r);

/* Two of these checks alone, of numbers as large as they come: of the dimension before anything as
 * long is read, and of the rotation. */
status check_columns(const family *f, double dimension, report *r);
status check_degrees(double rotation, report *r);

/* The block of a copula. */
status write_copula(const copula *c, value *out, report *r);

enum { LOW_END_OPEN = 1, HIGH_END_OPEN = 2 };    /* of the ranges in a family's row */

/* The low end of a family's theta in this dimension, and which ends are excluded. */
double lowest_theta(const family *f, size_t dimension, int *open);

#endif
