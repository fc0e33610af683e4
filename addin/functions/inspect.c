/* inspect.c - looking at correlation matrices. */
#include "../correlations.h"
#include "../words.h"
#include "../../src/leeway.h"

#include <math.h>

static const char GROUP[] = "Mend and inspect correlation matrices";
static const char MATRIX_HELP[] =
    "A square of correlations; a header row and a name column are allowed.";

/* For any symmetric matrix, whose entries may be large: rounding is 1e-9 of the largest. */
static status refuse_asymmetry(const argument *a, const double *matrix, report *r)
{
    size_t d = a->data.cols;
    double largest = 0;
    for (size_t i = 0; i < d * d; i++) largest = fmax(largest, fabs(matrix[i]));
    for (size_t i = 0; i < d; i++)
        for (size_t j = i + 1; j < d; j++)
            if (!(fabs(matrix[i * d + j] - matrix[j * d + i]) <= 1e-9 * largest))
                return refuse_defect(a, matrix, (defect){ NOT_SYMMETRIC, i, j }, r);
    return OK;
}

static status cell_eigen(const argument *in, value *out, report *r)
{
    double *matrix = own_matrix(&in[0], r);
    if (!matrix) return NO_MEMORY;
    status s = refuse_asymmetry(&in[0], matrix, r);
    if (!s) s = new_table(r, in[0].data.cols, 1, out);
    if (s) return s;
    return all_eigenvalues(matrix, in[0].data.cols, out->table.at, r->pool);
}

static status cell_feasible(const argument *in, value *out, report *r)
{
    double *matrix = own_matrix(&in[0], r);
    if (!matrix) return NO_MEMORY;
    size_t d = in[0].data.cols;
    defect found = matrix_defect(matrix, d);
    if (found.what != NO_DEFECT) {
        const char *sentence = defect_text(&in[0], matrix, found, r);
        if (!sentence) return NO_MEMORY;
        remark(r, "%s", sentence);
        return answer(out, 0);
    }
    bool feasible;
    tidy_matrix(matrix, d);
    double lowest;
    status s = matrix_feasible(matrix, d, in[1].number, &feasible, r->pool);
    if (!s) s = lowest_eigenvalue(matrix, d, &lowest, r->pool);
    if (s) return s;
    remark(r, "the lowest eigenvalue is %g", lowest);
    return answer(out, feasible);
}

/* A line's place in the matrix. */
static status line_of(const char *name, const argument *a, size_t d, size_t *line, report *r)
{
    *line = (size_t)a->number - 1;
    if (*line < d) return OK;
    return refuse(r, OUT_OF_DOMAIN, "%s is %zu, but matrix has only %zu", name, *line + 1, d);
}

static status cell_leeway(const argument *in, value *out, report *r)
{
    double *matrix, low, high;
    size_t d = in[0].data.cols, row, column;
    status s = take_correlations(&in[0], &matrix, r);
    if (!s) s = line_of("row", &in[1], d, &row, r);
    if (!s) s = line_of("column", &in[2], d, &column, r);
    if (s) return s;
    if (row == column)
        return refuse(r, OUT_OF_DOMAIN, "row and column are both %zu, and the diagonal is always 1",
                      row + 1);
    s = entry_leeway(matrix, d, row, column, &low, &high, r->pool);
    if (s == OUT_OF_DOMAIN)
        return refuse(r, s, "no value of this entry makes the matrix feasible: without line %zu "
                      "or without line %zu it is not feasible either", row + 1, column + 1);
    if (!s) s = new_table(r, 1, 2, out);
    if (s) return s;
    put_number(out, 0, 0, low);
    put_number(out, 0, 1, high);
    return OK;
}

static void put_clash(value *out, size_t row, const clash *c)
{
    for (size_t k = 0; k < 3; k++) put_number(out, row, k, (double)(c->line[k] + 1));
    put_number(out, row, 3, c->lowest);
    put_number(out, row, 4, c->low);
    put_number(out, row, 5, c->high);
}

static status remark_clashes(const double *matrix, size_t d, size_t all, report *r)
{
    if (all) {
        remark(r, "%zu triple%s cannot stand together", all, plural(all));
        return OK;
    }
    bool feasible;
    status s = matrix_feasible(matrix, d, 0, &feasible, r->pool);
    if (!s)
        remark(r, feasible ? "no triple clashes, and the matrix is feasible"
                           : "each triple can stand, but the matrix as a whole cannot");
    return s;
}

static status cell_clashes(const argument *in, value *out, report *r)
{
    double *matrix;
    clash *found;
    size_t d = in[0].data.cols, most = (size_t)in[1].number, n, all;
    status s = take_correlations(&in[0], &matrix, r);
    if (!s) s = clashing_triples(matrix, d, most, &found, &n, &all, r->pool);
    if (!s) s = remark_clashes(matrix, d, all, r);
    if (!s) s = new_table(r, n ? n : 1, 6, out);
    if (s) return s;
    for (size_t k = 0; k < n; k++) put_clash(out, k, &found[k]);
    for (size_t k = 0; n == 0 && k < 6; k++) put_number(out, 0, k, 0);
    return OK;
}

const function inspect_functions[] = {
    {
        .name = "eigen",
        .group = GROUP,
        .help = "The eigenvalues of a symmetric matrix, largest first, in one column.",
        .detail =
            "Any symmetric matrix, covariances too. A matrix of correlations is feasible when none "
            "of its eigenvalues is negative.",
        .examples = {
            { "EIGEN({1;0.5|0.5;1})", "1.5" },
            { "INDEX(EIGEN({2;-1;0|-1;2;-1|0;-1;2});3;1)", "0.585786437626905" },
            { "EIGEN({1;0.5|0.4;1})", "#VALUE!" },
        },
        .params = {
            { .name = "matrix", .kind = MATRIX,
              .help = "A square of numbers; a header row and a name column are allowed." },
        },
        .costly = true,
        .call = cell_eigen,
    },
    {
        .name = "feasible",
        .group = GROUP,
        .help = "1 when a square is a matrix of correlations that can stand together, else 0.",
        .detail =
            "It must be symmetric, have a diagonal of 1 and entries in [-1;1] (all to 1e-9), and "
            "no eigenvalue below floor - 1e-12 d, where d is its number of rows. When the answer "
            "is 0 for another reason than the eigenvalues, WHY says for which.",
        .examples = {
            { "FEASIBLE({1;0.9;0.7|0.9;1;0.9|0.7;0.9;1})", "1" },
            { "FEASIBLE({1;0.9;0|0.9;1;0.9|0;0.9;1})", "0" },
            { "FEASIBLE({1;0.9|0.9;1};0.2)", "0" },
        },
        .params = {
            { .name = "matrix", .kind = MATRIX,
              .help = "A square of numbers; a header row and a name column are allowed." },
            { .name = "floor", .kind = NUMBER, .low = 0, .high = 1, .open = HIGH_OPEN,
              .optional = true, .help = "The lowest eigenvalue wanted, 0 when left out." },
        },
        .costly = true,
        .call = cell_feasible,
    },
    {
        .name = "leeway",
        .group = GROUP,
        .help = "The lowest and highest value that one correlation may take with all others held.",
        .detail =
            "One row of two cells. The entry's own value does not matter. For three lines the "
            "limits are ab - s and ab + s with s = sqrt((1-a^2)(1-b^2)) (Stanley & Wang 1969, "
            "Olkin 1981), for more they follow from the Schur complement. #NUM! when no value "
            "helps because the others clash among themselves.",
        .examples = {
            { "LEEWAY({1;0.5;0|0.5;1;0.7|0;0.7;1};1;3)", "-0.268465843842649" },
            { "INDEX(LEEWAY({1;0.5;0|0.5;1;0.7|0;0.7;1};1;3);1;2)", "0.968465843842649" },
            { "LEEWAY({1;0.5|0.5;1};1;2)", "-1" },
            { "LEEWAY({1;0.5|0.5;1};1;1)", "#NUM!" },
        },
        .params = {
            { .name = "matrix", .kind = MATRIX, .help = MATRIX_HELP },
            { .name = "row", .kind = WHOLE, .low = 1, .high = 16384,
              .help = "Number of the first line, 1 for the first of the matrix." },
            { .name = "column", .kind = WHOLE, .low = 1, .high = 16384,
              .help = "Number of the second line." },
        },
        .costly = true,
        .call = cell_leeway,
    },
    {
        .name = "clashes",
        .group = GROUP,
        .help = "The triples of lines whose correlations cannot stand together, worst first.",
        .detail =
            "A row a triple: the numbers of the three lines, the lowest eigenvalue of their "
            "correlations, and the lowest and highest value that the correlation of the second "
            "with the third may take when the other two stay. One row of 0 when no triple clashes,"
            " which does not mean that the matrix is feasible: larger groups can clash where no "
            "triple does, and WHY says so.",
        .examples = {
            { "CLASHES({1;0.9;0|0.9;1;0.9|0;0.9;1})", "1" },
            { "INDEX(CLASHES({1;0.9;0|0.9;1;0.9|0;0.9;1});1;4)", "-0.272792206135786" },
            { "CLASHES({1;0.5|0.5;1})", "0" },
        },
        .params = {
            { .name = "matrix", .kind = MATRIX, .help = MATRIX_HELP },
            { .name = "most", .kind = WHOLE, .low = 1, .high = 100000, .optional = true,
              .otherwise = 20, .help = "How many triples to list at most, 20 when left out." },
        },
        .costly = true,
        .call = cell_clashes,
    },
    { 0 },
};
