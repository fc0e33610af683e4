/* chi_square_score.h - the chi-square whose probability has a given normal score, at any depth.
 *
 * student.h has the same from a table within |z| <= 8.24, as far as draws go. */
#ifndef CHI_SQUARE_SCORE_H
#define CHI_SQUARE_SCORE_H

#include "student.h"

#include <stdbool.h>

/* Segments on either side beyond the table, each 2^(1/4) times as far out as the one before. */
enum { FAR_SEGMENTS = 160 };

/* For one number of degrees of freedom. One thread at a time: a segment is filled when a score
 * first falls into it. */
struct chi_square_score {
    struct student near;
    double log_df, log_k;                    /* K as in student.c */
    bool *filled;
    double (*far)[STUDENT_TERMS];            /* below, then above */
};

/* df > 0 and finite, else OUT_OF_DOMAIN; NO_MEMORY. */
status chi_square_score_prepare(struct chi_square_score *s, double df, pool *p);

/* log sqrt(chi-square/df) where the probability is Phi(z), for |z| to 1e12; error below 1e-12 of
 * the larger of itself and 1. */
double log_chi_square_scale(struct chi_square_score *s, double z);

#endif
