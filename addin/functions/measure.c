/* measure.c - dependence in data: ranks, and Kendall's tau of a pair and of all pairs. */
#include "../function.h"
#include "../measures.h"
#include "../params.h"
#include "../shape.h"
#include "../words.h"
#include "../../src/ranks.h"
#include "../../src/tau.h"
#include "../../src/tau_grid.h"
#include "../../src/tau_scores.h"
#include "../../src/tau_weighted.h"

#include <math.h>

static const double NORMAL_975 = 1.959963984540054;      /* 97.5 % point of the normal */

/* ---- TAU ---- */

enum { X, Y, PAIR_WEIGHTS };

static status tau_plain(const argument *in, value *out, report *r)
{
    struct tau_counts c;
    double tau;
    status s = tau_count(in[X].data.at, in[Y].data.at, in[X].data.rows, &c, r->pool);
    if (s != OK) return s;
    s = tau_b(&c, &tau);
    if (s != OK) return refuse_measure(s, (size_t)c.rows, 2, &in[X], &in[Y], "tau", r);
    remark_rows((size_t)c.rows, filled_in_either(&in[X], &in[Y]), "gaps", r);
    return answer(out, tau);
}

static status check_weights(const argument *weights, report *r)
{
    for (size_t i = 0; i < weights->data.rows; i++)
        if (weights->data.at[i] < 0)
            return refuse(r, OUT_OF_DOMAIN, "weights has %g in row %zu, but must not be negative",
                          weights->data.at[i], i + weights->header + 1);
    return OK;
}

/* The same refusals, with rows of no weight taken for gaps. */
static status refuse_weighted(status s, size_t used, const argument *in, report *r)
{
    argument y = in[Y];
    if (s != TOO_FEW && s != NO_VARIATION) return s;
    y.data.at = pool_take(r->pool, y.data.rows, sizeof *y.data.at);
    if (!y.data.at) return NO_MEMORY;
    for (size_t i = 0; i < y.data.rows; i++)
        y.data.at[i] = in[PAIR_WEIGHTS].data.at[i] > 0 ? in[Y].data.at[i] : gap();
    return refuse_measure(s, used, 2, &in[X], &y, "tau with weights above 0", r);
}

static status tau_with_weights(const argument *in, value *out, report *r)
{
    const double *x = in[X].data.at, *y = in[Y].data.at, *weight = in[PAIR_WEIGHTS].data.at;
    size_t used = 0;
    double tau;
    status s = check_weights(&in[PAIR_WEIGHTS], r);
    if (s != OK) return s;
    s = tau_weighted(x, y, weight, in[X].data.rows, &tau, &used, r->pool);
    if (s != OK) return refuse_weighted(s, used, in, r);
    remark_rows(used, filled_in_either(&in[X], &in[Y]), "gaps or weight 0", r);
    return answer(out, tau);
}

static status cell_tau(const argument *in, value *out, report *r)
{
    return in[PAIR_WEIGHTS].given ? tau_with_weights(in, out, r) : tau_plain(in, out, r);
}

/* ---- TAUGRID ---- */

enum { DATA_COLUMNS, GAPS, WEIGHTS, FIGURE };

typedef enum { TAU, ERROR, COUNT, LOW, HIGH } figure;

/* What the pairs are taken from. */
struct pairs {
    pool *pool;
    samples data;
    const double *weights;       /* or NULL */
    struct tau_grid *grid;       /* without weights */
    struct score_room *scoring;  /* for figures that need the error */
    figure figure;
};

/* Where all columns are to be complete, the rows in which they are; the weights count as a
 * column. */
static status keep_complete_rows(struct pairs *p, report *r)
{
    samples all = p->data, complete;
    if (p->weights) {
        all.cols++;
        all.at = pool_take(r->pool, all.rows * all.cols, sizeof *all.at);
        if (!all.at) return NO_MEMORY;
        for (size_t i = 0; i < p->data.rows * p->data.cols; i++) all.at[i] = p->data.at[i];
        for (size_t i = 0; i < all.rows; i++) column(&all, p->data.cols)[i] = p->weights[i];
    }
    status s = complete_rows(&all, &complete, r->pool);
    if (s != OK) return s;
    if (p->weights) p->weights = column(&complete, p->data.cols);
    p->data.rows = complete.rows;
    p->data.at = complete.at;
    return OK;
}

static status make_ready(struct pairs *p, report *r)
{
    if (p->weights) return OK;
    status s = new_tau_grid(&p->data, COUNT_AS_SUITS, &p->grid, r->pool);
    if (s == OK && p->figure != TAU && p->figure != COUNT)
        s = new_score_room(p->data.rows, &p->scoring, r->pool);
    return s;
}

static double clamp(double tau)
{
    return tau > 1 ? 1 : tau < -1 ? -1 : tau;
}

static status error_figure(const struct pairs *p, size_t i, size_t j, double *x)
{
    struct tau_scores scores;
    double tau, error;
    tau_scores_ranked(tau_grid_ranking(p->grid, i), tau_grid_ranking(p->grid, j), &scores,
                      p->scoring);
    status s = tau_b(&scores.counts, &tau);
    if (s == OK) s = tau_error_free(&scores, &error);
    if (s != OK) return s;
    *x = p->figure == ERROR ? error
       : clamp(p->figure == LOW ? tau - NORMAL_975 * error : tau + NORMAL_975 * error);
    return OK;
}

static double count_weighted(const double *x, const double *y, const double *weight, size_t n)
{
    size_t count = 0;
    for (size_t i = 0; i < n; i++) count += !is_gap(x[i]) && !is_gap(y[i]) && weight[i] > 0;
    return (double)count;
}

/* The figure of columns i and j. A column with itself is exactly 1, or what is wrong with it. */
static status pair_figure(void *pairs, size_t i, size_t j, double *x)
{
    const struct pairs *p = pairs;
    const double *a = column(&p->data, i), *b = column(&p->data, j);
    if (p->weights) {
        size_t used;
        *x = count_weighted(a, b, p->weights, p->data.rows);
        return p->figure == COUNT ? OK
             : tau_weighted(a, b, p->weights, p->data.rows, x, &used, p->pool);
    }
    struct tau_counts c;
    if (p->figure != TAU && p->figure != COUNT) return error_figure(p, i, j, x);
    tau_grid_counts(p->grid, i, j, &c);
    *x = (double)c.rows;
    return p->figure == COUNT ? OK : tau_b(&c, x);
}

static size_t above_zero(const double *weight, size_t n)
{
    size_t count = 0;
    for (size_t i = 0; i < n; i++) count += weight[i] > 0;
    return count;
}

static status cell_taugrid(const argument *in, value *out, report *r)
{
    static const char *const names[] = { "tau", "error", "count", "low", "high" };
    struct pairs p = { .pool = r->pool, .data = in[DATA_COLUMNS].data,
                       .figure = (figure)in[FIGURE].word,
                       .weights = in[WEIGHTS].given ? in[WEIGHTS].data.at : NULL };
    bool by_rows = in[GAPS].word == GAPS_BY_ROWS;
    if (p.weights && p.figure != TAU && p.figure != COUNT)
        return refuse(r, BAD_KIND, "figure is \"%s\", which has no agreed meaning with weights: "
                      "leave out weights, or ask for tau or count", names[p.figure]);
    status s = p.weights ? check_weights(&in[WEIGHTS], r) : OK;
    if (s == OK && by_rows) s = keep_complete_rows(&p, r);
    if (s == OK) s = make_ready(&p, r);
    if (s == OK) s = symmetric_grid(p.data.cols, pair_figure, &p, out, r);
    if (s != OK) return s;
    if (by_rows && p.weights)
        remark_rows(above_zero(p.weights, p.data.rows), in[DATA_COLUMNS].filled,
                    "gaps or weight 0", r);
    else
        remark_grid_rows(by_rows, p.data.rows, in[DATA_COLUMNS].filled, r);
    return OK;
}

/* ---- RANKS ---- */

enum { RANKED, TIES, SEED };

static size_t observed(const samples *s)
{
    size_t n = 0;
    for (size_t i = 0; i < s->rows * s->cols; i++) n += !is_gap(s->at[i]);
    return n;
}

/* Every column has its own rows; where no cell is empty they are the same. */
static void remark_ranked(const argument *a, report *r)
{
    size_t n = observed(&a->data), all = a->filled * a->data.cols;
    if (a->data.cols == 1 || n == all)
        remark_rows(n / a->data.cols, a->filled, "gaps", r);
    else
        remark(r, "%zu row%s of data, each column with those that it has; %zu gap%s not ranked",
               a->filled, plural(a->filled), all - n, plural(all - n));
}

static status cell_ranks(const argument *in, value *out, report *r)
{
    const samples *s = &in[RANKED].data;
    if (in[TIES].word == TIES_RANDOM && !in[SEED].given)
        return refuse(r, BAD_KIND, "seed is missing: ties in random order need one");
    samples ranks = *s;
    ranks.at = pool_take(r->pool, s->rows * s->cols, sizeof *ranks.at);
    if (!ranks.at) return NO_MEMORY;
    uint64_t seed = in[SEED].given ? (uint64_t)in[SEED].number : 0;
    status made = scaled_ranks(s, (tie_rule)in[TIES].word, seed, ranks.at, r->pool);
    if (made != OK) return made;
    remark_ranked(&in[RANKED], r);
    return table_like(&in[RANKED], &ranks, out, r);
}

static const char GROUP[] = "Measure dependence in data";

const function measure_functions[] = {
    {
        .name = "ranks",
        .group = GROUP,
        .help = "The scaled ranks of each column, rank/(n + 1), strictly between 0 and 1.",
        .detail =
            "n is the number of observations in the column; gaps stay empty and are not ranked. "
            "A header row stays. Scaled ranks with average ties are the pseudo-observations from "
            "which copulas are fitted (Genest, Ghoudi & Rivest 1995). Ties get the average of the "
            "ranks they share, the lowest, the highest, or these ranks in an order that the seed "
            "draws, for each column anew.",
        .examples = {
            { "RANKS({30|10|20})", "0.75" },
            { "RANKS({5|5|9})", "0.375" },
            { "RANKS({5|5|9};\"low\")", "0.25" },
            { "RANKS({5|5|9};\"random\")", "#VALUE!" },
        },
        .params = {
            OBSERVATIONS,
            { .name = "ties", .help = "What tied observations get: average, low, high or random.",
              .kind = WORD, .words = "average low high random", .optional = true },
            { .name = "seed", .help = "For random ties: a whole number from 0.",
              .kind = WHOLE, .low = 0, .high = 9007199254740992, .optional = true,
              .otherwise = NAN },
        },
        .call = cell_ranks,
    },
    {
        .name = "tau",
        .group = GROUP,
        .help = "Kendall's tau-b of a pair of columns, tau-a where nothing ties.",
        .detail =
            "(C - D)/sqrt((P - Tx)(P - Ty)) with C concordant and D discordant of P pairs of "
            "rows, Tx and Ty of them tied in x and in y (Kendall 1945). Rows with a gap in x or y "
            "are left out. Perfect dependence is exactly 1 or -1, and x and y may change places. "
            "Counted in O(n log n) (Knight 1966). Weights are relative importance: every pair "
            "counts by the product of its two weights, in all four numbers alike; whole weights "
            "give the tau of rows repeated so often. Rows whose weight is 0 or empty are left "
            "out. #N/A with fewer than two rows, #DIV/0! when a column does not vary.",
        .examples = {
            { "TAU({1|2|3|4};{1|3|2|4})", "0.666666666666667" },
            { "TAU({12;2;1;12;2};{1;4;7;1;0})", "-0.471404520791032" },
            { "TAU({1|2|3};{1|3|2};{1|2|1})", "0.2" },
            { "TAU({1|2|3};{7|7|7})", "#DIV/0!" },
        },
        .params = {
            PAIR_OF_COLUMNS,
            { .name = "weights",
              .help = "The importance of each row, at least 0; all alike when left out.",
              .kind = COLUMN, .optional = true, .fits = "x" },
        },
        .call = cell_tau,
    },
    {
        .name = "tauGrid",
        .group = GROUP,
        .help = "Kendall's tau-b of every pair of columns, as a matrix.",
        .detail =
            "With gaps \"pairs\" each pair uses the rows that both columns have, with \"rows\" "
            "all use the rows without any gap. figure: tau; error, the standard error that "
            "assumes no distribution, as TAUBAND with method free; low and high, the limits tau "
            "-/+ 1.96 error within [-1;1], which cover 95 % in large samples (92 to 94 % at ten "
            "rows, about 95 % from twenty); count, the rows used. error, low and high have no "
            "agreed meaning with weights and are refused. A pair without a value shows its error "
            "in its own cells: #N/A with fewer than two rows (three for the error), #DIV/0! where "
            "a column does not vary in the rows of the pair. The diagonal is exactly 1, its error "
            "0. A matrix from pairs with gaps need not be feasible: REPAIR mends it.",
        .examples = {
            { "INDEX(TAUGRID({1;1;4|2;3;3|3;2;2|4;4;1});1;2)", "0.666666666666667" },
            { "INDEX(TAUGRID({1;1;4|2;3;3|3;2;2|4;4;1});1;3)", "-1" },
            { "INDEX(TAUGRID({1;1|2;3|3;2|4;4};;;\"count\");2;1)", "4" },
            { "INDEX(TAUGRID({1;7|2;7|3;7});1;2)", "#DIV/0!" },
        },
        .params = {
            OBSERVATIONS,
            GAPS_OF_PAIRS,
            { .name = "weights",
              .help = "The importance of each row, at least 0; all alike when left out.",
              .kind = COLUMN, .optional = true, .fits = "data" },
            { .name = "figure", .help = "tau, error, count, low or high.",
              .kind = WORD, .words = "tau error count low high", .optional = true },
        },
        .costly = true,
        .call = cell_taugrid,
    },
    { 0 },
};
