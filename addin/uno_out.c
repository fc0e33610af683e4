/* uno_out.c - values as the office takes them.
 *
 * A gap goes out as "": a void inside a matrix looks empty, but the next formula reads it as the
 * number 0. An error is a NaN that carries the office's number for it, alone or inside a matrix.
 */
#include "uno_cells.h"
#include "uno_types.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

static const unsigned error_codes[] = {
    [OK] = 0,
    [BAD_KIND] = 519,            /* #VALUE! */
    [OUT_OF_DOMAIN] = 503,       /* #NUM! */
    [NO_VARIATION] = 532,        /* #DIV/0! */
    [TOO_FEW] = 32767,           /* #N/A */
    [NOT_SETTLED] = 523,         /* Err:523 */
    [NO_MEMORY] = 514,           /* Err:514 */
};

static double error_number(status s)
{
    uint64_t bits = 0x7ff8000000000000u | error_codes[s];
    double x;
    memcpy(&x, &bits, sizeof x);
    return x;
}

double own_number(double x)
{
    if (!isnan(x)) return x;
    uint64_t bits;
    memcpy(&bits, &x, sizeof bits);
    unsigned code = bits & 0xffff;
    if (!code || bits >> 16 != 0x7ff800000000u) return x;
    for (int s = BAD_KIND; s <= NO_MEMORY; s++)
        if (error_codes[s] == code) return fault((status)s);
    return fault(BAD_KIND);
}

/* A number, or the office's error for a fault. */
static double shown(double x)
{
    if (!isnan(x)) return x;
    status s = fault_in(x);
    return s == OK ? x : error_number(s);
}

static void answer_number(uno_Any *ret, double x)
{
    uno_type_any_construct(ret, &x, simple_type(typelib_TypeClass_DOUBLE), NULL);
}

static void answer_text(uno_Any *ret, const char *utf8)
{
    rtl_uString *text = office_text(utf8);
    if (!text) {
        answer_number(ret, error_number(NO_MEMORY));
        return;
    }
    uno_type_any_construct(ret, &text, simple_type(typelib_TypeClass_STRING), NULL);
    rtl_uString_release(text);
}

/* Calc takes a result as a matrix of zeros and puts each text into it by moving all that follows: a
 * million empty rows took it 48 s, and 20,000 take 20 ms. So where more rows than that stand empty
 * at the end, as when whole columns were given, the result ends with its last row that is not
 * empty. */
enum { MOST_EMPTY_ROWS = 20000 };

static bool row_is_empty(const table *t, size_t i)
{
    for (size_t place = i * t->cols; place < (i + 1) * t->cols; place++)
        if ((t->words && t->words[place]) || !marks_gap(t->at[place])) return false;
    return true;
}

static table without_long_tail(const table *t)
{
    table kept = *t;
    while (kept.rows > 1 && row_is_empty(t, kept.rows - 1)) kept.rows--;
    return t->rows - kept.rows > MOST_EMPTY_ROWS ? kept : *t;
}

static bool only_numbers(const table *t)
{
    if (t->words) return false;
    for (size_t i = 0; i < t->rows * t->cols; i++)
        if (marks_gap(t->at[i])) return false;
    return true;
}

static bool fill_numbers(uno_Sequence **row, const double *from, size_t cols)
{
    if (!uno_type_sequence_realloc(row, numbers_type(), (sal_Int32)cols, NULL, NULL)) return false;
    double *to = (double *)(void *)(*row)->elements;
    for (size_t j = 0; j < cols; j++) to[j] = shown(from[j]);
    return true;
}

static bool put_text_any(uno_Any *cell, const char *utf8)
{
    rtl_uString *text = office_text(utf8);
    if (!text) return false;
    uno_type_any_assign(cell, &text, simple_type(typelib_TypeClass_STRING), NULL, NULL);
    rtl_uString_release(text);
    return true;
}

static bool fill_anys(uno_Sequence **row, const table *t, size_t i)
{
    if (!uno_type_sequence_realloc(row, anys_type(), (sal_Int32)t->cols, NULL, NULL)) return false;
    uno_Any *cell = (uno_Any *)(void *)(*row)->elements;
    for (size_t j = 0; j < t->cols; j++) {
        size_t place = i * t->cols + j;
        const char *word = t->words ? t->words[place] : NULL;
        if (!word && marks_gap(t->at[place])) word = "";
        if (word) {
            if (!put_text_any(cell + j, word)) return false;
            continue;
        }
        double x = shown(t->at[place]);
        uno_type_any_assign(cell + j, &x, simple_type(typelib_TypeClass_DOUBLE), NULL, NULL);
    }
    return true;
}

static void answer_table(uno_Any *ret, const table *whole)
{
    table kept = without_long_tail(whole), *t = &kept;
    bool numbers = only_numbers(t);
    uno_type *type = numbers ? number_rows_type() : any_rows_type();
    uno_Sequence *rows = NULL;
    bool ok = uno_type_sequence_construct(&rows, type, NULL, (sal_Int32)t->rows, NULL);
    for (size_t i = 0; ok && i < t->rows; i++) {
        uno_Sequence **row = (uno_Sequence **)(void *)rows->elements + i;
        ok = numbers ? fill_numbers(row, t->at + i * t->cols, t->cols) : fill_anys(row, t, i);
    }
    if (ok) uno_type_any_construct(ret, &rows, type, NULL);
    else answer_number(ret, error_number(NO_MEMORY));
    if (rows) uno_type_destructData(&rows, type, NULL);
}

void answer_any(uno_Any *ret, status s, const value *v)
{
    if (s != OK) {
        answer_number(ret, error_number(s));
        return;
    }
    switch (v->is) {
    case IS_NUMBER:
        if (marks_gap(v->number)) answer_text(ret, "");
        else answer_number(ret, shown(v->number));
        return;
    case IS_TEXT:
        answer_text(ret, v->text);
        return;
    case IS_TABLE:
        if (v->table.rows && v->table.cols) {
            answer_table(ret, &v->table);
            return;
        }
        break;
    case IS_NOTHING:
        break;
    }
    answer_number(ret, error_number(BAD_KIND));       /* the office takes no empty answer */
}
