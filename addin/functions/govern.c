/* govern.c - functions that say what the others did. */
#include "../function.h"
#include "../version.h"

#include <gsl/gsl_version.h>

char *openblas_get_config(void);
char *openblas_get_corename(void);

static status cell_about(const argument *in, value *out, report *r)
{
    (void)in;
    *out = (value){ .is = IS_TEXT,
                    .text = text_from(r->pool, "Jointsheet %s (%s; GSL %s; %s; kernel %s)",
                                      JOINTSHEET_VERSION, "C11, " __VERSION__, GSL_VERSION,
                                      openblas_get_config(), openblas_get_corename()) };
    return out->text ? OK : NO_MEMORY;
}

static status say(const char *sentence, const char *more, value *out, report *r)
{
    *out = (value){ .is = IS_TEXT,
                    .text = text_from(r->pool, *more ? "%s: %s" : "%s", sentence, more) };
    return out->text ? OK : NO_MEMORY;
}

/* The named function's own report, in this call's pool. Its errors are this function's result. */
static status cell_why(const argument *in, value *out, report *r)
{
    const value *given = r->given;
    size_t n = r->n_given;
    const function *f = function_named(in[0].text);
    if (!f || f->rest)
        return refuse(r, BAD_KIND,
                      "function is \"%s\", but must name a function that can be asked about",
                      in[0].text);
    report inner = { .pool = r->pool };
    value ignored;
    if (call_function(f, given + 1, n ? n - 1 : 0, &ignored, &inner) != OK)
        return say(inner.why, "", out, r);
    return say("fine", inner.facts, out, r);
}

const function govern_functions[] = {
    {
        .name = "why",
        .group = "Govern",
        .help = "Runs a function and says in one sentence what is wrong with its arguments, or that all is fine.",
        .detail = "The sentence names argument, row and column, counted from the first row of the range. When all "
                  "is fine it tells rows used and dropped, headers skipped and repairs made. "
                  "`=IFERROR(JOINT.TAU(A2:A41;B2:B41);JOINT.WHY(\"TAU\";A2:A41;B2:B41))` shows the sentence in "
                  "place of an error. A range with an error in one of its cells never reaches a function: the "
                  "office answers Err:504, here too, and `=SUMPRODUCT(ISERROR(A2:A41))` counts such cells.",
        .examples = {
            { "WHY(\"TAU\";{1;2;3};{1;2})", "y is 2 long, but x is 3 long" },
            { "WHY(\"THETA\";\"gumbel\";0.5)", "fine" },
        },
        .params = {
            { .name = "function", .help = "The function's name in quotes, with or without JOINT.", .kind = WORDS },
            { .name = "arguments", .help = "The arguments it was given.", .kind = RAW, .optional = true },
        },
        .rest = true,
        .call = cell_why,
    },
    {
        .name = "about",
        .group = "Govern",
        .help = "The version of Jointsheet, how it was built, and the libraries in it.",
        .examples = { { "LEFT(ABOUT();10)", "Jointsheet" } },
        .call = cell_about,
    },
    { 0 },
};
