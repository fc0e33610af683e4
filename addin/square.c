/* square.c - squares of cells that need not be full. */
#include "square.h"
#include "read.h"
#include "words.h"

/* A single cell is a square too, unlike where observations are wanted. */
static status cells_of(const char *name, const value *v, const table **t, report *r)
{
    if (v->is == IS_TABLE) {
        *t = &v->table;
        return OK;
    }
    return table_of(name, v, "a square range", t, r);
}

/* A frame may hold names and blanks only: a number in it would be dropped unseen. */
static status check_frame(const square *s, report *r)
{
    const table *t = s->cells;
    for (size_t i = 0; i < t->rows; i++)
        for (size_t j = 0; j < t->cols; j++) {
            if (i >= s->row && j >= s->column) continue;
            if (word_at(t, i, j) || empty_at(t, i, j)) continue;
            return refuse(r, BAD_KIND, "%s is %zu x %zu cells, of which that in row %zu, column "
                          "%zu must be a name or empty", s->name, t->rows, t->cols, i + 1,
                          j + 1);
        }
    return OK;
}

status square_of_size(const char *name, const value *v, size_t d, square *found, report *r)
{
    const table *t;
    status s = cells_of(name, v, &t, r);
    if (s) return s;
    if (t->rows < d || t->rows > d + 1 || t->cols < d || t->cols > d + 1)
        return refuse(r, BAD_KIND, "%s is %zu x %zu cells, but must be %zu x %zu like the matrix",
                      name, t->rows, t->cols, d, d);
    *found = (square){ name, t, t->rows - d, t->cols - d, d };
    return check_frame(found, r);
}

static bool number_in_row(const table *t, size_t row)
{
    for (size_t j = 0; j < t->cols; j++)
        if (!word_at(t, row, j) && !empty_at(t, row, j)) return true;
    return false;
}

static bool number_in_first_column(const table *t)
{
    for (size_t i = 0; i < t->rows; i++)
        if (!word_at(t, i, 0) && !empty_at(t, i, 0)) return true;
    return false;
}

/* header row and name column around a square */
static bool framed(const table *t)
{
    if (!header_in(t) || number_in_first_column(t)) return false;
    for (size_t i = 1; i < t->rows; i++)
        if (number_in_row(t, i)) return true;
    return false;
}

status square_of_any_size(const char *name, const value *v, square *found, report *r)
{
    const table *t;
    status s = cells_of(name, v, &t, r);
    if (s) return s;
    size_t header = t->rows > t->cols, names = t->cols > t->rows;
    if (t->rows == t->cols && framed(t)) header = names = 1;
    if (t->rows - header != t->cols - names || t->rows == header)
        return refuse(r, BAD_KIND, "%s is %zu x %zu cells, but must be square", name, t->rows,
                      t->cols);
    *found = (square){ name, t, header, names, t->rows - header };
    return check_frame(found, r);
}

static status check_name(const square *s, size_t row, size_t column, size_t line,
                         const char **names, const char *other, report *r)
{
    const char *own = word_at(s->cells, row, column);
    if (!own || !*names[line] || same_word(own, names[line])) return OK;
    return refuse(r, BAD_KIND, "%s names line %zu \"%s\" in row %zu, column %zu, but %s names it "
                  "\"%s\"", s->name, line + 1, own, row + 1, column + 1, other, names[line]);
}

status check_names(const square *s, const char **names, const char *other, report *r)
{
    status done = OK;
    for (size_t i = 0; !done && i < s->d; i++) {
        if (s->row) done = check_name(s, 0, s->column + i, i, names, other, r);
        if (!done && s->column) done = check_name(s, s->row + i, 0, i, names, other, r);
    }
    return done;
}

static value cell_at(const square *s, size_t i, size_t j)
{
    const table *t = s->cells;
    const char *word = word_at(t, s->row + i, s->column + j);
    double x = t->at[(s->row + i) * t->cols + s->column + j];
    if (word) return (value){ .is = IS_TEXT, .text = word };
    return marks_gap(x) ? (value){ .is = IS_NOTHING } : (value){ .is = IS_NUMBER, .number = x };
}

static bool same_cell(const value *a, const value *b)
{
    if (a->is != b->is) return false;
    return a->is == IS_TEXT ? same_word(a->text, b->text) : a->number == b->number;
}

status cell_or_opposite(const square *s, size_t i, size_t j, value *cell, report *r)
{
    value here = cell_at(s, i, j), opposite = cell_at(s, j, i);
    *cell = here.is == IS_NOTHING ? opposite : here;
    if (cell->is == IS_NUMBER && fault_in(cell->number) != OK)
        return refuse(r, fault_in(cell->number), "%s has an error in row %zu, column %zu", s->name,
                      s->row + i + 1, s->column + j + 1);
    if (here.is == IS_NOTHING || opposite.is == IS_NOTHING || same_cell(&here, &opposite))
        return OK;
    return refuse(r, BAD_KIND, "%s has different entries in row %zu, column %zu and in the "
                  "opposite cell", s->name, s->row + i + 1, s->column + j + 1);
}
