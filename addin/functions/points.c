/* points.c - what a model says at points. */
#include "../function.h"
#include "../params.h"
#include "../read.h"
#include "../shape.h"
#include "../words.h"
#include "../../src/evaluate.h"
#include "../../src/evaluation_work.h"

#include <math.h>

enum { ASKED, POINTS };

/* What came out, and what WHY is to say of it. */
struct answers {
    samples s;
    double error, part;       /* the largest that a row has, and as a part of its number */
    size_t empty;             /* rows with a gap */
    bool beyond;              /* whether an answer is beyond the range of numbers */
};

/* One row of points; the answer goes into `to`. */
typedef status answer_row(const struct evaluation *e, const double *u, double *to, double *error);

/* How a row is answered, and about how long that takes. */
struct way {
    answer_row *of;
    seconds_of_point *takes;
};

/* Each number within (0;1), or [0;1] if closed. */
static status check_points(const argument *in, bool closed, report *r)
{
    const samples *points = &in[POINTS].data;
    for (size_t j = 0; j < points->cols; j++)
        for (size_t i = 0; i < in[POINTS].filled; i++) {
            double u = column(points, j)[i];
            if (is_gap(u) || (u > 0 && u < 1) || (closed && u >= 0 && u <= 1)) continue;
            return refuse(r, OUT_OF_DOMAIN,
                          "points has %g in row %zu, column %zu, but must be between 0 and 1%s", u,
                          row_in_range(&in[POINTS], i), j + 1, closed ? "" : ", ends excluded");
        }
    return OK;
}

static bool take_row(const samples *points, size_t i, double *u)
{
    bool whole = true;
    for (size_t j = 0; j < points->cols; j++) {
        u[j] = column(points, j)[i];
        whole = whole && !is_gap(u[j]);
    }
    return whole;
}

/* Less quasi-Monte Carlo for many rows; refuses what would freeze the office all the same. */
static status check_time(const argument *in, const struct evaluation *e,
                         seconds_of_point *takes, report *r)
{
    const samples *points = &in[POINTS].data;
    double *u = pool_take(r->pool, points->cols, sizeof *u);
    size_t whole = 0;
    if (!u) return NO_MEMORY;
    for (size_t i = 0; i < in[POINTS].filled; i++) whole += take_row(points, i, u);
    double seconds = takes == cdf_seconds ? with_fewer_box_points(e, whole)
                                          : (double)whole * takes(e);
    return within_time(seconds, whole, "point", r);
}

/* After the first i rows: whether all would take too long, where that was not to be seen before. */
static status check_spent(const argument *in, const struct evaluation *e, size_t i, report *r)
{
    double spent = seconds_spent(e), all = (double)in[POINTS].filled;
    if (spent <= LONGEST_WAIT) return OK;
    return within_time(spent * all / (double)i, in[POINTS].filled, "point", r);
}

static status each_row(const argument *in, const struct evaluation *e, answer_row *of,
                       struct answers *a, report *r)
{
    const samples *points = &in[POINTS].data;
    double *u = pool_take(r->pool, points->cols, 2 * sizeof *u), *to = u + points->cols;
    if (!u) return NO_MEMORY;
    for (size_t i = 0; i < a->s.rows; i++) {
        double error = 0;
        bool whole = take_row(points, i, u);
        status s = whole ? of(e, u, to, &error) : OK;
        if (s == NO_MEMORY) return s;
        if (check_spent(in, e, i + 1, r) != OK) return OUT_OF_DOMAIN;
        if (!whole) a->empty++;
        if (s == OK && error > 0) a->error = fmax(a->error, error);
        if (s == OK && error > 0) a->part = fmax(a->part, error / to[0]);
        if (s == OK && whole) a->beyond = a->beyond || isinf(*to);
        for (size_t j = 0; j < a->s.cols; j++)
            column(&a->s, j)[i] = !whole ? gap() : s != OK ? fault(s)
                                : isfinite(to[j]) ? to[j] : fault(OUT_OF_DOMAIN);
    }
    return OK;
}

static void remark_on_rows(const struct answers *a, report *r)
{
    if (a->empty)
        remark(r, "%zu row%s of points with gaps left empty", a->empty, plural(a->empty));
}

/* `cols` answers a row. */
static status ask_all(const argument *in, enum question q, size_t cols, struct way way,
                      struct answers *a, struct evaluation *e, report *r)
{
    status s = check_points(in, q == ASK_CDF, r);
    if (s == OK) s = evaluation_of(in[ASKED].model, e, r->pool);
    if (s != OK) return s;
    const char *limit = evaluation_limit(e, q);
    if (limit) return refuse(r, OUT_OF_DOMAIN, "model %s", limit);
    s = check_time(in, e, way.takes, r);
    if (s != OK) return s;
    *a = (struct answers){ .s = { .rows = in[POINTS].filled, .cols = cols } };
    a->s.at = pool_take(r->pool, a->s.rows, cols * sizeof *a->s.at);
    if (!a->s.at) return NO_MEMORY;
    s = each_row(in, e, way.of, a, r);
    if (s == OK) remark_on_rows(a, r);
    return s;
}

/* One column, below the words of a header if the points had one. */
static status one_column(const argument *in, const struct answers *a, const char *word, value *out,
                         report *r)
{
    size_t header = in[POINTS].header;
    status s = new_table(r, a->s.rows + header, 1, out);
    if (s == OK && header) s = put_text(r, out, 0, 0, word);
    for (size_t i = 0; s == OK && i < a->s.rows; i++)
        put_number(out, i + header, 0, a->s.at[i]);
    return s;
}

static status row_cdf(const struct evaluation *e, const double *u, double *to, double *error)
{
    return cdf_at(e, u, to, error);
}

/* Rounded up to two digits. */
static double two_digits(double error)
{
    double digit = error > 0 ? pow(10, floor(log10(error)) - 1) : 1;
    return ceil(error / digit) * digit;
}

/* Where all points say the same they tell no error. */
static void remark_quasi(size_t points, double error, report *r)
{
    if (error == 0) {
        remark(r, "by quasi-Monte Carlo with %zu points, which all agree", points);
        return;
    }
    remark(r, "by quasi-Monte Carlo with %zu points, with a standard error of at most %g", points,
           two_digits(error));
}

static status cell_cdf(const argument *in, value *out, report *r)
{
    struct answers a;
    struct evaluation e;
    struct way way = { row_cdf, cdf_seconds };
    status s = ask_all(in, ASK_CDF, 1, way, &a, &e, r);
    if (s == OK && a.error > 0)
        remark(r, "by quasi-Monte Carlo with %zu points, with a standard error of at most %g and "
               "%g %% of a number", box_points(&e), two_digits(a.error), two_digits(100 * a.part));
    return s == OK ? one_column(in, &a, "cdf", out, r) : s;
}

static status row_density(const struct evaluation *e, const double *u, double *to, double *error)
{
    (void)error;
    double logarithm = 0;
    status s = log_density_at(e, u, &logarithm);
    *to = exp(logarithm);
    return s;
}

static status cell_density(const argument *in, value *out, report *r)
{
    struct answers a;
    struct evaluation e;
    struct way way = { row_density, density_seconds };
    status s = ask_all(in, ASK_DENSITY, 1, way, &a, &e, r);
    if (s == OK && a.beyond) r->cause = "the density is above 1e308";
    return s == OK ? one_column(in, &a, "density", out, r) : s;
}

static status row_conditional(const struct evaluation *e, const double *u, double *to,
                              double *error)
{
    (void)error;
    return conditional_at(e, u, to);
}

static status cell_conditional(const argument *in, value *out, report *r)
{
    struct answers a;
    struct evaluation e;
    size_t d = in[ASKED].model->dimension;
    struct way way = { row_conditional, conditional_seconds };
    status s = ask_all(in, ASK_CONDITIONAL, d, way, &a, &e, r);
    return s == OK ? table_like(&in[POINTS], &a.s, out, r) : s;
}

static status row_from_conditional(const struct evaluation *e, const double *u, double *to,
                                   double *error)
{
    (void)error;
    return from_conditional_at(e, u, to);
}

static status cell_fromconditional(const argument *in, value *out, report *r)
{
    struct answers a;
    struct evaluation e;
    size_t d = in[ASKED].model->dimension;
    struct way way = { row_from_conditional, from_conditional_seconds };
    status s = ask_all(in, ASK_CONDITIONAL, d, way, &a, &e, r);
    return s == OK ? table_like(&in[POINTS], &a.s, out, r) : s;
}

/* Of the numbers in a range those from 0 to 1, in its order, go to w; returns how many. Each other
 * becomes an error in `to`, and each gap stays one. */
static size_t take_probabilities(const samples *in, double *w, double *to)
{
    size_t n = 0;
    for (size_t i = 0; i < in->rows * in->cols; i++) {
        double x = in->at[i];
        to[i] = is_gap(x) ? gap() : fault(OUT_OF_DOMAIN);
        if (x >= 0 && x <= 1) w[n++] = x;
    }
    return n;
}

static void put_back(const samples *in, const double *k, double *to)
{
    for (size_t i = 0; i < in->rows * in->cols; i++)
        if (in->at[i] >= 0 && in->at[i] <= 1) {
            to[i] = isnan(*k) ? fault(NOT_SETTLED) : *k;
            k++;
        }
}

/* The numbers of a range in its shape; the status instead of a single one that is an error. */
static status numbers_like(const argument *a, double *at, value *out, report *r)
{
    samples s = a->data;
    if (s.at != &a->number) {
        s.at = at;
        return table_like(a, &s, out, r);
    }
    *out = (value){ .is = IS_NUMBER, .number = *at };
    return fault_in(*at);
}

static status cell_kendallof(const argument *in, value *out, report *r)
{
    struct evaluation e;
    const samples *asked = &in[1].data;
    size_t all = asked->rows * asked->cols;
    double *w = pool_take(r->pool, all, sizeof *w), *k = pool_take(r->pool, all, sizeof *k);
    double *to = pool_take(r->pool, all, sizeof *to), error;
    status s = w && k && to ? evaluation_of(in[0].model, &e, r->pool) : NO_MEMORY;
    if (s != OK) return s;
    const char *limit = evaluation_limit(&e, ASK_KENDALL);
    if (limit) return refuse(r, OUT_OF_DOMAIN, "model %s", limit);
    size_t n = take_probabilities(asked, w, to);
    s = within_time(kendall_seconds(&e, 1), 1, "value", r);
    if (s == OK) s = within_time(kendall_seconds(&e, n), n, "value", r);
    if (s == OK) s = kendall_at(&e, w, n, k, &error, r->pool);
    if (s != OK) return s;
    if (n > 0 && kendall_rays(&e))
        remark_quasi(kendall_rays(&e), error, r);
    put_back(asked, k, to);
    return numbers_like(&in[1], to, out, r);
}

static const char GROUP[] = "Describe a model";

const function points_functions[] = {
    {
        .name = "cdf",
        .group = GROUP,
        .help = "The probability that all lines are at most what a row of points says.",
        .detail =
            "Pairs to 1e-10 relative, in the tails too: for gaussian and t the integral of a "
            "conditional probability, which is positive, and rotated ones of all families by forms "
            "in which nothing cancels; for a grouped t also the integral over its chi-squares. "
            "gaussian and t beyond pairs by quasi-Monte Carlo (Genz 1992; Genz & Bretz 2002) with "
            "32,768 points, drawn about where the probability lies (Botev 2017), which leaves an "
            "error of a hundredth of a percent of the number in three columns, and of some tenths "
            "in a hundred, in the tails too; WHY states the standard error. Rows that would take "
            "more than about a second get fewer points each, down to 2,048. Archimedean families "
            "in any dimension by their generator, rotated by 180 as the mean over their frailty "
            "(Marshall & Olkin 1988) of the product of what the columns then do by themselves, to "
            "1e-10 relative too. A row with a gap gives an empty cell; points with a header give a "
            "column with the header cdf. What would take more than about 20 s is refused. The "
            "probability that all columns are above a point is that of the model with rotation 180 "
            "at 1 - u; give that as it is, 1e-20 where u is 1 - 1e-20. A computed range such as "
            "1-A2:C2 reaches a function whole only in a formula entered with Ctrl+Shift+Enter.",
        .examples = {
            { "CDF(MODEL(\"gaussian\";0.5);{0.5;0.5})", "0.333333333333333" },
            { "CDF(MODEL(\"clayton\";1);{0.5;0.5|0.2;0.9})", "0.333333333333333" },
            { "CDF(MODEL(\"gumbel\";2;;180);{0.01;0.01})", "0.00588721111702" },
            { "CDF(MODEL(\"gumbel\";2);{0.5;1.5})", "#NUM!" },
        },
        .params = {
            MODEL_BLOCK,
            { .name = "points", .fits = "model",
              .help = "One point a row, one column a line, from 0 to 1.", .kind = DATA },
        },
        .call = cell_cdf,
        .costly = true,
    },
    {
        .name = "density",
        .group = GROUP,
        .help = "The density of a model, one value a row of points.",
        .detail =
            "Archimedean families in any dimension by the derivatives of their generator (Hofert, "
            "Maechler & McNeil 2012); a grouped t by an integral over its chi-squares. A singular "
            "matrix and perfect dependence have no density: #NUM!. So has a density beyond 1e308. "
            "A row with a gap gives an empty cell; below a header the result begins with the word "
            "density. What would take more than about 20 s is refused.",
        .examples = {
            { "DENSITY(MODEL(\"gaussian\";0.5);{0.5;0.5})", "1.15470053837925" },
            { "DENSITY(MODEL(\"clayton\";1;;;3);{0.5;0.5;0.5})", "1.5" },
            { "DENSITY(MODEL(\"gaussian\";1);{0.5;0.5})", "#NUM!" },
        },
        .params = {
            MODEL_BLOCK,
            { .name = "points", .fits = "model",
              .help = "One point a row, one column for each of the model, between 0 and 1.",
              .kind = DATA },
        },
        .call = cell_density,
        .costly = true,
    },
    {
        .name = "conditional",
        .group = GROUP,
        .help = "Rows of a model into independent uniforms: each column given those before it.",
        .detail =
            "The transform of Rosenblatt (1952): column 1 as it is, column j the probability that "
            "the line is at most what it is, given the columns before. Of rows that follow the "
            "model the result is uniform and independent, which is a way to look where a model "
            "does not fit. A singular matrix and perfect dependence are #NUM!. A row with a gap "
            "gives empty cells. What would take more than about 20 s is refused: 10,000 rows of "
            "gumbel take that in some 1,800 columns, one row in some 6,000, and 10,000 of a "
            "grouped t in some 60.",
        .examples = {
            { "INDEX(CONDITIONAL(MODEL(\"clayton\";1);{0.5;0.5});1;2)", "0.444444444444444" },
            { "INDEX(CONDITIONAL(MODEL(\"independent\");{0.3;0.8});1;2)", "0.8" },
        },
        .params = {
            MODEL_BLOCK,
            { .name = "points", .fits = "model",
              .help = "One point a row, one column for each of the model, between 0 and 1.",
              .kind = DATA },
        },
        .call = cell_conditional,
        .costly = true,
    },
    {
        .name = "fromConditional",
        .group = GROUP,
        .help = "Independent uniforms into rows that follow a model; the inverse of CONDITIONAL.",
        .detail =
            "Column 1 as it is, column j the quantile of its conditional distribution given the "
            "columns before. It makes rows of a model from uniforms of one's own, or moves one "
            "line along its conditional distribution for a stress: with 0.99 in column 2 it "
            "answers what line 2 has in one of a hundred cases in which line 1 has what is in "
            "column 1. Limits as in CONDITIONAL, but it takes some twelve times as long, of "
            "gaussian and t hardly more. Numbers beyond 1 - 2^-53 become that.",
        .examples = {
            { "INDEX(FROMCONDITIONAL(MODEL(\"clayton\";1);{0.5;0.444444444444444});1;2)", "0.5" },
            { "INDEX(FROMCONDITIONAL(MODEL(\"gaussian\";0.5);{0.99;0.5});1;2)",
              "0.877620530654097" },
        },
        .params = {
            MODEL_BLOCK,
            { .name = "points", .fits = "model",
              .help = "One row of uniforms for each row wanted, between 0 and 1.", .kind = DATA },
        },
        .call = cell_fromconditional,
        .costly = true,
    },
    {
        .name = "kendallOf",
        .group = GROUP,
        .help = "The Kendall distribution of a model: P(C(U) <= w), to lay beside KENDALLCURVE.",
        .detail =
            "Archimedean families by their generator in any dimension (Barbe, Genest, Ghoudi & "
            "Remillard 1996), other pairs and rotated ones by an integral along the curve on which "
            "the distribution function is w, to 1e-9, for tau beyond 0.95 or -0.95 to 1e-7. "
            "gaussian, t and rotation 180 in more than two dimensions, a grouped t, and a t pair "
            "with df below 0.25 by quasi-Monte Carlo: along up to 4,096 lines through the unit "
            "cube on which the distribution function rises, fewer in many columns, which take some "
            "2 s in all and answer every value; WHY states the standard error: ask all w in one "
            "formula entered with Ctrl+Shift+Enter, not in one formula a row, since what takes the "
            "time is made once for a formula. A value of a gaussian pair takes some 0.004 s, of "
            "another t pair some 0.025, with df below 2 some 0.07; what would take more than about "
            "20 s is refused. Of a pair tau is 3 - 4 times the area below it (Genest & Rivest "
            "1993).",
        .examples = {
            { "KENDALLOF(MODEL(\"independent\");0.5)", "0.846573590279973" },
            { "KENDALLOF(MODEL(\"clayton\";1);0.5)", "0.75" },
        },
        .params = {
            MODEL_BLOCK,
            { .name = "w", .help = "Probabilities, a number or a range of them.", .kind = NUMBERS,
              .low = 0, .high = 1 },
        },
        .call = cell_kendallof,
        .costly = true,
    },
    { 0 },
};
