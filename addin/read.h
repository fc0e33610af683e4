/* read.h - reading arguments: from values as they came to what a parameter's
 * kind promises. Each refuses with a sentence that names the parameter, and row
 * and column counted from the first row of the range.
 */
#ifndef READ_H
#define READ_H

#include "function.h"

/* Any kind; see enum kind. The fields of `a` that the kind does not use are zero. `earlier` is the
 * argument that this one has to fit, or NULL: lengths, lines and names must agree with it. */
status read_argument(const param *p, const value *v, const argument *earlier, argument *a,
                     report *r);

/* ---- read_table.c: ranges of numbers ---- */

/* One column or row; `filled` counts the rows up to the last that is not empty. */
status read_column(const char *name, const value *v, argument *a, report *r);

/* Observations in rows. Without gaps, the empty rows at the end are left out of the data. */
status read_data(const char *name, const value *v, bool gaps_allowed, argument *a, report *r);

/* A square of numbers, with or without a header row and a name column. */
status read_matrix(const value *v, const char *name, samples *m, bool *header, report *r);

/* A number, or a table of numbers and gaps below a header row or without one. */
status read_numbers(const char *name, const value *v, argument *a, report *r);

/* ---- read_blocks.c: labelled blocks ---- */

status read_margins(const char *name, const value *v, struct margins *m, report *r);

/* The names of lines as known from an earlier argument; NULL where there are none. */
struct line_names {
    size_t lines;
    const char **names;
};

/* `known`, for lines that have no name in the block itself, may be NULL. */
status read_terms(const char *name, const value *v, const struct line_names *known, struct terms *t,
                  report *r);
status read_aggregate(const char *name, const value *v, struct terms *t, report *r);
status read_settings(const param *p, const value *v, const setting **settings, report *r);

/* ---- read_cells.c: single cells and what several readers need ---- */

/* the text in a cell, or NULL */
const char *word_at(const table *t, size_t row, size_t col);

/* true for a cell that holds nothing */
bool empty_at(const table *t, size_t row, size_t col);

/* true when the first row holds names and nothing else but empty cells: see reads_as_name() */
bool header_in(const table *t);

/* rows up to the last that is not empty */
size_t filled_rows(const table *t);

/* Refuses a text, an error, an infinite or undefined number; an empty cell gives gap(). */
status number_at(const char *name, const table *t, size_t row, size_t col, double *x, report *r);

/* Why a value is no table, for a parameter that needs `wanted` ("a column", "a range"); OK if it is
 * one. */
status table_of(const char *name, const value *v, const char *wanted, const table **t, report *r);

/* Where both name the n lines, the names must be the same, in order; an empty one is none, and
 * either list may be NULL. */
status check_same_names(const char *name, const char **names, const char *other,
                        const char **theirs, size_t n, report *r);

/* The first row's texts as names, an empty cell as ""; NULL when there is no memory. */
const char **names_in_row(const table *t, size_t row, size_t from, size_t n, report *r);

/* The single cell that a value is: a number, text or 1 x 1 table becomes a plain number, text or
 * nothing. */
value single_of(const value *v);

#endif
