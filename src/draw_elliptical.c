/* draw_elliptical.c - draws from the normal and the t copula
 *
 * Method
 *   X = L Z with the Cholesky factor L of the correlation matrix and normal scores Z of uniforms.
 *   The normal copula is Phi(X_j), the t copula T(X_j / sqrt(chi_j / df_j)), where every chi_j is
 *   the chi-square quantile, for df_j, of one uniform that the row's columns share (Daul, De
 *   Giorgi, Lindskog & McNeil 2003 for the grouped one).
 *
 * Special cases
 *   A singular matrix: see factor.c.
 *
 * Accuracy
 *   Sums run in a fixed order, without contraction: the bits do not depend on the machine.
 */
#include "draw.h"

#include "draw_block.h"
#include "factor.h"
#include "normal.h"
#include "student.h"

#include <math.h>

FOR_EACH_PROCESSOR
static void scale_column(double factor, double *restrict x)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) x[i] *= factor;
}

FOR_EACH_PROCESSOR
static void add_multiple(double factor, const double *restrict z, double *restrict x)
{
    for (int i = 0; i < ROWS_AT_ONCE; i++) x[i] += factor * z[i];
}

/* z becomes l z, from the last column up, so that it can stay where it is. */
static void correlate(const double *l, size_t d, double (*z)[ROWS_AT_ONCE])
{
    for (size_t j = d; j-- > 0;) {
        const double *row = l + j * d;
        scale_column(row[j], z[j]);
        for (size_t k = 0; k < j; k++)
            if (row[k] != 0.0) add_multiple(row[k], z[k], z[j]);
    }
}

/* What drawing from an elliptical copula needs beside the tables of t. */
struct elliptical {
    size_t d;
    double *factor;
    double (*x)[ROWS_AT_ONCE];
};

static status prepare(struct elliptical *e, const copula *c, pool *p)
{
    e->d = c->dimension;
    e->factor = pool_take_zeroed(p, e->d * e->d, sizeof *e->factor);
    e->x = pool_take(p, e->d, sizeof *e->x);
    if (!e->factor || !e->x) return NO_MEMORY;
    return correlation_factor(c->matrix, e->d, e->factor);
}

static void normal_block(const struct elliptical *e, const struct draw_rows *where, size_t start)
{
    uniforms_of_block(where, start, e->d, e->x);
    for (size_t j = 0; j < e->d; j++) normal_scores_of_rows(e->x[j]);
    correlate(e->factor, e->d, e->x);
}

status draw_gaussian(const copula *c, const struct draw_rows *where, pool *p)
{
    struct elliptical e;
    status s = prepare(&e, c, p);
    if (s != OK) return s;
    for (size_t start = 0; start < where->rows; start += ROWS_AT_ONCE) {
        normal_block(&e, where, start);
        for (size_t j = 0; j < e.d; j++) normal_probabilities_of_rows(e.x[j]);
        store_block(where, start, e.d, e.x);
    }
    return OK;
}

/* The tables of a t copula: those of each different df once, and which of them a column takes. */
struct mixing {
    size_t different;
    struct student *table;
    size_t *table_of;
    double (*log_chi)[ROWS_AT_ONCE];
};

static status prepare_mixing(struct mixing *m, const copula *c, pool *p)
{
    size_t d = c->dimension;
    m->table = pool_take(p, d, sizeof *m->table);
    m->table_of = pool_take(p, d, sizeof *m->table_of);
    m->different = 0;
    if (!m->table || !m->table_of) return NO_MEMORY;
    for (size_t j = 0; j < d; j++) {
        size_t k = 0;
        while (k < m->different && m->table[k].df != c->df[j]) k++;
        m->table_of[j] = k;
        if (k < m->different) continue;
        status s = student_tables(&m->table[m->different++], c->df[j], p);
        if (s != OK) return s;
    }
    m->log_chi = pool_take(p, m->different, sizeof *m->log_chi);
    return m->log_chi ? OK : NO_MEMORY;
}

static void mixing_block(const struct mixing *m, const struct draw_rows *where, size_t start)
{
    double score[ROWS_AT_ONCE], spare[ROWS_AT_ONCE];
    struct draw_rows unturned = *where;
    unturned.mirrored = false;          /* normals turned and chi-squares kept give 1 - u */
    mixing_of_block(&unturned, start, score, spare);
    normal_scores_of_rows(score);
    for (size_t k = 0; k < m->different; k++)
        log_chi_squares_of_rows(&m->table[k], score, m->log_chi[k]);
}

status draw_t(const copula *c, const struct draw_rows *where, pool *p)
{
    struct elliptical e;
    struct mixing m;
    status s = prepare(&e, c, p);
    if (s == OK) s = prepare_mixing(&m, c, p);
    if (s != OK) return s;
    for (size_t start = 0; start < where->rows; start += ROWS_AT_ONCE) {
        normal_block(&e, where, start);
        mixing_block(&m, where, start);
        for (size_t j = 0; j < e.d; j++) {
            size_t k = m.table_of[j];
            student_probabilities_of_rows(&m.table[k], m.log_chi[k], e.x[j]);
        }
        store_block(where, start, e.d, e.x);
    }
    return OK;
}
