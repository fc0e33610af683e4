/* words.h - texts as the functions understand them: UTF-8, letters of any case
 * alike in ASCII, blanks around them of no account.
 */
#ifndef WORDS_H
#define WORDS_H

#include "../src/memory.h"

#include <stdbool.h>
#include <stdarg.h>
#include <stddef.h>

/* same word, whatever the case and the blanks around it */
bool same_word(const char *a, const char *b);

/* the text behind a prefix in lower case, whose letters may be of any case; the whole text without
 * it */
const char *without_prefix(const char *text, const char *prefix);

/* the place of a word in a list separated by single blanks, or -1 */
int word_in(const char *list, const char *word);

/* "12", "3,5", "1.234,5", "-2e3", "7 %": what a person would take for a number */
bool reads_as_number(const char *text);

/* "motor", "Q1", "5 EUR", but no number, date, sum of money or lone sign: a text with a letter */
bool reads_as_name(const char *text);

/* lower case, single blanks, none around; NULL when there is no memory */
char *tidy_words(pool *p, const char *text);

/* "a, b or c" from "a b c" */
char *listed(pool *p, const char *list);

/* "" for one, else "s" */
const char *plural(size_t n);

/* formats into at most n bytes; knows %s %zu %d %g %%; see report.h */
void format_text(char *to, size_t n, const char *format, va_list rest);

#endif
