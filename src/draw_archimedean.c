/* draw_archimedean.c - draws from Archimedean copulas by their frailty
 *
 * Method
 *   Marshall & Olkin (1988): psi(E_j / V) with exponential E_j and the frailty V of the row. All in
 *   logarithms, log E_j - log V, so that strong dependence neither overflows nor underflows.
 *
 * Special cases
 *   Results are kept within [2^-53; 1 - 2^-53].
 *
 * Accuracy
 *   That of frailty.c and laplace.c.
 */
#include "draw.h"

#include "draw_block.h"
#include "elementary.h"
#include "frailty.h"

/* uniforms become log(E / V) with E = -log u */
FOR_EACH_PROCESSOR
static void log_times(double *restrict u, const double *restrict log_v)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) u[i] = log_within(-log_within(u[i])) - log_v[i];
}

status draw_by_frailty(const copula *c, const struct draw_rows *where, pool *p)
{
    const struct frailty *f = c->family->frailty;
    struct frailty_tables tables;
    double log_v[ROWS_AT_ONCE], spare[ROWS_AT_ONCE];
    double (*u)[ROWS_AT_ONCE] = pool_take(p, c->dimension, sizeof *u);
    status s = u ? f->prepare(&tables, c->theta, p) : NO_MEMORY;
    for (size_t start = 0; s == OK && start < where->rows; start += ROWS_AT_ONCE) {
        mixing_of_block(where, start, log_v, spare);
        f->log_frailties(&tables, log_v, spare);
        uniforms_of_block(where, start, c->dimension, u);
        for (size_t j = 0; j < c->dimension; j++) {
            log_times(u[j], log_v);
            f->transforms(u[j], c->theta);
            for (int i = 0; i < ROWS_AT_ONCE; i++) u[j][i] = kept_inside(u[j][i]);
        }
        store_block(where, start, c->dimension, u);
    }
    return s;
}
