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
 * 512. */
size_t elliptical_box_points(const struct elliptical_points *m);
bool elliptical_box_halve(struct elliptical_points *m);

/* P(X_1 <= x_1, ..., X_d <= x_d) and its standard error by quasi-Monte Carlo; x are the normal
 * scores, or for t the points where a column is sqrt(df / chi-square) times a normal number.
 * OUT_OF_DOMAIN without elliptical_box_prepare(). Source: Genz (1992), Genz & Bretz (2002). */
status elliptical_box(const struct elliptical_points *m, const double *x, double *value,
                      double *error);

/* ---- grouped_points.c, grouped_pair.c: several df, one uniform driving all chi-squares ---- */

struct grouped_points;

status grouped_prepare(struct elliptical_points *m, pool *p);

/* The points where the columns are sqrt(df/chi-square) times a normal number. */
void grouped_scores(const struct elliptical_points *m, const double *u, double *x);

/* Integrals over the uniform, for every u within (0;1). NOT_SETTLED where correlations within about
 * 1e-9 of -1 or 1 leave a peak too narrow to be found. */
status grouped_pair_cdf(const struct elliptical_points *m, const double *u, double *value);
status grouped_log_density(const struct elliptical_points *m, const double *u, double *value);
status grouped_conditional(const struct elliptical_points *m, const double *u, double *w);
status grouped_from_conditional(const struct elliptical_points *m, const double *w, double *u);

/* About how long all of them took since grouped_prepare(), counted, not measured. Beyond 30 s they
 * are NOT_SETTLED. */
double grouped_seconds(const struct elliptical_points *m);

/* for elliptical_box(): sqrt(chi-square / df) of every column at the uniform v */
void grouped_scales(const struct elliptical_points *m, double v, double *scale);

#endif
