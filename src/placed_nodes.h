/* placed_nodes.h - the trapezoid rule on the line, with its nodes where the integrand is.
 *
 * For positive integrands of exponential kind, of which the logarithm is known: it may lie below
 * exp(-700) or above, and have its mass anywhere. */
#ifndef PLACED_NODES_H
#define PLACED_NODES_H

#include <stdbool.h>
#include <stddef.h>

enum { FIRST_NODES = 49, MOST_NODES = 3073 };

/* Equally spaced, or crowded around `centre`: centre + width sinh(t) with equally spaced t. With
 * the logarithm of the integrand at each. */
struct placed_nodes {
    size_t n;
    double first, step;              /* of t */
    double centre, width;            /* width 0: equally spaced */
    double *log_term;                /* MOST_NODES */
    double *hidden;                  /* MOST_NODES, or NULL: bound on the logarithm between a node
                                      * and the next where those do not tell, else -HUGE_VAL */
    bool halved;                     /* those of even number are known */
    double below, above;             /* bounds on the logarithm beyond either end; HUGE_VAL: none */
};

/* Sets log_term, hidden, below and above, of nodes whose places are set. */
typedef void log_terms(struct placed_nodes *nodes, void *with);

double node_at(const struct placed_nodes *nodes, size_t k);
double node_weight(const struct placed_nodes *nodes, size_t k);

/* What a sum over the nodes says. */
struct placed_sum {
    double highest, log_integral;    /* of log_term, of the integral */
    bool settled, roughly;           /* nothing left at either end or hidden, and every other */
};                                   /* node would have done as well to 3e-11; to 3e-7 */

struct placed_sum sum_over_nodes(const struct placed_nodes *nodes);

/* Puts equally spaced nodes where the integrand is more than exp(-44) of its peak, and no more than
 * that takes. */
struct placed_sum span_nodes(struct placed_nodes *nodes, log_terms *of, void *with);

/* Between the ends of nodes whose log_term is set as many as it takes to settle, which leaves an
 * error below 3e-11, but no more than `most`; crowded around where the integrand is steepest if
 * equally spaced ones would have to be many. */
struct placed_sum settle_nodes(struct placed_nodes *nodes, log_terms *of, void *with,
                               size_t most);

/* span_nodes() and settle_nodes() */
struct placed_sum place_nodes(struct placed_nodes *nodes, log_terms *of, void *with,
                              size_t most);

#endif
