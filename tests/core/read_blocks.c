/* Margins, terms and settings, as the reference describes them. */
#include "cells.h"

#include "../../addin/read.h"

static pool p;
static report r;

static int start(void **state)
{
    (void)state;
    r = (report){ .pool = &p };
    return 0;
}

static int end(void **state)
{
    (void)state;
    pool_empty(&p);
    p = (pool){ 0 };
    return 0;
}

static void said(const char *words)
{
    if (!strstr(r.why, words)) fail_msg("\"%s\" does not say \"%s\"", r.why, words);
    r = (report){ .pool = &p };
}

static struct margins margins(const char *block, status want)
{
    struct margins m = { 0 };
    value v = cells(&p, block);
    assert_int_equal(read_margins("margins", &v, &m, &r), want);
    return m;
}

static struct terms terms(const char *block, status want)
{
    struct terms t = { 0 };
    value v = cells(&p, block);
    assert_int_equal(read_terms("terms", &v, NULL, &t, &r), want);
    return t;
}

static void margins_with_and_without_header(void **state)
{
    (void)state;
    static const char *const blocks[] = {
        "motor,lognormal,5,0.5; cargo,exponential,2,",
        "name,distribution,a,b; motor,lognormal,5,0.5; cargo,exponential,2,",
        "b,a,DISTRIBUTION,name; 0.5,5,LogNormal,motor; ,2,exponential,cargo",
        ",distribution,a,b; motor,lognormal,5,0.5; cargo,exponential,2,; ,,,",
    };
    for (size_t i = 0; i < 4; i++) {
        struct margins m = margins(blocks[i], OK);
        assert_int_equal(m.lines, 2);
        assert_ptr_equal(m.of[0].distribution, distribution_named("lognormal"));
        assert_same(m.of[0].a, 5);
        assert_same(m.of[0].b, 0.5);
        assert_same(m.of[1].a, 2);
        assert_string_equal(m.names[1], "cargo");
    }
    struct margins m = margins("lognormal,5,0.5; gamma,2,3", OK);
    assert_null(m.names);
    assert_same(m.of[1].b, 3);
}

static void margins_refused(void **state)
{
    (void)state;
    margins("motor,lognormall,5,0.5; a,gamma,1,1", BAD_KIND);
    said("distribution \"lognormall\" in row 1");
    margins("motor,lognormal,5,; a,gamma,1,1", BAD_KIND);
    said("lacks b, the sigma of the lognormal, in row 1");
    margins("motor,lognormal,5,-1", OUT_OF_DOMAIN);
    said("sigma -1 in row 1");
    margins("motor,exponential,5,1", BAD_KIND);
    said("gives b in row 1, but exponential has no such parameter");
    margins("name,distribution,mu; a,normal,1", BAD_KIND);
    said("heading \"mu\" in column 3");
    margins("motor,lognormal,x,1", BAD_KIND);
    said("text \"x\" in row 1, column 3");
    margins("name,distribution,a,b; ,,,", BAD_KIND);
    said("no rows");
}

static void terms_with_and_without_header(void **state)
{
    (void)state;
    static const char *const blocks[] = {
        "10,,0.5,motor; ,100,1,cargo",
        "motor,10,,0.5; cargo,,100,1",
        "share,name,excess,limit; 0.5,motor,10,; 1,cargo,,100",
    };
    for (size_t i = 0; i < 3; i++) {
        struct terms t = terms(blocks[i], OK);
        assert_int_equal(t.lines, 2);
        assert_same(t.of[0].excess, 10);
        assert_true(isinf(t.of[0].limit));
        assert_same(t.of[0].share, 0.5);
        assert_same(t.of[1].excess, 0);
        assert_same(t.of[1].limit, 100);
        assert_string_equal(t.names[0], "motor");
    }
}

static void lines_that_follow(void **state)
{
    (void)state;
    struct terms t = terms("name,excess,limit,share,with; claim,10,50,1,; expense,,,,claim", OK);
    assert_int_equal(t.of[1].with, 1);
    t = terms("excess,limit,share,with; 10,50,1,; ,,1,1", OK);
    assert_int_equal(t.of[1].with, 1);
    static const char *names[] = { "claim", "expense" };
    static const struct line_names known = { 2, names };
    value v = cells(&p, "excess,limit,share,with; 10,50,1,; ,,,claim");
    assert_int_equal(read_terms("terms", &v, &known, &t, &r), OK);
    assert_int_equal(t.of[1].with, 1);
    assert_string_equal(t.names[1], "expense");
    v = cells(&p, "excess,limit,share,with; 10,50,1,; 1,2,1,; ,,,claim");      /* too many lines */
    assert_int_equal(read_terms("terms", &v, &known, &t, &r), BAD_KIND);
    said("no line of that name");
    terms("name,excess,limit,share,with; a,0,5,1,; a,0,5,1,; b,,,,a", BAD_KIND);
    said("lines 1 and 2 have that name");
    terms("excess,limit,share,with; 10,50,1,; ,,1,claim", BAD_KIND);
    said("no line of that name");
    terms("excess,limit,share,with; 10,50,1,; ,,1,3", OUT_OF_DOMAIN);
    said("numbered from 1 to 2");
    terms("excess,limit,share,with; 10,50,1,; ,,1,2", BAD_KIND);
    said("follow itself");
    terms("excess,limit,share,with; 10,50,1,; ,,,3; ,,,2", BAD_KIND);
    said("follow in a circle");
}

static void terms_refused(void **state)
{
    (void)state;
    terms("10,20,; 1,1,1", BAD_KIND);
    said("gives no share in row 1");
    terms("10,20,1.5; 1,1,1", OUT_OF_DOMAIN);
    said("share 1.5 in row 1");
    terms("-1,20,1; 1,1,1", OUT_OF_DOMAIN);
    said("excess -1 in row 1");
    terms("1,0,1; 1,1,1", OUT_OF_DOMAIN);
    said("limit 0 in row 1");
    terms("retention,limit,share; 1,2,1", BAD_KIND);
    said("heading \"retention\" in column 1");
    terms("1,unlimited,1; 1,1,1", BAD_KIND);
    said("\"unlimited\" in row 1, column 2");
    terms("excess,excess,share; 1,2,1", BAD_KIND);
    said("two columns for \"excess\"");
}

static void aggregates(void **state)
{
    (void)state;
    struct terms t;
    value v = cells(&p, "100,200");
    assert_int_equal(read_aggregate("aggregate", &v, &t, &r), OK);
    assert_same(t.of[0].share, 1);
    assert_same(t.of[0].limit, 200);
    v = cells(&p, "limit,excess,share; 200,100,0.9");
    assert_int_equal(read_aggregate("aggregate", &v, &t, &r), OK);
    assert_same(t.of[0].excess, 100);
    v = cells(&p, ",excess,limit,share; annual,5,10,0.5");
    assert_int_equal(read_aggregate("aggregate", &v, &t, &r), OK);
    assert_same(t.of[0].excess, 5);
    assert_same(t.of[0].share, 0.5);
    v = cells(&p, "annual,5,10");
    assert_int_equal(read_aggregate("aggregate", &v, &t, &r), OK);
    assert_same(t.of[0].limit, 10);
    v = cells(&p, "excess,limit,name,with; 5,10,a,b");
    assert_int_equal(read_aggregate("aggregate", &v, &t, &r), BAD_KIND);
    said("heading \"with\" in column 4");
    v = cells(&p, "1,2,1; 1,2,1");
    assert_int_equal(read_aggregate("aggregate", &v, &t, &r), BAD_KIND);
    said("2 rows, but must be one row");
}

static void settings(void **state)
{
    (void)state;
    static const param what = { .name = "settings", .kind = SETTINGS, .words = "rows seed scheme" };
    const setting *s;
    value v = cells(&p, "Seed,7; scheme,plain; rows,");
    assert_int_equal(read_settings(&what, &v, &s, &r), OK);
    assert_false(s[0].given);
    assert_same(s[1].number, 7);
    assert_string_equal(s[2].text, "plain");
    v = cells(&p, "seeds,7; rows,3");
    assert_int_equal(read_settings(&what, &v, &s, &r), BAD_KIND);
    said("label \"seeds\" in row 1, but knows only rows, seed or scheme");
    v = cells(&p, "seed,7; seed,3");
    assert_int_equal(read_settings(&what, &v, &s, &r), BAD_KIND);
    said("twice");
    v = cells(&p, "1,7; seed,3");
    assert_int_equal(read_settings(&what, &v, &s, &r), BAD_KIND);
    said("no label in row 1");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(margins_with_and_without_header, start, end),
        cmocka_unit_test_setup_teardown(margins_refused, start, end),
        cmocka_unit_test_setup_teardown(terms_with_and_without_header, start, end),
        cmocka_unit_test_setup_teardown(lines_that_follow, start, end),
        cmocka_unit_test_setup_teardown(terms_refused, start, end),
        cmocka_unit_test_setup_teardown(aggregates, start, end),
        cmocka_unit_test_setup_teardown(settings, start, end),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
