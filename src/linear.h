/* linear.h - the few things wanted from LAPACK and BLAS.
 *
 * They are called by their Fortran names, which every build of LAPACK has. Matrices are square
 * or rectangular, column by column, as Fortran keeps them; for a symmetric one that makes
 * no difference, and only one triangle is read: row >= column by Fortran's count, which is
 * matrix[i * d + j] with i <= j by ours. All room comes from the caller.
 */
#ifndef LINEAR_H
#define LINEAR_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>
#include <stddef.h>

/* Room for the eigenvalues, and if asked for the eigenvectors, of a d x d matrix; it may be used
 * again. */
typedef struct {
    int d;
    bool with_vectors;
    double *work;
    int *whole_work;
    int n_work, n_whole;
} eigen_room;

/* OUT_OF_DOMAIN: d is 0 or too large for LAPACK's 32-bit counts; NO_MEMORY. */
status make_eigen_room(eigen_room *room, size_t d, bool with_vectors, pool *p);

/* Eigenvalues, lowest first, into values[d]. The matrix is overwritten: with vectors, column k is
 * the unit eigenvector of values[k], without them the content is lost. NOT_SETTLED when LAPACK's
 * iteration fails or the matrix holds a number that is not finite. */
status eigen(double *matrix, double *values, const eigen_room *room);

/* Whether a symmetric matrix has a Cholesky factor; its triangle is overwritten. */
bool cholesky(double *matrix, size_t d);

/* c (rows x cols) = a (rows x inner) b (inner x cols) */
void product(const double *a, const double *b, size_t rows, size_t inner, size_t cols, double *c);

/* c (rows x cols) = a' b, where a is inner x rows and b is inner x cols */
void transposed_product(const double *a, const double *b, size_t rows, size_t inner, size_t cols,
                        double *c);

/* c (d x d) = a a' where a is d x cols, in both triangles */
void outer_product(const double *a, size_t d, size_t cols, double *c);

#endif
