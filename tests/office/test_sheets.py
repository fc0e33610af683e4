"""The sample sheets: every formula cell of every sheet is recalculated and shows no error, also
where a term is left open; and where an input is wrong, the workbook says which.
"""
import glob
import os

from checks import error_name

FORMULA_CELLS, ERRORS_ONLY = 16, 4       # com.sun.star.sheet.CellFlags, FormulaResult


def cells_of(ranges):
    for area in ranges.getRangeAddresses():
        for i in range(area.StartRow, area.EndRow + 1):
            for j in range(area.StartColumn, area.EndColumn + 1):
                yield j, i


def errors_in(document):
    """How many formula cells there are, and those that show errors: (place, formula, error)."""
    document.calculateAll()
    count, found = 0, []
    for sheet in document.Sheets:
        count += sum(1 for _ in cells_of(sheet.queryContentCells(FORMULA_CELLS)))
        for j, i in cells_of(sheet.queryFormulaCells(ERRORS_ONLY)):
            cell = sheet.getCellByPosition(j, i)
            found.append((cell.AbsoluteName, cell.Formula, error_name(cell.getError())))
    return count, found


OPEN = [('Terms.C17',), ('Terms.B17',), ('Terms.B17', 'Terms.C17'), ('Terms.D17',),
        ('Terms.D11',), ("'Loss ratios'.B8",)]          # cells that may be emptied
WRONG = [('Terms.E8', 1.5, 'the share 1.5 in row 3'), ('Terms.C17', 'none', 'the text "none"'),
         ('Price.B8', 'even', 'the scheme "even"'), ('Price.F6', 'clayton', 'clayton is none of'),
         ("'Loss ratios'.C10", 'lost', 'Loss ratios: data has the text "lost" in row 4, column 2'),
         ('Margins.I8', 'beta', 'Margin, Property: distribution is "beta"'),
         ('Models.B7', -1, 'df is -1'), ('Price.F8', 'some', 'Loadings')]


def place(document, name):
    """The first cell of a named range, or of an address with its sheet."""
    names = document.NamedRanges
    if names.hasByName(name):
        area = names.getByName(name).getReferredCells()
    else:
        sheet, address = name.replace("'", '').split('.')
        area = document.Sheets.getByName(sheet).getCellRangeByName(address)
    return area.getCellByPosition(0, 0)


def changed(document, changes):
    """Puts values into cells, looks at the workbook and puts the old ones back."""
    before = {name: place(document, name).Formula for name in changes}
    for name, value in changes.items():
        if isinstance(value, str):
            place(document, name).setString(value)
        else:
            place(document, name).setValue(value)
    found = errors_in(document)[1]
    seen = [place(document, name).String for name in ('CHECKS_FAILED', 'REASON')]
    for name, formula in before.items():
        place(document, name).setFormula(formula)
    return found, *seen


def changes_of_stop_loss(checks, document):
    for names in OPEN:
        found, failed, reason = changed(document, dict.fromkeys(names, ''))
        checks.check(not found and failed == '0' and not reason, 'stop-loss without %s: %d errors, '
                     '%s checks fail, %s' % (' '.join(names), len(found), failed, reason))
    for name, value, sentence in WRONG:
        found, failed, reason = changed(document, {name: value})
        checks.check(found and sentence in reason, 'stop-loss with %s in %s says %r'
                     % (value, name, reason))
    found, failed, reason = changed(document, {})
    checks.check(not found and failed == '0' and not reason, 'stop-loss is as it was')


def run(checks, office, given):
    paths = sorted(glob.glob(os.path.join(given.sheets, '*.fods')))
    checks.check(paths, 'sample-sheets: there are none')
    for path in paths:
        document = office.open(path)
        count, found = errors_in(document)
        name = os.path.basename(path)
        checks.check(count > 0, '%s: no formulas' % name)
        for place, formula, error in found:
            checks.check(False, '%s: %s %s shows %s' % (name, place, formula, error))
        checks.passed += count - len(found)
        if name == 'stop-loss.fods':
            changes_of_stop_loss(checks, document)
        document.close(True)
