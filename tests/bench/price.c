/* price.c - how long quantiles, risk measures and a pricing take.
 *
 * Prints "name<TAB>seconds" a line; price.py reads them and times what SciPy users would write.
 */
#include "../../src/family.h"
#include "../../src/price.h"
#include "../../src/quantiles.h"
#include "../../src/draw.h"

#include <math.h>
#include <stdio.h>
#include <string.h>
#include <time.h>

enum { LINES = 5, ROWS = 100000, REPEATS = 11 };

static double now(void)
{
    struct timespec t;
    timespec_get(&t, TIME_UTC);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static margin margin_of(const char *word, double a, double b)
{
    return (margin){ distribution_named(word), a, b, NAN };
}

static void report_best(const char *name, void (*work)(void))
{
    double best = INFINITY;
    for (int i = 0; i < REPEATS; i++) {
        double start = now();
        work();
        best = fmin(best, now() - start);
    }
    printf("%s\t%.6f\n", name, best);
}

/* ---- what is timed ---- */

static double uniforms[ROWS], losses[ROWS];
static const double levels[] = { 0.99 };

static void quantiles_of(const char *word, double a, double b)
{
    pool p = { 0 };
    margin m = margin_of(word, a, b);
    const quantiles *q;
    if (quantiles_prepare(&m, NULL, ROWS, &p, &q) == OK) losses_at(q, uniforms, ROWS, losses);
    pool_empty(&p);
}

static void gamma_quantiles(void) { quantiles_of("gamma", 2.5, 400); }
static void lognormal_quantiles(void) { quantiles_of("lognormal", 6, 1.2); }

static void value_at_risk(void)
{
    pool p = { 0 };
    estimate e;
    values_at_risk(losses, ROWS, levels, 1, &p, &e);
    pool_empty(&p);
}

static void shortfall(void)
{
    pool p = { 0 };
    estimate e;
    tail_values_at_risk(losses, ROWS, levels, 1, &p, &e);
    pool_empty(&p);
}

static void price(const copula *model, size_t rows)
{
    pool p = { 0 };
    margin of[LINES] = {
        margin_of("lognormal", 6, 1.2), margin_of("gamma", 2.5, 400), margin_of("pareto", 2.2, 300),
        margin_of("lomax", 3.1, 900), margin_of("weibull", 0.8, 700)
    };
    term terms[LINES];
    for (size_t j = 0; j < LINES; j++) terms[j] = (term){ 500, 2000, 0.8, 0 };
    const struct margins margins = { LINES, of, NULL };
    const struct terms all = { LINES, terms, NULL };
    const term aggregate = { 1000, 8000, 1, 0 };
    cover c;
    pricing out;
    cover_prepare(&all, LINES, &aggregate, &p, &c);
    struct simulation s = { .model = model, .margins = &margins, .cover = &c, .seed = 1,
                            .rows = rows, .level = 0.99 };
    if (price_model(&s, &p, &out) != OK) puts("price_model failed");
    pool_empty(&p);
}

static double matrix[LINES * LINES], df[LINES];

static copula t_model(void)
{
    for (size_t i = 0; i < LINES * LINES; i++) matrix[i] = i % (LINES + 1) ? 0.4 : 1;
    for (size_t i = 0; i < LINES; i++) df[i] = 4;
    return (copula){ .family = family_named("t"), .dimension = LINES, .matrix = matrix, .df = df };
}

static copula gumbel_model(void)
{
    return (copula){ .family = family_named("gumbel"), .dimension = LINES, .theta = 1.7 };
}

static void price_t(void) { copula c = t_model(); price(&c, ROWS); }
static void price_gumbel(void) { copula c = gumbel_model(); price(&c, ROWS); }
static void price_million(void) { copula c = t_model(); price(&c, 1000000); }

int main(void)
{
    copula independent = { .family = family_named("independent"), .dimension = 2 };
    static double both[2 * ROWS];
    pool p = { 0 };
    if (draw(&independent, 1, 0, ROWS, both, ROWS, &p) != OK) return 1;
    memcpy(uniforms, both, sizeof uniforms);
    pool_empty(&p);
    report_best("100000 gamma quantiles", gamma_quantiles);
    report_best("100000 lognormal quantiles", lognormal_quantiles);
    report_best("VaR of 100000", value_at_risk);
    report_best("TVaR of 100000", shortfall);
    report_best("price, t copula, 5 lines, 100000 rows", price_t);
    report_best("price, gumbel copula, 5 lines, 100000 rows", price_gumbel);
    report_best("price, t copula, 5 lines, 1000000 rows", price_million);
    return 0;
}
