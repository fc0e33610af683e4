/* report.c - sentences and result tables. */
#include "report.h"
#include "words.h"

#include <math.h>
#include <string.h>

enum { MOST_CELLS = 20000000, MOST_ROWS = 1048576, LONGEST_TEXT = 1024 };

status refuse(report *r, status s, const char *format, ...)
{
    if (*r->why) return s;
    va_list rest;
    va_start(rest, format);
    format_text(r->why, sizeof r->why, format, rest);
    va_end(rest);
    return s;
}

void remark(report *r, const char *format, ...)
{
    size_t at = strlen(r->facts);
    if (at && at + 2 < sizeof r->facts) {
        memcpy(r->facts + at, "; ", 3);
        at += 2;
    }
    va_list rest;
    va_start(rest, format);
    format_text(r->facts + at, sizeof r->facts - at, format, rest);
    va_end(rest);
}

status within_time(double seconds, size_t n, const char *what, report *r)
{
    if (seconds <= LONGEST_WAIT) return OK;
    return refuse(r, OUT_OF_DOMAIN, "%zu %s%s of this model would take about %g s%s", n, what,
                  plural(n), round(seconds), n > 1 ? ": ask for fewer at a time" : "");
}

char *text_from(pool *p, const char *format, ...)
{
    char text[LONGEST_TEXT];
    va_list rest;
    va_start(rest, format);
    format_text(text, sizeof text, format, rest);
    va_end(rest);
    return pool_text(p, text);
}

status new_table(report *r, size_t rows, size_t cols, value *out)
{
    if (rows > MOST_ROWS)
        return refuse(r, OUT_OF_DOMAIN,
                      "the result would have %zu rows, more than the 1,048,576 of a sheet", rows);
    if (cols && rows > MOST_CELLS / cols)
        return refuse(r, OUT_OF_DOMAIN,
                      "the result would have %zu rows and %zu columns, more than 20 million cells",
                      rows, cols);
    double *at = pool_take(r->pool, rows * cols, sizeof *at);
    if (!at) return NO_MEMORY;
    for (size_t i = 0; i < rows * cols; i++) at[i] = gap();
    *out = (value){ .is = IS_TABLE, .table = { rows, cols, at, NULL } };
    return OK;
}

status put_text(report *r, value *out, size_t row, size_t col, const char *text)
{
    table *t = &out->table;
    if (!t->words) t->words = pool_take_zeroed(r->pool, t->rows * t->cols, sizeof *t->words);
    if (!t->words) return NO_MEMORY;
    t->words[row * t->cols + col] = text;
    return OK;
}
