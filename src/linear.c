/* linear.c - eigenvalues, products and factors by LAPACK and BLAS.
 *
 * Method: dsyevd, the divide and conquer method of Cuppen (1981) as made stable by Gu & Eisenstat
 * (1995); dpotrf, dgemm, dsyrk (Anderson et al., LAPACK Users' Guide, 3rd edition, 1999).
 * Special cases: dsyevd may run forever or answer nonsense on NaN, so the matrix is looked over
 * first.
 * Accuracy: eigenvalues to a modest multiple of 2.2e-16 of the largest one in absolute value.
 */
#include "linear.h"

#include <limits.h>
#include <math.h>

/* The lengths of the texts come last, as gfortran passes them. */
void dsyevd_(const char *job, const char *triangle, const int *n, double *a, const int *lda,
             double *values, double *work, const int *n_work, int *whole_work, const int *n_whole,
             int *info, size_t job_length, size_t triangle_length);
void dpotrf_(const char *triangle, const int *n, double *a, const int *lda, int *info,
             size_t triangle_length);
void dgemm_(const char *turn_a, const char *turn_b, const int *rows, const int *cols,
            const int *inner, const double *alpha, const double *a, const int *lda,
            const double *b, const int *ldb, const double *beta, double *c, const int *ldc,
            size_t turn_a_length, size_t turn_b_length);
void dsyrk_(const char *triangle, const char *turn, const int *n, const int *inner,
            const double *alpha, const double *a, const int *lda, const double *beta, double *c,
            const int *ldc, size_t triangle_length, size_t turn_length);

status make_eigen_room(eigen_room *room, size_t d, bool with_vectors, pool *p)
{
    enum { LARGEST = 30000 };      /* 1 + 6 d + 2 d d must be an int */
    if (d == 0 || d > LARGEST) return OUT_OF_DOMAIN;
    int n = (int)d;
    *room = (eigen_room){ .d = n, .with_vectors = with_vectors,
                          .n_work = with_vectors ? 1 + 6 * n + 2 * n * n : 1 + 2 * n,
                          .n_whole = with_vectors ? 3 + 5 * n : 1 };
    room->work = pool_take(p, (size_t)room->n_work, sizeof *room->work);
    room->whole_work = pool_take(p, (size_t)room->n_whole, sizeof *room->whole_work);
    return room->work && room->whole_work ? OK : NO_MEMORY;
}

static bool all_finite(const double *x, size_t n)
{
    for (size_t i = 0; i < n; i++)
        if (!isfinite(x[i])) return false;
    return true;
}

status eigen(double *matrix, double *values, const eigen_room *room)
{
    size_t d = (size_t)room->d;
    if (!all_finite(matrix, d * d)) return NOT_SETTLED;
    int info = 0;
    dsyevd_(room->with_vectors ? "V" : "N", "L", &room->d, matrix, &room->d, values, room->work,
            &room->n_work, room->whole_work, &room->n_whole, &info, 1, 1);
    return info == 0 ? OK : NOT_SETTLED;
}

bool cholesky(double *matrix, size_t d)
{
    if (d == 0 || d > INT_MAX) return false;
    int n = (int)d, info = 0;
    dpotrf_("L", &n, matrix, &n, &info, 1);
    return info == 0;
}

static void multiply(const char *turn_a, const double *a, size_t lda, const double *b,
                     size_t rows, size_t inner, size_t cols, double *c)
{
    int m = (int)rows, k = (int)inner, n = (int)cols, lead_a = (int)lda;
    double one = 1, zero = 0;
    if (m && k && n)
        dgemm_(turn_a, "N", &m, &n, &k, &one, a, &lead_a, b, &k, &zero, c, &m, 1, 1);
    else
        for (size_t i = 0; i < rows * cols; i++) c[i] = 0;
}

void product(const double *a, const double *b, size_t rows, size_t inner, size_t cols, double *c)
{
    multiply("N", a, rows, b, rows, inner, cols, c);
}

void transposed_product(const double *a, const double *b, size_t rows, size_t inner, size_t cols,
                        double *c)
{
    multiply("T", a, inner, b, rows, inner, cols, c);
}

void outer_product(const double *a, size_t d, size_t cols, double *c)
{
    int n = (int)d, k = (int)cols;
    double one = 1, zero = 0;
    if (k == 0) {
        for (size_t i = 0; i < d * d; i++) c[i] = 0;
        return;
    }
    dsyrk_("L", "N", &n, &k, &one, a, &n, &zero, c, &n, 1, 1);
    for (size_t j = 0; j < d; j++)
        for (size_t i = j + 1; i < d; i++) c[i * d + j] = c[j * d + i];
}
