/* govern.c - functions that say what the others did. */
#include "../function.h"
#include "../read.h"
#include "../version.h"
#include "../words.h"

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

static status say(const char *text, value *out)
{
    *out = (value){ .is = IS_TEXT, .text = text };
    return text ? OK : NO_MEMORY;
}

static bool only_faults(const value *result)
{
    const table *t = &result->table;
    for (size_t i = 0; result->is == IS_TABLE && i < t->rows * t->cols; i++)
        if (fault_in(t->at[i]) == OK && !marks_gap(t->at[i])) return false;
    return result->is == IS_TABLE && !t->words && fault_in(t->at[0]) != OK;
}

static bool any_fault(const value *result)
{
    const table *t = &result->table;
    for (size_t i = 0; result->is == IS_TABLE && i < t->rows * t->cols; i++)
        if (fault_in(t->at[i]) != OK) return true;
    return false;
}

/* "fine" where no cell holds an error, with the facts, of which errors in cells are the first. The
 * size is told since one cell shows only the first of a result. */
static status say_fine(const value *result, report *inner, value *out)
{
    const table *t = &result->table;
    if (result->is == IS_TABLE && (t->rows > 1 || t->cols > 1))
        remark(inner, "the result is %zu x %zu cells", t->rows, t->cols);
    if (only_faults(result))
        return say(text_from(inner->pool, "no cell has a value: %s", inner->facts), out);
    if (any_fault(result)) return say(text_from(inner->pool, "done, but %s", inner->facts), out);
    return say(text_from(inner->pool, *inner->facts ? "fine: %s" : "fine", inner->facts), out);
}

static const char HOW_TO_ASK[] = "WHY takes a name in quotes and then the arguments, as in "
                                 "WHY(\"TAU\";A1:A9;B1:B9)";

/* The named function's own report, in this call's pool. Whatever is wrong, WHY itself says it. */
static status cell_why(const argument *in, value *out, report *r)
{
    (void)in;
    const value *given = r->given;
    value name = { .is = IS_NOTHING }, result;
    if (r->n_given) name = single_of(&given[0]);
    if (name.is != IS_TEXT) return say(HOW_TO_ASK, out);
    const function *f = function_named(without_prefix(name.text, "="));
    if (!f)
        return say(text_from(r->pool, "there is no function \"%s\": %s", name.text, HOW_TO_ASK),
                   out);
    if (f->rest) return say("WHY cannot be asked about itself", out);
    report inner = { .pool = r->pool };
    status s = call_function(f, given + 1, r->n_given - 1, &result, &inner);
    return s == OK ? say_fine(&result, &inner, out) : say(text_from(r->pool, "%s", inner.why), out);
}

const function govern_functions[] = {
    {
        .name = "why",
        .group = "Govern",
        .help = "Runs a function and says in one sentence what is wrong with its arguments, or "
                "that all is fine.",
        .detail =
            "The sentence names argument, row and column, counted from the first row of the range. "
            "When all is fine it tells rows used and dropped, headers skipped, repairs made and "
            "the size of the result; when only some cells of it hold errors, how many and where "
            "the first is. "
            "`=IFERROR(JOINT.TAU(A2:A41;B2:B41);JOINT.WHY(\"TAU\";A2:A41;B2:B41))` shows the "
            "sentence in place of an error. An error in a cell of a range never reaches a "
            "function: the office answers Err:504, here too, and "
            "`=SUMPRODUCT(ISERROR(A2:A41))` counts such cells. Of a nested formula ask the inner "
            "function first, since its error is all that the outer one gets.",
        .examples = {
            { "WHY(\"TAU\";{1;2;3};{1;2})", "y is 2 long, but x is 3 long" },
            { "WHY(\"THETA\";\"gumbel\";0.5)", "fine" },
            { "WHY(\"EIGEN\";{1;0.5|0.5;1})", "fine: the result is 2 x 1 cells" },
            { "LEFT(WHY(\"TUA\";1);26)", "there is no function \"TUA\"" },
        },
        .params = {
            { .name = "function", .help = "The function's name in quotes, with or without JOINT.",
              .kind = RAW },
            { .name = "arguments", .help = "The arguments it was given.", .kind = RAW,
              .optional = true },
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
