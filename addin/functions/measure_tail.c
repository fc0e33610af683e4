/* measure_tail.c - dependence in the tails, and the Kendall distribution of data. */
#include "../function.h"
#include "../measures.h"
#include "../params.h"
#include "../words.h"
#include "../../src/kendall_curve.h"
#include "../../src/tail_dependence.h"

enum { X, Y };

/* ---- TAIL ---- */

enum { CORNER = 2, FRACTION };
enum { UPPER, LOWER };

static status rank_pair(const argument *in, const char *what, struct joint_ranks *ranks, report *r)
{
    *ranks = (struct joint_ranks){ 0 };
    status s = new_joint_ranks(in[X].data.at, in[Y].data.at, in[X].data.rows, ranks, r->pool);
    if (s != OK) return refuse_measure(s, ranks->rows, 2, &in[X], &in[Y], what, r);
    remark_rows(ranks->rows, filled_in_either(&in[X], &in[Y]), "gaps", r);
    return OK;
}

static status cell_tail(const argument *in, value *out, report *r)
{
    struct joint_ranks ranks;
    struct tail_estimate t;
    status s = rank_pair(in, "tail dependence", &ranks, r);
    if (s == OK) s = new_table(r, 1, 3, out);
    if (s != OK) return s;
    size_t k = rows_in_tail(&ranks, in[FRACTION].number);
    if (in[CORNER].word == UPPER) upper_tail(&ranks, k, &t);
    else lower_tail(&ranks, k, &t);
    put_number(out, 0, 0, t.lambda);
    if (!is_gap(t.error)) put_number(out, 0, 1, t.error);
    put_number(out, 0, 2, (double)t.joint);
    remark(r, "the tail has room for %zu row%s of each column", k, plural(k));
    if (t.joint > k) remark(r, "ties put %zu rows into it, so that the figure is above 1", t.joint);
    return OK;
}

/* ---- TAILCURVE, KENDALLCURVE ---- */

enum { POINTS = 2 };

static status cell_tailcurve(const argument *in, value *out, report *r)
{
    struct joint_ranks ranks;
    size_t points = (size_t)in[POINTS].number;
    status s = rank_pair(in, "tail dependence", &ranks, r);
    if (s == OK) s = new_table(r, points, 3, out);
    for (size_t i = 0; s == OK && i < points; i++) {
        double fraction = 0.5 * (double)(i + 1) / (double)points;
        struct tail_estimate lower, upper;
        lower_tail(&ranks, rows_in_tail(&ranks, fraction), &lower);
        upper_tail(&ranks, rows_in_tail(&ranks, fraction), &upper);
        put_number(out, i, 0, fraction);
        put_number(out, i, 1, lower.lambda);
        put_number(out, i, 2, upper.lambda);
    }
    return s;
}

static status cell_kendallcurve(const argument *in, value *out, report *r)
{
    size_t points = (size_t)in[POINTS].number, used = 0, n = in[X].data.rows;
    double *w = pool_take(r->pool, n, sizeof *w);
    status s = w ? kendall_values(in[X].data.at, in[Y].data.at, n, w, &used, r->pool) : NO_MEMORY;
    if (s != OK) return refuse_measure(s, used, 1, &in[X], &in[Y], "the curve", r);
    s = new_table(r, points, 2, out);
    for (size_t i = 0; s == OK && i < points; i++) {
        double v = (double)(i + 1) / (double)points;
        put_number(out, i, 0, v);
        put_number(out, i, 1, share_at_most(w, used, v));
    }
    if (s == OK) remark_rows(used, filled_in_either(&in[X], &in[Y]), "gaps", r);
    return s;
}

static const char GROUP[] = "Measure dependence in data";

const function measure_tail_functions[] = {
    {
        .name = "tail",
        .group = GROUP,
        .help = "Empirical tail dependence: the estimate, its standard error, the joint count.",
        .detail =
            "With n rows that have both, k = fraction x n rounded to the nearest whole number, at "
            "least 1, and mid-ranks R and S: upper is #(R > n-k and S > n-k)/k, lower #(R <= k "
            "and S <= k)/k. The standard error is that of Schmidt & Stadtmueller (2006) for a "
            "tail copula that is alike in both columns, sqrt(L (1 - L)(1 - L/2)/k); it stays "
            "empty under ten joint observations, where it would say nothing, and where ties "
            "put more than k rows into the tail, which makes the figure exceed 1. #N/A with fewer "
            "than two rows.",
        .examples = {
            { "TAIL({1|2|3|4|5|6|7|8};{1|2|3|4|5|6|8|7};\"upper\";0.25)", "1" },
            { "TAIL({1|2|3|4|5|6|7|8};{1|8|3|4|5|6|2|7};\"lower\";0.25)", "0.5" },
            { "INDEX(TAIL({1|2|3|4|5|6|7|8};{1|8|3|4|5|6|2|7};\"lower\";0.25);1;3)", "1" },
            { "TAIL({1|2|3};{1|2|3};\"upper\";2)", "#NUM!" },
        },
        .params = {
            PAIR_OF_COLUMNS,
            { .name = "corner", .help = "upper or lower.", .kind = WORD, .words = "upper lower" },
            { .name = "fraction", .help = "The share of rows that is the tail, above 0 to 1.",
              .kind = NUMBER, .low = 0, .high = 1, .open = LOW_OPEN },
        },
        .call = cell_tail,
    },
    {
        .name = "tailCurve",
        .group = GROUP,
        .help = "Empirical tail dependence at rising fractions: fraction, lower, upper.",
        .detail =
            "One row a point, ready to chart: the fractions 0.5 i/points, i = 1 to points, and at "
            "each what TAIL gives for the lower and the upper corner. Where a curve is flat "
            "towards small fractions, its level is the tail dependence.",
        .examples = {
            { "ROWS(TAILCURVE({1|2|3|4};{1|2|4|3}))", "50" },
            { "INDEX(TAILCURVE({1|2|3|4};{1|2|4|3};2);1;2)", "1" },
            { "INDEX(TAILCURVE({1|2|3|4};{1|2|4|3};2);1;3)", "0" },
        },
        .params = {
            PAIR_OF_COLUMNS,
            { .name = "points", .help = "How many fractions.", .kind = WHOLE, .low = 1,
              .high = 10000, .optional = true, .otherwise = 50 },
        },
        .costly = true,
        .call = cell_tailcurve,
    },
    {
        .name = "kendallCurve",
        .group = GROUP,
        .help = "The empirical Kendall distribution at equal steps: w and its probability.",
        .detail =
            "Each of the n rows that have both gets W, the share of the n rows that are no higher "
            "in x and in y, itself included (Genest & Rivest 1993, divisor n). The result is, at "
            "w = i/points, i = 1 to points, the share of W at most w. KENDALLOF gives the same of "
            "a model.",
        .examples = {
            { "INDEX(KENDALLCURVE({1|2|3|4};{1|3|2|4};4);2;2)", "0.75" },
            { "ROWS(KENDALLCURVE({1|2|3|4};{1|3|2|4}))", "50" },
        },
        .params = {
            PAIR_OF_COLUMNS,
            { .name = "points", .help = "How many steps.", .kind = WHOLE, .low = 1,
              .high = 10000, .optional = true, .otherwise = 50 },
        },
        .costly = true,
        .call = cell_kendallcurve,
    },
    { 0 },
};
