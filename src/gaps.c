/* gaps.c - leaving out the rows in which something is missing
 *
 * Method
 *   One pass over the rows. Whole rows: first mark, then copy column by column.
 *
 * Special cases
 *   No complete row at all gives samples of 0 rows, which is no error here.
 *
 * Accuracy
 *   Values are copied bit by bit, in their order.
 */
#include "gaps.h"

size_t complete_pairs(const double *x, const double *y, const double *weight, size_t n,
                      double *x_out, double *y_out, double *weight_out)
{
    size_t kept = 0;
    for (size_t i = 0; i < n; i++) {
        if (is_gap(x[i]) || is_gap(y[i]) || (weight && !(weight[i] > 0))) continue;
        x_out[kept] = x[i];
        y_out[kept] = y[i];
        if (weight) weight_out[kept] = weight[i];
        kept++;
    }
    return kept;
}

static size_t mark_incomplete(const samples *s, bool *incomplete)
{
    size_t marked = 0;
    for (size_t j = 0; j < s->cols; j++) {
        const double *x = column(s, j);
        for (size_t i = 0; i < s->rows; i++) {
            if (!is_gap(x[i]) || incomplete[i]) continue;
            incomplete[i] = true;
            marked++;
        }
    }
    return marked;
}

status complete_rows(const samples *s, samples *complete, pool *p)
{
    bool *incomplete = pool_take_zeroed(p, s->rows, sizeof *incomplete);
    if (!incomplete) return NO_MEMORY;
    size_t kept = s->rows - mark_incomplete(s, incomplete);
    *complete = *s;
    if (kept == s->rows) return OK;

    complete->rows = kept;
    complete->at = pool_take(p, kept * s->cols, sizeof *complete->at);
    if (!complete->at) return NO_MEMORY;
    for (size_t j = 0; j < s->cols; j++) {
        const double *from = column(s, j);
        double *to = column(complete, j);
        for (size_t i = 0; i < s->rows; i++)
            if (!incomplete[i]) *to++ = from[i];
    }
    return OK;
}
