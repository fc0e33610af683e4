/* selfcheck.c - published values computed again by the cell functions, inside this very office. */
#include "../function.h"
#include "../value.h"

#include <math.h>
#include <string.h>

enum { MOST_ARGUMENTS = 5 };

/* An argument: a word, a number (rows = 0), a table, whose texts are in words, or the model that
 * MODEL makes of a family, its parameter (number) and df. */
struct literal {
    const char *text, *family;
    double number, df;
    size_t rows, cols;
    const double *at;
    const char *const *words;
};

struct published {
    const char *what, *source, *function;
    struct literal given[MOST_ARGUMENTS];
    size_t cell;                 /* of the result, row by row */
    double value, tolerance;     /* absolute */
};

static const double tuna_lightness[] = { 44.4, 45.9, 41.9, 53.3, 44.7, 44.1, 50.7, 45.2, 60.1 };
static const double tuna_score[] = { 2.6, 3.1, 2.5, 5.0, 3.6, 4.0, 5.2, 2.8, 3.8 };
static const double higham[] = { 1, 1, 0, 1, 1, 1, 0, 1, 1 };
static const double tridiagonal[] = { 2, -1, 0, -1, 2, -1, 0, -1, 2 };
static const double losses[] = { 3, 17, 8, 44, 91 };
static const double quarter[] = { 0.25, 0.5 }, half[] = { 0.5, 0.5 };
static const double gammas[] = { NAN, 2, 10, NAN, 3, 10 };
static const char *const gamma_words[] = { "gamma", NULL, NULL, "gamma", NULL, NULL };

enum { PRICE_COLUMNS = 7, TVAR_ROW = 6, GROSS_COLUMN = 1 };

static const struct published checks[] = {
    { "tau of nine pairs", "Hollander & Wolfe (1973), p. 187", "tau",
      { { .rows = 9, .cols = 1, .at = tuna_lightness },
        { .rows = 9, .cols = 1, .at = tuna_score } },
      0, 4.0 / 9, 1e-15 },
    { "theta of frank at tau 0.5", "50-digit recomputation of Genest (1987)", "theta",
      { { .text = "frank" }, { .number = 0.5 } }, 0, 5.736282707019970917, 1e-11 },
    { "theta of joe at tau 0.5", "50-digit recomputation, Joe (1997)", "theta",
      { { .text = "joe" }, { .number = 0.5 } }, 0, 2.856257211950806517, 1e-11 },
    { "correlation at tau 1/3", "Greiner (1909)", "greiner",
      { { .number = 1.0 / 3 } }, 0, 0.5, 1e-15 },
    { "normal pair of correlation 0.5, both below the median", "Sheppard (1899)", "cdf",
      { { .family = "gaussian", .number = 0.5 }, { .rows = 1, .cols = 2, .at = half } }, 0,
      1.0 / 3, 1e-12 },
    { "Spearman's rho of a normal pair of correlation 0.5", "Pearson (1907), 6/pi asin(1/4)",
      "rhoOf", { { .family = "gaussian", .number = 0.5 } }, 0, 0.482583739530997463, 1e-12 },
    { "tail dependence of t at correlation 0.5 with 4 df", "50-digit recomputation, Embrechts, "
      "McNeil & Straumann (2002)", "tailOf",
      { { .family = "t", .number = 0.5, .df = 4 }, { .text = "upper" } }, 0,
      0.25316999510032263, 1e-12 },
    { "clayton 1 at (1/4, 1/2): P(V <= 1/2 | U = 1/4)", "by hand, (v/(u + v - u v))^2",
      "conditional", { { .family = "clayton", .number = 1 },
                       { .rows = 1, .cols = 2, .at = quarter } }, 1, 0.64, 1e-14 },
    { "Kendall distribution of clayton 1 at 1/2", "Genest & Rivest (1993), w + w (1 - w)",
      "kendallOf", { { .family = "clayton", .number = 1 }, { .number = 0.5 } }, 0, 0.75, 1e-14 },
    { "lowest eigenvalue of tridiagonal (-1, 2, -1)", "closed form, 2 - sqrt 2", "eigen",
      { { .rows = 3, .cols = 3, .at = tridiagonal } }, 2, 0.585786437626904951, 1e-14 },
    { "nearest correlation matrix, entry 1, 2", "Higham (2002), p. 334", "repair",
      { { .rows = 3, .cols = 3, .at = higham } }, 1, 0.7606898534022837848, 1e-9 },
    { "nearest correlation matrix, entry 1, 3", "Higham (2002), p. 334", "repair",
      { { .rows = 3, .cols = 3, .at = higham } }, 2, 0.1572981061383757546, 1e-9 },
    { "weibull shape for mean 3 and variance 7.5", "method of moments, recomputed to 20 digits",
      "moments", { { .text = "weibull" }, { .number = 3 }, { .number = 2.738612787525830567 } }, 0,
      1.0967191846224573339, 1e-11 },
    { "gamma (2, 10) at 0.99", "Klugman, Panjer & Willmot, appendix A", "quantile",
      { { .number = 0.99 }, { .text = "gamma" }, { .number = 2 }, { .number = 10 } }, 0,
      66.383520679938122694, 1e-9 },
    { "expected shortfall of five losses at 0.5", "Acerbi & Tasche (2002), by hand: 143.5 / 2.5",
      "tvar", { { .rows = 5, .cols = 1, .at = losses }, { .number = 0.5 } }, 0, 57.4, 1e-12 },
    { "TVaR 0.99 of gamma (2, 10) + gamma (3, 10), simulated",
      "closed form: the sum is gamma (5, 10)", "price",
      { { .family = "independent" },
        { .rows = 2, .cols = 3, .at = gammas, .words = gamma_words } },
      TVAR_ROW * PRICE_COLUMNS + GROSS_COLUMN, 130.00544913678995897, 2.4 },
};

enum { CHECKS = sizeof checks / sizeof *checks };

/* By the cell function of this name. */
static status call_named(const char *name, const value *in, size_t n, value *out, pool *p)
{
    const function *f = function_named(name);
    report inner = { .pool = p };
    return f ? call_function(f, in, n, out, &inner) : BAD_KIND;
}

static status model_from(const struct literal *l, value *v, pool *p)
{
    const value in[] = { { .is = IS_TEXT, .text = l->family },
                         { .is = IS_NUMBER, .number = l->number },
                         { .is = IS_NUMBER, .number = l->df } };
    return call_named("model", in, l->df > 0 ? 3 : l->number != 0 ? 2 : 1, v, p);
}

static status value_from(const struct literal *l, value *v, pool *p)
{
    if (l->family) return model_from(l, v, p);
    *v = (value){ .is = l->text ? IS_TEXT : IS_NUMBER, .text = l->text, .number = l->number };
    if (!l->rows) return OK;
    size_t n = l->rows * l->cols;
    double *at = pool_take(p, n, sizeof *at);
    const char **words = l->words ? pool_take(p, n, sizeof *words) : NULL;
    if (!at || (l->words && !words)) return NO_MEMORY;
    for (size_t i = 0; i < n; i++) at[i] = isnan(l->at[i]) ? gap() : l->at[i];
    if (words) memcpy(words, l->words, n * sizeof *words);
    *v = (value){ .is = IS_TABLE, .table = { l->rows, l->cols, at, words } };
    return OK;
}

static bool is_given(const struct literal *l)
{
    return l->text || l->family || l->rows || l->number != 0;
}

static status compute(const struct published *c, double *x, report *r)
{
    value in[MOST_ARGUMENTS], out;
    size_t n = 0;
    for (; n < MOST_ARGUMENTS && is_given(c->given + n); n++) {
        status s = value_from(c->given + n, in + n, r->pool);
        if (s != OK) return s;
    }
    status s = call_named(c->function, in, n, &out, r->pool);
    if (s == OK) *x = out.is == IS_TABLE ? out.table.at[c->cell] : out.number;
    return s;
}

static status put_check(const struct published *c, size_t row, value *out, report *r)
{
    double x = NAN;
    status s = compute(c, &x, r);
    bool pass = s == OK && fabs(x - c->value) <= c->tolerance;
    put_number(out, row, 1, s == OK ? x : fault(s));
    put_number(out, row, 2, c->value);
    put_number(out, row, 3, c->tolerance);
    s = put_text(r, out, row, 0, c->what);
    if (s == OK) s = put_text(r, out, row, 4, c->source);
    return s == OK ? put_text(r, out, row, 5, pass ? "pass" : "fail") : s;
}

static status cell_selfcheck(const argument *in, value *out, report *r)
{
    static const char *const heading[] = { "check", "computed", "published", "allowed", "source",
                                           "result" };
    (void)in;
    status s = new_table(r, 1 + CHECKS, 6, out);
    for (size_t k = 0; s == OK && k < 6; k++) s = put_text(r, out, 0, k, heading[k]);
    for (size_t i = 0; s == OK && i < CHECKS; i++) s = put_check(checks + i, i + 1, out, r);
    return s;
}

const function selfcheck_functions[] = {
    {
        .name = "selfCheck",
        .group = "Govern",
        .help = "Computes published values again inside this office: one row each, pass or fail.",
        .detail = "Columns: check, computed, published, allowed (the difference that passes at "
                  "most), source, result. "
                  "`=SUMPRODUCT(JOINT.SELFCHECK()&\"\"=\"fail\")` must be 0. The last row is "
                  "simulated and may differ by about six standard errors.",
        .examples = {
            { "INDEX(SELFCHECK();2;6)", "pass" },
            { "SUMPRODUCT(SELFCHECK()&\"\"=\"pass\")", "16" },
            { "SUMPRODUCT(SELFCHECK()&\"\"=\"fail\")", "0" },
        },
        .costly = true,
        .call = cell_selfcheck,
    },
    { 0 },
};
