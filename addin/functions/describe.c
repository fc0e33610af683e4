/* describe.c - what a model says, and what stands in a block. */
#include "../function.h"
#include "../read.h"
#include "../words.h"
#include "../../src/pair_measures.h"

#include <math.h>
#include <string.h>

typedef status measure(const copula *c, size_t i, size_t j, const void *with, double *x, pool *p);

/* A number where one describes all pairs, else the matrix of them. */
static status each_pair(const copula *c, measure *of, const void *with, value *out, report *r)
{
    size_t d = c->dimension;
    double x;
    if (one_for_all_pairs(c)) {
        status s = of(c, 0, 1, with, &x, r->pool);
        return s == OK ? answer(out, x) : s;
    }
    status s = new_table(r, d, d, out);
    for (size_t i = 0; s == OK && i < d; i++) {
        put_number(out, i, i, 1);
        for (size_t j = 0; j < i; j++) {
            status one = of(c, i, j, with, &x, r->pool);
            if (one == NO_MEMORY) return one;
            put_number(out, i, j, one == OK ? x : fault(one));
            put_number(out, j, i, one == OK ? x : fault(one));
        }
    }
    return s;
}

static status pair_tau(const copula *c, size_t i, size_t j, const void *with, double *x, pool *p)
{
    (void)with;
    return tau_of_pair(c, i, j, x, p);
}

static status pair_rho(const copula *c, size_t i, size_t j, const void *with, double *x, pool *p)
{
    (void)with;
    return rho_of_pair(c, i, j, x, p);
}

static status pair_tail(const copula *c, size_t i, size_t j, const void *with, double *x, pool *p)
{
    (void)p;
    const enum corner *corner = with;
    return tail_of_pair(c, i, j, *corner, x);
}

static status cell_tauof(const argument *in, value *out, report *r)
{
    return each_pair(in[0].model, pair_tau, NULL, out, r);
}

static status cell_rhoof(const argument *in, value *out, report *r)
{
    return each_pair(in[0].model, pair_rho, NULL, out, r);
}

static status cell_tailof(const argument *in, value *out, report *r)
{
    enum corner corner = in[1].word == 0 ? LOWER : UPPER;
    return each_pair(in[0].model, pair_tail, &corner, out, r);
}

/* Words that stand between a value and what FIT adds to it. */
static bool ends_value(const table *t, size_t row, size_t col)
{
    const char *word = word_at(t, row, col);
    return col > 1 && word && word_in("error low high", word) >= 0;
}

/* The part of a block beside a label: rows down to the next label, columns to the last that holds
 * anything. */
struct part {
    size_t row, rows, cols;
};

static struct part part_beside(const table *t, size_t row)
{
    struct part p = { row, 1, 0 };
    for (size_t i = row; i < t->rows && (i == row || empty_at(t, i, 0)); i++)
        for (size_t col = 1; col < t->cols && !ends_value(t, i, col); col++) {
            if (empty_at(t, i, col)) continue;
            p.rows = i - row + 1;
            if (col > p.cols) p.cols = col;
        }
    return p;
}

/* The content of one cell as a result. */
static value content(const table *t, size_t row, size_t col)
{
    const char *word = col < t->cols ? word_at(t, row, col) : NULL;
    if (word) return (value){ .is = IS_TEXT, .text = word };
    if (col >= t->cols || empty_at(t, row, col)) return (value){ .is = IS_TEXT, .text = "" };
    return (value){ .is = IS_NUMBER, .number = t->at[row * t->cols + col] };
}

static status copy_part(const table *t, const struct part *p, value *out, report *r)
{
    status s = new_table(r, p->rows, p->cols, out);
    for (size_t i = 0; s == OK && i < p->rows; i++)
        for (size_t j = 0; s == OK && j < p->cols; j++) {
            const char *word = word_at(t, p->row + i, 1 + j);
            put_number(out, i, j, t->at[(p->row + i) * t->cols + 1 + j]);
            if (word) s = put_text(r, out, i, j, word);
        }
    return s;
}

/* Where a named column stands: right of the name in the label's own row, or below it in the first
 * row; 0 where there is none. */
static size_t column_named(const table *t, size_t row, const char *name)
{
    for (size_t col = 1; col < t->cols; col++)
        if (word_at(t, row, col) && same_word(word_at(t, row, col), name)) return col + 1;
    for (size_t col = 1; col < t->cols; col++)
        if (word_at(t, 0, col) && same_word(word_at(t, 0, col), name)) return col;
    return 0;
}

/* One cell beside the label, by its number counted from the label or by its name. */
static status read_cell(const table *t, size_t row, const argument *column, value *out, report *r)
{
    value one = single_of(column->raw);
    size_t col = 0;
    if (one.is == IS_TEXT) {
        col = column_named(t, row, one.text);
        if (!col) return refuse(r, BAD_KIND, "block has no column \"%s\"", one.text);
    } else if (one.is == IS_NUMBER && fault_in(one.number) == OK) {
        double most = (double)t->cols - 1;
        if (!(one.number >= 1 && one.number <= most && one.number == floor(one.number)))
            return refuse(r, OUT_OF_DOMAIN, "column is %g, but must be a whole number from 1 to %g",
                          one.number, most);
        col = (size_t)one.number;
    } else {
        return refuse(r, BAD_KIND, "column must be a whole number or the name of a column");
    }
    *out = content(t, row, col);
    return OK;
}

static status cell_read(const argument *in, value *out, report *r)
{
    const table *t;
    status s = table_of("block", in[0].raw, "a block with labels in its first column", &t, r);
    if (s != OK) return s;
    size_t row = 0;
    while (row < t->rows && !(word_at(t, row, 0) && same_word(word_at(t, row, 0), in[1].text)))
        row++;
    if (row == t->rows) return refuse(r, BAD_KIND, "block has no label \"%s\"", in[1].text);
    if (in[2].given) return read_cell(t, row, &in[2], out, r);
    struct part p = part_beside(t, row);
    if (p.rows > 1 || p.cols > 1) return copy_part(t, &p, out, r);
    *out = content(t, row, 1);
    return OK;
}

static const char GROUP[] = "Describe a model";

const function describe_functions[] = {
    {
        .name = "tauOf",
        .group = GROUP,
        .help = "Kendall's tau of a model: a number, or a matrix where its pairs differ.",
        .detail =
            "A number for a pair and for families with one parameter, else the matrix of all "
            "pairs. It is that of the rotated copula. To 1e-12; for a grouped t, whose tau is an "
            "integral over its chi-squares and not Greiner's, to 1e-9.",
        .examples = {
            { "TAUOF(MODEL(\"gumbel\";2))", "0.5" },
            { "TAUOF(MODEL(\"clayton\";2;;90))", "-0.5" },
            { "TAUOF(MODEL(\"t\";0.5;4;0;3))", "1" },
        },
        .params = {
            { .name = "model", .help = "A model block, as MODEL or FIT returns it.",
              .kind = MODEL },
        },
        .call = cell_tauof,
    },
    {
        .name = "rhoOf",
        .group = GROUP,
        .help = "Spearman's rho of a model: a number, or a matrix where its pairs differ.",
        .detail =
            "A number for a pair and for families with one parameter, else the matrix of all "
            "pairs. It is that of the rotated copula. To 1e-12; for a grouped t to 1e-9.",
        .examples = {
            { "RHOOF(MODEL(\"gaussian\";0.517638090205042))", "0.5" },
            { "RHOOF(MODEL(\"clayton\";-0.5))", "-0.466666666666667" },
        },
        .params = {
            { .name = "model", .help = "A model block, as MODEL or FIT returns it.",
              .kind = MODEL },
        },
        .call = cell_rhoof,
        .costly = true,
    },
    {
        .name = "tailOf",
        .group = GROUP,
        .help = "Tail dependence of a model: a number, or a matrix where its pairs differ.",
        .detail =
            "The limit of P(V > q | U > q) as q tends to 1 (upper), or of P(V <= q | U <= q) as q "
            "tends to 0 (lower), for every pair of columns. It is that of the rotated copula.",
        .examples = {
            { "TAILOF(MODEL(\"gumbel\";2);\"upper\")", "0.585786437626905" },
            { "TAILOF(MODEL(\"t\";0.5;3);\"lower\")", "0.3125" },
            { "TAILOF(MODEL(\"gaussian\";0.9);\"upper\")", "0" },
        },
        .params = {
            { .name = "model", .help = "A model block, as MODEL or FIT returns it.",
              .kind = MODEL },
            { .name = "corner", .help = "lower or upper.", .kind = WORD, .words = "lower upper" },
        },
        .call = cell_tailof,
    },
    {
        .name = "read",
        .group = GROUP,
        .help = "The value, row or matrix beside a label of a block.",
        .detail =
            "Works for every block with labels in its first column. Without a column the result is "
            "all that stands beside the label, down to the next label; what FIT adds beside a "
            "parameter is left out. A column is a number, counted from the label, or a name: the "
            "cell to the right of that name in the label's row, or else the cell of the label's "
            "row below that name in the first row. Of two rows with the same label the first is "
            "taken.",
        .examples = {
            { "READ(MODEL(\"gumbel\";2);\"theta\")", "2" },
            { "READ(MODEL(\"t\";0.3;4);\"matrix\";2)", "0.3" },
            { "READ(MODEL(\"t\";0.3;4);\"theta\")", "#VALUE!" },
        },
        .params = {
            { .name = "block", .help = "A block with labels in its first column.", .kind = RAW },
            { .name = "label", .help = "The label, in quotes.", .kind = WORDS },
            { .name = "column", .help = "Which cell beside the label, by number or by name.",
              .kind = RAW, .optional = true },
        },
        .call = cell_read,
    },
    { 0 },
};
