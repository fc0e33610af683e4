/* simulate.c - draws from a model. */
#include "../function.h"
#include "../params.h"
#include "../../src/scheme.h"

static const char GROUP[] = "Simulate";

enum { MODEL_DRAWN, ROWS, SEED, SCHEME, SKIP };

/* Draws are made column by column and cells stand row by row: this many rows at a time. */
enum { ROWS_AT_A_TIME = 1 << 14 };

static void into_table(const double *u, size_t stride, size_t first, size_t rows, value *out)
{
    size_t columns = out->table.cols;
    double *at = out->table.at + first * columns;
    for (size_t i = 0; i < rows; i++)
        for (size_t j = 0; j < columns; j++) at[i * columns + j] = u[j * stride + i];
}

static status draw_into(const copula *c, scheme how, uint64_t seed, size_t skip, value *out,
                        pool *p)
{
    size_t rows = out->table.rows, most = how == SCHEME_LATIN ? rows : ROWS_AT_A_TIME;
    double *u = pool_take(p, most < rows ? most : rows, c->dimension * sizeof *u);
    if (!u) return NO_MEMORY;
    for (size_t done = 0; done < rows; done += most) {
        size_t n = rows - done < most ? rows - done : most;
        status s = draw_by_scheme(c, how, seed, skip + done, n, u, n, p);
        if (s != OK) return s;
        into_table(u, n, done, n, out);
    }
    return OK;
}

static status cell_draw(const argument *in, value *out, report *r)
{
    const copula *c = in[MODEL_DRAWN].model;
    scheme how = (scheme)in[SCHEME].word;
    size_t skip = (size_t)in[SKIP].number;
    if (how == SCHEME_SOBOL && c->dimension > SOBOL_COLUMNS)
        return refuse(r, OUT_OF_DOMAIN,
                      "model has %zu columns, but the scheme sobol reaches only to %d",
                      c->dimension, SOBOL_COLUMNS);
    if (how == SCHEME_LATIN && skip > 0)
        return refuse(r, OUT_OF_DOMAIN,
                      "skip is %zu, but latin has no rows to skip: its rows belong together", skip);
    status s = new_table(r, (size_t)in[ROWS].number, c->dimension, out);
    if (s != OK) return s;
    s = draw_into(c, how, (uint64_t)in[SEED].number, skip, out, r->pool);
    if (s == OUT_OF_DOMAIN)
        return refuse(r, s, "model cannot be drawn from: its matrix is not feasible");
    return s;
}

const function simulate_functions[] = {
    {
        .name = "draw",
        .group = GROUP,
        .help = "Rows of uniforms in (0;1) that follow a model, one column for each line.",
        .detail =
            "The same seed and model give the same numbers on every machine, at every "
            "recalculation and however many rows are asked for: row i depends on the seed, i "
            "and the model alone, and skip continues a draw. Draws under one seed are not "
            "independent of each other, whatever the model. Uniforms from a counter-based "
            "generator (Salmon, Moraes, Dror & Shaw 2011), 52 bits each. gaussian and t: "
            "Cholesky factor times normal scores, t over one chi-square a row, by inversion; "
            "with several df one uniform drives them all. clayton, gumbel, frank and joe by "
            "their frailty (Marshall & Olkin 1988); amh, plackett, fgm and clayton below 0 by "
            "inverting the conditional distribution. A singular matrix can be drawn from. "
            "Schemes: plain has independent rows. antithetic: row 2k opposes row 2k - 1, made "
            "from 1 - u where that was made from u. latin: every column has one number in "
            "each of `rows` equal parts of (0;1) (Stein 1987; Packham & Schmidt 2010); it "
            "cannot skip. sobol: points that fill the cube evenly (Joe & Kuo 2008), scrambled "
            "by the seed, best with a power of 2 as rows, for up to 128 columns. Numbers from "
            "2^-53 to 1 - 2^-53.",
        .examples = {
            { "DRAW(MODEL(\"t\";0.5;4);3;1)", "0.959119431159873" },
            { "INDEX(DRAW(MODEL(\"gumbel\";2);5;42);5;2)", "0.0389016719600976" },
            { "DRAW(MODEL(\"gumbel\";2);1;42;\"plain\";4)", "0.322577599721742" },
            { "DRAW(MODEL(\"gumbel\";2);5;42;\"latin\";4)", "#NUM!" },
        },
        .params = {
            MODEL_BLOCK,
            { .name = "rows", .help = "How many rows, at most 1048576.", .kind = WHOLE,
              .low = 1, .high = 1048576 },
            { .name = "seed", .help = "A whole number from 0; another seed gives other numbers.",
              .kind = WHOLE, .low = 0, .high = 9007199254740992 },
            { .name = "scheme", .help = "plain, antithetic, latin or sobol.", .kind = WORD,
              .words = scheme_words, .optional = true },
            { .name = "skip", .help = "Leaves out this many rows at the beginning.", .kind = WHOLE,
              .low = 0, .high = 4503599627370496, .optional = true },
        },
        .costly = true,
        .call = cell_draw,
    },
    { 0 },
};
