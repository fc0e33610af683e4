/* params.h - parameters that several functions take, for their entries in the tables. */
#ifndef PARAMS_H
#define PARAMS_H

#include "function.h"

/* x and y */
#define PAIR_OF_COLUMNS \
    { .name = "x", .help = "One column or row of observations.", .kind = COLUMN }, \
    { .name = "y", .help = "As many observations of another line.", .kind = COLUMN, .fits = "x" }

#define MODEL_BLOCK \
    { .name = "model", .help = "A model block, as MODEL returns it.", .kind = MODEL }

#define OBSERVATIONS \
    { .name = "data", .help = "Observations in rows, lines in columns.", .kind = DATA }

#define GAPS_OF_PAIRS \
    { .name = "gaps", .help = "pairs: each pair uses the rows it has; rows: complete rows only.", \
      .kind = WORD, .words = "pairs rows", .optional = true }

/* coverage, method and seed; the words are in the order of band_method in src/tau_band.h */
#define BAND_SETTINGS(what) \
    { .name = "coverage", .help = "How often the interval is to hold the true " what ".", \
      .kind = NUMBER, .low = 0, .high = 1, .open = BOTH_OPEN, .optional = true, \
      .otherwise = 0.95 }, \
    { .name = "method", .help = "free, binormal, fisherz, jackknife or bootstrap.", \
      .kind = WORD, .words = "free binormal fisherz jackknife bootstrap", .optional = true }, \
    { .name = "seed", .help = "For the bootstrap: a whole number from 0.", .kind = WHOLE, \
      .low = 0, .high = 9007199254740992, .optional = true, .otherwise = 1 }

#endif
