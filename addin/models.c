/* models.c - reading and writing model blocks. */
#include "models.h"
#include "correlations.h"
#include "read.h"
#include "words.h"
#include "../src/family.h"

#include <math.h>
#include <string.h>

enum label { COPULA, DIMENSION, LINES, ROTATION, THETA, DF, MATRIX_LABEL, LABELS };

static const char *const LABEL_WORDS = "copula dimension lines rotation theta df matrix";
static const char *const LABEL_OF[] = {
    "copula", "dimension", "lines", "rotation", "theta", "df", "matrix"
};
static const char *const FIT_ROWS = "loglik aic bic used dropped";
static const char *const FIT_WORDS = "error low high";

/* A block being read: where its labels stand. */
struct reading {
    const char *param;
    const table *t;
    size_t row[LABELS];      /* 1 + the row, 0 where the label is missing */
    size_t matrix_rows;
    double *matrix;          /* what the copula's matrix is read into */
    report *r;
};

static bool empty_from(const table *t, size_t row, size_t col)
{
    for (; col < t->cols; col++)
        if (!empty_at(t, row, col)) return false;
    return true;
}

/* Puts a known label in its place. What a fit adds has none; *under says whether rows without a
 * label may follow. */
static status place_label(struct reading *b, size_t row, const char *word, enum label *under)
{
    report *r = b->r;
    int k = word_in(LABEL_WORDS, word);
    *under = LABELS;
    if (k >= 0 && b->row[k])
        return refuse(r, BAD_KIND, "%s has the label %s twice, in row %zu and in row %zu", b->param,
                      LABEL_OF[k], b->row[k], row + 1);
    if (k >= 0) {
        b->row[k] = row + 1;
        *under = (enum label)k;
        return OK;
    }
    if (word_in(FIT_ROWS, word) >= 0 || same_word(word, "matrix error")) return OK;
    return refuse(r, BAD_KIND, "%s has the unknown label \"%s\" in row %zu", b->param, word,
                  row + 1);
}

/* Rows without a label belong to the matrix, or to the matrix error, above them. */
static status find_labels(struct reading *b)
{
    enum label under = COPULA;
    bool skipping = false;
    for (size_t row = 0; row < b->t->rows; row++) {
        const char *word = word_at(b->t, row, 0);
        if (word) {
            char *tidy = tidy_words(b->r->pool, word);
            if (!tidy) return NO_MEMORY;
            if (!strcmp(tidy, "notes")) return OK;
            status s = place_label(b, row, tidy, &under);
            if (s != OK) return s;
            skipping = !strcmp(tidy, "matrix error");
            b->matrix_rows += under == MATRIX_LABEL;
        } else if (!empty_from(b->t, row, 0) && !skipping) {
            if (under != MATRIX_LABEL || !empty_at(b->t, row, 0))
                return refuse(b->r, BAD_KIND, "%s has no label in row %zu", b->param, row + 1);
            b->matrix_rows++;
        }
    }
    return OK;
}

static status missing(const struct reading *b, enum label k)
{
    return refuse(b->r, BAD_KIND, "%s has no row with the label %s", b->param, LABEL_OF[k]);
}

/* The number in a cell that must hold one. */
static status number_in(const struct reading *b, size_t row, size_t col, const char *label,
                        double *x)
{
    if (col >= b->t->cols || empty_at(b->t, row, col))
        return refuse(b->r, BAD_KIND, "%s has an empty cell in row %zu, column %zu, not %s",
                      b->param, row + 1, col + 1, label);
    return number_at(b->param, b->t, row, col, x, b->r);
}

/* Nothing may stand beside a value. */
static status nothing_from(const struct reading *b, size_t row, size_t col, const char *label)
{
    for (; col < b->t->cols; col++)
        if (!empty_at(b->t, row, col))
            return refuse(b->r, BAD_KIND, "%s has too much beside %s, in row %zu, column %zu",
                          b->param, label, row + 1, col + 1);
    return OK;
}

/* Nothing but the words that a fit puts beside a parameter, each with its number or an empty
 * cell. */
static status only_fit_from(const struct reading *b, size_t row, size_t col, const char *label)
{
    while (col < b->t->cols) {
        const char *word = word_at(b->t, row, col);
        if (!word || word_in(FIT_WORDS, word) < 0) return nothing_from(b, row, col, label);
        double skipped;
        status s =
            col + 1 < b->t->cols ? number_at(b->param, b->t, row, col + 1, &skipped, b->r) : OK;
        if (s != OK) return s;
        col += 2;
    }
    return OK;
}

/* How many cells beside a label hold something before an empty one or a word of a fit. */
static size_t count_beside(const struct reading *b, size_t row)
{
    size_t col = 1;
    for (; col < b->t->cols && !empty_at(b->t, row, col); col++)
        if (word_at(b->t, row, col) && word_in(FIT_WORDS, word_at(b->t, row, col)) >= 0) break;
    return col - 1;
}

/* Hands on what a check found, with the row of the label it is about. */
static status refuse_found(const struct reading *b, status s, const char *label,
                           const report *found)
{
    if (s == OK || s == NO_MEMORY || !*found->why) return s;
    return refuse(b->r, s, "%s, row %zu: %s", b->param, b->row[word_in(LABEL_WORDS, label)],
                  found->why);
}

static status read_family(const struct reading *b, copula *c)
{
    if (!b->row[COPULA]) return missing(b, COPULA);
    size_t row = b->row[COPULA] - 1;
    const char *word = b->t->cols > 1 ? word_at(b->t, row, 1) : NULL;
    if (!word)
        return refuse(b->r, BAD_KIND, "%s has no word beside copula, in row %zu", b->param,
                      row + 1);
    char *tidy = tidy_words(b->r->pool, word);
    if (!tidy) return NO_MEMORY;
    c->family = family_named(tidy);
    if (!c->family)
        return refuse(b->r, BAD_KIND,
                      "%s has the unknown copula \"%s\" in row %zu (see JOINT.FAMILIES)", b->param,
                      word, row + 1);
    return nothing_from(b, row, 2, "copula");
}

static status read_whole(const struct reading *b, enum label k, double *x)
{
    size_t row = b->row[k] - 1;
    status s = number_in(b, row, 1, LABEL_OF[k], x);
    if (s == OK) s = nothing_from(b, row, 2, LABEL_OF[k]);
    if (s == OK && *x != floor(*x))
        return refuse(b->r, OUT_OF_DOMAIN, "%s, row %zu: %s is %g, but must be a whole number",
                      b->param, row + 1, LABEL_OF[k], *x);
    return s;
}

static status read_dimension(const struct reading *b, copula *c)
{
    report found = { .pool = b->r->pool };
    double d;
    if (!b->row[DIMENSION]) return missing(b, DIMENSION);
    status s = read_whole(b, DIMENSION, &d);
    if (s != OK) return s;
    s = check_columns(c->family, d, &found);
    c->dimension = s == OK ? (size_t)d : 0;
    return refuse_found(b, s, "dimension", &found);
}

static status read_rotation(const struct reading *b, copula *c)
{
    report found = { .pool = b->r->pool };
    double rotation = 0;
    status s = b->row[ROTATION] ? read_whole(b, ROTATION, &rotation) : OK;
    if (s != OK) return s;
    s = check_degrees(rotation, &found);
    c->rotation = s == OK ? (int)rotation : 0;
    return refuse_found(b, s, "rotation", &found);
}

static status read_lines(const struct reading *b, copula *c)
{
    if (!b->row[LINES]) return OK;
    size_t row = b->row[LINES] - 1, d = c->dimension;
    for (size_t col = 1; col <= d && col < b->t->cols; col++)
        if (!word_at(b->t, row, col) && !empty_at(b->t, row, col))
            return refuse(b->r, BAD_KIND,
                          "%s has no text in row %zu, column %zu, not a line's name", b->param,
                          row + 1, col + 1);
    if (d >= b->t->cols)
        return refuse(b->r, BAD_KIND, "%s has fewer lines in row %zu than its dimension, %zu",
                      b->param, row + 1, d);
    c->lines = names_in_row(b->t, row, 1, d, b->r);
    return c->lines ? nothing_from(b, row, 1 + d, "lines") : NO_MEMORY;
}

static status read_theta(struct reading *b, copula *c)
{
    if (!b->row[THETA]) return missing(b, THETA);
    status s = number_in(b, b->row[THETA] - 1, 1, "theta", &c->theta);
    return s == OK ? only_fit_from(b, b->row[THETA] - 1, 2, "theta") : s;
}

/* One number for all columns, or one for each. */
static status read_df(struct reading *b, copula *c)
{
    if (!b->row[DF]) return missing(b, DF);
    size_t row = b->row[DF] - 1, n = count_beside(b, row), d = c->dimension;
    if (n != 1 && n != d)
        return refuse(b->r, BAD_KIND,
                      "%s has %zu numbers beside df in row %zu, but must have 1 or %zu", b->param,
                      n, row + 1, d);
    double *df = pool_take(b->r->pool, d, sizeof *df);
    if (!df) return NO_MEMORY;
    c->df = df;
    for (size_t i = 0; i < d; i++) {
        status s = number_in(b, row, n == 1 ? 1 : 1 + i, "df", &df[i]);
        if (s != OK) return s;
    }
    return only_fit_from(b, row, 1 + n, "df");
}

/* Places are counted in the block, not in the matrix. */
static status refuse_correlations(const struct reading *b, const double *matrix, size_t d)
{
    defect found = matrix_defect(matrix, d);
    if (found.what == NO_DEFECT) return OK;
    const char *sentence = defect_sentence(b->param, matrix, d, found, b->row[MATRIX_LABEL] - 1, 1,
                                           b->r->pool);
    return sentence ? refuse(b->r, status_of_defect(found), "%s", sentence) : NO_MEMORY;
}

/* Names that stand above the numbers or between them belong elsewhere. */
static status refuse_names(const struct reading *b, size_t first)
{
    const table *t = b->t;
    for (size_t row = first; row < t->rows && (row == first || !word_at(t, row, 0)); row++)
        for (size_t col = 1; col < t->cols; col++) {
            const char *word = word_at(t, row, col);
            if (word && reads_as_name(word))
                return refuse(b->r, BAD_KIND, "%s has the text \"%s\" in row %zu, column %zu, "
                              "where a number of the matrix is needed (names go into a row with "
                              "the label lines)", b->param, word, row + 1, col + 1);
        }
    return OK;
}

static status read_correlations(struct reading *b, copula *c)
{
    if (!b->row[MATRIX_LABEL]) return missing(b, MATRIX_LABEL);
    size_t first = b->row[MATRIX_LABEL] - 1, d = c->dimension;
    status named = refuse_names(b, first);
    if (named != OK) return named;
    if (b->matrix_rows != d)
        return refuse(b->r, BAD_KIND, "%s has a matrix of %zu row%s from row %zu on, not %zu%s",
                      b->param, b->matrix_rows, plural(b->matrix_rows), first + 1, d,
                      b->matrix_rows < d ? " (does the range hold the whole block?)" : "");
    double *matrix = pool_take(b->r->pool, d * d, sizeof *matrix);
    if (!matrix) return NO_MEMORY;
    c->matrix = b->matrix = matrix;
    for (size_t i = 0; i < d; i++) {
        for (size_t j = 0; j < d; j++) {
            status s = number_in(b, first + i, 1 + j, "the matrix", &matrix[i * d + j]);
            if (s != OK) return s;
        }
        status s = nothing_from(b, first + i, 1 + d, "the matrix");
        if (s != OK) return s;
    }
    return refuse_correlations(b, matrix, d);
}

struct part {
    enum label label;
    bool has;
    status (*read)(struct reading *b, copula *c);
};

/* The parameters that the family has, and none that it has not. */
static status read_parameters(struct reading *b, copula *c)
{
    const struct part parts[] = {
        { THETA, c->family->has_theta, read_theta },
        { DF, c->family->has_df, read_df },
        { MATRIX_LABEL, c->family->has_matrix, read_correlations },
    };
    for (size_t i = 0; i < sizeof parts / sizeof *parts; i++) {
        enum label k = parts[i].label;
        if (!parts[i].has && b->row[k])
            return refuse(b->r, BAD_KIND, "%s has %s in row %zu, but %s has no such parameter",
                          b->param, LABEL_OF[k], b->row[k], c->family->word);
        status s = parts[i].has ? parts[i].read(b, c) : OK;
        if (s != OK) return s;
    }
    return OK;
}

/* A matrix given as a model has all that MODEL needs, and none of the labels of a block. */
static status refuse_matrix(const struct reading *b, const value *block)
{
    report unused = { .pool = b->r->pool };
    samples m;
    bool header;
    for (size_t row = 0; row < b->t->rows; row++)
        if (word_at(b->t, row, 0) && word_in(LABEL_WORDS, word_at(b->t, row, 0)) >= 0) return OK;
    status s = read_matrix(block, b->param, &m, &header, &unused);
    if (s == NO_MEMORY) return s;
    if (s != OK) return OK;
    return refuse(b->r, BAD_KIND, "%s is %zu x %zu numbers without labels; JOINT.MODEL makes a "
                  "model of them", b->param, m.rows, m.cols);
}

status read_copula(const value *block, const char *param_name, const copula **c, report *r)
{
    struct reading b = { .param = param_name, .r = r };
    status s = table_of(param_name, block, "a model block, as MODEL returns it", &b.t, r);
    copula *read = pool_take_zeroed(r->pool, 1, sizeof *read);
    if (s == OK && !read) return NO_MEMORY;
    if (s == OK) s = refuse_matrix(&b, block);
    if (s == OK) s = find_labels(&b);
    if (s == OK) s = read_family(&b, read);
    if (s == OK) s = read_dimension(&b, read);
    if (s == OK) s = read_rotation(&b, read);
    if (s == OK) s = read_lines(&b, read);
    if (s == OK) s = read_parameters(&b, read);
    report found = { .pool = r->pool };
    const char *label = NULL;
    if (s == OK) s = check_copula(read, &label, &found);
    if (label) s = refuse_found(&b, s, label, &found);
    if (s == OK && b.matrix) tidy_matrix(b.matrix, read->dimension);
    *c = read;
    return s;
}

static bool grouped(const copula *c)
{
    for (size_t i = 1; c->df && i < c->dimension; i++)
        if (c->df[i] != c->df[0]) return true;
    return false;
}

/* A block being written: the row it has come to, and the first failure. */
struct writing {
    value *out;
    size_t row;
    report *r;
    status s;
};

static void put_word(struct writing *w, size_t col, const char *word)
{
    if (w->s == OK) w->s = put_text(w->r, w->out, w->row, col, word);
}

static void write_number(struct writing *w, const char *label, double x)
{
    put_word(w, 0, label);
    put_number(w->out, w->row++, 1, x);
}

static void write_numbers(struct writing *w, const char *label, const double *x, size_t n)
{
    if (label) put_word(w, 0, label);
    for (size_t j = 0; j < n; j++) put_number(w->out, w->row, 1 + j, x[j]);
    w->row++;
}

static void write_words(struct writing *w, const char *label, const char *const *words, size_t n)
{
    put_word(w, 0, label);
    for (size_t j = 0; j < n; j++)
        if (*words[j]) put_word(w, 1 + j, words[j]);
    w->row++;
}

status write_copula(const copula *c, value *out, report *r)
{
    const family *f = c->family;
    size_t d = c->dimension, matrix_rows = f->has_matrix ? d : 0;
    bool rotated = c->rotation != 0;
    size_t rows = 2u + (c->lines != NULL) + f->has_theta + f->has_df + rotated + matrix_rows;
    size_t columns = c->lines || f->has_matrix ? 1 + d : 2;
    status s = new_table(r, rows, columns, out);
    if (s != OK) return s;

    struct writing w = { .out = out, .r = r };
    write_words(&w, "copula", &f->word, 1);
    write_number(&w, "dimension", (double)d);
    if (c->lines) write_words(&w, "lines", c->lines, d);
    if (f->has_theta) write_number(&w, "theta", c->theta);
    if (f->has_df) write_numbers(&w, "df", c->df, grouped(c) ? d : 1);
    if (rotated) write_number(&w, "rotation", c->rotation);
    for (size_t i = 0; i < matrix_rows; i++)
        write_numbers(&w, i ? NULL : "matrix", c->matrix + i * d, d);
    return w.s;
}
