/* Model blocks: what MODEL writes read_copula() reads, what FIT adds is skipped, and whatever is
 * wrong is refused with a sentence that says where. */
#include "cells.h"

#include "../../addin/models.h"
#include "../../src/family.h"

static const copula *read_cells_of(pool *p, const char *block)
{
    report r = { .pool = p };
    value v = cells(p, block);
    const copula *c;
    status s = read_copula(&v, "model", &c, &r);
    assert_string_equal(r.why, "");
    assert_int_equal(s, OK);
    return c;
}

static void refused(const char *block, status want, const char *why)
{
    pool p = { 0 };
    report r = { .pool = &p };
    value v = cells(&p, block);
    const copula *c;
    status s = read_copula(&v, "model", &c, &r);
    assert_string_equal(r.why, why);
    assert_int_equal(s, want);
    pool_empty(&p);
}

/* Writes a copula and reads it back. */
static const copula *there_and_back(pool *p, const copula *c)
{
    report r = { .pool = p };
    value block;
    const copula *back;
    assert_int_equal(write_copula(c, &block, &r), OK);
    assert_int_equal(read_copula(&block, "model", &back, &r), OK);
    assert_string_equal(r.why, "");
    assert_ptr_equal(back->family, c->family);
    assert_int_equal(back->dimension, c->dimension);
    assert_int_equal(back->rotation, c->rotation);
    return back;
}

static void one_parameter_comes_back(void **state)
{
    (void)state;
    uint64_t s = 3;
    for (const family *const *f = families; *f; f++) {
        if (!(*f)->has_theta) continue;
        for (size_t i = 0; i < effort(50); i++) {
            pool p = { 0 };
            size_t more = (*f)->most_dimensions ? (*f)->most_dimensions - 1 : 4;
            copula c = { .family = *f, .dimension = 2 + random_below(&s, more),
                         .theta = fmin((*f)->theta_high, 1 + 20 * random_uniform(&s)) };
            c.rotation = c.dimension == 2 ? 90 * (int)random_below(&s, 4)
                                          : 180 * (int)random_below(&s, 2);
            const copula *back = there_and_back(&p, &c);
            assert_same(back->theta, c.theta);
            assert_null(back->matrix);
            assert_null(back->lines);
            pool_empty(&p);
        }
    }
}

static void elliptical_comes_back(void **state)
{
    (void)state;
    static const double matrix[] = { 1, 0.3, -0.2, 0.3, 1, 0.1, -0.2, 0.1, 1 };
    static const double df[] = { 4.2, 4.2, 7 }, equal[] = { 4.2, 4.2, 4.2 };
    const char *lines[] = { "motor", "", "cargo" };
    pool p = { 0 };
    copula c = { .family = family_named("t"), .dimension = 3, .matrix = matrix, .df = df,
                 .lines = lines, .rotation = 180 };
    const copula *back = there_and_back(&p, &c);
    for (size_t i = 0; i < 9; i++) assert_same(back->matrix[i], matrix[i]);
    for (size_t i = 0; i < 3; i++) assert_same(back->df[i], df[i]);
    for (size_t i = 0; i < 3; i++) assert_string_equal(back->lines[i], lines[i]);

    c.df = equal;
    report r = { .pool = &p };
    value block;
    assert_int_equal(write_copula(&c, &block, &r), OK);
    assert_true(marks_gap(block.table.at[3 * 4 + 2]));       /* one number for all columns */
    back = there_and_back(&p, &c);
    for (size_t i = 0; i < 3; i++) assert_same(back->df[i], 4.2);

    c.family = family_named("gaussian");
    c.df = NULL;
    back = there_and_back(&p, &c);
    assert_null(back->df);
    c = (copula){ .family = family_named("independent"), .dimension = 5 };
    there_and_back(&p, &c);
    pool_empty(&p);
}

static void any_order_case_and_blanks(void **state)
{
    (void)state;
    pool p = { 0 };
    const copula *c = read_cells_of(&p, "\" MATRIX \",1,0.5; ,0.5,1; , , ;Dimension,2,;DF,3,;"
                                        "COPULA,\" T \",; , , ;lines,a,b");
    assert_string_equal(c->family->word, "t");
    assert_same(c->matrix[1], 0.5);
    assert_same(c->df[1], 3);
    assert_string_equal(c->lines[1], "b");
    assert_int_equal(c->rotation, 0);
    c = read_cells_of(&p, "rotation,270;theta,-0.5;dimension,2;copula,clayton");
    assert_int_equal(c->rotation, 270);
    assert_same(c->theta, -0.5);
    pool_empty(&p);
}

/* A matrix with rounding of the size a sheet leaves behind is made exact. */
static void rounding_is_tidied(void **state)
{
    (void)state;
    pool p = { 0 };
    const copula *c = read_cells_of(
        &p, "copula,gaussian,;dimension,2,;matrix,0.9999999999,0.5; ,0.50000000005,1");
    assert_same(c->matrix[0], 1);
    assert_same(c->matrix[1], c->matrix[2]);
    pool_empty(&p);
}

static void what_fit_adds_is_skipped(void **state)
{
    (void)state;
    pool p = { 0 };
    const copula *c = read_cells_of(
        &p, "copula,t,,,,,,;dimension,2,,,,,,;lines,motor,cargo,,,,,;"
            "df,4.2,error,0.9,low,3.1,high,;matrix,1,0.3,,,,,;,0.3,1,,,,,;"
            "matrix error,0,0.05,,,,,;,0.05,0,,,,,;loglik,12.5,,,,,,;"
            "aic,-21,,,,,,;bic,-15,,,,,,;used,120,,,,,,;dropped,3,,,,,,;"
            "notes,the gaussian is not rejected,,,,,,;,anything,1,2,,,,;theta,typo,,,,,,");
    assert_same(c->df[0], 4.2);
    assert_same(c->matrix[1], 0.3);
    c = read_cells_of(&p, "copula,gumbel,,,,,,;dimension,2,,,,,,;"
                          "theta,1.45,error,0.06,low,1.33,high,1.57;loglik,12.5,,,,,,");
    assert_same(c->theta, 1.45);
    pool_empty(&p);
}

static void labels_that_are_wrong(void **state)
{
    (void)state;
    refused("copula,gumbel;dimension,2;thetta,2", BAD_KIND,
            "model has the unknown label \"thetta\" in row 3");
    refused("copula,gumbel;dimension,2;theta,2;theta,3", BAD_KIND,
            "model has the label theta twice, in row 3 and in row 4");
    refused("dimension,2;theta,2", BAD_KIND, "model has no row with the label copula");
    refused("copula,gumbel;theta,2", BAD_KIND, "model has no row with the label dimension");
    refused("copula,gumbel;dimension,2", BAD_KIND, "model has no row with the label theta");
    refused("copula,t;dimension,2", BAD_KIND, "model has no row with the label df");
    refused("copula,gaussian;dimension,2", BAD_KIND, "model has no row with the label matrix");
    refused("copula,gumbel;dimension,2;,5;theta,2", BAD_KIND, "model has no label in row 3");
    refused("copula,gumbel;dimension,2;7,5;theta,2", BAD_KIND, "model has no label in row 3");
    refused("copula,gumbel;dimension,2;theta,2;df,4", BAD_KIND,
            "model has df in row 4, but gumbel has no such parameter");
    refused("copula,independent;dimension,2;theta,2", BAD_KIND,
            "model has theta in row 3, but independent has no such parameter");
    refused("copula,gumbell;dimension,2;theta,2", BAD_KIND,
            "model has the unknown copula \"gumbell\" in row 1 (see JOINT.FAMILIES)");
    refused("copula,3;dimension,2;theta,2", BAD_KIND,
            "model has no word beside copula, in row 1");
}

static void cells_that_are_wrong(void **state)
{
    (void)state;
    refused("copula,gumbel,;dimension,2,;theta,2,7", BAD_KIND,
            "model has too much beside theta, in row 3, column 3");
    refused("copula,gumbel,t;dimension,2,;theta,2,", BAD_KIND,
            "model has too much beside copula, in row 1, column 3");
    refused("copula,gumbel;dimension,2;theta,", BAD_KIND,
            "model has an empty cell in row 3, column 2, not theta");
    refused("copula,gumbel;dimension,2;theta,\"2.5\"", BAD_KIND,
            "model has the text \"2.5\" in row 3, column 2, where a number is needed");
    refused("copula,gumbel,,;dimension,2,,;theta,2,errors,1", BAD_KIND,
            "model has too much beside theta, in row 3, column 3");
    refused("copula,t,;dimension,2,;df,4,;matrix,1,0.5;,0.5,", BAD_KIND,
            "model has an empty cell in row 5, column 3, not the matrix");
    refused("copula,t,;dimension,2,;df,4,;matrix,1,0.5", BAD_KIND,
            "model has a matrix of 1 row from row 4 on, not 2 (does the range hold the whole "
            "block?)");
    refused("copula,t,;dimension,3,;df,4,;matrix,1,0.5;,0.5,1", BAD_KIND,
            "model has a matrix of 2 rows from row 4 on, not 3 (does the range hold the whole "
            "block?)");
    refused("copula,gaussian,;dimension,2,;matrix,motor,cargo;,1,0.5;,0.5,1", BAD_KIND,
            "model has the text \"motor\" in row 3, column 2, where a number of the matrix is "
            "needed (names go into a row with the label lines)");
    refused("copula,t,,;dimension,2,,;df,4,,;matrix,1,0.5,0;,0.5,1,", BAD_KIND,
            "model has too much beside the matrix, in row 4, column 4");
    refused("copula,t,,;dimension,3,,;df,4,5,;matrix,1,0,0;,0,1,0;,0,0,1", BAD_KIND,
            "model has 2 numbers beside df in row 3, but must have 1 or 3");
    refused("copula,t,;dimension,2,;df,,4;matrix,1,0;,0,1", BAD_KIND,
            "model has 0 numbers beside df in row 3, but must have 1 or 2");
    refused("copula,gaussian,;dimension,2,;lines,a,1;matrix,1,0;,0,1", BAD_KIND,
            "model has no text in row 3, column 3, not a line's name");
}

static void numbers_that_are_wrong(void **state)
{
    (void)state;
    refused("copula,gumbel;dimension,2;theta,0.5", OUT_OF_DOMAIN,
            "model, row 3: theta is 0.5, but gumbel in two dimensions takes [1;1e+17]");
    refused("copula,joe;dimension,2;theta,2e17", OUT_OF_DOMAIN,
            "model, row 3: theta is 2e+17, but joe in two dimensions takes [1;1e+17]");
    refused("copula,clayton;dimension,2;theta,-1.5", OUT_OF_DOMAIN,
            "model, row 3: theta is -1.5, but clayton in two dimensions takes [-1;1e+17]");
    refused("theta,-0.5;copula,clayton;dimension,3", OUT_OF_DOMAIN,
            "model, row 1: theta is -0.5, but clayton in more than two dimensions takes [0;1e+17]");
    refused("copula,frank;dimension,3;theta,-0.5", OUT_OF_DOMAIN,
            "model, row 3: theta is -0.5, but frank in more than two dimensions takes [0;inf)");
    refused("copula,gumbel;dimension,1;theta,2", OUT_OF_DOMAIN,
            "model, row 2: dimension is 1, but must be at least 2");
    refused("copula,gumbel;dimension,-3;theta,2", OUT_OF_DOMAIN,
            "model, row 2: dimension is -3, but must be at least 2");
    refused("copula,gumbel;dimension,2.5;theta,2", OUT_OF_DOMAIN,
            "model, row 2: dimension is 2.5, but must be a whole number");
    refused("copula,gumbel;dimension,20000;theta,2", OUT_OF_DOMAIN,
            "model, row 2: dimension is 20000, but gumbel has at most 16384");
    refused("copula,gumbel;dimension,2000000000;theta,2", OUT_OF_DOMAIN,
            "model, row 2: dimension is 2000000000, but gumbel has at most 16384");
    refused("copula,gumbel;dimension,-1e300;theta,2", OUT_OF_DOMAIN,
            "model, row 2: dimension is -1e+300, but must be at least 2");
    refused("copula,gumbel;dimension,2;theta,2;rotation,2000000000", OUT_OF_DOMAIN,
            "model, row 4: rotation is 2000000000, but must be 0, 90, 180 or 270");
    refused("copula,gumbel;dimension,2;theta,2;rotation,-90", OUT_OF_DOMAIN,
            "model, row 4: rotation is -90, but must be 0, 90, 180 or 270");
    refused("copula,gumbel;dimension,2;theta,2;rotation,0.5", OUT_OF_DOMAIN,
            "model, row 4: rotation is 0.5, but must be a whole number");
    refused("copula,gumbel;dimension,2;theta,2;rotation,45", OUT_OF_DOMAIN,
            "model, row 4: rotation is 45, but must be 0, 90, 180 or 270");
    refused("copula,gumbel;dimension,2;theta,2;rotation,360", OUT_OF_DOMAIN,
            "model, row 4: rotation is 360, but must be 0, 90, 180 or 270");
    refused("copula,gumbel;dimension,3;theta,2;rotation,90", OUT_OF_DOMAIN,
            "model, row 4: rotation is 90, but in more than two dimensions must be 0 or 180");
    refused("copula,t,;dimension,2,;df,0,;matrix,1,0;,0,1", OUT_OF_DOMAIN,
            "model, row 3: df is 0, but must be above 0 and at most 1000000000");
    refused("copula,t,;dimension,2,;df,4,-1;matrix,1,0;,0,1", OUT_OF_DOMAIN,
            "model, row 3: df is -1, but must be above 0 and at most 1000000000");
}

static void matrices_that_are_wrong(void **state)
{
    (void)state;
    refused("copula,gaussian,;dimension,2,;matrix,1,1.2;,1.2,1", OUT_OF_DOMAIN,
            "model has 1.2 in row 3, column 3, outside [-1;1]");
    refused("copula,gaussian,;dimension,2,;matrix,1,0.2;,0.3,1", BAD_KIND,
            "model is not symmetric: 0.2 stands in row 3, column 3, but 0.3 in the opposite cell");
    refused("copula,gaussian,;dimension,2,;matrix,1,0.2;,0.2,2", OUT_OF_DOMAIN,
            "model has 2 on its diagonal, in row 4, column 3, where 1 must stand");
    /* eigenvalues of the equicorrelation matrix: 1 - r and 1 + (d - 1) r */
    refused("copula,gaussian,,;dimension,3,,;matrix,1,-0.6,-0.6;,-0.6,1,-0.6;,-0.6,-0.6,1",
            OUT_OF_DOMAIN,
            "model, row 3: the matrix is not feasible, its lowest eigenvalue is -0.2 "
            "(JOINT.REPAIR gives the nearest matrix that is)");
    pool p = { 0 };                                        /* a singular one is feasible */
    read_cells_of(&p, "copula,gaussian,,;dimension,3,,;"
                      "matrix,1,-0.5,-0.5;,-0.5,1,-0.5;,-0.5,-0.5,1");
    pool_empty(&p);
}

static void what_is_no_block(void **state)
{
    (void)state;
    pool p = { 0 };
    report r = { .pool = &p };
    const copula *c;
    value v = { .is = IS_TEXT, .text = "gumbel" };
    assert_int_equal(read_copula(&v, "model", &c, &r), BAD_KIND);
    assert_string_equal(r.why, "model is the text \"gumbel\", but must be a model block, as MODEL "
                               "returns it");
    refused("copula;dimension", BAD_KIND, "model has no word beside copula, in row 1");
    refused(",;,", BAD_KIND, "model has no row with the label copula");
    refused("1,0.3;0.3,1", BAD_KIND,
            "model is 2 x 2 numbers without labels; JOINT.MODEL makes a model of them");
    refused(",motor,cargo;motor,1,0.3;cargo,0.3,1", BAD_KIND,
            "model is 2 x 2 numbers without labels; JOINT.MODEL makes a model of them");
    pool_empty(&p);
}

static void every_take_can_fail(void **state)
{
    (void)state;
    const char *block = "copula,t,;dimension,2,;lines,a,b;df,4,;matrix,1,0.5;,0.5,1";
    for (size_t fail_at = 1;; fail_at++) {
        pool p = { 0 };
        report r = { .pool = &p };
        value v = cells(&p, block), out;
        const copula *c;
        p.fail_at = p.taken + fail_at;
        status s = read_copula(&v, "model", &c, &r);
        if (s == OK) s = write_copula(c, &out, &r);
        bool failed = p.taken >= p.fail_at;
        pool_empty(&p);
        if (!failed) {
            assert_int_equal(s, OK);
            assert_true(fail_at > 5);
            return;
        }
        assert_int_equal(s, NO_MEMORY);
    }
}

/* Blocks with cells swapped, dropped and doubled at random: refused or read, never a crash, and
 * what is read is admissible. */
static void scrambled_blocks(void **state)
{
    (void)state;
    uint64_t s = 9;
    for (size_t i = 0; i < effort(3000); i++) {
        pool p = { 0 };
        report r = { .pool = &p };
        value v = cells(&p, "copula,t,;dimension,2,;lines,a,b;df,4,;matrix,1,0.5;,0.5,1;"
                            "rotation,90,;notes,x,");
        size_t n = v.table.rows * v.table.cols;
        for (size_t k = random_below(&s, 4); k < 4; k++) {
            size_t to = random_below(&s, n), from = random_below(&s, n);
            v.table.at[to] = v.table.at[from];
            v.table.words[to] = v.table.words[from];
        }
        const copula *c;
        status read = read_copula(&v, "model", &c, &r);
        if (read == OK) assert_int_equal(check_copula(c, NULL, &r), OK);
        else assert_true(*r.why);
        pool_empty(&p);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(one_parameter_comes_back), cmocka_unit_test(elliptical_comes_back),
        cmocka_unit_test(any_order_case_and_blanks), cmocka_unit_test(rounding_is_tidied),
        cmocka_unit_test(what_fit_adds_is_skipped), cmocka_unit_test(labels_that_are_wrong),
        cmocka_unit_test(cells_that_are_wrong), cmocka_unit_test(numbers_that_are_wrong),
        cmocka_unit_test(matrices_that_are_wrong), cmocka_unit_test(what_is_no_block),
        cmocka_unit_test(every_take_can_fail), cmocka_unit_test(scrambled_blocks),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
