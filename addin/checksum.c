/* checksum.c - FNV-1a over the arguments, whatever the machine.
 *
 * Numbers count with fifteen significant digits, which is what the office writes into a file: a
 * workbook that is saved and opened again gives the same checksum.
 */
#include "checksum.h"

#include <math.h>
#include <stdio.h>

enum { CELL_EMPTY, CELL_NUMBER, CELL_TEXT };

static uint64_t add_byte(uint64_t h, unsigned char byte)
{
    return (h ^ byte) * UINT64_C(0x100000001b3);
}

static uint64_t add_word(uint64_t h, uint64_t word)
{
    for (int i = 0; i < 8; i++) h = add_byte(h, (unsigned char)(word >> (8 * i)));
    return h;
}

/* Digits and signs only: the decimal point depends on the locale. */
static uint64_t add_number(uint64_t h, double number)
{
    char digits[32];
    snprintf(digits, sizeof digits, "%.14e", number == 0 ? fabs(number) : number);
    for (const char *s = digits; *s; s++)
        if ((*s >= '0' && *s <= '9') || *s == '-' || *s == '+' || *s == 'e')
            h = add_byte(h, (unsigned char)*s);
    return add_byte(h, 0);
}

static uint64_t add_cell(uint64_t h, const char *text, double number)
{
    if (text && *text) {
        h = add_byte(h, CELL_TEXT);
        for (; *text; text++) h = add_byte(h, (unsigned char)*text);
        return add_byte(h, 0);
    }
    if (text || marks_gap(number)) return add_byte(h, CELL_EMPTY);
    return add_number(add_byte(h, CELL_NUMBER), number);
}

static uint64_t add_value(uint64_t h, const value *v)
{
    const table *t = &v->table;
    bool is_table = v->is == IS_TABLE;
    h = add_word(h, is_table ? t->rows : 1);
    h = add_word(h, is_table ? t->cols : 1);
    if (v->is == IS_NUMBER) return add_cell(h, NULL, v->number);
    if (v->is == IS_TEXT) return add_cell(h, v->text, 0);
    if (!is_table) return add_byte(h, CELL_EMPTY);
    for (size_t i = 0; i < t->rows * t->cols; i++)
        h = add_cell(h, t->words ? t->words[i] : NULL, t->at[i]);
    return h;
}

uint64_t checksum_of(const value *given, size_t n)
{
    uint64_t h = UINT64_C(0xcbf29ce484222325);
    while (n > 0 && given[n - 1].is == IS_NOTHING) n--;
    for (size_t i = 0; i < n; i++) h = add_value(h, given + i);
    return h;
}

const char *checksum_text(const value *given, size_t n, pool *p)
{
    uint64_t h = checksum_of(given, n);
    char digits[17] = { 0 };
    for (int i = 15; i >= 0; i--, h >>= 4) digits[i] = "0123456789abcdef"[h & 15];
    return pool_text(p, digits);
}
