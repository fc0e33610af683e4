"""Every parameter of every function gets wrong things, one at a time, in a call that is otherwise
that of its first example: the rules of each kind of parameter hold for every function, and WHY
says "fine" only when no error shows.
"""
import re
import time

from checks import ERRORS, first_call, read_rows

VALUE = ('#VALUE!',)
ANY = tuple(ERRORS)
SLOW = 20                            # seconds that no call of this sweep may take

WRONG = {
    'number': {'word_cell': VALUE, '"5"': VALUE, '"3,5"': VALUE, 'wide': VALUE, 'one_row': VALUE},
    'whole': {'word_cell': VALUE, '"5"': VALUE, 'wide': VALUE, '1.5': ANY},
    'word': {'"bogusword"': VALUE, '17': VALUE, 'wide': VALUE},
    'words': {'"bogusword"': VALUE, '17': VALUE, 'wide': VALUE},
    'numbers': {'word_cell': VALUE, '"5"': VALUE, 'wordy': VALUE, 'texted': VALUE},
    'column': {'data': VALUE, 'word_cell': VALUE, '"5"': VALUE, 'cell': ANY, 'wordy': VALUE,
               'texted': VALUE, 'commaed': VALUE, 'blanks': ANY},
    'data': {'word_cell': VALUE, '"5"': VALUE, 'cell': ANY, 'wordy_data': VALUE},
    'full data': {'word_cell': VALUE, '"5"': VALUE, 'wordy_data': VALUE, 'gappy_data': VALUE,
                  'blanks': ANY},
    'matrix': {'word_cell': VALUE, 'wide': VALUE, 'wordy_data': VALUE, 'blanks': VALUE},
    'model': {'5': VALUE, 'word_cell': VALUE, 'matrix': VALUE, 'blanks': VALUE},
    'margins': {'5': VALUE, 'blanks': VALUE, '"motor"': VALUE, 'matrix': VALUE},
    'terms': {'"motor"': VALUE, 'wordy': VALUE},
    'aggregate': {'"motor"': VALUE, 'wordy_data': VALUE},
    'settings': {'5': VALUE, '{"bogusword",1}': VALUE},
    'raw': {},
}

ODD = ['cell', 'blank', 'word_cell', 'blanks', 'one_row', 'constant', 'data', 'wide', 'gappy', '""',
       'TRUE()', '-1', '0', '1E+300', 'broken', 'impossible', 'outside', 'constant_data',
       'first_rows']


def baseline(name, examples):
    """The arguments of the first example that shows no error."""
    for formula, gives in examples.get(name, []):
        arguments = first_call(formula, name)
        if arguments is not None and gives not in ERRORS:
            return arguments
    return None


def examples_of(given):
    """The examples of each function: formula and what it gives."""
    examples = {}
    for row in read_rows(given.examples):
        if len(row) == 3 and row[1]:
            examples.setdefault(row[0], []).append((row[1], row[2]))
    return examples


def baselines(given):
    """Every function that has an example to start from, with its arguments there."""
    examples = examples_of(given)
    for name in examples:
        arguments = baseline(name, examples)
        if arguments and name != 'why':
            yield name, arguments


def call(name, arguments):
    return '=JOINT.%s(%s)' % (name.upper(), ';'.join(arguments))


def consistent(checks, desk, name, arguments, result, seconds):
    """WHY and the result agree."""
    sentence = desk.evaluate('=JOINT.WHY(%s)' % ';'.join(['"%s"' % name] + arguments))
    formula = call(name, arguments)
    checks.check(seconds < SLOW, 'sweep: %s took %.1f s' % (formula, seconds))
    if not checks.check(isinstance(sentence, str) and sentence and sentence not in ERRORS,
                        'sweep: WHY of %s says %r' % (formula, sentence)):
        return
    fine = sentence.startswith('fine')
    shows_error = result in ERRORS
    in_a_cell = re.match(r'done, but \d+ cells? of the result', sentence)
    checks.check(fine != shows_error or in_a_cell,
                 'sweep: %s gives %r, but WHY says "%s"' % (formula, result, sentence))
    checks.check(fine or (sentence[-1] not in '.;' and len(sentence) > 8),
                 'sweep: WHY of %s is no sentence: "%s"' % (formula, sentence))


def sweep(checks, desk, name, arguments, place, kind):
    tried = dict.fromkeys(ODD)
    tried.update(WRONG[kind])
    for thing, allowed in tried.items():
        changed = arguments + [''] * (place + 1 - len(arguments))
        changed[place] = thing
        start = time.monotonic()
        result = desk.evaluate(call(name, changed))
        seconds = time.monotonic() - start
        if allowed:
            wanted = 'an error' if allowed is ANY else ' or '.join(allowed)
            checks.check(result in allowed,
                         'sweep: %s gives %r, not %s' % (call(name, changed), result, wanted))
        consistent(checks, desk, name, changed, result, seconds)


def run(checks, desk, given):
    examples = examples_of(given)
    places = {}
    for name, parameter, kind, optional, rest in read_rows(given.parameters):
        place = places.get(name, 0)
        places[name] = place + 1
        arguments = baseline(name, examples)
        if arguments is None:
            checks.check(False, 'sweep: no example of %s calls it and shows no error' % name)
        elif rest == '0' and name != 'why':
            sweep(checks, desk, name, arguments, place, kind)
