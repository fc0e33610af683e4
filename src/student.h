/* student.h - Student's t and the chi-square that drives it, for any number of degrees
 * of freedom, from tables that are built in a fraction of a millisecond and have the same bits
 * everywhere.
 */
#ifndef STUDENT_H
#define STUDENT_H

#include "memory.h"
#include "random.h"
#include "status.h"

enum { STUDENT_TERMS = 12 };

/* The tables for one number of degrees of freedom. Each row is a polynomial on one segment. */
struct student {
    double df;
    double per_unit;                         /* segments of `tail` to a unit of w, see student.c */
    size_t segments;
    double (*tail)[STUDENT_TERMS];           /* P(T > t) */
    double (*log_chi_square)[STUDENT_TERMS]; /* by the normal score of its probability */
};

/* Builds the tables from the pool. df > 0 and finite, else OUT_OF_DOMAIN; NO_MEMORY. */
status student_tables(struct student *s, double df, pool *p);

/* Only the table of the chi-square, of any df > 0 up to 1e300; student_probability() may not be
 * called. */
status chi_square_table(struct student *s, double df, pool *p);

/* P(T <= x), relative error below 1e-12 (df >= 0.05) wherever it is above 2^-53; smaller values are
 * answered with 2^-53 and those near 1 with 1 - 2^-53. */
double student_probability(const struct student *s, double x);

/* The log of the chi-square quantile at the probability Phi(z), |z| < 8.25; error below 1e-11 of
 * the standard deviation of the logarithm for |z| <= 7. */
double log_chi_square(const struct student *s, double z);

/* log_chi_square() for ROWS_AT_ONCE rows */
void log_chi_squares_of_rows(const struct student *s, const double *restrict z,
                             double *restrict log_chi);

/* For ROWS_AT_ONCE rows x becomes P(T <= x / sqrt(chi / df)), kept within [2^-53; 1 - 2^-53] */
void student_probabilities_of_rows(const struct student *s, const double *restrict log_chi,
                                   double *restrict x);

#endif
