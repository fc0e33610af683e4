/* measure_tau.c - how far Kendall's tau may be trusted: intervals and a test. */
#include "../function.h"
#include "../measures.h"
#include "../params.h"
#include "../../src/tau_band.h"
#include "../../src/tau_test.h"

enum { X, Y };

/* ---- TAUBAND ---- */

enum { COVERAGE = 2, METHOD, SEED };

static status cell_tauband(const argument *in, value *out, report *r)
{
    struct tau_band b = { 0 };
    band_method method = (band_method)in[METHOD].word;
    status s = tau_band(in[X].data.at, in[Y].data.at, in[X].data.rows, in[COVERAGE].number, method,
                        (uint64_t)in[SEED].number, &b, r->pool);
    if (s != OK)
        return refuse_measure(s, b.used, method == BAND_FISHERZ ? 5 : 3, &in[X], &in[Y],
                              "this interval", r);
    s = new_table(r, 1, 5, out);
    if (s != OK) return s;
    put_number(out, 0, 0, b.tau);
    put_number(out, 0, 1, b.low);
    put_number(out, 0, 2, b.high);
    put_number(out, 0, 3, b.error);
    put_number(out, 0, 4, (double)b.used);
    remark_rows(b.used, filled_in_either(&in[X], &in[Y]), "gaps", r);
    return OK;
}

/* ---- TAUTEST ---- */

enum { SIDE = 2 };

static status cell_tautest(const argument *in, value *out, report *r)
{
    double p_value;
    size_t used = 0;
    status s = tau_test(in[X].data.at, in[Y].data.at, in[X].data.rows, (side)in[SIDE].word,
                        &p_value, &used, r->pool);
    if (s != OK) return refuse_measure(s, used, 2, &in[X], &in[Y], "the test", r);
    remark_rows(used, filled_in_either(&in[X], &in[Y]), "gaps", r);
    return answer(out, p_value);
}

static const char GROUP[] = "Measure dependence in data";

const function measure_tau_functions[] = {
    {
        .name = "tauBand",
        .group = GROUP,
        .help = "Kendall's tau with a confidence interval: tau, low, high, standard error, rows.",
        .detail =
            "free assumes nothing of the distribution (Fligner & Rust 1982; Hollander & Wolfe): "
            "tau -/+ z error; with ties the same estimate on the influence values of tau-b. It "
            "covers 92 to 94 % of a nominal 95 % at ten rows and about 95 % from twenty. binormal "
            "takes the variance that a normal pair with correlation sin(pi tau/2) has (Esscher "
            "1924). fisherz is tanh(atanh(tau) -/+ z sqrt(0.437/(n - 4))) (Fieller, Hartley & "
            "Pearson 1957), its error by the delta method, and needs five rows. jackknife leaves "
            "out each row in turn. bootstrap gives percentiles and standard deviation of 2,000 "
            "resamples that the seed draws; the office waits, about a second for 10,000 rows "
            "and 10 to 15 for 100,000, where free is as good. Take free unless there is a reason "
            "not to; jackknife is its check and covers a little less at few rows; fisherz and "
            "binormal rest on a normal pair and serve for comparison; bootstrap where limits "
            "should not lie evenly about tau. Limits are kept within [-1;1]. Rows "
            "with a gap in x or y are left out. #N/A with fewer than three rows, #DIV/0! when a "
            "column does not vary.",
        .examples = {
            { "INDEX(TAUBAND({44.4|45.9|41.9|53.3|44.7|44.1|50.7|45.2|60.1};"
              "{2.6|3.1|2.5|5.0|3.6|4.0|5.2|2.8|3.8});1;4)", "0.253575258104244" },
            { "INDEX(TAUBAND({44.4|45.9|41.9|53.3|44.7|44.1|50.7|45.2|60.1};"
              "{2.6|3.1|2.5|5.0|3.6|4.0|5.2|2.8|3.8};0.9;\"fisherz\");1;3)", "0.746069903377199" },
            { "TAUBAND({1|2|3|4|5};{1|2|3|4|5};0.95;\"jackknife\")", "1" },
            { "TAUBAND({1|2};{1|2})", "#N/A" },
        },
        .params = {
            PAIR_OF_COLUMNS,
            BAND_SETTINGS("tau"),
        },
        .costly = true,
        .call = cell_tauband,
    },
    {
        .name = "tauTest",
        .group = GROUP,
        .help = "The p-value of independence against dependence, by Kendall's tau.",
        .detail =
            "Exact without ties up to 200 rows (Kendall 1938), else by the normal distribution "
            "with the variance corrected for ties in both columns and no continuity correction. "
            "side: both takes twice the smaller tail, at most 1; above asks for tau > 0, below "
            "for tau < 0. Below 1e-308 the result is 0. Rows with a gap in x or y are left out. "
            "#N/A with fewer than two rows, #DIV/0! when a column does not vary.",
        .examples = {
            { "TAUTEST({44.4|45.9|41.9|53.3|44.7|44.1|50.7|45.2|60.1};"
              "{2.6|3.1|2.5|5.0|3.6|4.0|5.2|2.8|3.8})", "0.11943893298059964" },
            { "TAUTEST({12|2|1|12|2};{1|4|7|1|0})", "0.28274545993277458" },
            { "TAUTEST({1|2|3|4};{1|2|3|4};\"above\")", "0.041666666666666667" },
        },
        .params = {
            PAIR_OF_COLUMNS,
            { .name = "side", .help = "both, above (tau > 0) or below (tau < 0).", .kind = WORD,
              .words = "both above below", .optional = true },
        },
        .call = cell_tautest,
    },
    { 0 },
};
