/* family_rows.h - what the tests of families share: rows of published values. */
#ifndef TESTS_FAMILY_ROWS_H
#define TESTS_FAMILY_ROWS_H

#include "table.h"

#include "../../src/family.h"

/* what the files of check values call a family */
static inline const family *family_in_row(const struct csv *t, size_t row)
{
    const char *word = csv_text(t, row, "family");
    if (!strcmp(word, "normal")) word = "gaussian";
    if (!strcmp(word, "student_t")) word = "t";
    return family_named(word);
}

/* "1e-12 relative" or "1e-14" */
static inline double allowed(const struct csv *t, size_t row, double want)
{
    double tolerance = csv_number(t, row, "tolerance");
    assert_true(tolerance > 0 && tolerance < 1e-9);
    return strstr(csv_text(t, row, "tolerance"), "relative") ? tolerance * fabs(want) : tolerance;
}

/* What tau loses when theta, in decimals, is rounded to a double: near theta = 1 it is more than
 * the tolerance, but known, as the slope there is (1 for gumbel, 2 pi^2/3 - 6 for joe). */
static inline double lost_to_rounding(const char *theta, double slope)
{
    if (strncmp(theta, "1.0", 3)) return 0;
    char excess[64];
    snprintf(excess, sizeof excess, "%s", theta);
    *excess = '0';
    return slope * (strtod(excess, NULL) - (strtod(theta, NULL) - 1));
}

/* Whether independence is at theta = 1. */
static inline bool about_one(const family *f)
{
    double theta;
    return f->theta_from_tau(0, &theta) == OK && theta == 1;
}

#endif
