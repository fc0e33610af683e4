"""The service as a program calls it: numbers that no cell can hold, shapes that no range has, and
several callers at once.
"""
import math
import struct
import threading

import uno

from checks import ERRORS, NAMES, read_rows
from fixture import X, Y
from test_sweep import baselines

INFINITE = float('inf')


def error_in(result):
    """The error in a result, or None."""
    if isinstance(result, float) and math.isnan(result):
        bits = struct.unpack('>Q', struct.pack('>d', result))[0]
        return NAMES.get(bits & 0xffffffff, 'no error of ours')
    return None


class Caller:
    """Calls with left-out arguments filled up, since a program must hand over all."""

    def __init__(self, functions, parameters):
        self.functions = functions
        self.counts = {}
        for name, *_ in read_rows(parameters):
            self.counts[name] = self.counts.get(name, 0) + 1

    def __call__(self, name, *arguments):
        missing = (None,) * (self.counts[name] - len(arguments))
        return uno.invoke(self.functions, name, arguments + missing)


def typed(kind, value):
    return uno.Any(kind, value)


def shapes(checks, call):
    """One column in every shape in which a program may hand it over."""
    expected = call('tau', typed('[][]double', tuple((v,) for v in X)),
                    typed('[][]double', tuple((v,) for v in Y)))
    checks.check(isinstance(expected, float) and error_in(expected) is None,
                 'api: tau gives %r' % (expected,))
    for kind, column in (('[][]any', tuple((v,) for v in X)), ('[]double', tuple(X)),
                         ('[]any', tuple(X)), ('[]any', tuple((v,) for v in X)),
                         ('[][]float', tuple((v,) for v in X)),
                         ('[][]long', tuple((int(v * 10),) for v in X)),
                         ('[][]hyper', tuple((int(v * 10),) for v in X))):
        result = call('tau', typed(kind, column), typed('[]double', tuple(Y)))
        checks.check(result == expected, 'api: x as %s gives %r, not %r' % (kind, result, expected))


def refusals(checks, call):
    good = typed('[]double', tuple(Y))
    for what, x in (
            ('infinite', typed('[]double', (INFINITE,) + tuple(X[1:]))),
            ('not a number', typed('[]double', (float('nan'),) + tuple(X[1:]))),
            ('infinite in any', typed('[][]any', ((-INFINITE,),) + tuple((v,) for v in X[1:]))),
            ('one infinite number', INFINITE),
            ('ragged rows', typed('[][]double', ((1.0, 2.0), (3.0,)))),
            ('no rows', typed('[][]double', ())),
            ('empty rows', typed('[][]double', ((), ()))),
            ('three dimensions', typed('[][][]double', (((1.0,),),))),
            ('an object', call.functions),
            ('nothing', None)):
        result = call('tau', x, good)
        checks.check(error_in(result) in ('#VALUE!', '#NUM!'),
                     'api: %s for x gives %r (%s)' % (what, result, error_in(result)))
    for name, arguments in (('greiner', (INFINITE,)), ('greiner', (float('nan'),)),
                            ('theta', ('gumbel', INFINITE)),
                            ('quantile', (0.5, 'normal', 0.0, INFINITE))):
        result = call(name, *arguments)
        checks.check(error_in(result) is not None, 'api: %s%r gives %r' % (name, arguments, result))


def spoiled(value, bad):
    """The value with its number, or the first number in it, replaced; None when it has none."""
    if isinstance(value, float):
        return bad
    if not isinstance(value, tuple):
        return None
    rows = [list(row) for row in value]
    for row in rows:
        for j, cell in enumerate(row):
            if isinstance(cell, float):
                row[j] = bad
                return tuple(map(tuple, rows))
    return None


def plain(desk, argument):
    """What an argument of a formula is: a number, a text or rows of cells; None when left out."""
    if not argument.strip():
        return None
    rows, columns = (desk.evaluate('=%s(%s)' % (f, argument)) for f in ('ROWS', 'COLUMNS'))
    if rows in ERRORS or rows * columns == 1:
        return desk.evaluate('=' + argument)
    return tuple(map(tuple, desk.matrix('=' + argument, int(rows), int(columns))))


def not_finite(checks, call, desk, given):
    """Every function refuses numbers that are not finite, wherever it takes numbers."""
    for name, arguments in baselines(given):
        values = [plain(desk, a) for a in arguments]
        for place, value in enumerate(values):
            for bad in (INFINITE, -INFINITE, float('nan')):
                changed = spoiled(value, bad)
                if changed is None:
                    continue
                spoilt = values[:place] + [changed] + values[place + 1:]
                result = call(name, *(typed('[][]any', v) if isinstance(v, tuple) else v
                                      for v in spoilt))
                checks.check(error_in(result) in NAMES.values(),
                             'api: %s with %r in argument %d gives %.200r'
                             % (name, bad, place + 1, result))


def no_voids(checks, call):
    """Unused cells of a result are texts: a void would be read back as 0."""
    block = call('model', 't', 0.3, 4.0, 0.0, 3.0)
    cells = [cell for row in block for cell in row]
    checks.check(None not in cells and '' in cells, 'api: voids in %r' % (block,))
    grid = call('ranks', typed('[][]any', ((1.0,), ('',), (3.0,))))
    checks.check(grid[1][0] == '', 'api: a gap comes out as %r' % (grid[1][0],))


def calls_of_caller(call, k):
    """Calls with data of this caller's own: tau, and others whose results are kept in the cache,
    together more than it holds, so that it finds, keeps and lets go."""
    x = X[k:] + X[:k]
    data = typed('[][]double', tuple(zip(x, Y)))
    terms = typed('[][]any', ((0.5, 4.0, 1.0), (1.0, '', 1.0 - 0.1 * k)))
    model = typed('[][]any', call('model', 'gumbel', 2.0 + k))
    return [('tau', typed('[]double', tuple(x)), typed('[]double', tuple(Y))), ('rhoGrid', data),
            ('report', data, terms)] + [('draw', model, 50.0, float(s)) for s in range(4)]


def at_once(checks, call):
    """Four callers, each with its own data, get what they get alone."""
    calls = [calls_of_caller(call, k) for k in range(4)]
    alone = [[call(*one) for one in own] for own in calls]
    for place, results in enumerate(zip(*alone)):
        checks.check(len(set(results)) == 4 and not any(map(error_in, results)),
                     'api: alone %s gives %.200r' % (calls[0][place][0], results))
    wrong = []

    def caller(k):
        for _ in range(100):
            for one, expected in zip(calls[k], alone[k]):
                result = call(*one)
                if result != expected:
                    wrong.append((one[0], result))

    threads = [threading.Thread(target=caller, args=(k,)) for k in range(4)]
    for t in threads:
        t.start()
    for t in threads:
        t.join()
    checks.check(not wrong, 'api: callers at once got %.500r' % wrong[:3])


def run(checks, desk, office, given):
    functions = office.service('org.jointsheet.Functions')
    checks.check(functions.supportsService('org.jointsheet.Functions'),
                 'api: the service is not supported')
    checks.check(not functions.supportsService('org.jointsheet.Other'),
                 'api: any service is supported')
    call = Caller(functions, given.parameters)
    shapes(checks, call)
    refusals(checks, call)
    not_finite(checks, call, desk, given)
    no_voids(checks, call)
    at_once(checks, call)
