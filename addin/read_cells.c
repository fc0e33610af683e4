/* read_cells.c - single cells, and what several readers need. */
#include "read.h"
#include "words.h"

#include <math.h>

const char *word_at(const table *t, size_t row, size_t col)
{
    return t->words ? t->words[row * t->cols + col] : NULL;
}

bool empty_at(const table *t, size_t row, size_t col)
{
    return !word_at(t, row, col) && marks_gap(t->at[row * t->cols + col]);
}

bool header_in(const table *t)
{
    if (!t->words) return false;
    bool text = false;
    for (size_t j = 0; j < t->cols; j++) {
        const char *word = word_at(t, 0, j);
        if (word ? !reads_as_name(word) : !marks_gap(t->at[j])) return false;
        text = text || word;
    }
    return text;
}

size_t filled_rows(const table *t)
{
    size_t rows = t->rows;
    for (; rows; rows--)
        for (size_t j = 0; j < t->cols; j++)
            if (!empty_at(t, rows - 1, j)) return rows;
    return 0;
}

status number_at(const char *name, const table *t, size_t row, size_t col, double *x, report *r)
{
    *x = t->at[row * t->cols + col];
    if (isfinite(*x)) return OK;
    const char *word = word_at(t, row, col);
    if (word)
        return refuse(r, BAD_KIND,
                      "%s has the text \"%s\" in row %zu, column %zu, where a number is needed",
                      name, word, row + 1, col + 1);
    if (marks_gap(*x)) return OK;
    if (fault_in(*x) != OK)
        return refuse(r, fault_in(*x), "%s has an error in row %zu, column %zu", name, row + 1,
                      col + 1);
    return refuse(r, OUT_OF_DOMAIN, "%s has no finite number in row %zu, column %zu", name, row + 1,
                  col + 1);
}

status table_of(const char *name, const value *v, const char *wanted, const table **t, report *r)
{
    if (v->is == IS_NOTHING) return refuse(r, BAD_KIND, "%s is missing", name);
    if (v->is == IS_TEXT) {
        if (*v->text)
            return refuse(r, BAD_KIND, "%s is the text \"%s\", but must be %s", name, v->text,
                          wanted);
        return refuse(r, BAD_KIND, "%s is an empty cell, but must be %s", name, wanted);
    }
    if (v->is == IS_NUMBER || (v->table.rows == 1 && v->table.cols == 1)) {
        double x = v->is == IS_NUMBER ? v->number : v->table.at[0];
        if (fault_in(x) != OK) return refuse(r, fault_in(x), "%s is an error", name);
        return refuse(r, BAD_KIND, "%s is one value, but must be %s", name, wanted);
    }
    *t = &v->table;
    return OK;
}

const char **names_in_row(const table *t, size_t row, size_t from, size_t n, report *r)
{
    const char **names = pool_take(r->pool, n, sizeof *names);
    for (size_t j = 0; names && j < n; j++) {
        const char *word = word_at(t, row, from + j);
        names[j] = word ? word : "";
    }
    return names;
}

status check_same_names(const char *name, const char **names, const char *other,
                        const char **theirs, size_t n, report *r)
{
    for (size_t i = 0; names && theirs && i < n; i++)
        if (*names[i] && *theirs[i] && !same_word(names[i], theirs[i]))
            return refuse(r, BAD_KIND, "%s names line %zu \"%s\", but %s names it \"%s\"", name,
                          i + 1, names[i], other, theirs[i]);
    return OK;
}

value single_of(const value *v)
{
    if (v->is == IS_TEXT && !*v->text) return (value){ .is = IS_NOTHING };
    if (v->is != IS_TABLE || v->table.rows != 1 || v->table.cols != 1) return *v;
    const char *word = word_at(&v->table, 0, 0);
    if (word) return (value){ .is = IS_TEXT, .text = word };
    if (marks_gap(v->table.at[0])) return (value){ .is = IS_NOTHING };
    return (value){ .is = IS_NUMBER, .number = v->table.at[0] };
}
