"""Whole columns give what the filled part of them gives, and in good time."""
import time

from checks import ERRORS, close, read_rows
from test_sweep import baseline, call, examples_of

PATIENCE = 20                        # seconds for a call with whole columns

TRIMMED = {'column': ('x', 'long_x'), 'data': ('data', 'long_data'),
           'full data': ('data', 'long_data')}
UNIFORMS = ('uniforms', 'long_uniforms')
SECOND = {'x': 'y', 'long_x': 'long_y'}
AS_MANY_LINES = ('margins', 'terms')     # blocks for the three lines of data and uniforms


def with_columns(arguments, parameters, long):
    """The call with every column or data argument replaced by ours, and the blocks that have to fit
    it; None when there is none."""
    columns, found = list(arguments), 0
    for i, (parameter, kind) in enumerate(parameters[:len(columns)]):
        if kind in TRIMMED:
            name = (UNIFORMS if parameter in ('uniforms', 'points') else TRIMMED[kind])[long]
            columns[i] = SECOND[name] if found and kind == 'column' else name
            found += 1
        elif kind in AS_MANY_LINES:
            columns[i] = kind
        elif kind == 'model' and ('points', 'data') in parameters:
            columns[i] = 'JOINT.MODEL("gaussian";matrix)'
    return columns if found else None


def run(checks, desk, given):
    examples, parameters = examples_of(given), {}
    for name, parameter, kind, optional, rest in read_rows(given.parameters):
        parameters.setdefault(name, []).append((parameter, kind))
    for name in parameters:
        arguments = baseline(name, examples)
        short = with_columns(arguments or [], parameters[name], 0)
        if not short:
            continue
        expected = desk.evaluate(call(name, short))
        checks.check(expected not in ERRORS, 'long: %s gives %r' % (call(name, short), expected))
        start = time.monotonic()
        formula = call(name, with_columns(arguments, parameters[name], 1))
        result = desk.evaluate(formula)
        seconds = time.monotonic() - start
        checks.check(seconds < PATIENCE, 'long: %s took %.1f s' % (formula, seconds))
        both = isinstance(expected, float) and isinstance(result, float)
        checks.check(close(expected, result) if both else expected == result,
                     'long: %s gives %r, but %s gives %r'
                     % (formula, result, call(name, short), expected))
