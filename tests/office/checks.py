"""Counting checks, and a sheet to evaluate formulas in."""
import re

ERRORS = {'#VALUE!': 519, '#NUM!': 503, '#DIV/0!': 532, '#N/A': 32767, 'Err:523': 523,
          'Err:514': 514, 'Err:504': 504}
NAMES = {code: name for name, code in ERRORS.items()}
SERVICE = 'ORG.JOINTSHEET.FUNCTIONS.'


class Checks:
    """Every check counts; one that fails says why in a line."""

    def __init__(self):
        self.passed = 0
        self.failed = 0

    def check(self, good, sentence):
        if good:
            self.passed += 1
        else:
            self.failed += 1
            print('FAILED ' + sentence, flush=True)
        return good


def error_name(code):
    return NAMES.get(code, 'Err:%d' % code)


def shown(cell):
    """What a formula cell gives: an error's name, a text, or a number."""
    code = cell.getError()
    if code:
        return error_name(code)
    from com.sun.star.table.CellContentType import TEXT
    from com.sun.star.sheet.FormulaResult import STRING
    if cell.Type == TEXT or cell.FormulaResultType2 == STRING:
        return cell.String
    return cell.Value


def close(a, b, tolerance=1e-9):
    return abs(a - b) <= tolerance * max(1.0, abs(a), abs(b))


def same(given, expected):
    """expected is text from a table: a number, a text or an error's name."""
    if isinstance(given, float):
        try:
            return close(given, float(expected))
        except ValueError:
            return False
    return given == expected


class Desk:
    """A document in which formulas are put into one cell, as a user in en-US would type them."""

    def __init__(self, office):
        self.document = office.new_sheet()
        self.sheets = self.document.Sheets
        self.sheets[0].Name = 'Work'
        self.cell = self.sheets[0].getCellByPosition(0, 0)

    def evaluate(self, formula):
        self.cell.FormulaLocal = formula
        result = shown(self.cell)
        self.cell.String = ''
        return result

    def matrix(self, formula, rows, columns):
        """A formula entered over a block, as with Ctrl+Shift+Enter: rows of values."""
        block = self.sheets[0].getCellRangeByPosition(2, 2, 1 + columns, 1 + rows)
        block.setArrayFormula(to_stored(self, formula))
        values = [[shown(block.getCellByPosition(j, i)) for j in range(columns)]
                  for i in range(rows)]
        block.clearContents(1 | 2 | 4 | 16)
        return values

    def close(self):
        self.document.close(True)


def to_stored(desk, formula):
    """The same formula with the names under which files hold it."""
    desk.cell.FormulaLocal = formula
    stored = desk.cell.Formula
    desk.cell.String = ''
    return stored


def read_rows(path):
    """The rows of a table separated by tabs, without blank lines and those that begin with #."""
    with open(path, encoding='utf-8') as lines:
        for line in lines:
            line = line.rstrip('\n')
            if line.strip() and not line.startswith('#'):
                yield line.split('\t')


def first_call(formula, name):
    """The arguments of the first call of JOINT.NAME in a formula, or None."""
    start = re.search(r'\bJOINT\.%s\(' % name.upper(), formula)
    if not start:
        return None
    arguments, depth, quoted, word = [], 0, False, ''
    for c in formula[start.end():]:
        if c == '"':
            quoted = not quoted
        if not quoted:
            if c in '({':
                depth += 1
            elif c in ')}' and depth > 0:
                depth -= 1
            elif c == ')':
                return arguments + [word] if arguments or word else []
            elif c == ';' and depth == 0:
                arguments.append(word)
                word = ''
                continue
        word += c
    return None
