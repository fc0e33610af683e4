"""Formulas live through .ods and .xlsx, and through an office that lacks the extension."""
import os

from checks import close, read_rows, shown, to_stored

FILTERS = {'ods': 'calc8', 'xlsx': 'Calc MS Excel 2007 XML'}


def stored_examples(desk, given):
    """One formula of each function, as files hold it."""
    seen = {}
    for row in read_rows(given.examples):
        if len(row) == 3 and row[1]:
            seen.setdefault(row[0], row[1])
    return [to_stored(desk, formula) for formula in seen.values()]


def write(office, formulas):
    """A document with each formula in a row of its own, and one over a block of cells."""
    document = office.new_sheet()
    sheet = document.Sheets[0]
    for i, formula in enumerate(formulas):
        sheet.getCellByPosition(1, i).Formula = formula
    block = sheet.getCellRangeByName('D1:E3')
    block.setArrayFormula('=ORG.JOINTSHEET.FUNCTIONS.GREINER({0|0.5|1})')
    return document


def plain(formula):
    return formula.replace(' ', '').upper()


def contents(document, count):
    document.calculateAll()
    sheet = document.Sheets[0]
    cells = [sheet.getCellByPosition(1, i) for i in range(count)]
    block = sheet.getCellRangeByName('D1:E3')
    return ([plain(c.Formula) for c in cells] + [plain(block.getArrayFormula())],
            [shown(c) for c in cells] + [shown(block.getCellByPosition(0, i)) for i in range(3)])


def alike(a, b):
    if isinstance(a, float) and isinstance(b, float):
        return close(a, b)
    return a == b


def compare(checks, what, before, after):
    for old, new in zip(before[0], after[0]):
        checks.check(old == new, '%s: %s came back as %s' % (what, old, new))
    for formula, old, new in zip(before[0], before[1], after[1]):
        checks.check(alike(old, new), '%s: %s gave %r and then %r' % (what, formula, old, new))


def run(checks, desk, office, without, given):
    formulas = stored_examples(desk, given)
    document = write(office, formulas)
    before = contents(document, len(formulas))
    for kind, filter_name in FILTERS.items():
        path = os.path.join(given.out, 'office', 'trip.' + kind)
        office.store(document, path, filter_name)
        again = office.open(path)
        compare(checks, kind, before, contents(again, len(formulas)))
        again.close(True)

        lacking = without.open(path)
        kept = os.path.join(given.out, 'office', 'kept.' + kind)
        without.store(lacking, kept, filter_name)
        lacking.close(True)
        again = office.open(kept)
        compare(checks, kind + ' saved without the extension', before,
                contents(again, len(formulas)))
        again.close(True)
    document.close(True)
