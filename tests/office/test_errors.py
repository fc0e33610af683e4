"""errors.tsv: what a formula must show, and the words that WHY must say about it."""
import os
import re

from checks import first_call, read_rows, same

TABLE = os.path.join(os.path.dirname(os.path.abspath(__file__)), 'errors.tsv')


def why(desk, formula):
    """What WHY says of the first call in a formula."""
    name = re.search(r'JOINT\.([A-Z0-9]+)\(', formula)[1]
    arguments = first_call(formula, name)
    return desk.evaluate('=JOINT.WHY(%s)' % ';'.join(['"%s"' % name] + arguments))


def run(checks, desk, given):
    for row in read_rows(TABLE):
        formula, expected, words = (row + ['', ''])[:3]
        result = desk.evaluate(formula)
        checks.check(same(result, expected),
                     'errors.tsv: %s gives %r, not %s' % (formula, result, expected))
        if words:
            sentence = why(desk, formula)
            for part in words.split('|'):
                checks.check(part in str(sentence),
                             'errors.tsv: WHY of %s says "%s", without "%s"'
                             % (formula, sentence, part))
