"""Whole columns give what the filled part of them gives, and in good time."""
import time

from checks import close, read_rows
from test_sweep import baseline, call, examples_of

PATIENCE = 20                        # seconds for a call with whole columns

TRIMMED = {'column': ('x', 'long_x'), 'data': ('data', 'long_data'),
           'full data': ('data', 'long_data')}
SECOND = {'x': 'y', 'long_x': 'long_y'}


def with_columns(arguments, kinds, long):
    """The call with every column or data argument replaced by ours; None when there is none."""
    columns, found = list(arguments), 0
    for i, kind in enumerate(kinds[:len(columns)]):
        if kind in TRIMMED:
            name = TRIMMED[kind][long]
            columns[i] = SECOND[name] if found and kind == 'column' else name
            found += 1
    return columns if found else None


def run(checks, desk, given):
    examples, kinds = examples_of(given), {}
    for name, parameter, kind, optional, rest in read_rows(given.parameters):
        kinds.setdefault(name, []).append(kind)
    for name in kinds:
        arguments = baseline(name, examples)
        short = with_columns(arguments or [], kinds[name], 0)
        if not short:
            continue
        expected = desk.evaluate(call(name, short))
        start = time.monotonic()
        formula = call(name, with_columns(arguments, kinds[name], 1))
        result = desk.evaluate(formula)
        seconds = time.monotonic() - start
        checks.check(seconds < PATIENCE, 'long: %s took %.1f s' % (formula, seconds))
        both = isinstance(expected, float) and isinstance(result, float)
        checks.check(close(expected, result) if both else expected == result,
                     'long: %s gives %r, but %s gives %r'
                     % (formula, result, call(name, short), expected))
