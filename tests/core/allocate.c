/* Tests of src/allocate.c. */
#include "table.h"

#include "../../src/allocate.h"

enum { N = 100000, LINES = 5 };
static double at[LINES * N];

/* The normal model of tests/values/euler_allocation_elliptical.csv: its lines and the first
 * five segments of Annex IV of Delegated Regulation (EU) 2015/35. The part of line i in the sd
 * of the sum is cov(i, S) / sd(S). */
static const double mean[LINES] = { 100, 80, 50, 120, 200 }, sd[LINES] = { 10, 8, 7.5, 12, 28 };

static void read_matrix(double *matrix)
{
    struct csv *t = csv_read("law_correlation_matrices.csv");
    for (size_t r = 0; r < t->rows; r++) {
        size_t i = (size_t)csv_number(t, r, "i"), j = (size_t)csv_number(t, r, "j");
        if (csv_is(t, r, "matrix", "nonlife_premium_reserve_segments") && i <= LINES && j <= LINES)
            matrix[(i - 1) * LINES + j - 1] = csv_number(t, r, "value");
    }
    csv_free(t);
}

static void cholesky_factor(const double *matrix, double *factor)
{
    for (size_t i = 0; i < LINES; i++)
        for (size_t j = 0; j <= i; j++) {
            double sum = matrix[i * LINES + j];
            for (size_t k = 0; k < j; k++) sum -= factor[i * LINES + k] * factor[j * LINES + k];
            factor[i * LINES + j] = i == j ? sqrt(sum) : sum / factor[j * LINES + j];
        }
}

static samples simulate(const double *matrix, size_t rows, uint64_t *random)
{
    double factor[LINES * LINES] = { 0 };
    cholesky_factor(matrix, factor);
    for (size_t i = 0; i < rows; i++) {
        double z[LINES];
        for (size_t j = 0; j < LINES; j++) {
            double sum = 0;
            z[j] = random_normal(random);
            for (size_t k = 0; k <= j; k++) sum += factor[j * LINES + k] * z[k];
            at[j * rows + i] = mean[j] + sd[j] * sum;
        }
    }
    return (samples){ rows, LINES, at, NULL };
}

static void parts_of_a_normal_model(void **state)
{
    (void)state;
    double matrix[LINES * LINES], variance = 0, alone[LINES];
    uint64_t random = 3;
    estimate part[LINES];
    pool p = { 0 };
    read_matrix(matrix);
    samples losses = simulate(matrix, N, &random);
    struct csv *t = csv_read("euler_allocation_elliptical.csv");
    for (size_t r = 0; r < t->rows; r++) {
        if (!csv_is(t, r, "model", "normal") || csv_is(t, r, "item", "total")) continue;
        size_t j = (size_t)csv_number(t, r, "item") - 1;
        assert_int_equal(allocate_tail(&losses, csv_number(t, r, "p"), &p, part, alone), OK);
        assert_within(part[j].value, csv_number(t, r, "TVaR_contribution"), 4 * part[j].error);
    }
    csv_free(t);
    for (size_t i = 0; i < LINES * LINES; i++)
        variance += matrix[i] * sd[i / LINES] * sd[i % LINES];
    assert_int_equal(allocate_covariance(&losses, &p, part, alone), OK);
    for (size_t j = 0; j < LINES; j++) {
        double covariance = 0;
        for (size_t k = 0; k < LINES; k++) covariance += matrix[j * LINES + k] * sd[j] * sd[k];
        assert_within(part[j].value, covariance / sqrt(variance), 4 * part[j].error);
        assert_close(alone[j], sd[j], 0.01);
    }
    pool_empty(&p);
}

/* parts add up, and the error of a part of the sd is the spread of such parts */
static void parts_add_up(void **state)
{
    (void)state;
    double matrix[LINES * LINES], alone[LINES], sum = 0, squares = 0, errors = 0;
    uint64_t random = 8;
    size_t rounds = effort(300);
    read_matrix(matrix);
    for (size_t round = 0; round < rounds; round++) {
        pool p = { 0 };
        estimate part[LINES], whole[1], tvar;
        double added = 0, added_tail = 0, level = 0.9, whole_alone;
        const double *sums;
        samples losses = simulate(matrix, 500, &random);
        assert_int_equal(row_sums(&losses, &p, &sums), OK);
        samples total = { 500, 1, (double *)sums, NULL };
        assert_int_equal(allocate_tail(&losses, level, &p, part, alone), OK);
        for (size_t j = 0; j < LINES; j++) added_tail += part[j].value;
        assert_int_equal(tail_values_at_risk(sums, 500, &level, 1, &p, &tvar), OK);
        assert_close(added_tail, tvar.value, 1e-13);
        assert_int_equal(allocate_covariance(&losses, &p, part, alone), OK);
        assert_int_equal(allocate_covariance(&total, &p, whole, &whole_alone), OK);
        for (size_t j = 0; j < LINES; j++) added += part[j].value;
        assert_close(added, whole_alone, 1e-12);
        assert_close(whole->value, whole_alone, 1e-12);
        sum += part[1].value;
        squares += part[1].value * part[1].value;
        errors += part[1].error;
        pool_empty(&p);
    }
    double m = (double)rounds, spread = sqrt((squares - sum * sum / m) / (m - 1));
    assert_close(errors / m, spread, 0.15);
}

/* 0.1 and 0.7 in every row: nothing varies, whatever their binary digits */
static void alike_rows(void **state)
{
    (void)state;
    pool p = { 0 };
    double alone[2];
    estimate part[2];
    for (size_t i = 0; i < 20; i++) at[i] = i < 10 ? 0.1 : 0.7;
    const samples still = { 10, 2, at, NULL };
    assert_int_equal(allocate_covariance(&still, &p, part, alone), NO_VARIATION);
    pool_empty(&p);
}

/* A line's part is its loss when that is the same in each of very many rows, and as exactly when
 * the rows are tied only in their sum: here 0.1 and 0.3 in turn, on average 0.2. */
static void parts_of_many_tied_rows(void **state)
{
    (void)state;
    enum { MANY = LINES * N / 2 };
    pool p = { 0 };
    double alone[2];
    estimate part[2];
    const samples losses = { MANY, 2, at, NULL };
    for (size_t i = 0; i < 2 * MANY; i++) at[i] = i < MANY ? 0.1 : 0.2;
    assert_int_equal(allocate_tail(&losses, 0.99, &p, part, alone), OK);
    assert_close(part[0].value, 0.1, 1e-15);
    assert_close(part[1].value, 0.2, 1e-15);
    assert_same(part[0].error, 0);
    for (size_t i = 0; i < 2 * MANY; i++) at[i] = i % 2 == i / MANY ? 0.1 : 0.3;
    assert_int_equal(allocate_tail(&losses, 0.99, &p, part, alone), OK);
    assert_close(part[0].value, 0.2, 1e-15);
    assert_close(part[1].value, 0.2, 1e-15);
    pool_empty(&p);
}

/* At a level of 1 to the last bit the tail is a part of the largest row, and by definition the
 * parts are its losses, even where lines are far larger than their sum in the row next to it. */
static void the_very_largest_row(void **state)
{
    (void)state;
    pool p = { 0 };
    const double level = 1 - 1e-16;
    double losses[] = { 1, 4e299, -9e299, -3, 5, -4e299, 9e299, 2 }, alone[2];
    estimate part[2], tvar;
    const double *sums;
    const samples four = { 4, 2, losses, NULL };
    assert_true(level < 1);
    assert_int_equal(allocate_tail(&four, level, &p, part, alone), OK);
    assert_close(part[0].value, 1, 1e-15);
    assert_close(part[1].value, 5, 1e-15);
    assert_same(alone[0], 4e299);
    assert_same(alone[1], 9e299);
    assert_int_equal(row_sums(&four, &p, &sums), OK);
    assert_int_equal(tail_values_at_risk(sums, 4, &level, 1, &p, &tvar), OK);
    assert_same(tvar.value, 6);
    pool_empty(&p);
}

static void too_large(void **state)
{
    (void)state;
    pool p = { 0 };
    double sum[] = { 1, 9e299, 2, 9e299 }, loss[] = { 1, 1e308, 2, -1e308 },
           square[] = { 1, 2e200, 5e199, 7 }, alone[2];
    estimate part[2];
    const double *sums;
    const samples no_sum = { 2, 2, sum, NULL }, no_loss = { 2, 2, loss, NULL },
                  no_square = { 2, 2, square, NULL };
    assert_int_equal(row_sums(&no_sum, &p, &sums), OUT_OF_DOMAIN);
    assert_int_equal(row_sums(&no_loss, &p, &sums), OUT_OF_DOMAIN);
    assert_int_equal(allocate_tail(&no_sum, 0.5, &p, part, alone), OUT_OF_DOMAIN);
    assert_int_equal(allocate_covariance(&no_square, &p, part, alone), OUT_OF_DOMAIN);
    pool_empty(&p);
}

static void refusals(void **state)
{
    (void)state;
    pool p = { 0 };
    double x[] = { 1, 2, 2, 1 }, alone[2];
    estimate part[2];
    const samples still = { 2, 2, x, NULL }, none = { 0, 2, x, NULL };
    assert_int_equal(allocate_covariance(&still, &p, part, alone), NO_VARIATION);
    assert_int_equal(allocate_covariance(&none, &p, part, alone), TOO_FEW);
    assert_int_equal(allocate_tail(&none, 0.5, &p, part, alone), TOO_FEW);
    p.fail_at = p.taken + 1;
    assert_int_equal(allocate_tail(&still, 0.5, &p, part, alone), NO_MEMORY);
    pool_empty(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(parts_of_a_normal_model),
        cmocka_unit_test(parts_add_up),
        cmocka_unit_test(alike_rows),
        cmocka_unit_test(parts_of_many_tied_rows),
        cmocka_unit_test(the_very_largest_row),
        cmocka_unit_test(too_large),
        cmocka_unit_test(refusals),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
