"""The sample sheets: every formula cell of every sheet is recalculated and shows no error."""
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
        document.close(True)
