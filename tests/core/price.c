/* Tests of src/price.c and src/tally.c: closed forms by drawing, and what must hold for every
 * cover. */
#include "margins.h"

#include "../../src/draw.h"
#include "../../src/family.h"
#include "../../src/price.h"
#include "../../src/quantiles.h"

static const double none = INFINITY;
enum { MOST_LINES = 5 };

/* A model with its cover, ready to price. */
struct deal {
    pool p;
    copula model;
    struct margins margins;
    margin of[MOST_LINES];
    double matrix[MOST_LINES * MOST_LINES], df[MOST_LINES];
    struct terms terms;
    term term_of[MOST_LINES], aggregate;
    cover cover;
    struct simulation sim;
    pricing out;
};

/* every pair with the same correlation or theta */
static void set_model(struct deal *d, const char *word, size_t lines, double parameter)
{
    const family *f = family_named(word);
    *d = (struct deal){ .model = { .family = f, .dimension = lines, .theta = parameter } };
    for (size_t i = 0; i < lines; i++) d->df[i] = 4;
    for (size_t i = 0; i < lines * lines; i++) d->matrix[i] = i % (lines + 1) ? parameter : 1;
    if (f->has_matrix) d->model.matrix = d->matrix;
    if (f->has_df) d->model.df = d->df;
    d->margins = (struct margins){ lines, d->of, NULL };
    d->sim = (struct simulation){ .model = &d->model, .margins = &d->margins, .cover = &d->cover,
                                  .seed = 1, .rows = 200000, .level = 0.99 };
}

static void set_cover(struct deal *d, bool with_terms, bool with_aggregate)
{
    d->terms = (struct terms){ with_terms ? d->margins.lines : 0, d->term_of, NULL };
    assert_int_equal(cover_prepare(&d->terms, d->margins.lines,
                                   with_aggregate ? &d->aggregate : NULL, &d->p, &d->cover),
                     OK);
}

static void run(struct deal *d)
{
    assert_int_equal(price_model(&d->sim, &d->p, &d->out), OK);
}

static estimate figure(const struct deal *d, size_t row, enum view v)
{
    return d->out.of[row * VIEWS + v];
}

/* ---- closed forms ---- */

static double closed_form(const struct csv *t, const char *quantity, const char *measure,
                          double level)
{
    char wanted[128], text[32];
    snprintf(text, sizeof text, "%g", level);
    snprintf(wanted, sizeof wanted, "%s: %s %s", quantity, measure, text);
    for (size_t i = 0; i < t->rows; i++)
        if (csv_is(t, i, "quantity", wanted)) return csv_number(t, i, "value");
    fail_msg("no row \"%s\"", wanted);
    return NAN;
}

static void check_closed_forms(struct deal *d, const char *quantity)
{
    static const double levels[] = { 0.9, 0.99, 0.995 };
    struct csv *t = csv_read("portfolio_closed_forms.csv");
    set_cover(d, false, false);
    for (size_t i = 0; i < 3; i++) {
        d->sim.level = levels[i];
        run(d);
        estimate var = figure(d, PRICE_VALUE_AT_RISK, GROSS),
                 tvar = figure(d, PRICE_SHORTFALL, GROSS);
        assert_within(var.value, closed_form(t, quantity, "VaR", levels[i]), 4 * var.error);
        assert_within(tvar.value, closed_form(t, quantity, "TVaR", levels[i]), 4 * tvar.error);
    }
    csv_free(t);
    pool_empty(&d->p);
}

/* tests/values/portfolio_closed_forms.csv: sums of gammas, of comonotone lognormals, of normals */
static void closed_forms_by_drawing(void **state)
{
    (void)state;
    struct deal d;
    set_model(&d, "independent", 2, 0);
    d.of[0] = margin_of("gamma", 2, 10);
    d.of[1] = margin_of("gamma", 3, 10);
    check_closed_forms(&d, "independent gamma(2,10)+gamma(3,10)");
    set_model(&d, "gaussian", 2, 1);
    d.of[0] = margin_of("lognormal", 10, 0.5);
    d.of[1] = margin_of("lognormal", 8, 1.5);
    check_closed_forms(&d, "comonotone lognormal(10,0.5)+lognormal(8,1.5)");
    set_model(&d, "gaussian", 2, 0.5);
    d.of[0] = margin_of("normal", 100, 20);
    d.of[1] = margin_of("normal", 150, 30);
    check_closed_forms(&d, "normal copula rho 0.5, normal(100,20)+normal(150,30)");
}

/* the first five segments of Annex IV of Delegated Regulation (EU) 2015/35 */
static void segments(double *matrix)
{
    struct csv *t = csv_read("law_correlation_matrices.csv");
    for (size_t r = 0; r < t->rows; r++) {
        size_t i = (size_t)csv_number(t, r, "i"), j = (size_t)csv_number(t, r, "j");
        if (!csv_is(t, r, "matrix", "nonlife_premium_reserve_segments") || i > 5 || j > 5) continue;
        matrix[(i - 1) * 5 + j - 1] = csv_number(t, r, "value");
    }
    csv_free(t);
}

/* tests/values/euler_allocation_elliptical.csv, the normal model (McNeil, Frey & Embrechts
 * 2005): the parts of the lines in the shortfall, within four standard errors */
static void parts_of_a_normal_model(void **state)
{
    (void)state;
    static const double mean[] = { 100, 80, 50, 120, 200 }, sd[] = { 10, 8, 7.5, 12, 28 };
    struct deal d;
    set_model(&d, "gaussian", 5, 0);
    segments(d.matrix);
    for (size_t j = 0; j < 5; j++) d.of[j] = margin_of("normal", mean[j], sd[j]);
    set_cover(&d, false, false);
    struct csv *t = csv_read("euler_allocation_elliptical.csv");
    size_t checked = 0;
    for (size_t r = 0; r < t->rows; r++) {
        if (!csv_is(t, r, "model", "normal")) continue;
        if (csv_is(t, r, "item", "total")) {
            d.sim.level = csv_number(t, r, "p");
            run(&d);
        }
        size_t line = csv_is(t, r, "item", "total") ? 0 : (size_t)csv_number(t, r, "item");
        size_t row = line ? PRICE_LINES + 5 + line - 1 : PRICE_SHORTFALL;
        estimate e = figure(&d, row, GROSS);
        assert_true(e.error < 0.01 * e.value);
        assert_within(e.value, csv_number(t, r, "TVaR_contribution"), 4 * e.error);
        checked++;
    }
    assert_true(checked >= 12);
    csv_free(t);
    pool_empty(&d.p);
}

/* ---- what holds for every cover ---- */

/* three lines of which one is a gamma and one follows, with an aggregate */
static void set_layers(struct deal *d, const char *family_word, double parameter)
{
    set_model(d, family_word, 3, parameter);
    d->of[0] = margin_of("lognormal", 6, 1);
    d->of[1] = margin_of("gamma", 2, 300);
    d->of[2] = margin_of("lomax", 3, 200);
    d->term_of[0] = (term){ 300, 2000, 0.8, 0 };
    d->term_of[1] = (term){ 500, none, 1, 0 };
    d->term_of[2] = (term){ 0, none, 1, 1 };
    d->aggregate = (term){ 400, 3000, 0.9, 0 };
    d->sim.rows = 30011;
}

static void check_sums(const struct deal *d)
{
    size_t lines = d->margins.lines;
    for (int v = 0; v < VIEWS; v++) {
        double means = 0, parts = 0;
        for (size_t j = 0; j < lines; j++) {
            means += figure(d, PRICE_LINES + j, v).value;
            parts += figure(d, PRICE_LINES + lines + j, v).value;
        }
        assert_close(means, figure(d, PRICE_MEAN, v).value, 1e-12);
        assert_close(parts, figure(d, PRICE_SHORTFALL, v).value, 1e-12);
    }
    assert_close(figure(d, PRICE_MEAN, CEDED).value + figure(d, PRICE_MEAN, RETAINED).value,
                 figure(d, PRICE_MEAN, GROSS).value, 1e-12);
}

static void parts_add_up(void **state)
{
    (void)state;
    struct deal d;
    set_layers(&d, "t", 0.5);
    for (int k = 0; k < 4; k++) {
        set_cover(&d, k & 1, k & 2);
        run(&d);
        check_sums(&d);
    }
    pool_empty(&d.p);
}

/* functions.md: PRICE under plain equals REPORT(LOSSES(DRAW())) */
static void model_equals_its_losses(void **state)
{
    (void)state;
    static const char *const words[] = { "t", "gumbel", "independent", "clayton" };
    for (size_t k = 0; k < 4; k++) {
        struct deal d;
        set_layers(&d, words[k], k == 0 ? 0.5 : 1.6);
        set_cover(&d, true, true);
        run(&d);
        size_t rows = d.sim.rows;
        samples losses = { rows, 3, pool_take(&d.p, rows, 3 * sizeof(double)), NULL };
        assert_int_equal(draw(&d.model, 1, 0, rows, losses.at, rows, &d.p), OK);
        for (size_t j = 0; j < 3; j++) {
            const quantiles *q;
            assert_int_equal(quantiles_prepare(d.of + j, NULL, rows, &d.p, &q), OK);
            losses_at(q, column(&losses, j), rows, column(&losses, j));
        }
        pricing given;
        assert_int_equal(price_losses(&losses, &d.cover, 0.99, &d.p, &given), OK);
        for (size_t i = 0; i < price_rows(3) * VIEWS; i++) {
            assert_same(given.of[i].value, d.out.of[i].value);
            assert_same(given.of[i].error, d.out.of[i].error);
        }
        pool_empty(&d.p);
    }
}

/* With an exponential of mean 1 the layer from e of width l costs exp(-e) - exp(-e - l),
 * attaches with exp(-e) and is exhausted with exp(-e - l); an aggregate on one line is a layer
 * on that layer. */
static void layers_of_an_exponential(void **state)
{
    (void)state;
    struct deal d;
    set_model(&d, "independent", 2, 0);
    d.of[0] = margin_of("exponential", 1, NAN);
    d.of[1] = margin_of("exponential", 1, NAN);
    d.term_of[0] = (term){ 0.5, 2, 1, 0 };
    d.term_of[1] = (term){ 1, 1, 0, 0 };                  /* nothing is ceded of the second */
    set_cover(&d, true, false);
    run(&d);
    estimate mean = figure(&d, PRICE_MEAN, CEDED), attaching = figure(&d, PRICE_ATTACHING, CEDED);
    estimate exhausting = figure(&d, PRICE_EXHAUSTING, CEDED);
    assert_within(mean.value, exp(-0.5) - exp(-2.5), 4 * mean.error);
    assert_within(attaching.value, exp(-0.5), 4 * attaching.error);
    assert_within(exhausting.value, exp(-2.5) * exp(-2),
                  4 * exhausting.error); /* both at their limit */
    assert_close(attaching.error, sqrt(exp(-0.5) * (1 - exp(-0.5)) / 200000), 0.01);
    assert_true(isnan(figure(&d, PRICE_ATTACHING, GROSS).value));
    d.aggregate = (term){ 0.5, 1, 1, 0 };
    set_cover(&d, true, true);
    run(&d);
    mean = figure(&d, PRICE_MEAN, CEDED);
    attaching = figure(&d, PRICE_ATTACHING, CEDED);
    exhausting = figure(&d, PRICE_EXHAUSTING, CEDED);
    assert_within(mean.value, exp(-1) - exp(-2), 4 * mean.error);
    assert_within(attaching.value, exp(-1), 4 * attaching.error);
    assert_within(exhausting.value, exp(-2), 4 * exhausting.error);
    d.aggregate.limit = none;
    set_cover(&d, true, true);
    run(&d);
    assert_true(isnan(figure(&d, PRICE_EXHAUSTING, CEDED).value));
    pool_empty(&d.p);
}

/* ---- schemes ---- */

/* The other schemes give the same price with no larger error of the mean; a second seed lies within
 * their own errors. */
static void schemes_agree(void **state)
{
    (void)state;
    struct deal d;
    set_layers(&d, "gaussian", 0.5);
    d.sim.rows = 64000;
    set_cover(&d, true, true);
    run(&d);
    estimate plain = figure(&d, PRICE_MEAN, GROSS), tail = figure(&d, PRICE_SHORTFALL, CEDED);
    for (int how = SCHEME_ANTITHETIC; how <= SCHEME_SOBOL; how++) {
        d.sim.how = (scheme)how;
        run(&d);
        estimate mean = figure(&d, PRICE_MEAN, GROSS), other = figure(&d, PRICE_SHORTFALL, CEDED);
        assert_true(mean.error < 0.8 * plain.error);
        assert_within(mean.value, plain.value, 4 * hypot(mean.error, plain.error));
        assert_within(other.value, tail.value, 4 * hypot(other.error, tail.error));
        check_sums(&d);
        d.sim.seed = 2;
        run(&d);
        assert_within(figure(&d, PRICE_MEAN, GROSS).value, mean.value, 6 * mean.error);
        d.sim.seed = 1;
    }
    pool_empty(&d.p);
}

/* Two standard normals with correlation 1/2 add up to a normal with sd sqrt 3; truth holds its
 * quantile z and its density at z / 0.01 at level 0.99 (scipy.stats.norm). How far the figures lie
 * from these is what the errors say, even where parts have but five rows in the tail. */
static void errors_of_short_parts(void **state)
{
    (void)state;
    static const double truth[] = { 2.3263478740408408, 2.6652142203458075 };
    for (int how = SCHEME_ANTITHETIC; how <= SCHEME_SOBOL; how++) {
        double away[2] = { 0 }, errors[2] = { 0 };
        for (size_t round = 0; round < effort(200); round++) {
            struct deal d;
            set_model(&d, "gaussian", 2, 0.5);
            d.of[0] = d.of[1] = margin_of("normal", 0, 1);
            set_cover(&d, false, false);
            d.sim.how = (scheme)how;
            d.sim.rows = PRICE_REPLICATES * 500;
            d.sim.seed = 1 + round;
            run(&d);
            for (size_t k = 0; k < 2; k++) {
                estimate e = figure(&d, k ? PRICE_SHORTFALL : PRICE_VALUE_AT_RISK, GROSS);
                away[k] += pow(e.value - truth[k] * sqrt(3), 2);
                errors[k] += e.error * e.error;
            }
            pool_empty(&d.p);
        }
        for (size_t k = 0; k < 2; k++) assert_within(sqrt(away[k] / errors[k]), 1, 0.25);
    }
}

/* With fewer than about four rows of each part in the tail the tail figures have no error, as under
 * plain; the others have. */
static void no_errors_without_a_tail(void **state)
{
    (void)state;
    struct deal d;
    set_layers(&d, "gaussian", 0.5);
    set_cover(&d, true, true);
    for (int how = SCHEME_ANTITHETIC; how <= SCHEME_SOBOL; how++) {
        d.sim.how = (scheme)how;
        d.sim.rows = PRICE_REPLICATES * 300;
        run(&d);
        for (size_t i = 0; i < price_rows(3); i++) {
            bool tail = i == PRICE_VALUE_AT_RISK || i == PRICE_SHORTFALL || i >= PRICE_LINES + 3;
            if (isnan(figure(&d, i, CEDED).value)) continue;
            assert_int_equal(isnan(figure(&d, i, CEDED).error), tail);
        }
    }
    pool_empty(&d.p);
}

/* ---- trouble ---- */

static void overflow_is_told(void **state)
{
    (void)state;
    struct deal d;
    set_model(&d, "independent", 2, 0);
    d.of[0] = margin_of("lognormal", 1, 1);
    d.of[1] = margin_of("lomax", 0.005, 1);
    set_cover(&d, false, false);
    d.sim.rows = 10000;
    assert_int_equal(price_model(&d.sim, &d.p, &d.out), OUT_OF_DOMAIN);
    assert_int_equal(d.out.overflowed, 2);
    pool_empty(&d.p);
}

/* each loss is a number but a row's sum is none, and the other way round the sum is 0 */
static void sums_can_overflow(void **state)
{
    (void)state;
    struct deal d;
    set_model(&d, "independent", 2, 0);
    set_cover(&d, false, false);
    double over[] = { 1, 1e308, 2, 1e308 }, beyond[] = { 1, 1e308, 2, -1e308 },
           fits[] = { 1, 9e299, 2, -9e299 };
    const samples no_sum = { 2, 2, over, NULL }, no_loss = { 2, 2, beyond, NULL },
                  fine = { 2, 2, fits, NULL };
    assert_int_equal(price_losses(&no_loss, &d.cover, 0.5, &d.p, &d.out), OUT_OF_DOMAIN);
    assert_int_equal(d.out.overflowed, 1);
    assert_int_equal(price_losses(&no_sum, &d.cover, 0.5, &d.p, &d.out), OUT_OF_DOMAIN);
    over[1] = over[3] = 9e299;
    assert_int_equal(price_losses(&no_sum, &d.cover, 0.5, &d.p, &d.out), OUT_OF_DOMAIN);
    assert_int_equal(d.out.overflowed, 3);
    assert_int_equal(price_losses(&fine, &d.cover, 0.5, &d.p, &d.out), OK);
    assert_same(figure(&d, PRICE_MEAN, GROSS).value, 1.5);
    assert_close(figure(&d, PRICE_LINES, GROSS).value, 4.5e299, 1e-15);
    for (size_t row = PRICE_VALUE_AT_RISK; row < price_rows(2); row++)
        assert_true(isfinite(figure(&d, row, GROSS).value));
    pool_empty(&d.p);
}

static void one_row(void **state)
{
    (void)state;
    struct deal d;
    set_layers(&d, "independent", 0);
    set_cover(&d, true, true);
    for (int how = SCHEME_PLAIN; how <= SCHEME_SOBOL; how++) {
        d.sim.rows = 1;
        d.sim.how = (scheme)how;
        run(&d);
        assert_close(figure(&d, PRICE_SHORTFALL, GROSS).value, figure(&d, PRICE_MEAN, GROSS).value,
                     1e-15);
        assert_true(isnan(figure(&d, PRICE_MEAN, GROSS).error));
    }
    d.sim.rows = 0;
    assert_int_equal(price_model(&d.sim, &d.p, &d.out), TOO_FEW);
    pool_empty(&d.p);
}

static void memory_can_fail(void **state)
{
    (void)state;
    for (int how = SCHEME_PLAIN; how <= SCHEME_SOBOL; how++) {
        status s = NO_MEMORY;
        for (size_t at = 1; s != OK; at++) {
            struct deal d;
            set_layers(&d, "t", 0.5);
            set_cover(&d, true, true);
            d.sim.rows = 3500;
            d.sim.how = (scheme)how;
            d.p.fail_at = d.p.taken + at;
            s = price_model(&d.sim, &d.p, &d.out);
            assert_true(s == OK || s == NO_MEMORY);
            pool_empty(&d.p);
            assert_true(at < 2000);
        }
    }
}

/* a million rows need memory for the tail and some blocks, not for the rows */
static void memory_is_bounded(void **state)
{
    (void)state;
    struct deal d;
    set_layers(&d, "gaussian", 0.5);
    set_cover(&d, true, true);
    d.sim.rows = 1000000;
    run(&d);
    assert_true((double)d.p.bytes < 8 * price_numbers(3, 1000000, 0.99, SCHEME_PLAIN) + 8e6);
    pool_empty(&d.p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(closed_forms_by_drawing),
        cmocka_unit_test(parts_of_a_normal_model),
        cmocka_unit_test(parts_add_up),
        cmocka_unit_test(model_equals_its_losses),
        cmocka_unit_test(layers_of_an_exponential),
        cmocka_unit_test(schemes_agree),
        cmocka_unit_test(errors_of_short_parts),
        cmocka_unit_test(no_errors_without_a_tail),
        cmocka_unit_test(overflow_is_told),
        cmocka_unit_test(sums_can_overflow),
        cmocka_unit_test(one_row),
        cmocka_unit_test(memory_can_fail),
        cmocka_unit_test(memory_is_bounded),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
