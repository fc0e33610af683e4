/* mend.c - mending correlation matrices. */
#include "../correlations.h"
#include "../read.h"
#include "../square.h"
#include "../words.h"
#include "../../src/duality.h"
#include "../../src/firm_repair.h"

#include <math.h>

static const char GROUP[] = "Mend and inspect correlation matrices";
static const char MATRIX_HELP[] =
    "A square of correlations; a header row and a name column are allowed.";
static const char FLOOR_HELP[] =
    "The lowest eigenvalue that the result may have, 0 when left out.";
static const char FIRMNESS_HELP[] =
    "A square or triangle of the same size: numbers above 0, the word hold, or nothing, which is "
    "1.";

enum { GIVEN, FLOOR, FIRMNESS };

/* A cell's own fault, whatever stands opposite. */
static status check_firmness(const square *s, size_t i, size_t j, report *r)
{
    size_t row = s->row + i, column = s->column + j;
    const char *word = word_at(s->cells, row, column);
    double x = s->cells->at[row * s->cells->cols + column];
    if (word && !same_word(word, "hold"))
        return refuse(r, BAD_KIND, "firmness has the text \"%s\" in row %zu, column %zu, but must "
                      "have a number, hold or nothing", word, row + 1, column + 1);
    if (!word && isfinite(x) && !(x > 0))
        return refuse(r, OUT_OF_DOMAIN, "firmness is %g in row %zu, column %zu, but must be above "
                      "0", x, row + 1, column + 1);
    return OK;
}

static status firmness_of(const square *s, size_t i, size_t j, double *firmness, report *r)
{
    value cell;
    status read = check_firmness(s, i, j, r);
    if (!read) read = check_firmness(s, j, i, r);
    if (!read) read = cell_or_opposite(s, i, j, &cell, r);
    if (read) return read;
    *firmness = cell.is == IS_TEXT ? INFINITY : cell.is == IS_NOTHING ? 1 : cell.number;
    return OK;
}

/* Firmness of each entry, INFINITY where it is held. *alike: the same everywhere, and nothing held.
 */
static status read_firmness(const value *v, const samples *matrix, double **firmness, bool *alike,
                            report *r)
{
    square cells;
    size_t d = matrix->cols;
    status s = square_of_size("firmness", v, d, &cells, r);
    if (!s && matrix->names) s = check_names(&cells, matrix->names, "matrix", r);
    if (s) return s;
    double *w = *firmness = pool_take_zeroed(r->pool, d, d * sizeof *w);
    if (!w) return NO_MEMORY;
    *alike = true;
    for (size_t i = 0; !s && i < d; i++)
        for (size_t j = i + 1; !s && j < d; j++) {
            s = firmness_of(&cells, i, j, &w[i * d + j], r);
            w[j * d + i] = w[i * d + j];
            *alike = *alike && isfinite(w[i * d + j]) && w[i * d + j] == w[1];
        }
    return s;
}

/* Names the lines that the proof of a clash (firm_repair.h) rests on most. */
static status refuse_holds(const argument *a, double floor, const double *proof, report *r)
{
    enum { MOST_NAMED = 8 };
    size_t d = a->data.cols, named = 0;
    const char *lines = "";
    double largest = 0;
    for (size_t i = 0; i < d; i++) largest = fmax(largest, proof[i * d + i]);
    for (size_t i = 0; i < d && named < MOST_NAMED; i++) {
        if (proof[i * d + i] < 0.01 * largest) continue;
        lines = text_from(r->pool, named++ ? "%s, %zu" : "%s%zu", lines, i + 1);
        if (!lines) return NO_MEMORY;
    }
    if (floor > 0)
        return refuse(r, OUT_OF_DOMAIN, "the entries held in firmness cannot stand together with "
                      "the floor %g; look at those among lines %s, or lower the floor", floor,
                      lines);
    return refuse(r, OUT_OF_DOMAIN, "the entries held in firmness cannot stand together; look at "
                  "those among lines %s", lines);
}

/* A repaired matrix and what proves it: no firmness and no proof where all entries count alike. */
struct mended {
    double *nearest, *firmness, *proof;
    course how;
};

static status mend_firmly(const argument *in, const double *given, struct mended *m, report *r)
{
    size_t d = in[GIVEN].data.cols;
    bool clash;
    m->proof = pool_take(r->pool, d, d * sizeof *m->proof);
    if (!m->proof) return NO_MEMORY;
    status s = nearest_firm(given, m->firmness, d, in[FLOOR].number, m->nearest, m->proof, &clash,
                            &m->how, r->pool);
    if (s == OUT_OF_DOMAIN && clash) return refuse_holds(&in[GIVEN], in[FLOOR].number, m->proof, r);
    if (s == NOT_SETTLED)
        return refuse(r, s, "the repair did not settle; entries held that leave no room, and "
                      "firmness of very different size, can be the reason");
    return s;
}

/* Into m->nearest, where there is room already. */
static status mend(const argument *in, const double *given, struct mended *m, report *r)
{
    size_t d = in[GIVEN].data.cols;
    bool alike = true;
    status s = OK;
    if (in[FIRMNESS].given)
        s = read_firmness(in[FIRMNESS].raw, &in[GIVEN].data, &m->firmness, &alike, r);
    if (s) return s;
    if (!alike) return mend_firmly(in, given, m, r);
    m->firmness = NULL;
    s = nearest_correlation(given, d, in[FLOOR].number, m->nearest, &m->how, r->pool);
    return s == NOT_SETTLED ? refuse(r, s, "the repair did not settle") : s;
}

/* What a repair changed, over the pairs of lines. */
typedef struct {
    double distance, largest;    /* in the Frobenius norm; of one entry */
    size_t row, column;          /* of the largest, counted from 0 */
    size_t small, large;         /* pairs moved by more than 0.01 and 0.05 */
} changes;

static changes compare(const double *given, const double *nearest, size_t d)
{
    const double ROUNDING = 1e-12;      /* of equal changes the first is named */
    changes c = { 0, 0, 0, 1, 0, 0 };
    for (size_t i = 0; i < d; i++)
        for (size_t j = i + 1; j < d; j++) {
            double change = fabs(nearest[i * d + j] - given[i * d + j]);
            c.distance += 2 * change * change;
            c.small += change > 0.01;
            c.large += change > 0.05;
            if (change > c.largest + ROUNDING) {
                c.row = i;
                c.column = j;
            }
            c.largest = fmax(c.largest, change);
        }
    c.distance = sqrt(c.distance);
    return c;
}

static status cell_repair(const argument *in, value *out, report *r)
{
    double *given;
    size_t d = in[GIVEN].data.cols;
    status s = take_correlations(&in[GIVEN], &given, r);
    if (!s) s = new_table(r, d, d, out);
    if (s) return s;
    struct mended m = { .nearest = out->table.at };
    s = mend(in, given, &m, r);
    if (s) return s;
    changes c = compare(given, out->table.at, d);
    if (c.largest == 0)
        remark(r, "no repair needed");
    else
        remark(r, "repaired, changing entries by up to %g (row %zu, column %zu)", c.largest,
               c.row + 1 + rows_above(&in[GIVEN]), c.column + 1 + columns_before(&in[GIVEN]));
    return OK;
}

static status put_notes(const changes *c, const double eigenvalues[2], double gap,
                        const course *how, value *out, report *r)
{
    const struct {
        const char *label;
        double number;
    } notes[] = {
        { "lowest before", eigenvalues[0] },
        { "lowest after", eigenvalues[1] },
        { "distance", c->distance },
        { "largest change", c->largest },
        { "moved by 0.01", (double)c->small },
        { "moved by 0.05", (double)c->large },
        { "iterations", (double)how->iterations },
        { "duality gap", gap },
    };
    size_t n = sizeof notes / sizeof *notes;
    status s = new_table(r, n, 4, out);
    for (size_t k = 0; !s && k < n; k++) {
        s = put_text(r, out, k, 0, notes[k].label);
        put_number(out, k, 1, notes[k].number);
    }
    if (s || c->largest == 0) return s;
    put_number(out, 3, 2, (double)(c->row + 1));
    put_number(out, 3, 3, (double)(c->column + 1));
    return OK;
}

static status cell_repairnote(const argument *in, value *out, report *r)
{
    double *given, lowest[2], gap;
    size_t d = in[GIVEN].data.cols;
    struct mended m = { .nearest = pool_take(r->pool, d, d * sizeof *m.nearest) };
    if (!m.nearest) return NO_MEMORY;
    status s = take_correlations(&in[GIVEN], &given, r);
    if (!s) s = mend(in, given, &m, r);
    if (!s) s = lowest_eigenvalue(given, d, &lowest[0], r->pool);
    if (!s) s = lowest_eigenvalue(m.nearest, d, &lowest[1], r->pool);
    if (!s)
        s = duality_gap(given, m.firmness, m.proof, m.nearest, d, in[FLOOR].number, &gap, r->pool);
    if (s) return s;
    changes c = compare(given, m.nearest, d);
    return put_notes(&c, lowest, gap, &m.how, out, r);
}

static status cell_mirror(const argument *in, value *out, report *r)
{
    square cells;
    status s = square_of_any_size("triangle", in[0].raw, &cells, r);
    if (!s) s = new_table(r, cells.d, cells.d, out);
    for (size_t i = 0; !s && i < cells.d; i++)
        for (size_t j = 0; !s && j < cells.d; j++) {
            value cell;
            s = cell_or_opposite(&cells, i, j, &cell, r);
            if (!s && cell.is == IS_TEXT) s = put_text(r, out, i, j, cell.text);
            else if (!s && cell.is == IS_NUMBER) put_number(out, i, j, cell.number);
            else if (i == j) put_number(out, i, j, 1);
        }
    return s;
}

const function mend_functions[] = {
    {
        .name = "repair",
        .group = GROUP,
        .help = "The nearest matrix of correlations that can stand together.",
        .detail =
            "Of all matrices with a diagonal of 1 and no eigenvalue below floor, the one with the "
            "least sum of firmness x change^2 (Higham 2002). A matrix that is feasible comes back "
            "bit for bit. With a floor above 0, 1e-8 say, the result has a Cholesky factor. "
            "Firmness says how far each entry is to be trusted: the larger, the less it moves, and "
            "hold keeps it as it is. One triangle of firmness is enough, its diagonal does not "
            "matter, and twice the firmness everywhere changes nothing. Keep firmness within a "
            "factor of a million: beyond, the more so with entries held, the search may end in "
            "Err:523, as it may where the entries held only just stand together. Those that cannot "
            "stand together are #NUM!, and WHY names lines to look at. Methods: Newton on the dual "
            "(Qi & Sun 2006), with firmness augmented Lagrangians (Qi & Sun 2011).",
        .examples = {
            { "INDEX(REPAIR({1;1;0|1;1;1|0;1;1});1;2)", "0.760689853402284" },
            { "INDEX(REPAIR({1;0.5;1|0.5;1;0.7|1;0.7;1};0;"
              "{\"\";\"hold\";1|\"\";\"\";\"hold\"|\"\";\"\";\"\"});1;3)", "0.968465843842649" },
            { "INDEX(REPAIR({1;0.3|0.3;1});2;1)", "0.3" },
            { "REPAIR({1;2|2;1})", "#NUM!" },
        },
        .params = {
            { .name = "matrix", .kind = MATRIX, .help = MATRIX_HELP },
            { .name = "floor", .kind = NUMBER, .low = 0, .high = 1, .open = HIGH_OPEN,
              .optional = true, .help = FLOOR_HELP },
            { .name = "firmness", .kind = RAW, .optional = true, .help = FIRMNESS_HELP },
        },
        .costly = true,
        .call = cell_repair,
    },
    {
        .name = "repairNote",
        .group = GROUP,
        .help = "What REPAIR does to a matrix, as a labelled block for the file.",
        .detail =
            "Rows: lowest before and lowest after are the lowest eigenvalues; distance is the "
            "square root of the sum of squared changes over all cells of the matrix; largest "
            "change has the numbers of its two lines beside it; moved by 0.01 and moved by 0.05 "
            "count the pairs of lines whose correlation changed by more; iterations is 0 when no "
            "repair was needed; no other matrix has a sum of firmness x squared change (over all "
            "cells) that is lower by more than the duality gap.",
        .examples = {
            { "INDEX(REPAIRNOTE({1;1;0|1;1;1|0;1;1});3;2)", "0.527790463581828" },
            { "INDEX(REPAIRNOTE({1;1;0|1;1;1|0;1;1});1;2)", "-0.414213562373095" },
            { "REPAIRNOTE({1;0.3|0.3;1})", "lowest before" },
        },
        .params = {
            { .name = "matrix", .kind = MATRIX, .help = MATRIX_HELP },
            { .name = "floor", .kind = NUMBER, .low = 0, .high = 1, .open = HIGH_OPEN,
              .optional = true, .help = FLOOR_HELP },
            { .name = "firmness", .kind = RAW, .optional = true, .help = FIRMNESS_HELP },
        },
        .costly = true,
        .call = cell_repairnote,
    },
    {
        .name = "mirror",
        .group = GROUP,
        .help = "The full symmetric square of a triangle of numbers or words.",
        .detail =
            "An empty cell takes what the opposite cell holds, and stays empty when that is empty "
            "too; an empty cell of the diagonal is 1. Both filled and different is #VALUE!. A "
            "header row and a name column are left out: of a range that is higher than wide the "
            "first row, of one that is wider than high the first column, of a square range both "
            "when they hold text and no number and the rest holds a number.",
        .examples = {
            { "INDEX(MIRROR({1;\"\"|0.3;1});1;2)", "0.3" },
            { "INDEX(MIRROR({\"\";\"hold\"|\"\";\"\"});2;1)", "hold" },
            { "MIRROR({1;0.2|0.3;1})", "#VALUE!" },
        },
        .params = {
            { .name = "triangle", .kind = RAW,
              .help = "A square range with one triangle filled, or both where they agree." },
        },
        .call = cell_mirror,
    },
    { 0 },
};
