/* correlations.c - matrix arguments: what is wrong with one, or a tidy copy of it. */
#include "correlations.h"

size_t rows_above(const argument *a)
{
    return a->header;
}

size_t columns_before(const argument *a)
{
    return a->raw->is == IS_TABLE ? a->raw->table.cols - a->data.cols : 0;
}

double *own_matrix(const argument *a, report *r)
{
    size_t d = a->data.cols;
    double *matrix = pool_take(r->pool, d, d * sizeof *matrix);
    for (size_t i = 0; matrix && i < d; i++)
        for (size_t j = 0; j < d; j++) matrix[i * d + j] = a->data.at[j * d + i];
    return matrix;
}

const char *defect_sentence(const char *name, const double *matrix, size_t d, defect found,
                            size_t above, size_t before, pool *p)
{
    size_t i = found.row, j = found.column, row = i + 1 + above, column = j + 1 + before;
    double here = matrix[i * d + j];
    if (found.what == DIAGONAL_NOT_ONE)
        return text_from(p, "%s has %g on its diagonal, in row %zu, column %zu, where 1 must stand",
                         name, here, row, column);
    if (found.what == OUTSIDE_UNIT)
        return text_from(p, "%s has %g in row %zu, column %zu, outside [-1;1]", name, here, row,
                         column);
    return text_from(p, "%s is not symmetric: %g stands in row %zu, column %zu, but %g in the "
                     "opposite cell", name, here, row, column, matrix[j * d + i]);
}

status status_of_defect(defect found)
{
    return found.what == NO_DEFECT ? OK : found.what == NOT_SYMMETRIC ? BAD_KIND : OUT_OF_DOMAIN;
}

const char *defect_text(const argument *a, const double *matrix, defect found, report *r)
{
    return defect_sentence(a->param->name, matrix, a->data.cols, found, rows_above(a),
                           columns_before(a), r->pool);
}

status refuse_defect(const argument *a, const double *matrix, defect found, report *r)
{
    const char *sentence = defect_text(a, matrix, found, r);
    return sentence ? refuse(r, status_of_defect(found), "%s", sentence) : NO_MEMORY;
}

status take_correlations(const argument *a, double **matrix, report *r)
{
    *matrix = own_matrix(a, r);
    if (!*matrix) return NO_MEMORY;
    defect found = matrix_defect(*matrix, a->data.cols);
    if (found.what != NO_DEFECT) return refuse_defect(a, *matrix, found, r);
    if (tidy_matrix(*matrix, a->data.cols))
        remark(r, "differences of up to 1e-9 in %s taken as rounding and removed",
               a->param->name);
    return OK;
}
