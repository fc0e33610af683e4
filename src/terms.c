/* terms.c - what a cover cedes.
 *
 * Method
 *   Line by line: share * min(max(loss - excess, 0), limit). A line that follows another, as
 *   allocated expense follows its claim, cedes the fraction of its loss that the line at the
 *   head of its chain ceded of its own. Then the aggregate, on the row's sum; what it recovers
 *   is shared in proportion to what each line ceded before it.
 *
 * Special cases
 *   A leader with no loss cedes nothing of its followers either. Following passes through a chain
 *   even where a line between has no loss in a row. A row that cedes nothing before the
 *   aggregate cedes nothing after it. Without terms a negative loss, a gain, goes to the aggregate
 *   like any other: it lowers the row's sum and bears its share of the recovery.
 *
 * Accuracy
 *   Rounding only; a ceded amount never exceeds share * limit.
 */
#include "terms.h"
#include "random.h"

#include <math.h>
#include <string.h>

static status fault_of(const struct terms *t, size_t line, terms_fault *fault)
{
    const term *one = t->of + line;
    *fault = TERMS_FINE;
    if (!(one->excess >= 0)) *fault = EXCESS_BELOW_ZERO;
    else if (!(one->limit > 0)) *fault = LIMIT_NOT_POSITIVE;
    else if (!(one->share >= 0 && one->share <= 1)) *fault = SHARE_OUTSIDE;
    if (*fault != TERMS_FINE) return OUT_OF_DOMAIN;
    if (one->with == 0) return OK;
    if (one->with > t->lines) *fault = FOLLOWS_NO_LINE;
    else if (one->with == line + 1) *fault = FOLLOWS_ITSELF;
    else if (one->excess > 0 || isfinite(one->limit)) *fault = FOLLOWER_HAS_OWN_TERMS;
    return *fault == TERMS_FINE ? OK : BAD_KIND;
}

/* The line at the head of the chain; t->lines when following never ends. */
static size_t leader_of(const struct terms *t, size_t line)
{
    for (size_t steps = 0; steps < t->lines; steps++) {
        if (t->of[line].with == 0) return line;
        line = t->of[line].with - 1;
    }
    return t->lines;
}

static bool unheard_share(const term *follower, const term *leader)
{
    return follower != leader && follower->share != 1 && follower->share != leader->share;
}

status terms_check(const struct terms *t, size_t *line, terms_fault *fault)
{
    for (*line = 0; *line < t->lines; (*line)++) {
        status s = fault_of(t, *line, fault);
        if (s != OK) return s;
    }
    for (*line = 0; *line < t->lines; (*line)++) {
        size_t leader = leader_of(t, *line);
        *fault = leader == t->lines ? FOLLOWS_IN_CIRCLE
                 : unheard_share(t->of + *line, t->of + leader) ? FOLLOWER_HAS_OWN_SHARE
                                                                : TERMS_FINE;
        if (*fault != TERMS_FINE) return BAD_KIND;
    }
    return OK;
}

status cover_prepare(const struct terms *t, size_t lines, const term *aggregate, pool *p, cover *c)
{
    *c = (cover){ .lines = lines, .aggregate = aggregate };
    if (!t || t->lines == 0) return OK;
    size_t *leader = pool_take(p, lines, sizeof *leader);
    if (!leader) return NO_MEMORY;
    for (size_t j = 0; j < lines; j++) leader[j] = leader_of(t, j);
    c->of = t->of;
    c->leader = leader;
    return OK;
}

/* both written as selections, so that loops over them become vector code */
static inline double layer(const term *t, double loss)
{
    double beyond = loss - t->excess;
    double within = beyond < t->limit ? beyond : t->limit;
    return t->share * (within > 0 ? within : 0);
}

FOR_EACH_PROCESSOR
static void cede_line(const term *t, const double *restrict loss, size_t rows,
                      double *restrict ceded)
{
    const term copy = *t;
    for (size_t i = 0; i < rows; i++) ceded[i] = layer(&copy, loss[i]);
}

static void follow(const double *loss, const double *leader_loss, const double *leader_ceded,
                   size_t rows, double *ceded)
{
    for (size_t i = 0; i < rows; i++) {
        bool recovers = leader_loss[i] > 0;
        ceded[i] = recovers ? loss[i] * (leader_ceded[i] / leader_loss[i]) : 0;
    }
}

static void cede_lines(const cover *c, const double *loss, size_t rows, size_t stride,
                       double *ceded)
{
    for (size_t j = 0; j < c->lines; j++)
        if (c->leader[j] == j) cede_line(c->of + j, loss + j * stride, rows, ceded + j * stride);
    for (size_t j = 0; j < c->lines; j++) {
        size_t leader = c->leader[j];
        if (leader != j)
            follow(loss + j * stride, loss + leader * stride, ceded + leader * stride, rows,
                   ceded + j * stride);
    }
}

/* Without terms each line goes to the aggregate as it is, gains too. */
static void cede_all_or_nothing(const cover *c, const double *loss, size_t rows, size_t stride,
                                double *ceded)
{
    for (size_t j = 0; j < c->lines; j++)
        for (size_t i = 0; i < rows; i++)
            ceded[j * stride + i] = c->aggregate ? loss[j * stride + i] : 0;
}

static void add_to(double *restrict sum, const double *restrict x, size_t rows)
{
    for (size_t i = 0; i < rows; i++) sum[i] += x[i];
}

/* from each row's sum of ceded amounts to the part of it that the aggregate recovers */
FOR_EACH_PROCESSOR
static void recovered_part(const term *aggregate, size_t rows, double *restrict sum)
{
    const term copy = *aggregate;
    for (size_t i = 0; i < rows; i++) sum[i] = sum[i] > 0 ? layer(&copy, sum[i]) / sum[i] : 0;
}

/* 0 times a gain is to be 0 and not -0 */
static void scale_by(double *restrict x, const double *restrict factor, size_t rows)
{
    for (size_t i = 0; i < rows; i++) x[i] = factor[i] > 0 ? x[i] * factor[i] : 0;
}

/* at most ROWS_AT_ONCE rows */
static void cede_rows(const cover *c, const double *loss, size_t rows, size_t stride, double *ceded,
                      double *before)
{
    double sum[ROWS_AT_ONCE] = { 0 };
    if (c->of) cede_lines(c, loss, rows, stride, ceded);
    else cede_all_or_nothing(c, loss, rows, stride, ceded);
    if (!c->aggregate && !before) return;
    for (size_t j = 0; j < c->lines; j++) add_to(sum, ceded + j * stride, rows);
    if (before) memcpy(before, sum, rows * sizeof *sum);
    if (!c->aggregate) return;
    recovered_part(c->aggregate, rows, sum);
    for (size_t j = 0; j < c->lines; j++) scale_by(ceded + j * stride, sum, rows);
}

void cede(const cover *c, const double *loss, size_t rows, size_t stride, double *ceded,
          double *before)
{
    for (size_t i = 0; i < rows; i += ROWS_AT_ONCE) {
        size_t n = rows - i < ROWS_AT_ONCE ? rows - i : ROWS_AT_ONCE;
        cede_rows(c, loss + i, n, stride, ceded + i, before ? before + i : NULL);
    }
}
