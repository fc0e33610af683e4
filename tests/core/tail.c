/* Tests of src/tail.c against a full sort and against src/risk.c. */
#include "table.h"

#include "../../src/order_statistics.h"
#include "../../src/tail.h"

enum { LINES = 3, MOST = 20000 };

static double part[LINES * MOST], total[MOST];

/* columns of MOST; kinds: continuous, whole numbers with many ties, mostly zero, capped */
static void fill(size_t n, int kind, uint64_t *random)
{
    for (size_t i = 0; i < n; i++) {
        total[i] = 0;
        for (size_t j = 0; j < LINES; j++) {
            double u = random_uniform(random), x = exp(3 * u);
            if (kind == 1) x = floor(4 * u);
            if (kind == 2) x = u < 0.99 ? 0 : 100 * u;
            part[j * MOST + i] = x;
            total[i] += x;
        }
        if (kind == 3 && total[i] > 20) {
            for (size_t j = 0; j < LINES; j++) part[j * MOST + i] *= 20 / total[i];
            total[i] = 20;
        }
    }
}

static tail filled(size_t n, double level, uint64_t *random, pool *p)
{
    tail t;
    assert_int_equal(tail_prepare(&t, LINES, n, level, p), OK);
    for (size_t i = 0; i < n;) {
        size_t some = 1 + random_below(random, 999);
        if (some > n - i) some = n - i;
        tail_add(&t, total + i, part + i, some, MOST);
        i += some;
    }
    return t;
}

/* functions.md: the mean over the worst n (1 - level) rows, those equal to the value at risk
 * sharing the weight that is left equally */
static double part_by_definition(size_t n, double level, double at_risk, size_t line)
{
    double weight = tail_weight(n, level), beyond = 0, equal = 0, sum = 0, tied_sum = 0;
    for (size_t i = 0; i < n; i++) {
        double x = part[line * MOST + i];
        if (total[i] > at_risk) beyond++, sum += x;
        if (total[i] == at_risk) equal++, tied_sum += x;
    }
    return (sum + (weight - beyond) / equal * tied_sum) / weight;
}

static void agrees_with_definition(void **state)
{
    (void)state;
    uint64_t random = 2;
    static const double levels[] = { 0.5, 0.9, 0.99, 1 - 1e-16 };
    for (size_t round = 0; round < effort(64); round++) {
        pool p = { 0 };
        size_t n = 1 + random_below(&random, MOST);
        double level = levels[round % 4], sum = 0;
        estimate var, tvar, of[LINES], want_var, want_tvar;
        fill(n, (int)(round / 4 % 4), &random);
        tail t = filled(n, level, &random, &p);
        assert_int_equal(tail_measure(&t, &p, &var, &tvar, of), OK);
        assert_int_equal(values_at_risk(total, n, &level, 1, &p, &want_var), OK);
        assert_int_equal(tail_values_at_risk(total, n, &level, 1, &p, &want_tvar), OK);
        assert_same(var.value, want_var.value);
        assert_same(var.error, want_var.error);
        assert_close(tvar.value, want_tvar.value, 1e-13);
        if (!isnan(want_tvar.error))
            assert_within(tvar.error, want_tvar.error, 1e-9 * want_tvar.error + 1e-12);
        for (size_t j = 0; j < LINES; j++) {
            assert_within(of[j].value, part_by_definition(n, level, var.value, j),
                          1e-12 * tvar.value);
            sum += of[j].value;
        }
        assert_close(sum, tvar.value, 1e-13);
        pool_empty(&p);
    }
}

/* whatever the blocks, the same bits */
static void blocks_do_not_matter(void **state)
{
    (void)state;
    uint64_t random = 21;
    for (int kind = 0; kind < 4; kind++) {
        pool p = { 0 };
        estimate var[2], tvar[2], of[2][LINES];
        fill(MOST, kind, &random);
        for (int k = 0; k < 2; k++) {
            tail t = filled(MOST, 0.99, &random, &p);
            assert_int_equal(tail_measure(&t, &p, var + k, tvar + k, of[k]), OK);
        }
        assert_memory_equal(var, var + 1, sizeof *var);
        assert_memory_equal(tvar, tvar + 1, sizeof *tvar);
        assert_memory_equal(of[0], of[1], sizeof of[0]);
        pool_empty(&p);
    }
}

/* the room is for the tail alone */
static void memory_is_bounded(void **state)
{
    (void)state;
    pool p = { 0 };
    tail t;
    assert_int_equal(tail_prepare(&t, 5, 20000000, 0.99, &p), OK);
    assert_true(p.bytes < 20000000 * 0.0130 * (5 + 2) * sizeof(double));
    assert_true(tail_numbers(5, 20000000, 0.99) * sizeof(double) <= (double)p.bytes);
    pool_empty(&p);
    p.fail_at = 1;
    assert_int_equal(tail_prepare(&t, 5, 1000, 0.99, &p), NO_MEMORY);
    pool_empty(&p);
}

/* The error of a part against the spread of the parts of many samples, with ties under a cap
 * and without */
static void errors_of_parts(void **state)
{
    (void)state;
    uint64_t random = 6;
    size_t rounds = effort(400), n = 4000;
    for (int kind = 0; kind < 4; kind += 3) {
        double sum = 0, squares = 0, errors = 0;
        for (size_t i = 0; i < rounds; i++) {
            pool p = { 0 };
            estimate var, tvar, of[LINES];
            fill(n, kind, &random);
            for (size_t k = 0; k < n; k++) {               /* line 0 made heavier than the others */
                total[k] += part[k];
                part[k] *= 2;
                if (kind == 3 && total[k] > 20) {
                    for (size_t j = 0; j < LINES; j++) part[j * MOST + k] *= 20 / total[k];
                    total[k] = 20;
                }
            }
            tail t = filled(n, 0.95, &random, &p);
            assert_int_equal(tail_measure(&t, &p, &var, &tvar, of), OK);
            sum += of[0].value;
            squares += of[0].value * of[0].value;
            errors += of[0].error;
            pool_empty(&p);
        }
        double m = (double)rounds, spread = sqrt((squares - sum * sum / m) / (m - 1));
        assert_close(errors / m, spread, 0.12);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(agrees_with_definition),
        cmocka_unit_test(blocks_do_not_matter),
        cmocka_unit_test(memory_is_bounded),
        cmocka_unit_test(errors_of_parts),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
