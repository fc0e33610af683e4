/* The functions that turn measured dependence into parameters, as a cell calls them. */
#include "call.h"

#include "../../addin/models.h"
#include "../../src/family.h"

#include <gsl/gsl_errno.h>

static double number_of(const char *name, size_t n, const value *in)
{
    struct call c = { 0 };
    call(&c, name, n, in);
    assert_string_equal(c.report.why, "");
    assert_int_equal(c.s, OK);
    assert_int_equal(c.out.is, IS_NUMBER);
    pool_empty(&c.pool);
    return c.out.number;
}

static void refused(const char *name, size_t n, const value *in, status want, const char *why)
{
    struct call c = { 0 };
    call(&c, name, n, in);
    assert_string_equal(c.report.why, why);
    assert_int_equal(c.s, want);
    pool_empty(&c.pool);
}

/* tau_to_parameter.csv, through the cell function */
static void theta_of_a_range(void **state)
{
    (void)state;
    struct csv *t = csv_read("tau_to_parameter.csv");
    static const char *const words[][2] = {
        { "normal", "gaussian" }, { "student_t", "t" }, { "clayton", "clayton" },
        { "gumbel", "gumbel" }, { "frank", "frank" }, { "joe", "joe" },
    };
    for (size_t k = 0; k < sizeof words / sizeof *words; k++) {
        size_t n;
        double *tau = csv_numbers(t, "tau", "family", words[k][0], &n);
        double *want = csv_numbers(t, "parameter", "family", words[k][0], &n);
        value in[] = { text(words[k][1]), { .is = IS_TABLE, .table = { n, 1, tau, NULL } } };
        struct call c = { 0 };
        assert_int_equal(call(&c, "THETA", 2, in)->s, OK);
        assert_int_equal(c.out.table.rows, n);
        for (size_t i = 0; i < n; i++) assert_within(c.out.table.at[i], want[i],
                                                     1e-14 + 1e-12 * fabs(want[i]));
        pool_empty(&c.pool);
        free(tau);
        free(want);
    }
    csv_free(t);
}

static void theta_out_of_reach(void **state)
{
    (void)state;
    refused("THETA", 2, (value[]){ text("gumbel"), number(-0.1) }, OUT_OF_DOMAIN,
            "tau is -0.1, but a pair of the gumbel copula reaches only [0;1)");
    refused("THETA", 2, (value[]){ text("Frank"), number(1) }, OUT_OF_DOMAIN,
            "tau is 1, but a pair of the frank copula reaches only (-1;1)");
    refused("THETA", 2, (value[]){ text("independent"), number(0) }, BAD_KIND,
            "independent has no parameter");
    struct call c = { 0 };
    value in[] = { text("joe"), cells(&c.pool, "tau,; 0.5,-0.5; ,0.3550659331517736") };
    assert_int_equal(call(&c, "THETA", 2, in)->s, OK);
    const double *at = c.out.table.at;
    assert_string_equal(c.out.table.words[0], "tau");
    assert_int_equal(fault_in(at[3]), OUT_OF_DOMAIN);
    assert_true(marks_gap(at[4]));
    assert_close(at[5], 2, 1e-14);
    pool_empty(&c.pool);
}

/* A pair's negative theta is given, and WHY says what it is good for. */
static void negative_theta(void **state)
{
    (void)state;
    struct call c = { 0 };
    call(&c, "theta", 2, (value[]){ text("clayton"), number(-0.2) });
    assert_close(c.out.number, -1.0 / 3, 1e-15);
    assert_string_equal(c.report.facts,
                        "theta below 0 is for pairs only; rotation 90 of a positive theta is "
                        "another negative dependence of a pair");
    call(&c, "theta", 2, (value[]){ text("clayton"), number(0.2) });
    assert_string_equal(c.report.facts, "");
    call(&c, "theta", 2, (value[]){ text("gaussian"), number(-0.2) });
    assert_string_equal(c.report.facts, "");
    pool_empty(&c.pool);
}

static void greiner(void **state)
{
    (void)state;
    for (int tau = -1; tau <= 1; tau++) {
        assert_same(number_of("GREINER", 1, (value[]){ number(tau) }), tau);
        assert_same(number_of("GREINERBACK", 1, (value[]){ number(tau) }), tau);
    }
    struct csv *t = csv_read("tau_to_parameter.csv");
    for (size_t i = 0; i < t->rows; i++) {
        if (!csv_is(t, i, "family", "normal")) continue;
        double tau = csv_number(t, i, "tau"), want = csv_number(t, i, "parameter");
        assert_within(number_of("GREINER", 1, (value[]){ number(tau) }), want, 1e-14);
    }
    csv_free(t);
    uint64_t s = 4;
    for (size_t i = 0; i < effort(500); i++) {
        double tau = 1.96 * random_uniform(&s) - 0.98;
        double correlation = number_of("GREINER", 1, (value[]){ number(tau) });
        assert_within(number_of("GREINERBACK", 1, (value[]){ number(correlation) }), tau, 1e-14);
    }
    refused("GREINER", 1, (value[]){ number(1.5) }, OUT_OF_DOMAIN,
            "tau is 1.5, but must be at least -1 and at most 1");
    refused("GREINERBACK", 1, (value[]){ number(-1.5) }, OUT_OF_DOMAIN,
            "correlation is -1.5, but must be at least -1 and at most 1");
}

/* 2 sin(pi rho/6) is Pearson's (1907); -7/15 is clayton at -1/2, see families.c; 0.469020170 is
 * that of t with 4 degrees of freedom and correlation 0.5 in rho_spearman_student_t.csv. */
static void theta_of_rho(void **state)
{
    (void)state;
    double half = number_of("THETARHO", 2, (value[]){ text("gaussian"), number(0.5) });
    assert_close(half, 0.51763809020504152, 1e-14);
    double negative = number_of("THETARHO", 2, (value[]){ text("clayton"), number(-7.0 / 15) });
    assert_close(negative, -0.5, 1e-12);
    double t = number_of("THETARHO", 3, (value[]){ text("t"), number(0.469020170), number(4) });
    assert_within(t, 0.5, 1e-8);
    double many = number_of("THETARHO", 3, (value[]){ text("t"), number(0.5), number(1e9) });
    assert_within(many, half, 1e-9);                       /* the normal, and below that of tau */
    double few = number_of("THETARHO", 3, (value[]){ text("t"), number(0.5), number(1e-9) });
    assert_within(few, sqrt(0.5), 1e-8);
    refused("THETARHO", 2, (value[]){ text("t"), number(0.5) }, BAD_KIND,
            "df is missing: t needs it");
    refused("THETARHO", 3, (value[]){ text("joe"), number(0.5), number(4) }, BAD_KIND,
            "df is given, but joe has no degrees of freedom");
    refused("THETARHO", 2, (value[]){ text("joe"), number(-0.5) }, OUT_OF_DOMAIN,
            "rho is -0.5, but a pair of the joe copula reaches only [0;1)");
}

/* In a range a tau out of reach is an error in its own cell, and WHY says what is in reach. */
static void reach_of_a_range(void **state)
{
    (void)state;
    struct call c = { 0 };
    call(&c, "THETA", 2, (value[]){ text("fgm"), cells(&c.pool, "0.1;0.3") });
    assert_int_equal(c.s, OK);
    assert_close(c.out.table.at[0], 0.45, 1e-15);
    assert_int_equal(fault_in(c.out.table.at[1]), OUT_OF_DOMAIN);
    assert_non_null(strstr(c.report.facts, "of tau a pair of the fgm copula reaches only "
                                           "[-0.222222;0.222222]"));
    call(&c, "THETARHO", 2, (value[]){ text("amh"), cells(&c.pool, "0.5;0.3") });
    assert_non_null(strstr(c.report.facts, "of rho a pair of the amh copula reaches only "
                                           "[-0.271065;0.478418]"));
    pool_empty(&c.pool);
}

static void df_from_tail_dependence(void **state)
{
    (void)state;
    assert_close(number_of("DFFROMTAIL", 2, (value[]){ number(0.5), number(0.3125) }), 3, 1e-12);
    refused("DFFROMTAIL", 2, (value[]){ number(0.5), number(0.7) }, OUT_OF_DOMAIN,
            "lambda is 0.7, but with a correlation of 0.5 the t copula reaches only (0;0.666667)");
    refused("DFFROMTAIL", 2, (value[]){ number(0.9999999), number(1e-300) }, OUT_OF_DOMAIN,
            "lambda is 1e-300, but with a correlation of 0.9999999 takes degrees of freedom "
            "outside [1e-6;1e9]");
    refused("DFFROMTAIL", 2, (value[]){ number(1), number(0.5) }, OUT_OF_DOMAIN,
            "correlation is 1, but must be above -1 and below 1");
}

static void list_of_families(void **state)
{
    (void)state;
    static const char *const want[][6] = {
        { "family", "parameter", "tau", "dimensions", "rotations", "tails" },
        { "independent", "none", "[0;0]", "2 or more", "0 90 180 270, beyond pairs 0 180",
          "none" },
        { "gaussian", "matrix", "[-1;1]", NULL, NULL, "none" },
        { "t", "matrix, df", "[-1;1]", NULL, NULL, "both" },
        { "clayton", "theta [-1;1e+17], beyond pairs [0;1e+17]", "[-1;1)", NULL, NULL, "lower" },
        { "gumbel", "theta [1;1e+17]", "[0;1)", NULL, NULL, "upper" },
        { "frank", "theta (-inf;inf), beyond pairs [0;inf)", "(-1;1)", NULL, NULL, "none" },
        { "joe", "theta [1;1e+17]", "[0;1)", NULL, NULL, "upper" },
        { "amh", "theta [-1;1]", "[-0.181726;0.333333]", "2", "0 90 180 270", "none" },
        { "plackett", "theta (0;inf)", "(-1;1)", "2", NULL, "none" },
        { "fgm", "theta [-1;1]", "[-0.222222;0.222222]", "2", NULL, "none" },
    };
    enum { ROWS = sizeof want / sizeof *want };
    struct call c = { 0 };
    assert_int_equal(call(&c, "FAMILIES", 0, NULL)->s, OK);
    assert_int_equal(c.out.table.rows, ROWS);
    assert_int_equal(c.out.table.cols, 6);
    for (size_t i = 0; i < ROWS; i++)
        for (size_t j = 0; j < 6; j++)
            if (want[i][j]) assert_string_equal(c.out.table.words[i * 6 + j], want[i][j]);
    pool_empty(&c.pool);
}

static const copula *model_of(struct call *c, size_t n, const value *in)
{
    const copula *read;
    call(c, "MODEL", n, in);
    assert_string_equal(c->report.why, "");
    assert_int_equal(c->s, OK);
    assert_int_equal(read_copula(&c->out, "model", &read, &c->report), OK);
    return read;
}

static void models(void **state)
{
    (void)state;
    struct call c = { 0 };
    const copula *m = model_of(&c, 2, (value[]){ text("gumbel"), number(2) });
    assert_same(m->theta, 2);
    assert_int_equal(m->dimension, 2);
    m = model_of(&c, 5, (value[]){ text("joe"), number(2), nothing(), number(180), number(7) });
    assert_int_equal(m->rotation, 180);
    assert_int_equal(m->dimension, 7);
    m = model_of(&c, 5, (value[]){ text("t"), number(0.3), number(4), nothing(), number(3) });
    assert_int_equal(m->dimension, 3);
    assert_same(m->matrix[5], 0.3);
    assert_same(m->df[2], 4);
    m = model_of(&c, 3, (value[]){ text("t"), cells(&c.pool, "motor,cargo;1,0.3;0.3,1"),
                                   cells(&c.pool, "4,7") });
    assert_string_equal(m->lines[1], "cargo");
    assert_same(m->matrix[1], 0.3);
    assert_same(m->df[1], 7);
    m = model_of(&c, 2, (value[]){ text("gaussian"),
                                   cells(&c.pool, ",motor,cargo;motor,1,-0.3;cargo,-0.3,1") });
    assert_string_equal(m->lines[0], "motor");
    assert_same(m->matrix[2], -0.3);
    model_of(&c, 2, (value[]){ text("gaussian"), cells(&c.pool, "1,0.3;0.3000000001,1") });
    assert_same(c.out.table.at[2 * 3 + 2], c.out.table.at[3 * 3 + 1]);  /* rounding is evened out */
    m = model_of(&c, 1, (value[]){ text("independent") });
    assert_int_equal(m->dimension, 2);
    pool_empty(&c.pool);
}

/* The block of the page that defines it: labels where they are promised. */
static void layout(void **state)
{
    (void)state;
    struct call c = { 0 };
    model_of(&c, 4, (value[]){ text("t"), cells(&c.pool, "motor,cargo;1,0.3;0.3,1"), number(4.2),
                               number(90) });
    static const char *const labels[] = {
        "copula", "dimension", "lines", "df", "rotation", "matrix", NULL
    };
    assert_int_equal(c.out.table.rows, 7);
    assert_int_equal(c.out.table.cols, 3);
    for (size_t i = 0; i < 7; i++) {
        const char *word = c.out.table.words[i * 3];
        if (labels[i]) assert_string_equal(word, labels[i]);
        else assert_null(word);
    }
    assert_string_equal(c.out.table.words[1], "t");
    assert_true(marks_gap(c.out.table.at[2]));
    assert_same(c.out.table.at[3 * 3 + 1], 4.2);
    assert_same(c.out.table.at[6 * 3 + 1], 0.3);
    pool_empty(&c.pool);
}

static void models_refused(void **state)
{
    (void)state;
    pool p = { 0 };
    value word = text("gaussian");
    refused("MODEL", 1, &word, BAD_KIND,
            "parameter is missing: gaussian needs a matrix, or one correlation for all pairs");
    refused("MODEL", 2, (value[]){ text("gumbel"), number(0.5) }, OUT_OF_DOMAIN,
            "theta is 0.5, but gumbel in two dimensions takes [1;1e+17]");
    refused("MODEL", 2, (value[]){ text("gumbel"), number(0) }, OUT_OF_DOMAIN,
            "theta is 0, but gumbel in two dimensions takes [1;1e+17] (a blank cell counts as 0)");
    refused("MODEL", 2, (value[]){ text("gumbel"), cells(&p, "1,0;0,1") }, BAD_KIND,
            "parameter must be one number");
    refused("MODEL", 2, (value[]){ text("gumbel"), text("two") }, BAD_KIND,
            "parameter is the text \"two\", but must be a number");
    refused("MODEL", 2, (value[]){ text("independent"), number(2) }, BAD_KIND,
            "independent has no parameter");
    refused("MODEL", 2, (value[]){ text("t"), number(0.5) }, BAD_KIND, "df is missing: t needs it");
    refused("MODEL", 3, (value[]){ word, number(0.5), number(4) }, BAD_KIND,
            "df is given, but gaussian has no degrees of freedom");
    refused("MODEL", 3, (value[]){ text("t"), number(0.5), cells(&p, "4;5;6") }, BAD_KIND,
            "df has 3 values, but must have 1 or 2, one a column");
    refused("MODEL", 3, (value[]){ text("t"), number(0.5), cells(&p, "4;-5") }, OUT_OF_DOMAIN,
            "df is -5, but must be above 0 and at most 1000000000");
    refused("MODEL", 3, (value[]){ text("t"), number(0.5), number(-1) }, OUT_OF_DOMAIN,
            "df is -1, but must be above 0 and at most 1000000000");
    refused("MODEL", 4, (value[]){ text("gumbel"), number(2), nothing(), number(45) },
            OUT_OF_DOMAIN, "rotation is 45, but must be 0, 90, 180 or 270");
    refused("MODEL", 4, (value[]){ text("gumbel"), number(2), nothing(), number(-90) },
            OUT_OF_DOMAIN, "rotation is -90, but must be 0, 90, 180 or 270");
    refused("MODEL", 4, (value[]){ text("gumbel"), number(2), nothing(), number(1e300) },
            OUT_OF_DOMAIN, "rotation is 1e+300, but must be 0, 90, 180 or 270");
    refused("MODEL", 5, (value[]){ word, number(0.3), nothing(), nothing(), number(5000) },
            OUT_OF_DOMAIN, "dimension is 5000, but gaussian has at most 4000");
    refused("MODEL", 5,
            (value[]){ text("gumbel"), number(2), nothing(), number(90), number(3) },
            OUT_OF_DOMAIN, "rotation is 90, but in more than two dimensions must be 0 or 180");
    refused("MODEL", 5,
            (value[]){ text("clayton"), number(-0.5), nothing(), nothing(), number(3) },
            OUT_OF_DOMAIN,
            "theta is -0.5, but clayton in more than two dimensions takes [0;1e+17]");
    refused("MODEL", 5,
            (value[]){ word, cells(&p, "1,0.3;0.3,1"), nothing(), nothing(), number(3) }, BAD_KIND,
            "dimension is 3, but parameter is a matrix of 2 columns");
    refused("MODEL", 5, (value[]){ word, number(-0.6), nothing(), nothing(), number(3) },
            OUT_OF_DOMAIN, "parameter is -0.6, but one correlation for 3 lines must be at least "
                           "-0.5 (-1/(d - 1))");
    refused("MODEL", 2, (value[]){ word, number(1.5) }, OUT_OF_DOMAIN,
            "parameter is 1.5, but a correlation is from -1 to 1");
    pool_empty(&p);
}

/* Rows and columns as they stand in the range, header and name column included. */
static void matrices_refused(void **state)
{
    (void)state;
    pool p = { 0 };
    value word = text("gaussian");
    refused("MODEL", 2, (value[]){ word, cells(&p, "a,b;1,0.3;0.3,1.2") }, OUT_OF_DOMAIN,
            "parameter has 1.2 on its diagonal, in row 3, column 2, where 1 must stand");
    refused("MODEL", 2, (value[]){ word, cells(&p, ",a,b;a,1,1.3;b,1.3,1") }, OUT_OF_DOMAIN,
            "parameter has 1.3 in row 2, column 3, outside [-1;1]");
    refused("MODEL", 2, (value[]){ word, cells(&p, "a,1,0.3;b,0.4,1") }, BAD_KIND,
            "parameter is not symmetric: 0.3 stands in row 1, column 3, but 0.4 in the opposite "
            "cell");
    refused("MODEL", 2, (value[]){ word, cells(&p, "1,-0.6,-0.6;-0.6,1,-0.6;-0.6,-0.6,1") },
            OUT_OF_DOMAIN, "parameter: the matrix is not feasible, its lowest eigenvalue is -0.2 "
                           "(JOINT.REPAIR gives the nearest matrix that is)");
    pool_empty(&p);
}

/* The degrees of freedom of another line would give a wrong number. */
static void df_of_named_lines(void **state)
{
    (void)state;
    struct call c = { 0 };
    pool *p = &c.pool;
    const char *matrix = "motor,property,cargo;1,0.3,0.2;0.3,1,0.1;0.2,0.1,1";
    value t = text("t"), r = cells(p, matrix), bare = cells(p, strchr(matrix, ';') + 1);
    refused("MODEL", 3, (value[]){ t, r, cells(p, "cargo,property,motor;3,4,5") }, BAD_KIND,
            "df names line 1 \"cargo\", but the matrix names it \"motor\"");
    refused("MODEL", 3, (value[]){ t, r, cells(p, "motor,,fire;3,4,5") }, BAD_KIND,
            "df names line 3 \"fire\", but the matrix names it \"cargo\"");
    const copula *m = model_of(&c, 3, (value[]){ t, r, cells(p, "Motor,property, cargo ;3,4,5") });
    assert_same(m->df[2], 5);
    model_of(&c, 3, (value[]){ t, bare, cells(p, "cargo,property,motor;3,4,5") });
    model_of(&c, 3, (value[]){ t, r, cells(p, "df;3;4;5") });
    model_of(&c, 3, (value[]){ t, r, cells(p, "df;3") });
    pool_empty(p);
}

/* A blank cell reaches a function as 0. */
static void df_of_a_blank_cell(void **state)
{
    (void)state;
    struct call c = { 0 };
    const copula *m = model_of(&c, 3, (value[]){ text("gumbel"), number(2), number(0) });
    assert_same(m->theta, 2);
    model_of(&c, 3, (value[]){ text("gaussian"), number(0.5), cells(&c.pool, "0") });
    refused("MODEL", 3, (value[]){ text("t"), number(0.5), number(0) }, OUT_OF_DOMAIN,
            "df is 0, but must be above 0 (a blank cell counts as 0)");
    refused("MODEL", 3, (value[]){ text("t"), number(0.5), cells(&c.pool, "4;0") }, OUT_OF_DOMAIN,
            "df is 0, but must be above 0 and at most 1000000000");
    refused("MODEL", 3, (value[]){ text("gumbel"), number(2), number(4) }, BAD_KIND,
            "df is given, but gumbel has no degrees of freedom");
    pool_empty(&c.pool);
}

static void every_take_can_fail(void **state)
{
    (void)state;
    for (size_t fail_at = 1;; fail_at++) {
        struct call c = { 0 };
        value in[] = { text("t"), cells(&c.pool, "motor,cargo;1,0.3;0.3,1"),
                       cells(&c.pool, "motor,cargo;4,5") };
        c.pool.fail_at = c.pool.taken + fail_at;
        call(&c, "MODEL", 3, in);
        bool failed = c.pool.taken >= c.pool.fail_at;
        pool_empty(&c.pool);
        assert_int_equal(c.s, failed ? NO_MEMORY : OK);
        if (!failed) break;
    }
}

int main(void)
{
    gsl_set_error_handler_off();                             /* as the add-in does at load */
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(theta_of_a_range), cmocka_unit_test(theta_out_of_reach),
        cmocka_unit_test(theta_of_rho), cmocka_unit_test(reach_of_a_range),
        cmocka_unit_test(df_from_tail_dependence),
        cmocka_unit_test(list_of_families), cmocka_unit_test(negative_theta),
        cmocka_unit_test(greiner), cmocka_unit_test(models),
        cmocka_unit_test(layout), cmocka_unit_test(models_refused),
        cmocka_unit_test(matrices_refused), cmocka_unit_test(df_of_named_lines),
        cmocka_unit_test(df_of_a_blank_cell),
        cmocka_unit_test(every_take_can_fail),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
