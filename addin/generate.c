/* generate.c - writes what others need from the function tables:
 *
 *     generate idl | xcu | reference | examples | parameters
 *
 * the interface definition, the configuration that tells the office about the functions, the
 * reference for users, and for the office tests the documented examples and the kinds of the
 * parameters as tables.
 */
#include "family_texts.h"
#include "function.h"

#include <ctype.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

#define SERVICE "org.jointsheet.Functions"

/* ---- the interface ---- */

static void idl_method(const function *f)
{
    size_t n = count_params(f);
    printf("        any %s(", f->name);
    for (size_t i = 0; i < n; i++)
        printf("%s[in] %s %s", i ? ", " : "", f->rest && i == n - 1 ? "sequence<any>" : "any",
               f->params[i].name);
    puts(");");
}

static void idl(void)
{
    puts("/* Written by addin/generate.c from addin/functions. Every parameter is any: "
         "only any can be\n"
         " * left out, and it keeps what the cell holds. */\n"
         "module org { module jointsheet {\n"
         "    interface XFunctions : com::sun::star::uno::XInterface {");
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++) idl_method(f);
    puts("    };\n"
         "    service Functions : XFunctions;\n"
         "}; };");
}

/* ---- names and help ---- */

static void upper_case(const char *s)
{
    for (; *s; s++) putchar(toupper((unsigned char)*s));
}

/* The first of several words. */
static int first_word(const char *words)
{
    return (int)strcspn(words, " ");
}

static bool wants_word(const param *p) { return p->kind == WORD && p->words && *p->words; }

static bool is_number(const param *p)
{
    return p->kind == NUMBER || p->kind == WHOLE || p->kind == NUMBERS;
}

/* Whether the default is a number that could have been given: else it only means "left out". */
static bool has_default(const param *p)
{
    if (!is_number(p) || !isfinite(p->otherwise)) return false;
    if (p->low == 0 && p->high == 0) return true;
    bool above = p->otherwise > p->low || (p->otherwise == p->low && !(p->open & LOW_OPEN));
    bool below = p->otherwise < p->high || (p->otherwise == p->high && !(p->open & HIGH_OPEN));
    return above && below;
}

static bool help_tells_default(const param *p)
{
    return strstr(p->help, "left out") || strstr(p->help, "leave it out");
}

/* What happens when an optional argument is left out, for the end of its help. */
static void optional_note(const param *p, const char *before, const char *after)
{
    if (!p->optional) return;
    printf("%sOptional", before);
    if (help_tells_default(p)) printf(".%s", after);
    else if (wants_word(p)) printf("; %.*s if left out.%s", first_word(p->words), p->words, after);
    else if (has_default(p)) printf("; %.15g if left out.%s", p->otherwise, after);
    else printf(".%s", after);
}

/* ---- the configuration ---- */

static void escaped(const char *s)
{
    for (; *s; s++) {
        switch (*s) {
        case '&': fputs("&amp;", stdout); break;
        case '<': fputs("&lt;", stdout); break;
        case '>': fputs("&gt;", stdout); break;
        default: putchar(*s);
        }
    }
}

/* The wizard shows no list, so that the many words for a family stand in their help. */
static void xcu_words(const param *p)
{
    if (p->words != family_words) return;
    printf(" Words: %s.", p->words);
}

static void xcu_param(const param *p)
{
    printf("        <node oor:name=\"%s\" oor:op=\"replace\">\n"
           "         <prop oor:name=\"DisplayName\"><value xml:lang=\"en-US\">%s</value></prop>\n"
           "         <prop oor:name=\"Description\"><value xml:lang=\"en-US\">", p->name, p->name);
    escaped(p->help);
    xcu_words(p);
    if (p->optional) optional_note(p, " ", "");
    else fputs(" Required.", stdout);    /* the wizard calls every `any` optional */
    puts("</value></prop>\n        </node>");
}

static void xcu_function(const function *f)
{
    printf("      <node oor:name=\"%s\" oor:op=\"replace\">\n"
           "       <prop oor:name=\"DisplayName\"><value xml:lang=\"en-US\">JOINT.", f->name);
    upper_case(f->name);
    fputs("</value></prop>\n"
          "       <prop oor:name=\"Description\"><value xml:lang=\"en-US\">", stdout);
    escaped(f->help);
    puts("</value></prop>\n       <prop oor:name=\"Category\"><value>Add-In</value></prop>\n"
         "       <node oor:name=\"Parameters\">");
    for (size_t i = 0; i < count_params(f); i++) xcu_param(f->params + i);
    puts("       </node>\n      </node>");
}

static void xcu(void)
{
    puts("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n"
         "<!-- Written by addin/generate.c from addin/functions. -->\n"
         "<oor:component-data xmlns:oor=\"http://openoffice.org/2001/registry\""
         " xmlns:xs=\"http://www.w3.org/2001/XMLSchema\"\n"
         "    oor:name=\"CalcAddIns\" oor:package=\"org.openoffice.Office\">\n"
         "  <node oor:name=\"AddInInfo\">\n"
         "   <node oor:name=\"" SERVICE "\" oor:op=\"replace\">\n"
         "    <node oor:name=\"AddInFunctions\">");
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++) xcu_function(f);
    puts("    </node>\n   </node>\n  </node>\n</oor:component-data>");
}

/* ---- the reference ---- */

static void signature(const function *f)
{
    size_t n = count_params(f);
    fputs("JOINT.", stdout);
    upper_case(f->name);
    putchar('(');
    for (size_t i = 0; i < n; i++) {
        const param *p = f->params + i;
        bool rest = f->rest && i == n - 1;
        printf("%s%s%s%s%s", i ? "; " : "", p->optional && !rest ? "[" : "", p->name,
               p->optional && !rest ? "]" : "", rest ? "..." : "");
    }
    putchar(')');
}

/* "from 0 to 1, ends excluded", for a number with bounds */
static void bounds_note(const param *p)
{
    static const char *const open[] = { "", ", the low end excluded", ", the high end excluded",
                                        ", ends excluded" };
    const double boundless = 1e15;                /* 2^53 - 1 bounds a seed, and interests nobody */
    if (!is_number(p) || (p->low == 0 && p->high == 0)) return;
    if (p->high >= boundless)
        printf(" %s %.15g.", p->open & LOW_OPEN ? "Above" : "At least", p->low);
    else if (p->low <= -boundless)
        printf(" %s %.15g.", p->open & HIGH_OPEN ? "Below" : "At most", p->high);
    else
        printf(" From %.15g to %.15g%s.", p->low, p->high, open[p->open & BOTH_OPEN]);
}

static void reference_param(const function *f, const param *p)
{
    printf("- **%s**: %s", p->name, p->help);
    if (p->kind == WORD || p->kind == SETTINGS) {
        if (p->words && *p->words) printf(" Words: `%s`.", p->words);
    }
    bounds_note(p);
    if (!(f->rest && p == f->params + count_params(f) - 1)) optional_note(p, " ", "");
    putchar('\n');
}

/* The tables write inline arrays as files do, {1;2|3;4}; in English they are typed {1,2;3,4}. */
static int typed_separator(char c, bool quoted, bool inline_array)
{
    if (quoted || !inline_array) return c;
    return c == ';' ? ',' : c == '|' ? ';' : c;
}

/* The formula as it is typed: known names before a parenthesis get their prefix. */
static void typed_formula(const char *formula)
{
    bool quoted = false, inline_array = false;
    putchar('=');
    for (const char *s = formula; *s; ) {
        size_t letters = strspn(s, "ABCDEFGHIJKLMNOPQRSTUVWXYZ");
        char name[64];
        if (!quoted && letters && letters < sizeof name && s[letters] == '(') {
            memcpy(name, s, letters);
            name[letters] = 0;
            if (function_named(name)) fputs("JOINT.", stdout);
        }
        if (letters) {
            printf("%.*s", (int)letters, s);
            s += letters;
            continue;
        }
        if (*s == '"') quoted = !quoted;
        if (!quoted && (*s == '{' || *s == '}')) inline_array = *s == '{';
        putchar(typed_separator(*s, quoted, inline_array));
        s++;
    }
}

static void reference_function(const function *f)
{
    fputs("### ", stdout);
    signature(f);
    printf("\n\n%s\n\n", f->help);
    for (size_t i = 0; i < count_params(f); i++) reference_param(f, f->params + i);
    if (f->params[0].name) putchar('\n');
    if (f->detail) printf("%s\n\n", f->detail);
    for (size_t i = 0; i < MAX_EXAMPLES && f->examples[i].formula; i++) {
        fputs("    ", stdout);
        typed_formula(f->examples[i].formula);
        printf("   gives   %s\n", f->examples[i].gives);
    }
    if (f->examples[0].formula) putchar('\n');
}

/* The order in which the job runs; a group that is not here comes after them. */
static const char *const groups[] = {
    "Measure dependence in data", "Turn it into parameters", "Describe a model",
    "Mend and inspect correlation matrices", "Simulate", "Price", "Govern", NULL,
};

static bool in_order(const char *group)
{
    for (size_t i = 0; groups[i]; i++)
        if (!strcmp(groups[i], group)) return true;
    return false;
}

static void contents_group(const char *heading)
{
    printf("- %s:", heading);
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++) {
            if (strcmp(f->group, heading)) continue;
            fputs(" `", stdout);
            upper_case(f->name);
            putchar('`');
        }
    putchar('\n');
}

static void reference_group(const char *heading)
{
    printf("## %s\n\n", heading);
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++)
            if (!strcmp(f->group, heading)) reference_function(f);
}

static void each_group(void (*say)(const char *heading))
{
    for (size_t i = 0; groups[i]; i++) say(groups[i]);
    const char *last = NULL;
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++) {
            if (in_order(f->group) || (last && !strcmp(last, f->group))) continue;
            say(last = f->group);
        }
}

static void reference_family(const family *f, pool *p)
{
    printf("| %s | %s | %s | %s | %s | %s | %s | %s |\n", f->word, parameter_text(f, p),
           tau_range(f, p), rho_range(f, p), dimensions_text(f, p), tails_text(f), f->use,
           f->source);
}

static void reference_families(void)
{
    pool p = { 0 };
    puts("## Copula families\n\n"
         "Written from their rows in `src/copulas`. Ranges are those of the unrotated copula; tau "
         "and Spearman's rho of a pair. [ and ] mean that an end belongs to the range, ( and ) "
         "that it does not. Tails: corners with tail dependence; rotation 180 exchanges them. "
         "Rotations 0, 90, 180, 270 for pairs, 0 and 180 beyond.\n\n"
         "| family | parameter | tau | rho | dimensions | tails | for | source |\n"
         "|---|---|---|---|---|---|---|---|");
    for (const family *const *f = families; *f; f++) reference_family(*f, &p);
    putchar('\n');
    pool_empty(&p);
}

static void reference(void)
{
    puts("# Function reference\n\n"
         "Written from the function tables in `addin/functions`; each example runs as a test in "
         "the office. Formulas are as typed in an English office. What holds for every function "
         "stands in the README under Conventions.\n");
    each_group(contents_group);
    putchar('\n');
    each_group(reference_group);
    reference_families();
}

/* ---- the examples: function, formula, what it gives ---- */

static void example_row(const function *f, const example *e)
{
    printf("%s\t", f->name);
    typed_formula(e->formula);
    printf("\t%s\n", e->gives);
}

static void examples(void)
{
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++) {
            if (!f->examples[0].formula) printf("%s\t\t\n", f->name);
            for (size_t i = 0; i < MAX_EXAMPLES && f->examples[i].formula; i++)
                example_row(f, f->examples + i);
        }
}

/* ---- the parameters: function, parameter, kind, optional, rest ---- */

static const char *const kinds[] = {
    [NUMBER] = "number", [WHOLE] = "whole", [WORD] = "word", [WORDS] = "words",
    [NUMBERS] = "numbers", [COLUMN] = "column", [DATA] = "data", [FULL_DATA] = "full data",
    [MATRIX] = "matrix", [MODEL] = "model", [MARGINS] = "margins", [TERMS] = "terms",
    [AGGREGATE] = "aggregate", [SETTINGS] = "settings", [RAW] = "raw",
};

static void parameters(void)
{
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++)
            for (size_t i = 0, n = count_params(f); i < n; i++)
                printf("%s\t%s\t%s\t%d\t%d\n", f->name, f->params[i].name,
                       kinds[f->params[i].kind], f->params[i].optional, f->rest && i == n - 1);
}

int main(int argc, char **argv)
{
    const char *what = argc == 2 ? argv[1] : "";
    if (!strcmp(what, "idl")) {
        idl();
    } else if (!strcmp(what, "xcu")) {
        xcu();
    } else if (!strcmp(what, "reference")) {
        reference();
    } else if (!strcmp(what, "examples")) {
        examples();
    } else if (!strcmp(what, "parameters")) {
        parameters();
    } else {
        fputs("usage: generate idl|xcu|reference|examples|parameters\n", stderr);
        return 2;
    }
    return fflush(stdout) || ferror(stdout);
}
