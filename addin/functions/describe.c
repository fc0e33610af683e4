/* describe.c - what a model says, and what stands in a block. */
#include "../function.h"
#include "../params.h"
#include "../read.h"
#include "../words.h"
#include "../../src/pair_measures.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

/* One figure of a pair of columns, and about how many seconds it takes. */
struct measure {
    status (*of)(const copula *c, size_t i, size_t j, const void *with, double *x, pool *p);
    double (*seconds)(const copula *c, size_t i, size_t j);
};

enum { PLACE_BITS = 12, REMEMBERED = 1 << PLACE_BITS };

/* Figures of pairs that differ, each in the place that its numbers lead to, since many pairs of a
 * matrix are often alike and some take their time. */
struct pair {
    bool taken;
    double correlation, low, high, x;      /* low, high: df, the order of which does not matter */
    status s;
};

static uint64_t mixed(uint64_t h, double x)
{
    uint64_t bits;
    memcpy(&bits, &x, sizeof bits);
    h = (h ^ bits) * 0x9e3779b97f4a7c15u;
    return h ^ h >> 32;
}

/* Where a pair stands among those remembered; if it is not there its place is made free for it. */
static struct pair *place_of(struct pair *all, const copula *c, size_t i, size_t j, bool *known)
{
    struct pair one = { .taken = true, .correlation = c->matrix[i * c->dimension + j] };
    if (c->df) {
        one.low = fmin(c->df[i], c->df[j]);
        one.high = fmax(c->df[i], c->df[j]);
    }
    uint64_t h = mixed(mixed(mixed(0, one.correlation), one.low), one.high);
    struct pair *at = all + (h >> (64 - PLACE_BITS));
    *known = at->taken && at->correlation == one.correlation && at->low == one.low
             && at->high == one.high;
    if (!*known) *at = one;
    return at;
}

static struct pair *new_places(pool *p)
{
    return pool_take_zeroed(p, REMEMBERED, sizeof(struct pair));
}

/* Refuses more pairs that differ than can be measured while the office waits. */
static status check_pairs(const copula *c, const struct measure *m, report *r)
{
    struct pair *all = new_places(r->pool);
    if (!all) return NO_MEMORY;
    double seconds = 0;
    size_t n = 0;
    bool known;
    for (size_t i = 0; i < c->dimension; i++)
        for (size_t j = 0; j < i; j++) {
            place_of(all, c, i, j, &known);
            if (known) continue;
            seconds += m->seconds(c, i, j);
            n++;
        }
    return within_time(seconds, n, "pair", r);
}

static status fill_pairs(const copula *c, const struct measure *m, const void *with, value *out,
                         report *r)
{
    struct pair *all = new_places(r->pool);
    if (!all) return NO_MEMORY;
    for (size_t i = 0; i < c->dimension; i++) {
        put_number(out, i, i, 1);
        for (size_t j = 0; j < i; j++) {
            bool known;
            struct pair *pair = place_of(all, c, i, j, &known);
            if (!known) pair->s = m->of(c, i, j, with, &pair->x, r->pool);
            if (pair->s == NO_MEMORY) return NO_MEMORY;
            put_number(out, i, j, pair->s == OK ? pair->x : fault(pair->s));
            put_number(out, j, i, pair->s == OK ? pair->x : fault(pair->s));
        }
    }
    return OK;
}

/* A number where one describes all pairs, else the matrix of them. */
static status each_pair(const copula *c, const struct measure *m, const void *with, value *out,
                        report *r)
{
    double x;
    if (one_for_all_pairs(c)) {
        status s = m->of(c, 0, 1, with, &x, r->pool);
        return s == OK ? answer(out, x) : s;
    }
    status s = check_pairs(c, m, r);
    if (s == OK) s = new_table(r, c->dimension, c->dimension, out);
    return s == OK ? fill_pairs(c, m, with, out, r) : s;
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
    static const struct measure tau = { pair_tau, tau_seconds };
    return each_pair(in[0].model, &tau, NULL, out, r);
}

static status cell_rhoof(const argument *in, value *out, report *r)
{
    static const struct measure rho = { pair_rho, rho_seconds };
    return each_pair(in[0].model, &rho, NULL, out, r);
}

static status cell_tailof(const argument *in, value *out, report *r)
{
    static const struct measure tail = { pair_tail, tail_seconds };
    enum corner corner = in[1].word == 0 ? LOWER : UPPER;
    return each_pair(in[0].model, &tail, &corner, out, r);
}

/* Words that stand between a value and what a fit adds to it. */
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

/* A number as a result: infinite ones, which a formula around the block may make, are errors. */
static double shown(double x)
{
    return isinf(x) ? fault(OUT_OF_DOMAIN) : x;
}

/* The content of one cell as a result. */
static value content(const table *t, size_t row, size_t col)
{
    const char *word = col < t->cols ? word_at(t, row, col) : NULL;
    if (word) return (value){ .is = IS_TEXT, .text = word };
    if (col >= t->cols || empty_at(t, row, col)) return (value){ .is = IS_TEXT, .text = "" };
    return (value){ .is = IS_NUMBER, .number = shown(t->at[row * t->cols + col]) };
}

static status copy_part(const table *t, const struct part *p, value *out, report *r)
{
    status s = new_table(r, p->rows, p->cols, out);
    for (size_t i = 0; s == OK && i < p->rows; i++)
        for (size_t j = 0; s == OK && j < p->cols; j++) {
            const char *word = word_at(t, p->row + i, 1 + j);
            put_number(out, i, j, shown(t->at[(p->row + i) * t->cols + 1 + j]));
            if (word) s = put_text(r, out, i, j, word);
        }
    return s;
}

static bool is_blank(char c)
{
    return c == ' ' || c == '\t' || c == '\n' || c == '\r';
}

static char lower(char c)
{
    return c >= 'A' && c <= 'Z' ? (char)(c + 32) : c;
}

/* Whether tidy_words() makes this of a text. */
static bool tidies_to(const char *s, const char *tidy)
{
    while (is_blank(*s)) s++;
    for (; *tidy; tidy++) {
        if (*tidy != ' ' && lower(*s++) != *tidy) return false;
        if (*tidy == ' ' && !is_blank(*s)) return false;
        while (*tidy == ' ' && is_blank(*s)) s++;
    }
    while (is_blank(*s)) s++;
    return !*s;
}

static bool holds(const table *t, size_t row, size_t col, const char *tidy)
{
    return word_at(t, row, col) && tidies_to(word_at(t, row, col), tidy);
}

/* How often a name stands in a row, and where first. */
static size_t count_named(const table *t, size_t row, const char *name, size_t *first)
{
    size_t count = 0;
    for (size_t col = 1; col < t->cols; col++)
        if (holds(t, row, col, name) && !count++) *first = col;
    return count;
}

/* Where a named column stands: right of the name in the label's own row, or below it in the first
 * row. */
static status column_named(const table *t, size_t row, const char *name, size_t *col, report *r)
{
    size_t beside = count_named(t, row, name, col), where = beside ? row : 0;
    size_t count = beside ? beside : count_named(t, 0, name, col);
    if (!count) return refuse(r, BAD_KIND, "block has no column \"%s\"", name);
    if (count > 1)
        return refuse(r, BAD_KIND, "block has \"%s\" %zu times in row %zu; a number as column "
                      "picks one", name, count, where + 1);
    *col += beside > 0;
    return OK;
}

/* One cell beside the label, by its number counted from the label or by its name. */
static status read_cell(const table *t, size_t row, const argument *column, value *out, report *r)
{
    value one = single_of(column->raw);
    size_t col = 0;
    if (one.is == IS_TEXT) {
        const char *name = tidy_words(r->pool, one.text);
        status s = name ? column_named(t, row, name, &col, r) : NO_MEMORY;
        if (s != OK) return s;
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
    while (row < t->rows && !holds(t, row, 0, in[1].text)) row++;
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
            "integral over its chi-squares and not Greiner's, to 1e-9. A pair of a grouped t takes "
            "some 4 ms, pairs that are alike take it once; what would take more than about 20 s is "
            "refused.",
        .examples = {
            { "TAUOF(MODEL(\"gumbel\";2))", "0.5" },
            { "TAUOF(MODEL(\"clayton\";2;;90))", "-0.5" },
            { "TAUOF(MODEL(\"t\";0.5;4;0;3))", "1" },
        },
        .params = {
            MODEL_BLOCK,
        },
        .costly = true,
        .call = cell_tauof,
    },
    {
        .name = "rhoOf",
        .group = GROUP,
        .help = "Spearman's rho of a model: a number, or a matrix where its pairs differ.",
        .detail =
            "A number for a pair and for families with one parameter, else the matrix of all "
            "pairs. It is that of the rotated copula. To 1e-12; for a grouped t to 1e-9. A pair of "
            "a grouped t takes some 8 ms, with df below 1 some 20 to 50, of another t some 0.2, "
            "with df below 2 some 2 ms; pairs that are alike take it once. What would take more "
            "than about 20 s is refused.",
        .examples = {
            { "RHOOF(MODEL(\"gaussian\";0.517638090205042))", "0.5" },
            { "RHOOF(MODEL(\"clayton\";-0.5))", "-0.466666666666667" },
        },
        .params = {
            MODEL_BLOCK,
        },
        .costly = true,
        .call = cell_rhoof,
    },
    {
        .name = "tailOf",
        .group = GROUP,
        .help = "Tail dependence of a model: a number, or a matrix where its pairs differ.",
        .detail =
            "The limit of P(V > q | U > q) as q tends to 1 (upper), or of P(V <= q | U <= q) as q "
            "tends to 0 (lower), for every pair of columns. It is that of the rotated copula. A "
            "pair of a grouped t takes some 0.6 ms, pairs that are alike take it once; what would "
            "take more than about 20 s is refused.",
        .examples = {
            { "TAILOF(MODEL(\"gumbel\";2);\"upper\")", "0.585786437626905" },
            { "TAILOF(MODEL(\"t\";0.5;3);\"lower\")", "0.3125" },
            { "TAILOF(MODEL(\"gaussian\";0.9);\"upper\")", "0" },
        },
        .params = {
            MODEL_BLOCK,
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
            "all that stands beside the label, down to the next label; the words error, low and "
            "high behind a value and what follows them are left out. A column is a number, counted "
            "from the label, or a name: the cell to the right of that name in the label's row, or "
            "else the cell of the label's row below that name in the first row. A name that stands "
            "there more than once is #VALUE!; a number picks one. Of two rows with the same label "
            "the first is taken. Case and blanks around and between words do not matter.",
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
