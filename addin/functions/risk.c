/* risk.c - measures of losses that stand in the sheet. */
#include "../function.h"
#include "../words.h"
#include "../../src/allocate.h"

#include <math.h>

static const char group[] = "Price";

static status sums_of(const argument *losses, const double **sums, report *r)
{
    if (losses->data.cols > 1)
        remark(r, "%zu columns added across each of %zu row%s", losses->data.cols,
               losses->data.rows, plural(losses->data.rows));
    else
        remark(r, "%zu row%s used", losses->data.rows, plural(losses->data.rows));
    status s = row_sums(&losses->data, r->pool, sums);
    return s == OUT_OF_DOMAIN ? refuse(r, s, "a loss or the sum of a row is beyond 1e300") : s;
}

/* ---- layers ---- */

static status cell_layercost(const argument *in, value *out, report *r)
{
    const double *sums;
    struct layer_cost c;
    status s = sums_of(in, &sums, r);
    if (s == OK) s = layer_cost_of(sums, in[0].data.rows, in[1].number, in[2].number, &c);
    if (s == OK) s = new_table(r, 1, 5, out);
    if (s != OK) return s;
    const double cells[] = { c.mean, c.error, c.sd, c.attaching, c.exhausting };
    for (size_t k = 0; k < 5; k++) put_known(out, 0, k, cells[k]);
    return OK;
}

/* ---- risk measures ---- */

typedef status measure(const double *loss, size_t n, const double *level, size_t count, pool *p,
                       estimate *out);

static bool inside(double level)
{
    return level > 0 && level < 1;
}

/* The levels row by row, those outside (0;1) left out, with the row of the result that each
 * fills. */
static status list_levels(const samples *from, double **level, size_t **place, size_t *count,
                          value *out, report *r)
{
    size_t cells = from->rows * from->cols;
    *level = pool_take(r->pool, cells, sizeof **level);
    *place = pool_take(r->pool, cells, sizeof **place);
    if (!*level || !*place) return NO_MEMORY;
    *count = 0;
    for (size_t i = 0; i < cells; i++) {
        double x = from->at[i % from->cols * from->rows + i / from->cols];
        if (!inside(x)) {
            double shown = is_gap(x) ? gap() : fault(OUT_OF_DOMAIN);
            put_number(out, i, 0, shown);
            put_number(out, i, 1, shown);
            continue;
        }
        (*level)[*count] = x;
        (*place)[(*count)++] = i;
    }
    return OK;
}

static status measure_levels(const argument *in, measure *of, value *out, report *r)
{
    const double *sums;
    double *level;
    size_t *place, count, n = in[0].data.rows;
    status s = sums_of(in, &sums, r);
    if (s == OK) s = new_table(r, in[1].data.rows * in[1].data.cols, 2, out);
    if (s == OK) s = list_levels(&in[1].data, &level, &place, &count, out, r);
    if (s != OK || count == 0) return s;
    estimate *found = pool_take(r->pool, count, sizeof *found);
    if (!found) return NO_MEMORY;
    s = of(sums, n, level, count, r->pool, found);
    for (size_t i = 0; s == OK && i < count; i++) {
        put_number(out, place[i], 0, found[i].value);
        put_known(out, place[i], 1, found[i].error);
        if (isnan(found[i].error))
            remark(r, "too few rows (%zu) to tell the error at level %g", n, level[i]);
    }
    return s;
}

static status cell_valueatrisk(const argument *in, value *out, report *r)
{
    return measure_levels(in, values_at_risk, out, r);
}

static status cell_tvar(const argument *in, value *out, report *r)
{
    return measure_levels(in, tail_values_at_risk, out, r);
}

/* ---- parts of lines ---- */

enum { BY_TAIL, BY_COVARIANCE };

static status cell_allocate(const argument *in, value *out, report *r)
{
    const samples *losses = &in[0].data;
    estimate *part = pool_take(r->pool, losses->cols, sizeof *part);
    double *alone = pool_take(r->pool, losses->cols, sizeof *alone);
    if (!part || !alone) return NO_MEMORY;
    status s = in[2].word == BY_TAIL
               ? allocate_tail(losses, in[1].number, r->pool, part, alone)
               : allocate_covariance(losses, r->pool, part, alone);
    if (s == TOO_FEW) return refuse(r, s, "losses has %zu rows, which are too few", losses->rows);
    if (s == OUT_OF_DOMAIN) return refuse(r, s, "the losses are too large to be added or squared");
    if (s == NO_VARIATION) return refuse(r, s, "the sum of the losses does not vary");
    if (s == OK) s = new_table(r, losses->cols, 3, out);
    for (size_t j = 0; s == OK && j < losses->cols; j++) {
        put_number(out, j, 0, part[j].value);
        put_known(out, j, 1, part[j].error);
        put_number(out, j, 2, alone[j]);
    }
    return s;
}

/* ---- the curve ---- */

static status cell_exceedance(const argument *in, value *out, report *r)
{
    const double *sums;
    status s = sums_of(in, &sums, r);
    if (s != OK) return s;
    size_t n = in[0].data.rows, points = exceedance_points(n, (size_t)in[1].number);
    samples curve = { .rows = points,
                      .cols = 2,
                      .at = pool_take(r->pool, points, 2 * sizeof(double)) };
    if (!curve.at) return NO_MEMORY;
    s = exceedance_curve(sums, n, points, r->pool, column(&curve, 0), column(&curve, 1));
    return s == OK ? table_from(&curve, out, r) : s;
}

#define LOSSES \
    { .name = "losses", .kind = FULL_DATA, \
      .help = "One period a row; several columns are added across each row first." }

const function risk_functions[] = {
    {
        .name = "layerCost",
        .group = group,
        .help = "What losses cost a layer: mean, its standard error, sd, probability of "
                "attaching and of exhausting.",
        .detail = "The layer pays min(max(loss - excess; 0); limit). It attaches where loss > "
                  "excess and is exhausted where loss >= excess + limit. Without a limit the "
                  "last cell is empty.",
        .examples = {
            { "LAYERCOST({10|20|30|40};15;20)", "10" },
            { "INDEX(LAYERCOST({10|20|30|40};15;20);1;4)", "0.75" },
            { "INDEX(LAYERCOST({10|20|30|40};15;20);1;5)", "0.25" },
        },
        .params = {
            LOSSES,
            { .name = "excess", .kind = NUMBER, .high = INFINITY,
              .help = "Where the layer begins." },
            { .name = "limit", .kind = NUMBER, .high = INFINITY, .open = LOW_OPEN,
              .optional = true, .otherwise = INFINITY,
              .help = "The most that the layer pays; leave it out for an unlimited layer." },
        },
        .call = cell_layercost,
    },
    {
        .name = "valueAtRisk",
        .group = group,
        .help = "Value at risk and its standard error, one row a level.",
        .detail = "The k-th smallest of n losses, k = n level rounded up, with n level taken as "
                  "whole when it is within 1e-9 of a whole number. The error rests on the "
                  "spacing of order statistics around it (Siddiqui 1960); it is empty while "
                  "these reach beyond the sample, which takes about four losses in the tail. "
                  "Errors assume independent rows.",
        .examples = {
            { "VALUEATRISK({3|17|8|44|91};0.6)", "17" },
            { "INDEX(VALUEATRISK({3|17|8|44|91};{0.2|0.9});2;1)", "91" },
        },
        .params = {
            LOSSES,
            { .name = "level", .kind = NUMBERS, .high = 1, .open = BOTH_OPEN,
              .help = "The level, such as 0.99, or a range of levels." },
        },
        .call = cell_valueatrisk,
    },
    {
        .name = "tvar",
        .group = group,
        .help = "Tail value at risk (expected shortfall) and its standard error, one row a level.",
        .detail = "The expected shortfall of Acerbi & Tasche (2002): the mean of the worst n(1 - "
                  "level) losses, the one at the value at risk counted by the fraction needed. "
                  "The error comes from the influence values (Manistre & Hancock 2005) and is "
                  "empty where that of VALUEATRISK is. Errors assume independent rows.",
        .examples = {
            { "TVAR({3|17|8|44|91};0.6)", "67.5" },
            { "TVAR({3|17|8|44|91};0.5)", "57.4" },
        },
        .params = {
            LOSSES,
            { .name = "level", .kind = NUMBERS, .high = 1, .open = BOTH_OPEN,
              .help = "The level, such as 0.99, or a range of levels." },
        },
        .call = cell_tvar,
    },
    {
        .name = "allocate",
        .group = group,
        .help = "The part of each line in the risk of their sum, its error, and the line's risk "
                "alone, one row a line.",
        .detail = "Euler allocation: the parts add up to the measure of the row sums. tail: "
                  "expected shortfall, as in TVAR; a part is the mean of the line over the same "
                  "rows with the same weights (Tasche 1999), and rows equal to the value at risk "
                  "share their weight equally. covariance: standard deviation; a part is the "
                  "covariance of the line with the sum over the sd of the sum, and level does "
                  "not matter. Errors assume independent rows; empty while too few rows are in "
                  "the tail.",
        .examples = {
            { "ALLOCATE({1;5|2;1|3;4|5;5};0.5)", "4" },
            { "INDEX(ALLOCATE({1;5|2;1|3;4|5;5};0.5);2;1)", "4.5" },
            { "ALLOCATE({1;10|2;20|3;30};0.9;\"covariance\")", "1" },
        },
        .params = {
            { .name = "losses", .kind = FULL_DATA, .help = "One period a row, one line a column." },
            { .name = "level", .kind = NUMBER, .high = 1, .open = BOTH_OPEN,
              .help = "The level, such as 0.99." },
            { .name = "method", .kind = WORD, .words = "tail covariance", .optional = true,
              .help = "The measure that is shared out." },
        },
        .call = cell_allocate,
    },
    {
        .name = "exceedance",
        .group = group,
        .help = "Losses and how often they are reached or exceeded, ready to chart.",
        .detail = "Column 1 holds losses, rising from the smallest to the largest; column 2 the "
                  "share of rows at or above each, from 1 down. In between the ranks fall "
                  "geometrically, so that on a logarithmic axis the points lie evenly. With fewer "
                  "rows than points every row is one; tied rows give the same point again.",
        .examples = {
            { "INDEX(EXCEEDANCE({30|10|20|40});3;1)", "30" },
            { "INDEX(EXCEEDANCE({0|0|0|5});3;2)", "1" },
            { "INDEX(EXCEEDANCE({30|10|20|40});3;2)", "0.5" },
        },
        .params = {
            LOSSES,
            { .name = "points", .kind = WHOLE, .low = 2, .high = 10000, .optional = true,
              .otherwise = 200, .help = "How many points the curve has." },
        },
        .call = cell_exceedance,
    },
    { 0 },
};
