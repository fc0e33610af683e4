"""Every documented example of every function gives what the reference says."""
from checks import read_rows, same


def run(checks, desk, given):
    for row in read_rows(given.examples):
        name, formula, gives = (row + ['', ''])[:3]
        if not formula:
            checks.check(False, 'example: %s has none' % name)
            continue
        result = desk.evaluate(formula)
        checks.check(same(result, gives), 'example: %s gives %r, not %s' % (formula, result, gives))
