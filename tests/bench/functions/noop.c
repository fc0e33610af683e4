/* noop.c - a function that does nothing with two ranges: what the office and the conversion of the
 * arguments cost. Built into the extension that `make bench` measures, never into the one that
 * ships.
 */
#include "../../../addin/function.h"

static status cell_noop(const argument *in, value *out, report *r)
{
    (void)in;
    (void)r;
    return answer(out, 0);
}

const function noop_functions[] = {
    {
        .name = "noop",
        .group = "Bench",
        .help = "Nothing.",
        .params = {
            { .name = "x", .help = "Any range.", .kind = RAW },
            { .name = "y", .help = "Any range.", .kind = RAW },
        },
        .call = cell_noop,
    },
    { 0 },
};
