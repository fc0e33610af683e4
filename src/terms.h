/* terms.h - the terms of a cover: what is ceded of the losses of its lines. */
#ifndef TERMS_H
#define TERMS_H

#include "memory.h"
#include "status.h"

#include <stdbool.h>
#include <stddef.h>

/* ceded = share * min(max(loss - excess, 0), limit). limit is INFINITY when there is none.
 *
 * A line that follows another has no excess and limit of its own (0 and INFINITY) and shares as
 * that line does (its share is 1 or the same): ceded = loss * (that line's ceded / that line's
 * loss). */
typedef struct {
    double excess, limit, share;
    size_t with;                 /* 0, or 1 + the line that this one follows */
} term;

struct terms {
    size_t lines;                /* 0 when no terms were given */
    term *of;
    const char **names;          /* or NULL when there were none */
};

/* The terms of a whole cover, checked and ready to apply: see cover_prepare(). */
typedef struct {
    size_t lines;
    const term *of;              /* NULL: lines have no terms; each goes whole to the aggregate,
                                    gains too, or nothing is ceded when there is none */
    const size_t *leader;        /* of each line: the head of the chain it follows, itself when it
                                    follows none */
    const term *aggregate;       /* NULL when there is none */
} cover;

/* Checks the terms of each line: excess >= 0, limit > 0, share in [0;1] and, where a line
 * follows another, that this line exists, is not the line itself, that following ends
 * somewhere, and that the follower has no excess, limit and share that would go unheard. On
 * failure *line is the line at fault and *fault what is wrong: OUT_OF_DOMAIN for excess, limit
 * and share by themselves, else BAD_KIND. */
typedef enum {
    TERMS_FINE, EXCESS_BELOW_ZERO, LIMIT_NOT_POSITIVE, SHARE_OUTSIDE, FOLLOWS_NO_LINE,
    FOLLOWS_ITSELF, FOLLOWS_IN_CIRCLE, FOLLOWER_HAS_OWN_TERMS,
    FOLLOWER_HAS_OWN_SHARE
} terms_fault;
status terms_check(const struct terms *t, size_t *line, terms_fault *fault);

/* Makes a cover of checked terms. t->lines may be 0 (none given), aggregate NULL. */
status cover_prepare(const struct terms *t, size_t lines, const term *aggregate, pool *p, cover *c);

/* The part ceded of each loss: loss and ceded of line j in row i stand at [j * stride + i].
 * With an aggregate, its recovery is shared within each row in proportion to what the lines
 * ceded; `before` takes each row's sum of ceded amounts before the aggregate, and may be NULL. */
void cede(const cover *c, const double *loss, size_t rows, size_t stride, double *ceded,
          double *before);

#endif
