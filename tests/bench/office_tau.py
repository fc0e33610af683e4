"""What a cell costs in the office: JOINT.TAU of two columns of 1,000 rows, the same double loop as
users have it in a Basic macro, and a function that does nothing with the same arguments.

    tests/bench/office_tau.py OUT        OUT/bench-build/jointsheet.oxt has the function noop
"""
import os
import random
import shutil
import sys
import time

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), '..', 'office'))
import office

ROWS, CELLS, MACRO_CELLS = 1000, 200, 2

MACRO = '''
Function BasicTau(x, y) As Double
    Dim n As Long, i As Long, j As Long, s As Double, a As Double, b As Double
    Dim tied_x As Double, tied_y As Double, pairs As Double
    n = UBound(x, 1)
    For i = 1 To n - 1
        For j = i + 1 To n
            a = x(j, 1) - x(i, 1)
            b = y(j, 1) - y(i, 1)
            s = s + Sgn(a) * Sgn(b)
            If a = 0 Then tied_x = tied_x + 1
            If b = 0 Then tied_y = tied_y + 1
        Next
    Next
    pairs = n * (n - 1) / 2
    BasicTau = s / Sqr((pairs - tied_x) * (pairs - tied_y))
End Function
'''


def with_macro(running, folder):
    """An empty workbook with the macro in it, opened so that it may run."""
    path = os.path.join(folder, 'macro.ods')
    document = running.new_sheet()
    libraries = document.BasicLibraries
    if not libraries.hasByName('Standard'):
        libraries.createLibrary('Standard')
    libraries.getByName('Standard').insertByName('Module1', MACRO)
    running.store(document, path, 'calc8')
    document.close(True)
    return running.desktop.loadComponentFromURL(
        office.url(path), '_blank', 0,
        (office.prop('Hidden', True), office.prop('MacroExecutionMode', 4)))


def fill(sheet):
    rnd = random.Random(1)
    rows = []
    for _ in range(ROWS + CELLS):
        x = rnd.gauss(0, 1)
        rows.append((x, x + rnd.gauss(0, 1)))
    sheet.getCellRangeByPosition(0, 0, 1, len(rows) - 1).setDataArray(tuple(rows))


def seconds_a_cell(document, formula, cells):
    """Recalculates that many cells, each over a window of its own; the best of three."""
    sheet = document.Sheets[0]
    area = sheet.getCellRangeByPosition(3, 0, 3, cells - 1)
    area.setFormulaArray(tuple((formula.format(i + 1, i + ROWS),) for i in range(cells)))
    taken = []
    for _ in range(3):
        start = time.perf_counter()
        document.calculateAll()
        taken.append(time.perf_counter() - start)
    result = sheet.getCellByPosition(3, 0)
    if result.getError():
        raise SystemExit('%s shows error %d' % (formula, result.getError()))
    value = result.Value
    area.clearContents(1 | 2 | 4 | 16)
    return min(taken) / cells, value


def main(out):
    folder = os.path.join(out, 'bench-office')
    shutil.rmtree(folder, ignore_errors=True)
    os.makedirs(folder)
    profile = os.path.join(folder, 'profile')
    office.add_extension(profile, os.path.join(out, 'bench-build', 'jointsheet.oxt'))
    with office.Office(profile, {'LC_ALL': 'C.UTF-8'}) as running:
        document = with_macro(running, folder)
        fill(document.Sheets[0])
        columns = '(A{0}:A{1};B{0}:B{1})'
        own, tau = seconds_a_cell(document, '=ORG.JOINTSHEET.FUNCTIONS.TAU' + columns, CELLS)
        nothing, _ = seconds_a_cell(document, '=ORG.JOINTSHEET.FUNCTIONS.NOOP' + columns, CELLS)
        macro, macro_tau = seconds_a_cell(document, '=BASICTAU' + columns, MACRO_CELLS)
        document.close(True)
    if abs(tau - macro_tau) > 1e-12:
        raise SystemExit('JOINT.TAU gives %r, the macro %r' % (tau, macro_tau))
    print('tau of 2 x %d cells, recalculated in the office, a cell of the sheet:' % ROWS)
    for name, taken in (('JOINT.TAU', own), ('nothing done', nothing), ('Basic macro', macro)):
        print('  %-14s %12.1f us   %10.1f x JOINT.TAU' % (name, taken * 1e6, taken / own))
    print('  %-14s %12.1f us' % ('tau itself', (own - nothing) * 1e6))


main(sys.argv[1])
