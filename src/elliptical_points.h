/* elliptical_points.h - what the normal and the t copula say at points. */
#ifndef ELLIPTICAL_POINTS_H
#define ELLIPTICAL_POINTS_H

#include "evaluate.h"
#include "student.h"

/* Both take the rotation in, by the signs of correlations. */
extern const struct evaluator gaussian_evaluator, t_evaluator;

/* What they keep. */
struct elliptical_points {
    size_t d;
    bool singular, grouped;
    double *matrix, *factor;      /* d x d, of the rotated copula */
    const double *df;             /* NULL for the normal copula */
    double log_constant;          /* of the density */
    struct grouped_points *groups;
    struct student *table;        /* t with one df: of the chi-square, for pairs of t with df + 1 */
    struct box_points *box;       /* for elliptical_box(); NULL if that has no answer */
};

/* A number as a sign and the logarithm of its size, which may lie beyond what a double holds. */
struct signed_log {
    double sign, log_size;
};

/* sqrt(df) sinh(a) */
struct signed_log signed_log_of(double a, double df);

/* Column over sqrt(df/chi-square), kept within +-e^300: there no normal number is. */
double times_scale(struct signed_log x, double log_scale);

/* ---- elliptical_pair.c ---- */

/* P(X <= x, Y <= y) of a normal pair, to 1e-12 relative down to 1e-300 */
double normal_pair_probability(double x, double y, double correlation);

/* The same of a t pair, with x = sqrt(df) sinh(a) and y likewise of b; to 1e-11 relative. `given`
 * is student_tables() of df + 1. */
double student_pair_probability(double a, double b, double correlation, double df,
                                const struct student *given);

/* ---- elliptical_box.c ---- */

/* Makes the points of elliptical_box(), d > 2. NO_MEMORY. */
status elliptical_box_prepare(struct elliptical_points *m, pool *p);

/* How many a probability takes, 32,768 at first; half as many from now on, if there are more than
 * 2,048. */
size_t elliptical_box_points(const struct elliptical_points *m);
bool elliptical_box_halve(struct elliptical_points *m);

/* P(U_1 <= u_1, ..., U_d <= u_d), 0 < u <= 1, and its standard error by quasi-Monte Carlo. Source:
 * Genz (1992), Genz & Bretz (2002), Botev (2017). */
status elliptical_box(const struct elliptical_points *m, const double *u, double *value,
                      double *error);

/* Takes `times` y from the rest, for ROWS_AT_ONCE points. */
void subtract_rows(double *restrict rest, double times, const double *restrict y);

/* ---- grouped_points.c, grouped_pair.c: several df, one uniform driving all chi-squares ---- */

struct grouped_points;

status grouped_prepare(struct elliptical_points *m, pool *p);

/* Integrals over the uniform, for every u within (0;1). NOT_SETTLED where correlations within about
 * 1e-9 of -1 or 1 leave a peak too narrow to be found. */
status grouped_pair_cdf(const struct elliptical_points *m, const double *u, double *value);
status grouped_log_density(const struct elliptical_points *m, const double *u, double *value);
status grouped_conditional(const struct elliptical_points *m, const double *u, double *w);
status grouped_from_conditional(const struct elliptical_points *m, const double *w, double *u);

/* About how long all of them took since grouped_prepare(), counted, not measured. Beyond 30 s they
 * are NOT_SETTLED. */
double grouped_seconds(const struct elliptical_points *m);

#endif
