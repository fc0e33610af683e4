/* function.h - what a cell function is: the one description from which all else
 * follows.
 *
 * Each file of addin/functions/ holds adaptors and a table of these. From the
 * tables come, generated, the interface definition, the configuration of the
 * office, the function reference and the test of every example; and at run time
 * the reading and checking of arguments and the sentences of WHY.
 */
#ifndef FUNCTION_H
#define FUNCTION_H

#include "report.h"
#include "value.h"
#include "../src/copula.h"
#include "../src/distribution.h"
#include "../src/samples.h"
#include "../src/terms.h"

enum { MAX_PARAMS = 12, MAX_EXAMPLES = 4, MAX_SETTINGS = 16 };

/* What a parameter takes. The rules of each kind are in read.c and its
 * neighbours, and stand in the reference for the user. */
typedef enum {
    NUMBER,          /* one number within bounds */
    WHOLE,           /* one whole number within bounds */
    WORD,            /* one word of the list in .words */
    WORDS,           /* several words in one text */
    NUMBERS,         /* a number or a range of them, each within bounds; gaps stay */
    COLUMN,          /* one column or row of observations; header, gaps */
    DATA,            /* observations in rows, lines in columns; header, gaps */
    FULL_DATA,       /* the same without gaps */
    MATRIX,          /* square, numbers in every cell; header row and name column allowed */
    MODEL,           /* a model block */
    MARGINS,         /* one line a row: [name] distribution a b c */
    TERMS,           /* one line a row: excess limit share [name] [with] */
    AGGREGATE,       /* one row: excess limit share */
    SETTINGS,        /* labels and values; the labels known are in .words */
    RAW              /* as it came: the adaptor reads it */
} kind;

enum { LOW_OPEN = 1, HIGH_OPEN = 2, BOTH_OPEN = 3 };

typedef struct {
    const char *name;         /* in lower case, one word or two joined: never change it */
    const char *help;         /* one sentence, for the wizard and the reference */
    kind kind;
    double low, high;         /* bounds of a number; both 0: any finite number */
    int open;                 /* which bounds are excluded */
    bool optional;
    double otherwise;         /* an optional number that is left out */
    const char *words;        /* WORD, WORDS, SETTINGS: what is known, separated by blanks; the
                                 first is taken when an optional word is left out */
    const char *fits;         /* an earlier parameter: as long as that column; for margins and
                                 terms, a row for each line of it, and names that agree */
} param;

/* The parts of a settings block that were given: label k of .words is value[k]. */
typedef struct {
    bool given;
    double number;
    const char *text;
} setting;

/* An argument that was read and checked. Which fields hold depends on the kind. */
typedef struct {
    bool given;               /* false: left out, and the fields hold the default */
    double number;            /* NUMBER, WHOLE */
    size_t word;              /* WORD: its place in .words */
    const char *text;         /* WORDS: lower case, single blanks */
    samples data;             /* COLUMN, DATA, FULL_DATA, NUMBERS; MATRIX, symmetric or not */
    size_t filled;            /* COLUMN, DATA: rows up to the last that is not empty */
    bool header;              /* a header was skipped */
    const copula *model;
    struct margins margins;
    struct terms terms;       /* TERMS, AGGREGATE */
    const setting *settings;
    const value *raw;         /* every kind: the value as it came */
    const param *param;       /* its description */
} argument;

typedef struct {
    const char *formula;      /* without the leading =, bare names: TAU({1;2;3};{1;3;2}) */
    const char *gives;        /* what the cell shows, for several cells the first: a number to
                                 1e-9, a text, or an error */
} example;

typedef struct function {
    const char *name;         /* method of the interface, like tauGrid: never change it */
    const char *group;        /* heading in the reference */
    const char *help;         /* one sentence, for the wizard and the reference */
    const char *detail;       /* for the reference: definitions, special cases, source */
    example examples[MAX_EXAMPLES];
    param params[MAX_PARAMS]; /* up to the first without a name */
    bool costly;              /* worth keeping in the cache of recent results */
    bool rest;                /* the last parameter stands for any number of further values, and
                                 the call takes all of them from the report, unread (WHY) */
    status (*call)(const argument *in, value *out, report *r);
} function;

/* Every file of addin/functions/ defines a table, ended by an entry without a name; the build
 * gathers them into function_tables, ended by NULL. */
extern const function *const function_tables[];

size_t count_params(const function *f);

/* the entry with this name or display name (JOINT.TAU, tau), case ignored; NULL if there is none */
const function *function_named(const char *name);

/* Reads and checks the arguments, calls, and leaves result or sentence. n_in may be smaller than
 * the number of parameters: the rest is left out. Re-entrant. */
status call_function(const function *f, const value *in, size_t n_in, value *out, report *r);

/* Applies g to each number of a NUMBERS argument; gaps and header texts stay in place. A status
 * other than OK goes into the cell, as does a number out of bounds; for a single number the status
 * goes back to the caller. */
status each_number(const argument *a, status (*g)(double x, const void *with, double *y),
                   const void *with, value *out, report *r);

/* A result table from column-wise numbers. */
status table_from(const samples *s, value *out, report *r);

#endif
