/* words.c - comparing, listing and formatting texts, the same in every locale. */
#include "words.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static bool is_blank(char c)
{
    return c == ' ' || c == '\t' || c == '\n' || c == '\r';
}

static char lower(char c)
{
    return c >= 'A' && c <= 'Z' ? (char)(c + 32) : c;
}

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

static const char *trimmed(const char *s, size_t *length)
{
    while (is_blank(*s)) s++;
    size_t n = strlen(s);
    while (n && is_blank(s[n - 1])) n--;
    *length = n;
    return s;
}

static bool same_letters(const char *a, const char *b, size_t n)
{
    for (size_t i = 0; i < n; i++)
        if (lower(a[i]) != lower(b[i])) return false;
    return true;
}

bool same_word(const char *a, const char *b)
{
    size_t n, m;
    a = trimmed(a, &n);
    b = trimmed(b, &m);
    return n == m && same_letters(a, b, n);
}

const char *without_prefix(const char *text, const char *prefix)
{
    size_t n = strlen(prefix);
    return strlen(text) >= n && same_letters(text, prefix, n) ? text + n : text;
}

int word_in(const char *list, const char *word)
{
    size_t n;
    word = trimmed(word, &n);
    for (int place = 0; *list; place++) {
        size_t length = strcspn(list, " ");
        if (length == n && same_letters(list, word, n)) return place;
        list += length;
        while (*list == ' ') list++;
    }
    return -1;
}

bool reads_as_number(const char *text)
{
    size_t n;
    const char *s = trimmed(text, &n), *end = s + n;
    bool digits = false;
    if (s < end && (*s == '+' || *s == '-')) s++;
    for (; s < end; s++) {
        if (is_digit(*s))
            digits = true;
        else if (digits && lower(*s) == 'e' && s + 1 < end) {
            if (s[1] == '+' || s[1] == '-') s++;
            if (s + 1 >= end || !is_digit(s[1])) return false;
        } else if (*s != '.' && *s != ',' && *s != '\'' && *s != '%' && !is_blank(*s))
            return false;
    }
    return digits;
}

/* Letters of other scripts count, signs do not: UTF-8 beginning with C2 (no-break space, currency)
 * or E2 (dashes, minus, euro) is a sign. */
bool reads_as_name(const char *text)
{
    for (const char *s = text; *s; s++) {
        unsigned char byte = (unsigned char)*s;
        if (byte == 0xc2 && s[1]) s++;
        else if (byte == 0xe2 && s[1] && s[2]) s += 2;
        else if (byte >= 0x80 || (lower(*s) >= 'a' && lower(*s) <= 'z'))
            return !reads_as_number(text);
    }
    return false;
}

char *tidy_words(pool *p, const char *text)
{
    char *tidy = pool_text(p, text), *to = tidy;
    if (!tidy) return NULL;
    for (const char *s = text; *s; s++) {
        if (!is_blank(*s))
            *to++ = lower(*s);
        else if (to > tidy && to[-1] != ' ')
            *to++ = ' ';
    }
    if (to > tidy && to[-1] == ' ') to--;
    *to = '\0';
    return tidy;
}

char *listed(pool *p, const char *list)
{
    size_t words = 1;
    for (const char *s = list; *s; s++) words += *s == ' ';
    char *text = pool_take(p, strlen(list) + 4 * words + 1, 1), *to = text;
    if (!text) return NULL;
    for (const char *s = list; *s; s++) {
        if (*s != ' ') {
            *to++ = *s;
        } else {
            const char *between = --words == 1 ? " or " : ", ";
            to += strlen(strcpy(to, between));
        }
    }
    *to = '\0';
    return text;
}

const char *plural(size_t n)
{
    return n == 1 ? "" : "s";
}

/* Whole numbers in full, others to six significant digits, with a point whatever the locale; to
 * fifteen where six would show a whole number (0.9999999 is not 1). */
static void number_text(char to[static 32], double x)
{
    bool whole = fabs(x) < 1e15 && x == floor(x);
    snprintf(to, 32, whole ? "%.0f" : "%.6g", x);
    if (!whole && strspn(to, "-0123456789") == strlen(to)) snprintf(to, 32, "%.15g", x);
    char *from = to, *at = to;
    while (*from) {
        if (strchr("+-0123456789einfa", *from)) {
            *at++ = *from++;
        } else {
            *at++ = '.';
            while (*from && !is_digit(*from)) from++;
        }
    }
    *at = '\0';
}

void format_text(char *to, size_t n, const char *format, va_list rest)
{
    size_t at = 0;
    for (const char *f = format; *f; f++) {
        char number[32];
        const char *piece = number;
        if (*f != '%') {
            number[0] = *f;
            number[1] = '\0';
        } else if (*++f == 's') {
            piece = va_arg(rest, const char *);
        } else if (*f == 'g') {
            number_text(number, va_arg(rest, double));
        } else if (*f == 'd') {
            snprintf(number, sizeof number, "%d", va_arg(rest, int));
        } else if (*f == 'z') {
            f++;
            snprintf(number, sizeof number, "%zu", va_arg(rest, size_t));
        } else {
            number[0] = *f;
            number[1] = '\0';
        }
        size_t length = strlen(piece);
        if (at + length >= n) length = n - 1 - at;
        memcpy(to + at, piece, length);
        at += length;
    }
    if (at == n - 1) /* cut off: leave no half letter */
        while (at && (unsigned char)to[at - 1] >= 0x80) at--;
    to[at] = '\0';
}
