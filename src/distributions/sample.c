/* sample.c - losses taken from data: column a of the samples that come with the margins.
 *
 * Method
 *   The inverse of the empirical distribution function, in quantiles.c, which has the data.
 *
 * Special cases
 *   No density, probability or quantile of its own.
 *
 * Accuracy
 *   Exact.
 */
#include "distributions.h"

const distribution sample_distribution = {
    .word = "sample",
    .parameter = { { .name = "column", .low = 1, .whole = true } },
};
