/* tau_scores.h - what each row contributes to Kendall's tau, and the standard error
 * that follows from it.
 */
#ifndef TAU_SCORES_H
#define TAU_SCORES_H

#include "tau.h"

/* One for each row that both columns have, in the order of x. */
struct tau_scores {
    size_t rows;
    double *score;           /* concordant minus discordant partners of this row */
    double *differ_x;        /* partners that do not tie with it in x */
    double *differ_y;
    struct tau_counts counts;
};

/* What scoring needs; one serves any number of pairs of up to `rows` rows. */
struct score_room;

status new_score_room(size_t rows, struct score_room **room, pool *p);

/* The scores of two ranked columns of the same length, in O(n log n), all exact. They lie in the
 * room and are overwritten by the next call. */
void tau_scores_ranked(const ranking *x, const ranking *y, struct tau_scores *scores,
                       struct score_room *room);

/* Replaces each score by the row's influence: its partners' mean departure from tau, times
 * their number. Without ties that is score - (rows - 1) tau; with ties it is the same for
 * the ratio that tau-b is, to first order. They sum to 0. TOO_FEW, NO_VARIATION as tau_b(). */
status tau_influence(struct tau_scores *scores);

/* The standard error of tau that needs no assumption on the distribution: the consistent estimate
 * of Fligner & Rust (1982), as in Hollander & Wolfe (1999, 8.3). With ties, the same estimate on
 * the influence values of tau-b. Overwrites the scores. TOO_FEW under three rows; NO_VARIATION as
 * tau_b(). */
status tau_error_free(struct tau_scores *scores, double *error);

/* The standard error by leaving out each row in turn (jackknife; Quenouille 1956, Tukey 1958), of
 * tau-b with ties. TOO_FEW under three rows; NO_VARIATION when leaving out some row leaves a
 * constant column. */
status tau_error_jackknife(const struct tau_scores *scores, double *error);

#endif
