/* measure_rho.c - Spearman's rho and the correlation of normal scores. */
#include "../function.h"
#include "../measures.h"
#include "../params.h"
#include "../../src/rho.h"

typedef status measure(const ranking *x, const ranking *y, double *result, size_t *used,
                       struct rho_room *room);

/* Columns ranked once, for any of their pairs. */
struct ranked {
    ranking *rankings;
    struct rho_room *room;
    measure *of;
};

static status rank_columns(const samples *s, struct ranked *k, report *r)
{
    struct rank_room *sorting;
    status made = new_rankings(s->rows, s->cols, &k->rankings, r->pool);
    if (made == OK) made = new_rank_room(s->rows, &sorting, r->pool);
    if (made == OK) made = new_rho_room(s->rows, &k->room, r->pool);
    for (size_t j = 0; made == OK && j < s->cols; j++)
        rank_values(column(s, j), s->rows, &k->rankings[j], sorting);
    return made;
}

/* ---- RHO ---- */

enum { X, Y };

static status cell_rho(const argument *in, value *out, report *r)
{
    struct ranked x, y;
    double rho;
    size_t used = 0;
    status s = rank_columns(&in[X].data, &x, r);
    if (s == OK) s = rank_columns(&in[Y].data, &y, r);
    if (s == OK) s = spearman_rho(x.rankings, y.rankings, &rho, &used, x.room);
    if (s != OK) return refuse_measure(s, used, 2, &in[X], &in[Y], "rho", r);
    remark_rows(used, filled_in_either(&in[X], &in[Y]), "gaps", r);
    return answer(out, rho);
}

/* ---- RHOGRID, NORMALSCOREGRID ---- */

enum { COLUMNS, GAPS };

static status pair_of(void *ranked, size_t i, size_t j, double *x)
{
    struct ranked *k = ranked;
    size_t used;
    return k->of(&k->rankings[i], &k->rankings[j], x, &used, k->room);
}

static status grid_of(const argument *in, measure *of, value *out, report *r)
{
    samples data = in[COLUMNS].data;
    struct ranked k = { .of = of };
    bool by_rows = in[GAPS].word == GAPS_BY_ROWS;
    status s = by_rows ? complete_rows(&in[COLUMNS].data, &data, r->pool) : OK;
    if (s == OK) s = rank_columns(&data, &k, r);
    if (s == OK) s = symmetric_grid(data.cols, pair_of, &k, out, r);
    if (s != OK) return s;
    remark_grid_rows(by_rows, data.rows, in[COLUMNS].filled, r);
    return OK;
}

static status cell_rhogrid(const argument *in, value *out, report *r)
{
    return grid_of(in, spearman_rho, out, r);
}

static status cell_normalscoregrid(const argument *in, value *out, report *r)
{
    return grid_of(in, normal_score_correlation, out, r);
}

static const char GROUP[] = "Measure dependence in data";

const function measure_rho_functions[] = {
    {
        .name = "rho",
        .group = GROUP,
        .help = "Spearman's rho of a pair of columns.",
        .detail =
            "The correlation of the ranks (Spearman 1904), ties getting the mean of the ranks they "
            "share. Rows with a gap in x or y are left out before ranking. Perfect dependence is "
            "exactly 1 or -1. #N/A with fewer than two rows, #DIV/0! when a column does not vary.",
        .examples = {
            { "RHO({1|2|3|4};{1|3|2|4})", "0.8" },
            { "RHO({1|5|5|9};{1|2|3|4})", "0.948683298050514" },
            { "RHO({1|2|3};{7|7|7})", "#DIV/0!" },
        },
        .params = {
            PAIR_OF_COLUMNS,
        },
        .call = cell_rho,
    },
    {
        .name = "rhoGrid",
        .group = GROUP,
        .help = "Spearman's rho of every pair of columns, as a matrix.",
        .detail =
            "With gaps \"pairs\" each pair uses, and ranks, the rows that both columns have; with "
            "\"rows\" all use the rows without any gap. A pair without a value shows its error in "
            "its own cells.",
        .examples = {
            { "INDEX(RHOGRID({1;1|2;3|3;2|4;4});1;2)", "0.8" },
            { "INDEX(RHOGRID({1;7|2;7|3;7});2;1)", "#DIV/0!" },
        },
        .params = {
            OBSERVATIONS,
            GAPS_OF_PAIRS,
        },
        .costly = true,
        .call = cell_rhogrid,
    },
    {
        .name = "normalScoreGrid",
        .group = GROUP,
        .help = "The correlation of the normal scores of every pair of columns, as a matrix.",
        .detail =
            "The normal score of an observation is the normal quantile of rank/(n + 1) (van der "
            "Waerden 1952), ties getting the mean of the ranks they share; with gaps \"pairs\" "
            "each pair is ranked among the rows that both columns have. Consistent for the "
            "correlation of a gaussian copula. A pair without a value shows its error in its own "
            "cells.",
        .examples = {
            { "INDEX(NORMALSCOREGRID({1;1|2;3|3;2});1;2)", "0.5" },
            { "INDEX(NORMALSCOREGRID({1;9|2;8|3;7|5;6});1;2)", "-1" },
        },
        .params = {
            OBSERVATIONS,
            GAPS_OF_PAIRS,
        },
        .costly = true,
        .call = cell_normalscoregrid,
    },
    { 0 },
};
