/* value.h - what crosses the seam between the office and the functions: flat C
 * data that carries no office type.
 */
#ifndef VALUE_H
#define VALUE_H

#include "../src/status.h"

#include <stdbool.h>
#include <stddef.h>

/* Cells, row by row. A cell with text has a word; a gap and an error are marked
 * in the number, see below. */
typedef struct {
    size_t rows, cols;
    double *at;
    const char **words; /* NULL when no cell holds text; else NULL where a cell holds none */
} table;

typedef struct {
    enum { IS_NOTHING, IS_NUMBER, IS_TEXT, IS_TABLE } is; /* nothing: left out */
    double number;
    const char *text; /* UTF-8 */
    table table;
} value;

/* An empty cell: a NaN of our own, that no arithmetic yields. In a result it shows as "". */
double gap(void);
bool marks_gap(double x);

/* A cell that shows an error, and the status in it (OK for every other number). */
double fault(status s);
status fault_in(double x);

#endif
