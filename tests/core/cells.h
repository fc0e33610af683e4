/* cells.h - arguments for tests of the seam, written as a sheet shows them:
 *
 *     cells(p, "motor,cargo; 1,2; ,0.5")
 *
 * Rows end with a semicolon, columns with a comma; an empty cell is a gap, what C reads as a number
 * is one, "..." in quotes is text whatever it holds, and all else is text.
 */
#ifndef TESTS_CELLS_H
#define TESTS_CELLS_H

#include "table.h"

#include "../../addin/function.h"
#include "../../addin/report.h"

static inline value number(double x)
{
    return (value){ .is = IS_NUMBER, .number = x };
}

static inline value text(const char *s)
{
    return (value){ .is = IS_TEXT, .text = s };
}

static inline value nothing(void)
{
    return (value){ .is = IS_NOTHING };
}

/* puts one cell's content, of n bytes without the blanks around it, into its place */
static inline void fill_cell(report *r, value *v, size_t row, size_t col, const char *s, size_t n)
{
    char *content = pool_take(r->pool, n + 1, 1), *end;
    memcpy(content, s, n);
    content[n] = 0;
    if (n >= 2 && *content == '"') {
        content[n - 1] = 0;
        put_text(r, v, row, col, content + 1);
        return;
    }
    double x = strtod(content, &end);
    if (n && !*end)
        put_number(v, row, col, x);
    else if (n)
        put_text(r, v, row, col, content);
}

static inline value cells(pool *p, const char *s)
{
    report r = { .pool = p };
    size_t rows = 1, cols = 1;
    for (const char *c = s; *c; c++) rows += *c == ';';
    for (const char *c = s; *c && *c != ';'; c++) cols += *c == ',';
    value v;
    assert_int_equal(new_table(&r, rows, cols, &v), OK);
    for (size_t i = 0; i < rows; i++)
        for (size_t j = 0; j < cols; j++) {
            s += strspn(s, " ");
            size_t n = strcspn(s, ",;"), used = n;
            while (used && s[used - 1] == ' ') used--;
            fill_cell(&r, &v, i, j, s, used);
            assert_int_equal(s[n], j + 1 < cols ? ',' : i + 1 < rows ? ';' : 0);
            s += n + 1;
        }
    return v;
}

#endif
