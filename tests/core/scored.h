/* scored.h - the scores of a pair of plain columns, for tests. */
#ifndef TESTS_SCORED_H
#define TESTS_SCORED_H

#include "pairs.h"

#include "../../src/tau_scores.h"

/* They live in the pool. */
static inline struct tau_scores scores_of(const double *x, const double *y, size_t n, pool *p)
{
    ranking *r;
    struct rank_room *sorting;
    struct score_room *scoring;
    struct tau_scores s;
    assert_int_equal(new_rankings(n, 2, &r, p), OK);
    assert_int_equal(new_rank_room(n, &sorting, p), OK);
    assert_int_equal(new_score_room(n, &scoring, p), OK);
    rank_values(x, n, &r[0], sorting);
    rank_values(y, n, &r[1], sorting);
    tau_scores_ranked(&r[0], &r[1], &s, scoring);
    return s;
}

#endif
