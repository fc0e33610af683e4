/* parameters.c - from measured dependence to the parameters of a model. */
#include "../family_texts.h"
#include "../function.h"
#include "../correlations.h"
#include "../models.h"
#include "../read.h"
#include "../../src/copulas/elliptical.h"
#include "../../src/family.h"
#include "../../src/pair_measures.h"
#include "../../src/spearman_inverse.h"

#include <math.h>
#include <string.h>

static status theta_of_tau(double tau, const void *family_of, double *theta)
{
    const family *f = family_of;
    return f->theta_from_tau(tau, theta);
}

static bool any_below(const value *out, double low)
{
    if (out->is == IS_NUMBER) return out->number < low;
    for (size_t i = 0; i < out->table.rows * out->table.cols; i++)
        if (out->table.at[i] < low) return true;
    return false;
}

static void remark_pairs_only(const family *f, const value *out, report *r)
{
    if (!any_below(out, f->theta_low_beyond_pairs)) return;
    remark(r, "theta below %g is for pairs only", f->theta_low_beyond_pairs);
    if (f->tail(1, NAN, LOWER) != f->tail(1, NAN, UPPER))
        remark(r, "rotation 90 of a positive theta is another negative dependence of a pair");
}

static status refuse_reach(const char *what, const argument *a, const char *range,
                           const family *f, report *r)
{
    if (!range) return NO_MEMORY;
    return refuse(r, OUT_OF_DOMAIN, "%s is %g, but a pair of the %s copula reaches only %s", what,
                  a->number, f->word, range);
}

/* What there is to say of a range that went well but for some of its cells. */
static status remark_reach(const char *what, const value *out, const char *range, const family *f,
                           report *r)
{
    size_t n = out->is == IS_TABLE ? out->table.rows * out->table.cols : 0;
    if (!range) return NO_MEMORY;
    for (size_t i = 0; i < n; i++)
        if (fault_in(out->table.at[i]) == OUT_OF_DOMAIN) {
            remark(r, "of %s a pair of the %s copula reaches only %s", what, f->word, range);
            break;
        }
    remark_pairs_only(f, out, r);
    return OK;
}

static status cell_theta(const argument *in, value *out, report *r)
{
    const family *f = families[in[0].word];
    if (!f->has_theta && !f->has_matrix)
        return refuse(r, BAD_KIND, "%s has no parameter", f->word);
    status s = each_number(&in[1], theta_of_tau, f, out, r);
    const char *range = tau_range(f, r->pool);
    if (s == OUT_OF_DOMAIN && out->is == IS_NUMBER)
        return refuse_reach("tau", &in[1], range, f, r);
    if (s == OK) s = remark_reach("tau", out, range, f, r);
    return s;
}

struct rho_call {
    const family *family;
    double df;
};

static status theta_of_rho(double rho, const void *with, double *theta)
{
    const struct rho_call *c = with;
    return theta_from_rho(c->family, rho, c->df, theta);
}

static status cell_thetarho(const argument *in, value *out, report *r)
{
    struct rho_call c = { families[in[0].word], in[2].number };
    const family *f = c.family;
    if (!f->has_theta && !f->has_matrix)
        return refuse(r, BAD_KIND, "%s has no parameter", f->word);
    if (f->has_df && !in[2].given)
        return refuse(r, BAD_KIND, "df is missing: %s needs it", f->word);
    if (!f->has_df && in[2].given)
        return refuse(r, BAD_KIND, "df is given, but %s has no degrees of freedom", f->word);
    status s = each_number(&in[1], theta_of_rho, &c, out, r);
    const char *range = rho_range(f, r->pool);
    if (s == OUT_OF_DOMAIN && out->is == IS_NUMBER)
        return refuse_reach("rho", &in[1], range, f, r);
    if (s == OK) s = remark_reach("rho", out, range, f, r);
    return s;
}

static status correlation_of(double tau, const void *unused, double *correlation)
{
    (void)unused;
    return correlation_from_tau(tau, correlation);
}

static status cell_greiner(const argument *in, value *out, report *r)
{
    return each_number(&in[0], correlation_of, NULL, out, r);
}

static status tau_of(double correlation, const void *unused, double *tau)
{
    (void)unused;
    return tau_from_correlation(correlation, tau);
}

static status cell_greinerback(const argument *in, value *out, report *r)
{
    return each_number(&in[0], tau_of, NULL, out, r);
}

static status cell_dffromtail(const argument *in, value *out, report *r)
{
    double correlation = in[0].number, lambda = in[1].number, df, highest = 0;
    status s = df_from_tail(correlation, lambda, &df, &highest);
    if (s == OUT_OF_DOMAIN && lambda < highest)
        return refuse(r, s, "lambda is %g, but with a correlation of %g takes degrees of freedom "
                      "outside [1e-6;1e9]", lambda, correlation);
    if (s == OUT_OF_DOMAIN)
        return refuse(r, s, "lambda is %g, but with a correlation of %g the t copula reaches only "
                      "(0;%g)", lambda, correlation, highest);
    return s == OK ? answer(out, df) : s;
}

static status put_family(const family *f, size_t row, value *out, report *r)
{
    pool *p = r->pool;
    const char *texts[] = { f->word, parameter_text(f, p), tau_range(f, p), dimensions_text(f, p),
                            rotations_text(f), tails_text(f) };
    for (size_t j = 0; j < sizeof texts / sizeof *texts; j++) {
        status s = texts[j] ? put_text(r, out, row, j, texts[j]) : NO_MEMORY;
        if (s != OK) return s;
    }
    return OK;
}

static status cell_families(const argument *in, value *out, report *r)
{
    (void)in;
    static const char *const header[] = {
        "family", "parameter", "tau", "dimensions", "rotations", "tails"
    };
    size_t n = 0, cols = sizeof header / sizeof *header;
    while (families[n]) n++;
    status s = new_table(r, n + 1, cols, out);
    for (size_t j = 0; s == OK && j < cols; j++) s = put_text(r, out, 0, j, header[j]);
    for (size_t i = 0; s == OK && i < n; i++) s = put_family(families[i], i + 1, out, r);
    return s;
}

enum { FAMILY, PARAMETER, FREEDOM, ROTATION, DIMENSION };

/* The number that a parameter is which came as a single cell. */
static status single_number(const value *one, double *x, report *r)
{
    if (one->is == IS_TEXT)
        return refuse(r, BAD_KIND, "parameter is the text \"%s\", but must be a number", one->text);
    if (one->is != IS_NUMBER) return refuse(r, BAD_KIND, "parameter must be one number");
    if (fault_in(one->number) != OK)
        return refuse(r, fault_in(one->number), "parameter is an error");
    if (!isfinite(one->number)) return refuse(r, OUT_OF_DOMAIN, "parameter is not a finite number");
    *x = one->number;
    return OK;
}

/* One correlation for all pairs. */
static status spread_correlation(const value *one, double *matrix, size_t d, report *r)
{
    const double ROUNDING = 1e-9;        /* as matrix_defect() has it */
    double correlation = 0;
    status s = single_number(one, &correlation, r);
    if (s == OK && fabs(correlation) > 1 + ROUNDING)
        return refuse(r, OUT_OF_DOMAIN, "parameter is %g, but a correlation is from -1 to 1",
                      correlation);
    correlation = fmax(-1, fmin(1, correlation));
    for (size_t i = 0; i < d; i++)
        for (size_t j = 0; j < d; j++) matrix[i * d + j] = i == j ? 1 : correlation;
    return s;
}

/* A matrix with its names. It says the dimension; where that is given as well, it must agree. */
static status take_matrix(const argument *in, copula *c, double **matrix, report *r)
{
    argument a = in[PARAMETER];
    status s = read_matrix(a.raw, "parameter", &a.data, &a.header, r);
    samples m = a.data;
    if (s != OK) return s;
    if (in[DIMENSION].given && c->dimension != m.cols)
        return refuse(r, BAD_KIND, "dimension is %zu, but parameter is a matrix of %zu columns",
                      c->dimension, m.cols);
    if (m.names) remark(r, "lines named as parameter names them");
    c->dimension = m.cols;
    c->lines = m.names;
    return take_correlations(&a, matrix, r);
}

static status take_parameter(const argument *in, copula *c, report *r)
{
    const family *f = c->family;
    value one = in[PARAMETER].given ? single_of(in[PARAMETER].raw) : (value){ .is = IS_NOTHING };
    if (!f->has_theta && !f->has_matrix && one.is == IS_NOTHING) return OK;
    if (!f->has_theta && !f->has_matrix)
        return refuse(r, BAD_KIND, "%s has no parameter", f->word);
    if (one.is == IS_NOTHING)
        return refuse(r, BAD_KIND, "parameter is missing: %s needs %s", f->word,
                      f->has_theta ? "theta" : "a matrix, or one correlation for all pairs");
    if (f->has_theta) return single_number(&one, &c->theta, r);

    double *matrix = NULL;
    status s = OK;
    if (one.is == IS_TABLE) {
        s = take_matrix(in, c, &matrix, r);
    } else if ((s = check_columns(f, (double)c->dimension, r)) == OK) {
        matrix = pool_take(r->pool, c->dimension, c->dimension * sizeof *matrix);
        s = matrix ? spread_correlation(&one, matrix, c->dimension, r) : NO_MEMORY;
    }
    c->matrix = matrix;
    return s;
}

/* Zero degrees of freedom, as a blank cell gives them, are none. */
static bool no_df(const argument *a)
{
    return !a->given || (single_of(a->raw).is == IS_NUMBER && a->number == 0);
}

/* One number of degrees of freedom for all columns, or one for each. */
static status take_df(const argument *a, copula *c, report *r)
{
    const family *f = c->family;
    if (!f->has_df && !no_df(a))
        return refuse(r, BAD_KIND, "df is given, but %s has no degrees of freedom", f->word);
    if (!f->has_df) return OK;
    if (!a->given) return refuse(r, BAD_KIND, "df is missing: %s needs it", f->word);
    if (no_df(a))
        return refuse(r, OUT_OF_DOMAIN, "df is 0, but must be above 0 (a blank cell counts as 0)");
    size_t n = a->data.rows * a->data.cols;
    if (n != 1 && n != c->dimension)
        return refuse(r, BAD_KIND, "df has %zu values, but must have 1 or %zu, one a column", n,
                      c->dimension);
    if (n == c->dimension && a->data.rows == 1) {
        status s = check_same_names("df", a->data.names, "the matrix", c->lines, n, r);
        if (s != OK) return s;
    }
    double *df = pool_take(r->pool, c->dimension, sizeof *df);
    if (!df) return NO_MEMORY;
    for (size_t i = 0; i < c->dimension; i++) {
        df[i] = a->data.at[n == 1 ? 0 : i];
        if (is_gap(df[i])) return refuse(r, BAD_KIND, "df has an empty cell at place %zu", i + 1);
    }
    c->df = df;
    return OK;
}

/* What a check found, in words of the arguments where it is about the matrix. */
static status refuse_model(const argument *in, const copula *c, status s, const char *label,
                           const report *found, report *r)
{
    if (s == OK || s == NO_MEMORY || !*found->why) return s;
    if (strcmp(label, "matrix")) return refuse(r, s, "%s", found->why);
    value one = single_of(in[PARAMETER].raw);
    if (one.is != IS_NUMBER) return refuse(r, s, "parameter: %s", found->why);
    return refuse(r, s, "parameter is %g, but one correlation for %zu lines must be at least %g "
                  "(-1/(d - 1))", one.number, c->dimension, -1 / ((double)c->dimension - 1));
}

static status cell_model(const argument *in, value *out, report *r)
{
    copula c = { .family = families[in[FAMILY].word],
                 .dimension = (size_t)in[DIMENSION].number };
    status s = check_degrees(in[ROTATION].number, r);
    if (s != OK) return s;
    c.rotation = (int)in[ROTATION].number;
    s = take_parameter(in, &c, r);
    if (s == OK) s = take_df(&in[FREEDOM], &c, r);
    if (s != OK) return s;
    const char *label = "";
    report found = { .pool = r->pool };
    s = check_copula(&c, &label, &found);
    return s == OK ? write_copula(&c, out, r) : refuse_model(in, &c, s, label, &found, r);
}

static const char GROUP[] = "Turn it into parameters";

const function parameters_functions[] = {
    {
        .name = "theta",
        .group = GROUP,
        .help = "The parameter with which a pair of a copula family has this Kendall's tau.",
        .detail =
            "gaussian and t: the correlation sin(pi tau/2). clayton: 2 tau/(1 - tau). gumbel: "
            "1/(1 - tau). frank: by its Debye function. joe: by its digamma function. amh and "
            "plackett: by inverting tau. fgm: 9 tau/2. Accurate to 1e-12 relative. What a family "
            "reaches of tau stands under Copula families; clayton and frank reach below 0 with a "
            "negative theta, which in more than two dimensions is not admissible; clayton with "
            "rotation 90 is another way to negative dependence. Where tau is a range the result "
            "has its shape, with #NUM! in the cell of a tau that "
            "the family cannot reach. A blank single cell counts as 0.",
        .examples = {
            { "THETA(\"gumbel\";0.5)", "2" },
            { "THETA(\"clayton\";-0.2)", "-0.333333333333333" },
            { "THETA(\"frank\";0.5)", "5.73628270701997" },
            { "THETA(\"joe\";-0.1)", "#NUM!" },
        },
        .params = {
            { .name = "family", .help = "The family's word, see FAMILIES.",
              .kind = WORD, .words = family_words },
            { .name = "tau", .help = "Kendall's tau, a number or a range of them.",
              .kind = NUMBERS, .low = -1, .high = 1 },
        },
        .call = cell_theta,
    },
    {
        .name = "thetaRho",
        .group = GROUP,
        .help = "The parameter with which a pair of a copula family has this Spearman's rho.",
        .detail =
            "gaussian: 2 sin(pi rho/6). fgm: 3 rho. The others by inverting rho: frank by its "
            "Debye "
            "functions, gumbel by an integral, clayton, joe and amh by series, plackett by its "
            "closed form, t by an integral over its chi-squares. What a family reaches of rho "
            "stands under Copula families; negative ones of clayton and frank with a negative "
            "theta, which is for pairs only. A blank single cell counts as 0.",
        .examples = {
            { "THETARHO(\"gaussian\";0.5)", "0.517638090205042" },
            { "THETARHO(\"clayton\";-7/15)", "-0.5" },
            { "THETARHO(\"plackett\";0.5)", "5.1156608664894" },
            { "THETARHO(\"gumbel\";-0.1)", "#NUM!" },
        },
        .params = {
            { .name = "family", .help = "The family's word, see FAMILIES.",
              .kind = WORD, .words = family_words },
            { .name = "rho", .help = "Spearman's rho, a number or a range of them.",
              .kind = NUMBERS, .low = -1, .high = 1 },
            { .name = "df", .help = "For t the degrees of freedom.", .kind = NUMBER,
              .low = 0, .high = 1e9, .open = LOW_OPEN, .optional = true },
        },
        .costly = true,
        .call = cell_thetarho,
    },
    {
        .name = "dfFromTail",
        .group = GROUP,
        .help = "The degrees of freedom at which a t copula has this tail dependence.",
        .detail =
            "Upper and lower tail dependence of the t copula are alike: twice the t distribution "
            "function with df + 1 degrees of freedom at -sqrt((df + 1)(1 - correlation)/(1 + "
            "correlation)) (Embrechts, McNeil & Straumann 2002). It falls from 1 - "
            "acos(correlation)/pi to 0 as df grows; other lambda are #NUM!.",
        .examples = {
            { "DFFROMTAIL(0.5;0.3125)", "3" },
            { "DFFROMTAIL(0.5;0.7)", "#NUM!" },
        },
        .params = {
            { .name = "correlation", .help = "The correlation of the pair, between -1 and 1.",
              .kind = NUMBER, .low = -1, .high = 1, .open = BOTH_OPEN },
            { .name = "lambda", .help = "The tail dependence wanted, between 0 and 1.",
              .kind = NUMBER, .low = 0, .high = 1, .open = BOTH_OPEN },
        },
        .call = cell_dffromtail,
    },
    {
        .name = "families",
        .group = GROUP,
        .help = "The copula families with their parameters, tau, dimensions, rotations and tails.",
        .detail =
            "One row a family below a header. [ and ] mean that an end of a range belongs to it, ( "
            "and ) that it does not. Tails says in which corners the unrotated copula has tail "
            "dependence; rotation 180 exchanges them.",
        .examples = {
            { "INDEX(FAMILIES();6;2)", "theta [1;1e+17]" },
            { "INDEX(FAMILIES();5;3)", "[-1;1)" },
        },
        .call = cell_families,
    },
    {
        .name = "greiner",
        .group = GROUP,
        .help = "The correlation sin(pi tau/2) of an elliptical copula with this Kendall's tau.",
        .detail =
            "Greiner (1909); it holds for the gaussian and, whatever its degrees of freedom, for "
            "the t copula (Lindskog, McNeil & Schmock 2003). Exact at -1, 0 and 1. A matrix of "
            "such correlations need not be feasible: REPAIR mends it.",
        .examples = {
            { "GREINER(0.5)", "0.707106781186548" },
            { "GREINER(1)", "1" },
            { "GREINER({0.2;-0.2})", "0.309016994374947" },
            { "GREINER(1.5)", "#NUM!" },
        },
        .params = {
            { .name = "tau", .help = "Kendall's tau from -1 to 1, a number or a range of them.",
              .kind = NUMBERS, .low = -1, .high = 1 },
        },
        .call = cell_greiner,
    },
    {
        .name = "greinerBack",
        .group = GROUP,
        .help = "The Kendall's tau 2 asin(correlation)/pi of an elliptical copula.",
        .detail = "The inverse of GREINER. Exact at -1, 0 and 1.",
        .examples = {
            { "GREINERBACK(0.5)", "0.333333333333333" },
            { "GREINERBACK(-1)", "-1" },
        },
        .params = {
            { .name = "correlation",
              .help = "The correlation of a pair from -1 to 1, a number or a range of them.",
              .kind = NUMBERS, .low = -1, .high = 1 },
        },
        .call = cell_greinerback,
    },
    {
        .name = "model",
        .group = GROUP,
        .help = "A model block: a copula with its parameters, for all functions that take a model.",
        .detail =
            "An array with labels down its first column: copula, dimension, lines when the matrix "
            "carried names, theta or df and matrix, rotation when it is not 0. It can stand in the "
            "sheet, be copied as values and edited, or be nested straight into another function. "
            "By hand: copula and dimension always; theta, or matrix (and df for t); lines, "
            "rotation and notes if wanted; in any order. A range for df may have a header, which must name "
            "the lines as the matrix does. "
            "With (U;V) from the unrotated copula, rotation 90 is (1-U;V), 180 is (1-U;1-V), the "
            "survival copula, and 270 is (U;1-V); theta is that of the unrotated copula. Beyond "
            "pairs rotation is 0 or 180. A matrix must have a unit diagonal and be symmetric and "
            "feasible: its lowest eigenvalue at least -1e-12 times the dimension. With several df "
            "(grouped t) one uniform drives the chi-square of every column.",
        .examples = {
            { "INDEX(MODEL(\"gumbel\";2);3;2)", "2" },
            { "INDEX(MODEL(\"t\";0.3;4;0;3);4;3)", "0.3" },
            { "MODEL(\"gaussian\";{1;0.3|0.3;1})", "copula" },
            { "MODEL(\"gumbel\";0.5)", "#NUM!" },
        },
        .params = {
            { .name = "family", .help = "The family's word, see FAMILIES.",
              .kind = WORD, .words = family_words },
            { .name = "parameter",
              .help = "theta; for gaussian and t a matrix, or one correlation for all pairs.",
              .kind = RAW, .optional = true },
            { .name = "df",
              .help = "For t the degrees of freedom above 0, one number or one for each column; "
                      "for other families 0 counts as left out.",
              .kind = NUMBERS, .optional = true },
            { .name = "rotation", .help = "0, 90, 180 or 270 degrees.", .kind = WHOLE,
              .optional = true, .otherwise = 0 },
            { .name = "dimension",
              .help = "How many columns the model has, where parameter is not a matrix.",
              .kind = WHOLE, .low = 2, .high = 16384, .optional = true, .otherwise = 2 },
        },
        .call = cell_model,
    },
    { 0 },
};
