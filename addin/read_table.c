/* read_table.c - ranges of numbers: columns, data, matrices.
 *
 * A table comes row by row and goes out column by column. A single column is
 * both, so it is handed on where it lies: adaptors never write to their arguments.
 */
#include "read.h"
#include "words.h"

#include <math.h>

/* Checks the cells from row `first` on. */
static status check_numbers(const char *name, const table *t, size_t first, report *r)
{
    for (size_t i = first * t->cols; i < t->rows * t->cols; i++) {
        double x = t->at[i];
        if (isfinite(x) || (marks_gap(x) && !(t->words && t->words[i]))) continue;
        return number_at(name, t, i / t->cols, i % t->cols, &x, r);
    }
    return OK;
}

/* A part of a table turned into columns. */
static status turned(const table *t, size_t row, size_t col, size_t rows, size_t cols, samples *s,
                     report *r)
{
    s->rows = rows;
    s->cols = cols;
    if (t->cols == 1) {
        s->at = t->at + row;
        return OK;
    }
    s->at = pool_take(r->pool, rows * cols, sizeof *s->at);
    if (!s->at) return NO_MEMORY;
    for (size_t i = 0; i < rows; i++)
        for (size_t j = 0; j < cols; j++)
            s->at[j * rows + i] = t->at[(row + i) * t->cols + col + j];
    return OK;
}

static size_t filled_column(const samples *s)
{
    size_t n = s->rows;
    while (n && is_gap(s->at[n - 1])) n--;
    return n;
}

/* One value where observations are needed is most often a computed range that the office cut. */
static status observations_of(const char *name, const value *v, const char *wanted,
                              const table **t, report *r)
{
    value one = single_of(v);
    if (one.is == IS_NUMBER && fault_in(one.number) == OK)
        return refuse(r, BAD_KIND, "%s is one value, but must be %s (a computed range reaches a "
                      "function whole only in a formula entered with Ctrl+Shift+Enter)", name,
                      wanted);
    return table_of(name, v, wanted, t, r);
}

status read_column(const char *name, const value *v, argument *a, report *r)
{
    const table *t;
    status s = observations_of(name, v, "one column or one row", &t, r);
    if (s != OK) return s;
    if (t->rows > 1 && t->cols > 1)
        return refuse(r, BAD_KIND, "%s is %zu x %zu cells, but must be one column or one row", name,
                      t->rows, t->cols);
    a->header = t->cols == 1 && header_in(t);
    s = check_numbers(name, t, a->header, r);
    if (s != OK) return s;
    a->data = (samples){ t->rows * t->cols - a->header, 1, t->at + a->header, NULL };
    if (a->header && !(a->data.names = names_in_row(t, 0, 0, 1, r))) return NO_MEMORY;
    a->filled = filled_column(&a->data);
    return a->filled ? OK : refuse(r, TOO_FEW, "%s has no observations", name);
}

static status refuse_gap(const char *name, const table *t, size_t first, size_t rows, report *r)
{
    for (size_t i = first; i < first + rows; i++)
        for (size_t j = 0; j < t->cols; j++)
            if (empty_at(t, i, j))
                return refuse(r, BAD_KIND, "%s has an empty cell in row %zu, column %zu", name,
                              i + 1, j + 1);
    return OK;
}

status read_data(const char *name, const value *v, bool gaps_allowed, argument *a, report *r)
{
    const table *t;
    status s = observations_of(name, v, "a range, one observation a row", &t, r);
    if (s != OK) return s;
    a->header = header_in(t);
    s = check_numbers(name, t, a->header, r);
    if (s != OK) return s;
    size_t filled = filled_rows(t);
    a->filled = filled > a->header ? filled - a->header : 0;
    if (!a->filled) return refuse(r, TOO_FEW, "%s has no observations", name);
    size_t rows = gaps_allowed ? t->rows - a->header : a->filled;
    if (!gaps_allowed && (s = refuse_gap(name, t, a->header, rows, r)) != OK) return s;
    s = turned(t, a->header, 0, rows, t->cols, &a->data, r);
    if (s != OK) return s;
    if (a->header && !(a->data.names = names_in_row(t, 0, 0, t->cols, r))) return NO_MEMORY;
    return OK;
}

/* The first column of a matrix holds names when it holds no number below the header, and some text.
 */
static bool names_in_column(const table *t, size_t first)
{
    bool text = false;
    for (size_t i = first; i < t->rows; i++) {
        if (!word_at(t, i, 0) && !empty_at(t, i, 0)) return false;
        text = text || word_at(t, i, 0);
    }
    return text;
}

/* Where both are there, the header row and the name column must tell the same lines. */
static status check_sides(const char *name, const table *t, report *r)
{
    for (size_t i = 1; i < t->cols; i++) {
        const char *above = word_at(t, 0, i), *beside = word_at(t, i, 0);
        if (above && beside && !same_word(above, beside))
            return refuse(r, BAD_KIND, "%s is headed \"%s\" in column %zu, but \"%s\" stands "
                          "beside row %zu", name, above, i + 1, beside, i + 1);
    }
    return OK;
}

static status names_of_matrix(const char *name, const table *t, bool header, bool side, samples *m,
                              report *r)
{
    if (!header && !side) return OK;
    status s = header && side ? check_sides(name, t, r) : OK;
    if (s != OK) return s;
    m->names = header ? names_in_row(t, 0, side, m->cols, r)
                      : pool_take(r->pool, m->cols, sizeof *m->names);
    if (!m->names) return NO_MEMORY;
    for (size_t i = 0; !header && i < m->cols; i++)
        m->names[i] = word_at(t, i, 0) ? word_at(t, i, 0) : "";
    return OK;
}

status read_matrix(const value *v, const char *name, samples *m, bool *header, report *r)
{
    value one_cell = single_of(v);
    if (v->is == IS_TABLE && one_cell.is == IS_NUMBER && fault_in(one_cell.number) == OK) {
        *header = false;
        *m = (samples){ 1, 1, v->table.at, NULL };
        return check_numbers(name, &v->table, 0, r);
    }
    const table *t;
    status s = table_of(name, v, "a square range of numbers", &t, r);
    if (s != OK) return s;
    size_t rows = filled_rows(t);
    if (!rows) return refuse(r, BAD_KIND, "%s is empty", name);
    *header = rows > 1 && header_in(t);
    bool side = t->cols > 1 && names_in_column(t, *header);
    size_t d = t->cols - side;
    if (rows - *header != d)
        return refuse(r, BAD_KIND, "%s is %zu x %zu cells of numbers, but must be square", name,
                      rows - *header, d);
    *m = (samples){ .rows = d, .cols = d, .at = pool_take(r->pool, d * d, sizeof *m->at) };
    if (!m->at) return NO_MEMORY;
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j < d; j++) {
            double *x = m->at + j * d + i;
            s = number_at(name, t, i + *header, j + side, x, r);
            if (s != OK) return s;
            if (is_gap(*x))
                return refuse(r, BAD_KIND, "%s has an empty cell in row %zu, column %zu (MIRROR "
                              "makes a full matrix of a triangle)", name, i + *header + 1,
                              j + side + 1);
        }
    return names_of_matrix(name, t, *header, side, m, r);
}

status read_numbers(const char *name, const value *v, argument *a, report *r)
{
    value one = single_of(v);
    if (one.is == IS_TEXT)
        return refuse(r, BAD_KIND, "%s is the text \"%s\", but must be a number", name, one.text);
    if (one.is == IS_NOTHING) return refuse(r, BAD_KIND, "%s is empty, but must be a number", name);
    if (one.is == IS_NUMBER) {
        if (fault_in(one.number) != OK)
            return refuse(r, fault_in(one.number), "%s is an error", name);
        if (!isfinite(one.number))
            return refuse(r, OUT_OF_DOMAIN, "%s is not a finite number", name);
        a->number = one.number;
        a->data = (samples){ 1, 1, &a->number, NULL };
        return OK;
    }
    const table *t = &v->table;
    a->header = t->rows > 1 && header_in(t);
    status s = check_numbers(name, t, a->header, r);
    if (s == OK) s = turned(t, a->header, 0, t->rows - a->header, t->cols, &a->data, r);
    if (s != OK || !a->header) return s;
    a->data.names = names_in_row(t, 0, 0, t->cols, r);
    return a->data.names ? OK : NO_MEMORY;
}
