/* parameter_band.c - how far a copula's parameter may be from its true value. */
#include "../family_texts.h"
#include "../function.h"
#include "../measures.h"
#include "../params.h"
#include "../../src/theta_band.h"

#include <math.h>

enum { FAMILY, X, Y, COVERAGE, METHOD, SEED };

static const char *end_text(double limit, pool *p)
{
    return isnan(limit) ? "left open" : text_from(p, "%g", limit);
}

/* Says when a limit of tau is beyond what the family reaches. */
static status remark_cuts(const family *f, const struct theta_band *b, report *r)
{
    const char *range = tau_range(f, r->pool), *low = end_text(b->low, r->pool);
    const char *high = end_text(b->high, r->pool);
    if (!range || !low || !high) return NO_MEMORY;
    if (b->low_cut)
        remark(r, "low cut: that of tau is %g, but a pair of the %s copula reaches only %s; it is "
               "%s", b->tau.low, f->word, range, low);
    if (b->high_cut)
        remark(r, "high cut: that of tau is %g, but a pair of the %s copula reaches only %s; it is "
               "%s", b->tau.high, f->word, range, high);
    return OK;
}

static status refuse_reach(const family *f, double tau, report *r)
{
    const char *range = tau_range(f, r->pool);
    if (!range) return NO_MEMORY;
    return refuse(r, OUT_OF_DOMAIN,
                  "tau of x and y is %g, but a pair of the %s copula reaches only %s", tau, f->word,
                  range);
}

static status cell_thetaband(const argument *in, value *out, report *r)
{
    const family *f = families[in[FAMILY].word];
    struct theta_band b = { .tau.used = 0 };
    band_method method = (band_method)in[METHOD].word;
    if (!f->has_theta && !f->has_matrix)
        return refuse(r, BAD_KIND, "%s has no parameter", f->word);
    status s = theta_band(f, in[X].data.at, in[Y].data.at, in[X].data.rows, in[COVERAGE].number,
                          method, (uint64_t)in[SEED].number, &b, r->pool);
    if (s == OUT_OF_DOMAIN) return refuse_reach(f, b.tau.tau, r);
    if (s != OK)
        return refuse_measure(s, b.tau.used, method == BAND_FISHERZ ? 5 : 3, &in[X], &in[Y],
                              "this interval", r);
    const double row[] = { b.theta, b.low, b.high, b.error, (double)b.tau.used };
    s = new_table(r, 1, 5, out);
    for (size_t j = 0; s == OK && j < 5; j++)
        if (!isnan(row[j])) put_number(out, 0, j, row[j]);
    if (s == OK) s = remark_cuts(f, &b, r);
    if (s == OK) remark_rows(b.tau.used, filled_in_either(&in[X], &in[Y]), "gaps", r);
    return s;
}

const function parameter_band_functions[] = {
    {
        .name = "thetaBand",
        .group = "Turn it into parameters",
        .help = "A copula's parameter with a confidence interval: theta, low, high, error, rows.",
        .detail =
            "THETA of the estimate and the limits of TAUBAND, whose methods and coverage it has, "
            "since theta grows with tau in every family (Genest & Favre 2007); the standard error "
            "is that of tau times the slope of theta. For gaussian and t it is the correlation. A "
            "limit of tau beyond what the family reaches is cut to the end of its range, and is "
            "empty where that end does not belong to the range; WHY says so. #NUM! when the family "
            "does not reach tau itself. Errors as in TAUBAND.",
        .examples = {
            { "THETABAND(\"gumbel\";{44.4|45.9|41.9|53.3|44.7|44.1|50.7|45.2|60.1};"
              "{2.6|3.1|2.5|5.0|3.6|4.0|5.2|2.8|3.8})", "1.8" },
            { "INDEX(THETABAND(\"gumbel\";{44.4|45.9|41.9|53.3|44.7|44.1|50.7|45.2|60.1};"
              "{2.6|3.1|2.5|5.0|3.6|4.0|5.2|2.8|3.8});1;4)", "0.82158383625775" },
            { "INDEX(THETABAND(\"gumbel\";{44.4|45.9|41.9|53.3|44.7|44.1|50.7|45.2|60.1};"
              "{2.6|3.1|2.5|5.0|3.6|4.0|5.2|2.8|3.8});1;2)", "1" },
            { "THETABAND(\"gumbel\";{1|2|3|4};{4|3|2|1})", "#NUM!" },
        },
        .params = {
            { .name = "family", .help = "The family's word, see FAMILIES.",
              .kind = WORD, .words = family_words },
            PAIR_OF_COLUMNS,
            BAND_SETTINGS("theta"),
        },
        .costly = true,
        .call = cell_thetaband,
    },
    { 0 },
};
