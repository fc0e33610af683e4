/* What holds for draws of every family: uniform margins, rows that depend on seed and row alone,
 * rotation, memory that fails. */
#include "draws.h"

static const struct {
    const char *word;
    size_t d;
    double theta, df;
} models[] = {
    { "independent", 2, 0, 0 }, { "independent", 3, 0, 0 },
    { "gaussian", 2, -0.7, 0 }, { "gaussian", 5, 0.6, 0 }, { "gaussian", 50, 0.3, 0 },
    { "t", 2, 0.5, 4 }, { "t", 3, 0.2, 0.5 }, { "t", 2, -0.9, 5.5 }, { "t", 7, 0.9, 1e6 },
    { "t", 2, 0.3, 0.03 },
    { "clayton", 2, -0.4, 0 }, { "clayton", 2, 2e-9, 0 }, { "clayton", 4, 2, 0 },
    { "clayton", 2, 19998, 0 }, { "clayton", 2, 1e9, 0 }, { "clayton", 2, 1e-15, 0 },
    { "gumbel", 2, 1.000000001, 0 }, { "gumbel", 3, 2.5, 0 }, { "gumbel", 2, 10000, 0 },
    { "gumbel", 2, 1e9, 0 },
    { "frank", 2, -6, 0 }, { "frank", 2, 9e-9, 0 }, { "frank", 4, 5.7, 0 },
    { "frank", 2, 39996, 0 },
    { "frank", 2, 1e9, 0 }, { "frank", 2, 1e-15, 0 },
    { "joe", 2, 1.000000001, 0 }, { "joe", 3, 3, 0 }, { "joe", 2, 20000, 0 },
    { "joe", 2, 1e9, 0 },
    { "amh", 2, -1, 0 }, { "amh", 2, 1e-9, 0 }, { "amh", 2, 0.9, 0 }, { "amh", 2, 1, 0 },
    { "plackett", 2, 1e-200, 0 }, { "plackett", 2, 0.2, 0 }, { "plackett", 2, 1, 0 },
    { "plackett", 2, 50, 0 }, { "plackett", 2, 1e200, 0 },
    { "fgm", 2, -1, 0 }, { "fgm", 2, 0.5, 0 }, { "fgm", 2, 1, 0 },
};
enum { MODELS = sizeof models / sizeof *models };

static copula *model(struct sample_copula *s, size_t k)
{
    const family *f = family_named(models[k].word);
    return f->has_matrix ? elliptical(s, models[k].word, models[k].d, models[k].theta, models[k].df)
                         : one_parameter(s, models[k].word, models[k].d, models[k].theta);
}

static int by_size(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Kolmogorov's sqrt(n) D and Anderson & Darling's A^2 of a column, which is sorted */
static void distances(double *u, size_t n, double *d, double *a)
{
    *d = 0, *a = -(double)n;
    qsort(u, n, sizeof *u, by_size);
    for (size_t i = 0; i < n; i++) {
        *d = fmax(*d, fmax((double)(i + 1) / (double)n - u[i], u[i] - (double)i / (double)n));
        *a -= (2 * (double)i + 1) / (double)n * (log(u[i]) + log1p(-u[n - 1 - i]));
    }
    *d *= sqrt((double)n);
}

/* critical values at 5 % and 0.1 % or 1 %, from uniformity_test_critical.csv: Kolmogorov (1933),
 * Anderson & Darling (1954) */
static double critical(const char *test, double alpha)
{
    struct csv *t = csv_read("uniformity_test_critical.csv");
    double value = NAN;
    for (size_t i = 0; i < t->rows; i++)
        if (strstr(csv_text(t, i, "test"), test) && csv_number(t, i, "alpha") == alpha)
            value = csv_number(t, i, "critical_value");
    csv_free(t);
    assert_true(value > 1);
    return value;
}

/* Of many independent tests a share alpha must exceed its critical value, within four standard
 * errors. One column of each draw is tested, so that the tests are independent. */
static void margins_are_uniform(void **state)
{
    (void)state;
    double kolmogorov = critical("Kolmogorov", 0.05), anderson = critical("Anderson", 0.05);
    double rare = critical("Kolmogorov", 0.001);
    size_t tests = 0, above[2] = { 0 }, far = 0, times = effort(20), n = 3000;
    for (size_t k = 0; k < MODELS; k++)
        for (size_t m = 0; m < times; m++, tests++) {
            struct sample_copula s;
            copula *c = model(&s, k);
            double *u = drawn(c, 1000 * k + m, 0, n), d, a;
            distances(u + (m % c->dimension) * n, n, &d, &a);
            above[0] += d > kolmogorov;
            above[1] += a > anderson;
            far += d > rare;
            free(u);
        }
    double expected = 0.05 * (double)tests, error = sqrt(expected * 0.95);
    for (int k = 0; k < 2; k++) assert_within((double)above[k], expected, 4 * error);
    assert_true((double)far < 1 + 4 * sqrt(0.001 * (double)tests) + 0.001 * (double)tests);
}

/* Row i is the same however many rows are asked for and wherever the draw begins. */
static void rows_stand_alone(void **state)
{
    (void)state;
    uint64_t pick = 9;
    for (size_t k = 0; k < MODELS; k++) {
        struct sample_copula s;
        copula *c = model(&s, k);
        size_t rows = 1111, d = c->dimension;
        double *whole = drawn(c, 12345678901234, 0, rows);
        for (size_t m = 0; m < effort(6); m++) {
            size_t first = random_below(&pick, rows), n = 1 + random_below(&pick, rows - first);
            double *part = drawn(c, 12345678901234, first, n);
            for (size_t j = 0; j < d; j++)
                for (size_t i = 0; i < n; i++)
                    assert_same(part[j * n + i], whole[j * rows + first + i]);
            free(part);
        }
        free(whole);
    }
}

/* The stride is kept: nothing is written beside the rows. */
static void only_the_rows_are_written(void **state)
{
    (void)state;
    for (size_t k = 0; k < MODELS; k++) {
        struct sample_copula s;
        copula *c = model(&s, k);
        pool p = { 0 };
        size_t stride = 300, rows = 259, d = c->dimension;
        double *u = malloc(d * stride * sizeof *u), *tight = drawn(c, 1, 0, rows);
        for (size_t i = 0; i < d * stride; i++) u[i] = -7;
        assert_int_equal(draw(c, 1, 0, rows, u, stride, &p), OK);
        for (size_t j = 0; j < d; j++)
            for (size_t i = 0; i < stride; i++)
                assert_same(u[j * stride + i], i < rows ? tight[j * rows + i] : -7.0);
        assert_int_equal(draw(c, 1, 0, 0, u, stride, &p), OK);
        free(u);
        free(tight);
    }
}

static void seeds_differ(void **state)
{
    (void)state;
    for (size_t k = 0; k < MODELS; k++) {
        struct sample_copula s;
        copula *c = model(&s, k);
        double *one = drawn(c, 0, 0, 100), *other = drawn(c, (uint64_t)1 << 53, 0, 100);
        size_t alike = 0;
        for (size_t i = 0; i < 100; i++) alike += one[i] == other[i];
        assert_int_equal(alike, 0);
        free(one);
        free(other);
    }
}

/* 90 is (1-U;V), 180 is 1-U everywhere, 270 is (U;1-V) */
static void rotations_turn_columns(void **state)
{
    (void)state;
    for (size_t k = 0; k < MODELS; k++) {
        struct sample_copula s;
        copula *c = model(&s, k);
        size_t n = 300, d = c->dimension;
        double *plain = drawn(c, 5, 0, n);
        for (int rotation = 90; rotation <= 270; rotation += 90) {
            if (d > 2 && rotation != 180) continue;
            c->rotation = rotation;
            double *turned = drawn(c, 5, 0, n);
            for (size_t j = 0; j < d; j++) {
                bool turns = rotation == 180 || j == (rotation == 270);
                for (size_t i = 0; i < n; i++)
                    assert_same(turned[j * n + i], turns ? 1 - plain[j * n + i] : plain[j * n + i]);
            }
            free(turned);
        }
        free(plain);
    }
}

/* Elliptical rows made from 1 - u are 1 - the rows; all families keep uniform margins. */
static void mirrored_rows_oppose(void **state)
{
    (void)state;
    for (size_t k = 0; k < MODELS; k++) {
        struct sample_copula s;
        copula *c = model(&s, k);
        pool p = { 0 };
        size_t n = 2000, d = c->dimension;
        double *plain = drawn(c, 600 + k, 0, n), *u = malloc(n * d * sizeof *u), distance, a;
        assert_int_equal(draw_mirrored(c, 600 + k, 0, n, u, n, &p), OK);
        if (c->family->has_matrix || !c->family->has_theta)
            for (size_t i = 0; i < n * d; i++) assert_within(u[i], 1 - plain[i], 2e-16);
        distances(u, n, &distance, &a);
        assert_true(distance < critical("Kolmogorov", 0.001));
        free(plain);
        free(u);
    }
}

static void memory_runs_out(void **state)
{
    (void)state;
    for (size_t k = 0; k < MODELS; k++) {
        struct sample_copula s;
        copula *c = model(&s, k);
        double *u = malloc(600 * c->dimension * sizeof *u);
        pool p = { 0 };
        assert_int_equal(draw(c, 1, 0, 600, u, 600, &p), OK);
        size_t takes = p.taken;
        assert_true(takes <= 7);
        for (size_t n = 1; n <= takes; n++) {
            pool failing = { .fail_at = n };
            assert_int_equal(draw(c, 1, 0, 600, u, 600, &failing), NO_MEMORY);
            assert_null(failing.last);
        }
        free(u);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(margins_are_uniform),
        cmocka_unit_test(rows_stand_alone),
        cmocka_unit_test(only_the_rows_are_written),
        cmocka_unit_test(seeds_differ),
        cmocka_unit_test(rotations_turn_columns),
        cmocka_unit_test(mirrored_rows_oppose),
        cmocka_unit_test(memory_runs_out),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
