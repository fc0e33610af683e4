/* grouped_points.h - what the files about a t copula with several degrees of freedom share. */
#ifndef GROUPED_POINTS_H
#define GROUPED_POINTS_H

#include "chi_square_score.h"
#include "elliptical_points.h"
#include "placed_nodes.h"

struct grouped_points {
    struct chi_square_score **score;  /* of each column; columns with the same df share */
    size_t *like;                     /* the first column with the same df */
    double **log_scale;               /* of each column, at the nodes: log sqrt(chi-square/df) */
    struct placed_nodes nodes;        /* of z */
    double *given;                    /* log-density of z and the columns learnt, at the nodes */
    double *y;                        /* columns at the nodes, d x MOST_NODES */
    struct signed_log *x;             /* t quantiles of the columns */
    double least_pivot;               /* of the Cholesky factor */
    size_t learnt;                    /* so many columns */
    int event;                        /* what the next one is: 1 below, -1 above, 0 anywhere */
    int for_event;                    /* for which the nodes were placed, */
    double log_placed;                /* with this integral */
    double log_mass;                  /* the integral of what is given */
    double outside;                   /* bound on what is given beyond the nodes */
    double seconds;                   /* about what all so far took, counted */
    struct placed_sum sum;
};

#endif
