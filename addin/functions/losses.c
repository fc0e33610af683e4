/* losses.c - loss distributions, and uniforms turned into losses. */
#include "../function.h"
#include "../read.h"
#include "../shape.h"
#include "../../src/margin_fit.h"
#include "../../src/quantiles.h"

#include <math.h>
#include <string.h>

static const char group[] = "Simulate";

/* ---- the words ---- */

static const char *all_words(pool *p)
{
    const char *all = "";
    for (size_t i = 0; all && distributions[i]; i++) {
        const char *before = !i ? "" : distributions[i + 1] ? ", " : " or ";
        all = text_from(p, "%s%s%s", all, before, distributions[i]->word);
    }
    return all;
}

/* A distribution that has a formula, which `sample` has not. */
static status named_distribution(const argument *a, const distribution **d, report *r)
{
    *d = distribution_named(a->text);
    if (!*d) {
        const char *all = all_words(r->pool);
        return all ? refuse(r, BAD_KIND, "distribution is \"%s\", but must be %s", a->text, all)
                   : NO_MEMORY;
    }
    if (!(*d)->quantile)
        return refuse(r, BAD_KIND, "distribution is %s, which comes from data and has no formula",
                      (*d)->word);
    return OK;
}

static status cell_distributions(const argument *in, value *out, report *r)
{
    static const char *const heading[] = { "distribution", "a", "b", "c" };
    (void)in;
    size_t n = 0;
    while (distributions[n]) n++;
    status s = new_table(r, n + 1, 1 + MARGIN_PARAMETERS, out);
    for (size_t k = 0; s == OK && k <= MARGIN_PARAMETERS; k++)
        s = put_text(r, out, 0, k, heading[k]);
    for (size_t i = 0; s == OK && i < n; i++) {
        const distribution *d = distributions[i];
        s = put_text(r, out, i + 1, 0, d->word);
        for (size_t k = 0; s == OK && k < distribution_parameters(d); k++)
            s = put_text(r, out, i + 1, k + 1, d->parameter[k].name);
    }
    return s;
}

/* ---- one distribution ---- */

enum { MOMENTS_DISTRIBUTION, MOMENTS_MEAN, MOMENTS_SD, MOMENTS_THRESHOLD };

static status refuse_moments(const distribution *d, const argument *in, double threshold, status s,
                             report *r)
{
    if (s != OUT_OF_DOMAIN) return s;
    double mean = in[MOMENTS_MEAN].number, sd = in[MOMENTS_SD].number;
    if (isnan(threshold))
        return refuse(r, s, "no %s has mean %g and sd %g: it needs a %s", d->word, mean, sd,
                      d->moments_need);
    return refuse(r, s, "no %s has mean %g and threshold %g: it needs a %s", d->word, mean,
                  threshold, d->moments_need);
}

static status cell_moments(const argument *in, value *out, report *r)
{
    const distribution *d;
    status s = named_distribution(in + MOMENTS_DISTRIBUTION, &d, r);
    if (s != OK) return s;
    const argument *given = in + MOMENTS_THRESHOLD;
    double threshold = given->given && given->number != 0 ? given->number : NAN;
    if (!isnan(threshold) && !d->takes_threshold)
        return refuse(r, BAD_KIND, "threshold is %g, but %s has none", threshold, d->word);
    margin m;
    s = d->from_moments(in[MOMENTS_MEAN].number, in[MOMENTS_SD].number, threshold, &m);
    if (s != OK) return refuse_moments(d, in, threshold, s, r);
    size_t which;
    if (margin_check(&m, &which) != OK)
        return refuse(r, OUT_OF_DOMAIN, "the %s of this %s would be beyond the range of numbers",
                      d->parameter[which].name, d->word);
    s = new_table(r, 1, MARGIN_PARAMETERS, out);
    for (size_t k = 0; s == OK && k < distribution_parameters(d); k++)
        put_number(out, 0, k, margin_parameter(&m, k));
    return s;
}

/* the distribution and its a, b, c in four arguments from `first` on */
static status margin_from(const argument *first, margin *m, report *r)
{
    static const char *const letter[] = { "a", "b", "c" };
    status s = named_distribution(first, &m->distribution, r);
    if (s != OK) return s;
    m->a = first[1].number;
    m->b = first[2].given ? first[2].number : NAN;
    m->c = first[3].given ? first[3].number : NAN;
    size_t k;
    s = margin_check(m, &k);
    if (s == OK) return OK;
    const struct parameter *p = m->distribution->parameter + k;
    const char *word = m->distribution->word;
    if (s == BAD_KIND && !p->name)
        return refuse(r, s, "%s is given, but %s does not use it", letter[k], word);
    if (s == BAD_KIND)
        return refuse(r, s, "%s, the %s of the %s, is missing", letter[k], p->name, word);
    return refuse(r, s, "%s, the %s of the %s, is %g, but must be %s %g", letter[k], p->name, word,
                  margin_parameter(m, k), p->low_open ? "above" : "at least", p->low);
}

static status quantile_at(double p, const void *with, double *x)
{
    const margin *m = with;
    if (p == 1) return OUT_OF_DOMAIN;
    *x = margin_quantile(m, p);
    return isfinite(*x) ? OK : OUT_OF_DOMAIN;
}

static status cell_quantile(const argument *in, value *out, report *r)
{
    margin m;
    status s = margin_from(in + 1, &m, r);
    if (s == OK) s = each_number(in, quantile_at, &m, out, r);
    if (s == OUT_OF_DOMAIN)
        return refuse(r, s, "p is %g, where the %s has no finite quantile", in[0].number,
                      m.distribution->word);
    return s;
}

static status probability_at(double x, const void *with, double *p)
{
    const margin *m = with;
    *p = m->distribution->probability(m, x, false);
    return OK;
}

static status cell_probability(const argument *in, value *out, report *r)
{
    margin m;
    status s = margin_from(in + 1, &m, r);
    return s == OK ? each_number(in, probability_at, &m, out, r) : s;
}

/* ---- a fit ---- */

/* The losses that are there, in the report's pool. */
static status without_gaps(const argument *a, double **loss, size_t *n, report *r)
{
    *loss = pool_take(r->pool, a->filled, sizeof **loss);
    if (!*loss) return NO_MEMORY;
    *n = 0;
    for (size_t i = 0; i < a->filled; i++)
        if (!is_gap(a->data.at[i])) (*loss)[(*n)++] = a->data.at[i];
    if (*n < a->filled) remark(r, "%zu empty rows left out", a->filled - *n);
    return OK;
}

/* the row of the range in which the k-th loss stands, both from 0 */
static size_t row_of_loss(const argument *a, size_t k)
{
    size_t i = 0;
    while (k > 0 || is_gap(a->data.at[i])) k -= !is_gap(a->data.at[i++]);
    return i;
}

static status refuse_fit(const distribution *d, const argument *losses, size_t n, size_t row,
                         status s, report *r)
{
    if (s == OUT_OF_DOMAIN && row < n) {
        size_t i = row_of_loss(losses, row);
        return refuse(r, s, "losses has %g in row %zu, but the %s needs losses %s",
                      losses->data.at[i], row_in_range(losses, i), d->word,
                      d->fitted_to == FROM_ZERO ? "of at least 0" : "above 0");
    }
    if (s == OUT_OF_DOMAIN)
        return refuse(r, s, "no %s fits these losses best%s%s", d->word,
                      d->fit_needs ? ": it takes " : "", d->fit_needs ? d->fit_needs : "");
    if (s == TOO_FEW) return refuse(r, s, "losses has %zu losses, but two are needed", n);
    if (s == NO_VARIATION) return refuse(r, s, "the losses are all alike");
    return s;
}

static status cell_marginfit(const argument *in, value *out, report *r)
{
    const distribution *d;
    double *loss;
    size_t n, row;
    margin_fit fit;
    status s = named_distribution(in, &d, r);
    if (s == OK) s = without_gaps(in + 1, &loss, &n, r);
    if (s != OK) return s;
    s = fit_margin(d, loss, n, &fit, &row);
    if (s != OK) return refuse_fit(d, in + 1, n, row, s, r);
    s = new_table(r, 1, 2 * MARGIN_PARAMETERS + 2, out);
    for (size_t k = 0; s == OK && k < distribution_parameters(d); k++) {
        put_number(out, 0, k, margin_parameter(&fit.margin, k));
        put_number(out, 0, MARGIN_PARAMETERS + k, fit.error[k]);
    }
    if (s != OK) return s;
    put_number(out, 0, 2 * MARGIN_PARAMETERS, fit.log_likelihood);
    put_number(out, 0, 2 * MARGIN_PARAMETERS + 1, fit.aic);
    remark(r, "%zu losses used", n);
    return OK;
}

/* ---- many losses ---- */

enum { LOSSES_UNIFORMS, LOSSES_MARGINS, LOSSES_SAMPLES };

/* A copy of the uniforms with 1/2 in the gaps. */
static status take_uniforms(const argument *a, samples *u, report *r)
{
    *u = (samples){ .rows = a->filled, .cols = a->data.cols };
    u->at = pool_take(r->pool, u->rows * u->cols, sizeof *u->at);
    if (!u->at) return NO_MEMORY;
    for (size_t j = 0; j < u->cols; j++) {
        const double *from = column(&a->data, j);
        for (size_t i = 0; i < u->rows; i++) {
            double x = is_gap(from[i]) ? 0.5 : from[i];
            if (!(x > 0 && x < 1))
                return refuse(r, OUT_OF_DOMAIN,
                              "uniforms has %g in row %zu, column %zu, but must be between 0 and 1",
                              x, row_in_range(a, i), j + 1);
            column(u, j)[i] = x;
        }
    }
    return OK;
}

/* Uniforms of column j into losses, in their place; gaps come back. */
static status turn_column(const argument *in, samples *u, size_t j, report *r)
{
    const margin *m = in[LOSSES_MARGINS].margins.of + j;
    const samples *given = in[LOSSES_SAMPLES].given ? &in[LOSSES_SAMPLES].data : NULL;
    const double *from = column(&in[LOSSES_UNIFORMS].data, j);
    double *to = column(u, j);
    const quantiles *q;
    status s = quantiles_prepare(m, given, u->rows, r->pool, &q);
    if (s == BAD_KIND && !given)
        return refuse(r, s, "margins takes line %zu from a sample, but samples is missing", j + 1);
    if (s == BAD_KIND)
        return refuse(r, s, "margins takes line %zu from column %g of samples, which has %zu",
                      j + 1, m->a, given->cols);
    if (s != OK) return s;
    losses_at(q, to, u->rows, to);
    for (size_t i = 0; i < u->rows; i++) {
        if (is_gap(from[i])) to[i] = gap();
        else if (!isfinite(to[i])) to[i] = fault(OUT_OF_DOMAIN);
    }
    return OK;
}

static status cell_losses(const argument *in, value *out, report *r)
{
    samples u;
    status s = take_uniforms(in + LOSSES_UNIFORMS, &u, r);
    for (size_t j = 0; s == OK && j < u.cols; j++) s = turn_column(in, &u, j, r);
    return s == OK ? table_like(in + LOSSES_UNIFORMS, &u, out, r) : s;
}

#define DISTRIBUTION_PARAMETER \
    { .name = "distribution", .kind = WORDS, \
      .help = "A word of JOINT.DISTRIBUTIONS(), such as lognormal, gamma or pareto." }
#define A_B_C \
    { .name = "a", .kind = NUMBER, .help = "The first parameter, see JOINT.DISTRIBUTIONS()." }, \
    { .name = "b", .kind = NUMBER, .optional = true, .otherwise = NAN, \
      .help = "The second parameter, if the distribution has one." }, \
    { .name = "c", .kind = NUMBER, .optional = true, .otherwise = NAN, \
      .help = "The third parameter, if the distribution has one." }

const function losses_functions[] = {
    {
        .name = "distributions",
        .group = group,
        .help = "The loss distributions there are, and what their parameters a, b, c mean.",
        .detail = "Normal mean sd; lognormal mu sigma, those of the logarithm; gamma shape "
                  "scale; exponential mean; weibull shape scale, with survival "
                  "exp(-(x/scale)^shape); pareto, of type I, alpha threshold, with survival "
                  "(threshold/x)^alpha from the threshold on; lomax, or Pareto of type II, alpha "
                  "scale, with survival (1 + x/scale)^-alpha; sample takes a column of given "
                  "samples.",
        .examples = {
            { "INDEX(DISTRIBUTIONS();3;1)", "lognormal" },
            { "INDEX(DISTRIBUTIONS();3;2)", "mu" },
        },
        .call = cell_distributions,
    },
    {
        .name = "moments",
        .group = group,
        .help = "The parameters a, b, c that give a distribution this mean and standard deviation.",
        .detail = "Method of moments, three cells in a row, unused ones empty. The exponential "
                  "takes the mean only, whatever sd says. The lomax needs an sd above its mean. "
                  "With a threshold the pareto keeps it and takes alpha from the mean alone, "
                  "alpha = mean/(mean - threshold); without one, mean and sd give alpha = 1 + "
                  "sqrt(1 + (mean/sd)^2) and the threshold. A threshold of 0, or a blank cell, "
                  "counts as left out.",
        .examples = {
            { "MOMENTS(\"gamma\";1000;500)", "4" },
            { "INDEX(MOMENTS(\"lognormal\";1000;500);1;2)", "0.472380727077439" },
            { "MOMENTS(\"pareto\";1500;0.1;1000)", "3" },
            { "MOMENTS(\"lomax\";1000;900)", "#NUM!" },
        },
        .params = {
            DISTRIBUTION_PARAMETER,
            { .name = "mean", .kind = NUMBER, .help = "The mean of the losses." },
            { .name = "sd", .kind = NUMBER, .high = INFINITY, .open = LOW_OPEN,
              .help = "The standard deviation of the losses." },
            { .name = "threshold", .kind = NUMBER, .high = INFINITY, .optional = true,
              .otherwise = NAN,
              .help = "For the pareto: the smallest loss; alpha then follows from the mean." },
        },
        .call = cell_moments,
    },
    {
        .name = "marginFit",
        .group = group,
        .help = "A distribution fitted to losses: a, b, c, their standard errors, log-likelihood "
                "and aic.",
        .detail = "Maximum likelihood, every loss observed in full: nothing censored or cut off. "
                  "Eight cells in a row, unused ones empty. Standard errors are those of large "
                  "samples. The pareto takes the smallest loss for its threshold. The lomax fits "
                  "only losses whose sd is above their mean; else its likelihood rises towards "
                  "the exponential without end.",
        .examples = {
            { "MARGINFIT(\"exponential\";{100|200|300})", "200" },
            { "INDEX(MARGINFIT(\"normal\";{1|2|3|4|5});1;2)", "1.41421356237310" },
            { "INDEX(MARGINFIT(\"pareto\";{1|2|4});1;1)", "1.44269504088896" },
            { "MARGINFIT(\"gamma\";{5|0|3})", "#NUM!" },
        },
        .params = {
            DISTRIBUTION_PARAMETER,
            { .name = "losses", .kind = COLUMN,
              .help = "One column or row of losses; gaps are left out." },
        },
        .call = cell_marginfit,
    },
    {
        .name = "quantile",
        .group = group,
        .help = "The loss that is not exceeded with probability p.",
        .detail = "Accurate to 12 digits in both tails. p = 0 gives the smallest loss where "
                  "there is one; p = 1 is #NUM!, since no distribution here has a largest loss.",
        .examples = {
            { "QUANTILE(0.99;\"lognormal\";0;1)", "10.2404736563121" },
            { "QUANTILE(0.5;\"exponential\";100)", "69.3147180559945" },
        },
        .params = {
            { .name = "p", .kind = NUMBERS, .high = 1,
              .help = "A probability, or a range of them." },
            DISTRIBUTION_PARAMETER,
            A_B_C,
        },
        .call = cell_quantile,
    },
    {
        .name = "probability",
        .group = group,
        .help = "The probability of a loss up to x.",
        .examples = {
            { "PROBABILITY(10.2404736563121;\"lognormal\";0;1)", "0.99" },
            { "PROBABILITY(2;\"pareto\";1;1)", "0.5" },
        },
        .params = {
            { .name = "x", .kind = NUMBERS, .help = "A loss, or a range of them." },
            DISTRIBUTION_PARAMETER,
            A_B_C,
        },
        .call = cell_probability,
    },
    {
        .name = "losses",
        .group = group,
        .help = "Uniforms turned into losses: each column through the quantile function of its "
                "line.",
        .detail = "A line with the distribution sample takes its losses from column a of "
                  "samples: the k-th smallest of n, k = n u rounded up. Gaps and a header row "
                  "stay where they are. Many losses of a gamma come from a table that agrees "
                  "with QUANTILE to 12 digits. A loss beyond the largest number is #NUM! in its "
                  "cell.",
        .examples = {
            { "LOSSES({0.5|0.9};{\"exponential\";100})", "69.3147180559945" },
            { "LOSSES({0.5|0.9};{\"sample\";1};{10|20|30|40})", "20" },
        },
        .params = {
            { .name = "uniforms", .kind = DATA,
              .help = "Numbers between 0 and 1, one column a line, as from JOINT.DRAW." },
            { .name = "margins", .kind = MARGINS, .fits = "uniforms",
              .help = "One row a line: [name] distribution a b c." },
            { .name = "samples", .kind = FULL_DATA, .optional = true,
              .help = "Losses for the distribution sample, one column for each such line." },
        },
        .costly = true,
        .call = cell_losses,
    },
    { 0 },
};
