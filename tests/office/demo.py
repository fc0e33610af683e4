"""Recalculates the sample workbook in a headless office, looks at every formula cell for errors,
prints the price table, and writes the workbook as PDF and its price sheet as CSV.

    tests/office/demo.py --out build sample-sheets/stop-loss.fods
"""
import argparse
import csv
import os
import shutil
import sys
import textwrap

import office
from test_sheets import errors_in

PRICE_SHEET, PRICE_TABLE = 'Price', 'PRICE_TABLE'


def print_table(rows):
    """Columns of equal width, headings broken into lines, all but the first to the right."""
    headings, *body = rows
    widths = [max(len(t) for t in column) for column in zip(*body)]
    widths = [max([w] + [len(word) for word in h.split()]) for w, h in zip(widths, headings)]
    broken = [textwrap.wrap(h, w) for h, w in zip(headings, widths)]
    tall = max(map(len, broken))
    for line in zip(*([''] * (tall - len(lines)) + lines for lines in broken)):
        print_line(line, widths)
    for line in body:
        print_line(line, widths)


def print_line(texts, widths):
    others = [t.rjust(w) for t, w in zip(texts[1:], widths[1:])]
    print('  '.join([texts[0].ljust(widths[0])] + others).rstrip())


def table_of(document):
    """The named range with the row of headings above it, as the cells show it."""
    area = document.NamedRanges.getByName(PRICE_TABLE).getReferredCells()
    place = area.getRangeAddress()
    return [[area.Spreadsheet.getCellByPosition(j, i).String
             for j in range(place.StartColumn, place.EndColumn + 1)]
            for i in range(max(place.StartRow - 1, 0), place.EndRow + 1)]


def write_csv(sheet, path):
    cursor = sheet.createCursor()
    cursor.gotoEndOfUsedArea(False)
    last = cursor.getRangeAddress()
    area = sheet.getCellRangeByPosition(0, 0, last.EndColumn, last.EndRow)
    with open(path, 'w', newline='', encoding='utf-8') as out:
        csv.writer(out).writerows(area.getDataArray())


def show(running, workbook, folder):
    """Returns how many formula cells show errors."""
    document = running.open(workbook)
    count, found = errors_in(document)
    print('%s: %d formula cells in %d sheets' % (workbook, count, len(document.Sheets)))
    for place, formula, error in found:
        print('  %s %s shows %s' % (place, formula, error))
    if not found and count:
        print()
        print_table(table_of(document))
        print()
        base = os.path.join(folder, os.path.splitext(os.path.basename(workbook))[0])
        running.store(document, base + '.pdf', 'calc_pdf_Export')
        write_csv(document.Sheets.getByName(PRICE_SHEET), base + '.csv')
        print('wrote %s.pdf and %s.csv' % (os.path.relpath(base), os.path.relpath(base)))
    document.close(True)
    return len(found) if count else 1


def main():
    parser = argparse.ArgumentParser()
    parser.add_argument('--out', required=True)
    parser.add_argument('workbook')
    given = parser.parse_args()
    folder = os.path.join(given.out, 'demo')
    shutil.rmtree(folder, ignore_errors=True)
    profile = os.path.join(folder, 'profile')
    office.add_extension(profile, os.path.join(given.out, 'jointsheet.oxt'))
    with office.Office(profile, {'LC_ALL': 'C.UTF-8'}) as running:
        errors = show(running, given.workbook, folder)
    if errors:
        print('FAILED: the workbook does not calculate', file=sys.stderr)
    return 1 if errors else 0


sys.exit(main())
