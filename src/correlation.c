/* correlation.c - eigenvalues, feasibility and defects of correlation matrices.
 *
 * Method: eigenvalues by LAPACK (linear.c). A matrix has no eigenvalue below f when G - f I has a
 * Cholesky factor, which costs a fraction of the eigenvalues. For feasibility f is half way to what
 * is allowed below the floor, so that a singular matrix has its factor too; only when it does not
 * exist, and the matrix may still be within what is allowed, are the eigenvalues computed.
 * Special cases: d = 1 goes the common way. A matrix with an entry that is not finite has no
 * answer.
 * Accuracy: of the eigenvalues a small multiple of 2.2e-16 d; the factor exists for no matrix whose
 * lowest eigenvalue lies further than that below f (Higham, Accuracy and Stability of Numerical
 * Algorithms, 2nd edition 2002, theorem 10.7), well inside the 1e-12 d that feasible allows.
 */
#include "correlation.h"
#include "linear.h"

#include <math.h>
#include <string.h>

static const double ROUNDING = 1e-9;
static const double ALLOWED = 1e-12;          /* below the floor, times d */

static double *copy_of(const double *matrix, size_t d, pool *p)
{
    double *copy = pool_take(p, d, d * sizeof *copy);
    return copy ? memcpy(copy, matrix, d * d * sizeof *copy) : NULL;
}

/* eigenvalues, lowest first, into room of the pool's */
static status ascending(const double *matrix, size_t d, double **values, pool *p)
{
    eigen_room room;
    status s = make_eigen_room(&room, d, false, p);
    if (s) return s;
    double *copy = copy_of(matrix, d, p);
    *values = pool_take(p, d, sizeof **values);
    return copy && *values ? eigen(copy, *values, &room) : NO_MEMORY;
}

status lowest_eigenvalue(const double *matrix, size_t d, double *lowest, pool *p)
{
    struct block *mark = p->last;
    double *values = NULL;
    status s = ascending(matrix, d, &values, p);
    if (!s) *lowest = values[0];
    pool_back_to(p, mark);
    return s;
}

status all_eigenvalues(const double *matrix, size_t d, double *eigenvalues, pool *p)
{
    struct block *mark = p->last;
    double *values = NULL;
    status s = ascending(matrix, d, &values, p);
    for (size_t i = 0; !s && i < d; i++) eigenvalues[i] = values[d - 1 - i];
    pool_back_to(p, mark);
    return s;
}

status lies_above(const double *matrix, size_t d, double floor, bool *above, pool *p)
{
    struct block *mark = p->last;
    double *copy = copy_of(matrix, d, p);
    if (!copy) return NO_MEMORY;
    for (size_t i = 0; i < d; i++) copy[i * d + i] -= floor;
    *above = cholesky(copy, d);
    for (size_t i = 0; *above && i < d; i++) *above = isfinite(copy[i * d + i]);
    pool_back_to(p, mark);
    return OK;
}

status matrix_feasible(const double *matrix, size_t d, double floor, bool *feasible, pool *p)
{
    if (d == 0) return OUT_OF_DOMAIN;
    double lowest, allowed = ALLOWED * (double)d;
    status s = lies_above(matrix, d, floor - allowed / 2, feasible, p);
    if (s || *feasible) return s;
    s = lowest_eigenvalue(matrix, d, &lowest, p);
    if (!s) *feasible = lowest >= floor - allowed;
    return s;
}

bool unit_diagonal(const double *matrix, size_t d)
{
    for (size_t i = 0; i < d; i++)
        if (matrix[i * d + i] != 1) return false;
    return true;
}

defect matrix_defect(const double *matrix, size_t d)
{
    for (size_t i = 0; i < d; i++) {
        if (!(fabs(matrix[i * d + i] - 1) <= ROUNDING))
            return (defect){ DIAGONAL_NOT_ONE, i, i };
        for (size_t j = 0; j < d; j++) {
            double here = matrix[i * d + j], mirrored = matrix[j * d + i];
            if (!(fabs(here) <= 1 + ROUNDING)) return (defect){ OUTSIDE_UNIT, i, j };
            if (!(fabs(here - mirrored) <= ROUNDING)) return (defect){ NOT_SYMMETRIC, i, j };
        }
    }
    return (defect){ NO_DEFECT, 0, 0 };
}

bool tidy_matrix(double *matrix, size_t d)
{
    bool changed = false;
    for (size_t i = 0; i < d; i++) {
        for (size_t j = 0; j <= i; j++) {
            double *here = &matrix[i * d + j], *mirrored = &matrix[j * d + i];
            double mean = i == j ? 1 : *here + (*mirrored - *here) / 2;
            double kept = fmin(1, fmax(-1, mean));
            changed = changed || *here != kept || *mirrored != kept;
            *here = *mirrored = kept;
        }
    }
    return changed;
}
