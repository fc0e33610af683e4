/* report.h - what a call leaves behind beside its result: memory, and sentences
 * for JOINT.WHY.
 */
#ifndef REPORT_H
#define REPORT_H

#include "value.h"
#include "../src/memory.h"

typedef struct {
    pool *pool;
    char why[512];      /* what is wrong, one sentence without a full stop */
    char facts[512];    /* what there is to say of a call that went well */
    const value *given; /* the arguments as they came, for checksums */
    size_t n_given;
    const char *cause;  /* of errors in cells of the result, where the usual one is none */
    bool undefined;          /* the result held an undefined number: a defect, for tests */
} report;

/* Says what is wrong and hands the status back: return refuse(r, BAD_KIND, "...").
 * The format knows %s, %zu, %d and %g (six digits, a point in every locale); a sentence names
 * argument, row and column, counted from the first row of the range. The first refusal of a call
 * stands. */
__attribute__((format(printf, 3, 4))) status refuse(report *r, status s, const char *format, ...);

/* Adds a fact, such as "2 rows dropped for gaps"; facts are joined by "; ". */
__attribute__((format(printf, 2, 3))) void remark(report *r, const char *format, ...);

enum { LONGEST_WAIT = 20 };   /* seconds */

/* Refuses what would keep the office waiting for longer than that: so many points, pairs or
 * values (`what`, one of them) of a model. */
status within_time(double seconds, size_t n, const char *what, report *r);

/* The same formatting into a text of the pool's; NULL when there is no memory. */
__attribute__((format(printf, 2, 3))) char *text_from(pool *p, const char *format, ...);

/* A table of gaps for a result. Refuses more than 20 million cells or 1,048,576 rows. */
status new_table(report *r, size_t rows, size_t cols, value *out);

/* Puts a text into a cell of a table made by new_table(). */
status put_text(report *r, value *out, size_t row, size_t col, const char *text);

static inline void put_number(value *out, size_t row, size_t col, double x)
{
    out->table.at[row * out->table.cols + col] = x;
}

/* An undefined number, such as an error that the sample is too small to tell, stays empty. */
static inline void put_known(value *out, size_t row, size_t col, double x)
{
    if (x == x) put_number(out, row, col, x);
}

static inline status answer(value *out, double x)
{
    *out = (value){ .is = IS_NUMBER, .number = x };
    return OK;
}

#endif
