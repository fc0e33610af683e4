/* price.c - covers and their price. */
#include "../checksum.h"
#include "../function.h"
#include "../shape.h"
#include "../version.h"
#include "../words.h"
#include "../../src/price.h"

#include <math.h>
#include <string.h>

static const char group[] = "Price";

enum { COLUMNS = 1 + 2 * VIEWS };
static const double most_numbers = 5e7;           /* kept while pricing: 400 MB */
static const double most_rows = 2e7;
static const double usual_rows = 100000, usual_seed = 1, usual_level = 0.99;

/* ---- covers ---- */

static status cover_from(const argument *terms, const argument *aggregate, size_t lines, cover *c,
                         report *r)
{
    const struct terms *t = terms->given ? &terms->terms : NULL;
    return cover_prepare(t, lines, aggregate->given ? aggregate->terms.of : NULL, r->pool, c);
}

static status cell_cede(const argument *in, value *out, report *r)
{
    const samples *losses = &in[0].data;
    samples ceded = { .rows = losses->rows, .cols = losses->cols };
    ceded.at = pool_take(r->pool, ceded.rows, ceded.cols * sizeof *ceded.at);
    if (!ceded.at) return NO_MEMORY;
    cover c;
    status s = cover_from(in + 1, in + 2, losses->cols, &c, r);
    if (s != OK) return s;
    cede(&c, losses->at, losses->rows, losses->rows, ceded.at, NULL);
    remark(r, "%zu row%s used", losses->rows, plural(losses->rows));
    return table_like(in, &ceded, out, r);
}

/* ---- names of lines ---- */

static bool named_before(const char **names, size_t j)
{
    for (size_t i = 0; i < j; i++)
        if (same_word(names[i], names[j])) return true;
    return false;
}

/* Names that a lookup can tell apart: those of the first argument that has any, else line 1,
 * line 2... A name that comes again gets its number. */
static const char **line_names(size_t lines, const char **const *sources, size_t n, pool *p)
{
    const char **names = pool_take(p, lines, sizeof *names);
    for (size_t j = 0; names && j < lines; j++) {
        names[j] = "";
        for (size_t k = 0; k < n && !*names[j]; k++)
            if (sources[k] && sources[k][j]) names[j] = sources[k][j];
        if (!*names[j]) names[j] = text_from(p, "line %zu", j + 1);
        if (names[j] && named_before(names, j))
            names[j] = text_from(p, "%s (%zu)", names[j], j + 1);
        if (!names[j]) return NULL;
    }
    return names;
}

/* ---- the block ---- */

/* What the rows below the figures say; a text or number that is missing stays empty. */
struct facts {
    double rows, seed, level;
    const char *scheme, *notes;
};

static const char *row_label(size_t row, const pricing *price, const char **names, pool *p)
{
    static const char *const label[PRICE_LINES] = {
        "mean", "sd", "attaching", "exhausting", "VaR", "TVaR"
    };
    if (row < PRICE_LINES) return label[row];
    size_t line = row - PRICE_LINES;
    return line < price->lines ? text_from(p, "mean %s", names[line])
                               : text_from(p, "TVaR %s", names[line - price->lines]);
}

static status put_heading(value *out, report *r)
{
    static const char *const heading[COLUMNS] = {
        "figure", "gross", "error", "ceded", "error", "retained", "error"
    };
    status s = OK;
    for (size_t k = 0; s == OK && k < COLUMNS; k++) s = put_text(r, out, 0, k, heading[k]);
    return s;
}

static status put_figures(const pricing *price, const char **names, value *out, report *r)
{
    status s = put_heading(out, r);
    for (size_t i = 0; s == OK && i < price_rows(price->lines); i++) {
        const char *label = row_label(i, price, names, r->pool);
        s = label ? put_text(r, out, i + 1, 0, label) : NO_MEMORY;
        for (size_t v = 0; v < VIEWS; v++) {
            estimate e = price->of[i * VIEWS + v];
            put_known(out, i + 1, 1 + 2 * v, e.value);
            put_known(out, i + 1, 2 + 2 * v, e.error);
        }
    }
    return s;
}

static status put_facts(const struct facts *f, size_t row, value *out, report *r)
{
    const char *inputs = checksum_text(r->given, r->n_given, r->pool);
    const struct { const char *label; double number; const char *text; } rows[] = {
        { "rows", f->rows, NULL },     { "seed", f->seed, NULL },
        { "scheme", NAN, f->scheme },  { "level", f->level, NULL },
        { "version", NAN, JOINTSHEET_VERSION }, { "inputs", NAN, inputs },
        { "notes", NAN, f->notes },
    };
    status s = inputs ? OK : NO_MEMORY;
    for (size_t i = 0; s == OK && i < sizeof rows / sizeof *rows; i++) {
        s = put_text(r, out, row + i, 0, rows[i].label);
        put_known(out, row + i, 1, rows[i].number);
        if (s == OK && rows[i].text) s = put_text(r, out, row + i, 1, rows[i].text);
    }
    return s;
}

enum { FACTS = 7 };

static status write_block(const pricing *price, const char **names, struct facts *f, value *out,
                          report *r)
{
    if (!names || !f->notes) return NO_MEMORY;
    if (isnan(price->of[PRICE_VALUE_AT_RISK * VIEWS].error))
        f->notes = text_from(r->pool, "%s%srows too few to tell the errors of VaR and TVaR",
                             f->notes, *f->notes ? "; " : "");
    if (!f->notes) return NO_MEMORY;
    if (*f->notes) remark(r, "%s", f->notes);
    size_t figures = price_rows(price->lines);
    status s = new_table(r, 1 + figures + FACTS, COLUMNS, out);
    if (s == OK) s = put_figures(price, names, out, r);
    return s == OK ? put_facts(f, 1 + figures, out, r) : s;
}

static status refuse_size(size_t lines, double rows, double level, scheme how, report *r)
{
    if (how == SCHEME_SOBOL && lines > SOBOL_COLUMNS)
        return refuse(r, OUT_OF_DOMAIN, "the scheme sobol takes up to %d lines, but there are %zu",
                      SOBOL_COLUMNS, lines);
    if (price_numbers(lines, (size_t)rows, level, how) <= most_numbers) return OK;
    if (how == SCHEME_LATIN)
        return refuse(r, OUT_OF_DOMAIN, "%g rows of %zu lines are too many for the scheme latin",
                      rows, lines);
    return refuse(r, OUT_OF_DOMAIN,
                  "%g rows of %zu lines at level %g have too many rows in the tail: "
                  "take fewer rows or a higher level",
                  rows, lines, level);
}

static status refuse_price(const pricing *price, const char **names, status s, report *r)
{
    if (s != OUT_OF_DOMAIN || !price->overflowed || !names) return s;
    if (price->overflowed > price->lines)
        return refuse(r, s, "the losses of a row add up to more than 1e300");
    return refuse(r, s, "a loss of %s is beyond 1e300; if it is simulated, are a, b, c parameters, "
                  "and not mean and sd? See MOMENTS", names[price->overflowed - 1]);
}

/* ---- REPORT ---- */

enum { REPORT_LOSSES, REPORT_TERMS, REPORT_AGGREGATE, REPORT_LEVEL };

static status cell_report(const argument *in, value *out, report *r)
{
    const samples *losses = &in[REPORT_LOSSES].data;
    double level = in[REPORT_LEVEL].number;
    remark(r, "%zu row%s used", losses->rows, plural(losses->rows));
    cover c;
    pricing price;
    status s = refuse_size(losses->cols, (double)losses->rows, level, SCHEME_PLAIN, r);
    if (s == OK) s = cover_from(in + REPORT_TERMS, in + REPORT_AGGREGATE, losses->cols, &c, r);
    if (s != OK) return s;
    const char **const sources[] = { losses->names, in[REPORT_TERMS].terms.names };
    const char **names = line_names(losses->cols, sources, 2, r->pool);
    s = price_losses(losses, &c, level, r->pool, &price);
    if (s != OK) return refuse_price(&price, names, s, r);
    struct facts f = { .rows = (double)losses->rows, .seed = NAN, .level = level, .notes = "" };
    return write_block(&price, names, &f, out, r);
}

/* ---- PRICE ---- */

enum { PRICE_MODEL, PRICE_MARGINS, PRICE_TERMS, PRICE_AGGREGATE, PRICE_SETTINGS, PRICE_SAMPLES };
static const char setting_words[] = "rows seed scheme level";
enum { SETTING_ROWS, SETTING_SEED, SETTING_SCHEME, SETTING_LEVEL };

static status number_setting(const setting *s, const char *label, double otherwise, double *x,
                             report *r)
{
    *x = s->given ? s->number : otherwise;
    if (s->given && s->text)
        return refuse(r, BAD_KIND, "settings has the text \"%s\" for %s, which must be a number",
                      s->text, label);
    return OK;
}

static status whole_setting(const setting *s, const char *label, double otherwise, double low,
                            double high, double *x, report *r)
{
    status done = number_setting(s, label, otherwise, x, r);
    if (done != OK || (*x >= low && *x <= high && *x == floor(*x))) return done;
    return refuse(r, OUT_OF_DOMAIN,
                  "settings has %g for %s, which must be a whole number from %g to %g", *x, label,
                  low, high);
}

static status level_setting(const setting *s, double *level, report *r)
{
    status done = number_setting(s, "level", usual_level, level, r);
    if (done != OK || (*level > 0 && *level < 1)) return done;
    return refuse(r, OUT_OF_DOMAIN, "settings has %g for level, which must be between 0 and 1",
                  *level);
}

static status scheme_setting(const setting *s, scheme *to, report *r)
{
    *to = SCHEME_PLAIN;
    if (!s->given) return OK;
    const char *known = listed(r->pool, scheme_words);
    if (!known) return NO_MEMORY;
    if (!s->text)
        return refuse(r, BAD_KIND, "settings has the number %g for scheme, which must be %s",
                      s->number, known);
    int place = word_in(scheme_words, s->text);
    if (place < 0)
        return refuse(r, BAD_KIND, "settings has the scheme \"%s\", but it must be %s", s->text,
                      known);
    *to = (scheme)place;
    return OK;
}

static status read_simulation(const setting *given, struct simulation *s, report *r)
{
    double rows, seed;
    status done = whole_setting(given + SETTING_ROWS, "rows", usual_rows, 1, most_rows, &rows, r);
    if (done == OK)
        done = whole_setting(given + SETTING_SEED, "seed", usual_seed, 0, 0x1p53, &seed, r);
    if (done == OK) done = scheme_setting(given + SETTING_SCHEME, &s->how, r);
    if (done == OK) done = level_setting(given + SETTING_LEVEL, &s->level, r);
    if (done != OK) return done;
    s->rows = (size_t)rows;
    s->seed = (uint64_t)seed;
    return refuse_size(s->margins->lines, rows, s->level, s->how, r);
}

static status check_samples(const struct margins *m, const argument *given, report *r)
{
    for (size_t j = 0; j < m->lines; j++) {
        if (m->of[j].distribution->quantile) continue;
        if (!given->given)
            return refuse(r, BAD_KIND,
                          "margins takes line %zu from a sample, but samples is missing", j + 1);
        if (given->data.rows == 0) return refuse(r, TOO_FEW, "samples has no rows");
        if (m->of[j].a > (double)given->data.cols)
            return refuse(r, BAD_KIND,
                          "margins takes line %zu from column %g of samples, which has %zu", j + 1,
                          m->of[j].a, given->data.cols);
    }
    return OK;
}

/* Margins whose mean or sd is infinite: the figures of such a line do not settle. */
static const char *heavy_lines(const struct margins *m, const char **names, pool *p)
{
    const char *notes = "";
    for (size_t j = 0; notes && names && j < m->lines; j++) {
        double mean = 0, sd = 0;
        const distribution *d = m->of[j].distribution;
        if (d->moments) d->moments(m->of + j, &mean, &sd);
        if (isfinite(mean) && isfinite(sd)) continue;
        notes = text_from(p, "%s%s%s has no finite %s", notes, *notes ? "; " : "", names[j],
                          isfinite(mean) ? "sd" : "mean");
    }
    return notes;
}

static status cell_price(const argument *in, value *out, report *r)
{
    const struct margins *margins = &in[PRICE_MARGINS].margins;
    const argument *terms = in + PRICE_TERMS, *given = in + PRICE_SAMPLES;
    cover c;
    struct simulation sim = { .model = in[PRICE_MODEL].model, .margins = margins, .cover = &c,
                              .given = given->given ? &given->data : NULL };
    pricing price;
    status s = check_samples(margins, given, r);
    if (s == OK) s = read_simulation(in[PRICE_SETTINGS].settings, &sim, r);
    if (s == OK) s = cover_from(terms, in + PRICE_AGGREGATE, margins->lines, &c, r);
    if (s != OK) return s;
    const char **const sources[] = { margins->names, sim.model->lines, terms->terms.names };
    const char **names = line_names(margins->lines, sources, 3, r->pool);
    s = price_model(&sim, r->pool, &price);
    if (s != OK) return refuse_price(&price, names, s, r);
    static const char *const schemes[] = {
        [SCHEME_PLAIN] = "plain", [SCHEME_ANTITHETIC] = "antithetic", [SCHEME_LATIN] = "latin",
        [SCHEME_SOBOL] = "sobol"
    };
    struct facts f = { .rows = (double)sim.rows, .seed = (double)sim.seed, .level = sim.level,
                       .scheme = schemes[sim.how], .notes = heavy_lines(margins, names, r->pool) };
    return write_block(&price, names, &f, out, r);
}

#define TERMS_HELP \
    "One row a line: excess limit share, optionally name and with; an empty limit is unlimited."
#define AGGREGATE_PARAMETER \
    { .name = "aggregate", .kind = AGGREGATE, .optional = true, \
      .help = "One row, excess limit share (1 if left out), on each row's sum of ceded amounts." }
#define BLOCK_DETAIL \
    "Columns: figure, gross, error, ceded, error, retained, error. Rows: mean, sd, " \
    "attaching, exhausting, VaR, TVaR; the mean of each line, labelled mean and its name; " \
    "its part of each TVaR, labelled TVaR and its name; rows, seed, scheme, level, version, " \
    "inputs, notes. Labels are unique, so that JOINT.READ finds them. The parts " \
    "of a TVaR add up to it; rows equal to the VaR share their weight equally. Attaching: " \
    "with an aggregate, the share of rows in which the ceded sum before it is larger than " \
    "its excess; else that in which anything is ceded. Exhausting: with an aggregate, the " \
    "ceded sum before it reaches excess + limit; else every line that follows no other " \
    "reaches its own; empty when a limit is open. Without terms every line goes whole to the " \
    "aggregate, gains too, and nothing is ceded when there is none. Errors are simulation " \
    "errors only, empty while about four rows are not yet in the tail. inputs is the 64-bit " \
    "FNV-1a hash of every argument as it came. "

const function price_functions[] = {
    {
        .name = "cede",
        .group = group,
        .help = "The ceded part of every loss.",
        .detail = "Ceded = share x min(max(loss - excess; 0); limit). A line under with follows "
                  "another, as allocated expense follows its claim: ceded = own loss x (that "
                  "line's ceded / that line's loss); it has no excess, limit or share of its "
                  "own, and passes on through a chain. The aggregate applies to each row's sum; "
                  "what it recovers is shared within the row in proportion to what each line "
                  "ceded. A header row stays.",
        .examples = {
            { "CEDE({50|120|400};{100;200;0.5})", "0" },
            { "INDEX(CEDE({50|120|400};{100;200;0.5});3;1)", "100" },
            { "INDEX(CEDE({300;60};{100;\"\";1;\"\";\"\"|\"\";\"\";\"\";\"\";1});1;2)", "40" },
        },
        .params = {
            { .name = "losses", .kind = FULL_DATA, .help = "One period a row, one line a column." },
            { .name = "terms", .kind = TERMS, .fits = "losses", .help = TERMS_HELP },
            AGGREGATE_PARAMETER,
        },
        .call = cell_cede,
    },
    {
        .name = "price",
        .group = group,
        .help = "Simulates a model inside the function and prices a cover: gross, ceded and "
                "retained figures with errors.",
        .detail = BLOCK_DETAIL
                  "Settings: rows (100000), seed (1), scheme (plain, antithetic, latin, sobol), "
                  "level (0.99). Under plain the block equals JOINT.REPORT of JOINT.LOSSES of "
                  "JOINT.DRAW; under the other schemes rows are drawn in 16 independent parts, "
                  "and errors come from their spread, those of VaR and TVaR once about four rows "
                  "of each part are in the tail; sobol does best with 16 times a power of two of "
                  "rows, such as 65536.",
        .examples = {
            { "INDEX(PRICE(MODEL(\"independent\");{\"exponential\";1|\"exponential\";2};"
              "{0;\"\";1|0;\"\";1};;{\"rows\";1000});12;2)", "1000" },
            { "INDEX(PRICE(MODEL(\"independent\");{\"exponential\";1|\"exponential\";2};"
              "{0;\"\";1|0;\"\";1};;{\"rows\";1000});2;6)", "0" },
        },
        .params = {
            { .name = "model", .kind = MODEL, .help = "A model block, one column a line." },
            { .name = "margins", .kind = MARGINS, .fits = "model",
              .help = "One row a line, for one period of the cover: [name] distribution a b c." },
            { .name = "terms", .kind = TERMS, .fits = "margins", .optional = true,
              .help = TERMS_HELP },
            AGGREGATE_PARAMETER,
            { .name = "settings", .kind = SETTINGS, .words = setting_words, .optional = true,
              .help = "Labels and values; a blank value means the default." },
            { .name = "samples", .kind = FULL_DATA, .optional = true,
              .help = "Losses for the distribution sample, one column for each such line." },
        },
        .costly = true,
        .call = cell_price,
    },
    {
        .name = "report",
        .group = group,
        .help = "The block of JOINT.PRICE for losses that are already in the sheet.",
        .detail = BLOCK_DETAIL "Seed and scheme are empty here. Errors assume independent rows.",
        .examples = {
            { "INDEX(REPORT({1;2|3;4|5;9};{2;\"\";1|2;\"\";1});2;2)", "8" },
            { "INDEX(REPORT({1;2|3;4|5;9};{2;\"\";1|2;\"\";1});2;4)", "4.33333333333333" },
        },
        .params = {
            { .name = "losses", .kind = FULL_DATA, .help = "One period a row, one line a column." },
            { .name = "terms", .kind = TERMS, .fits = "losses", .optional = true,
              .help = TERMS_HELP },
            AGGREGATE_PARAMETER,
            { .name = "level", .kind = NUMBER, .high = 1, .open = BOTH_OPEN, .optional = true,
              .otherwise = 0.99, .help = "The level of VaR and TVaR." },
        },
        .costly = true,
        .call = cell_report,
    },
    { 0 },
};
