/* shape.c - the header row of a range goes along with what is made of it. */
#include "shape.h"
#include "read.h"

static status copy_header(const argument *a, size_t cols, value *out, report *r)
{
    status s = OK;
    for (size_t j = 0; s == OK && j < cols; j++) {
        const char *word = word_at(&a->raw->table, 0, j);
        if (word) s = put_text(r, out, 0, j, word);
    }
    return s;
}

status table_like(const argument *a, const samples *from, value *out, report *r)
{
    status s = new_table(r, from->rows + a->header, from->cols, out);
    if (s == OK && a->header) s = copy_header(a, from->cols, out, r);
    for (size_t i = 0; s == OK && i < from->rows; i++)
        for (size_t j = 0; j < from->cols; j++) {
            double x = from->at[j * from->rows + i];
            put_number(out, i + a->header, j, is_gap(x) && fault_in(x) == OK ? gap() : x);
        }
    return s;
}
