"""The cells that the formulas of errors.tsv and of the sweep refer to, by name.

x y          columns of 12 numbers           short      the first 11 of x
headed       x below a header                gappy      x with two blank cells
blanks       12 blank cells                  constant   12 times the same number
wordy        x with n/a in row 7             texted     x with the text "5" in row 5
commaed      x with the text "5,5" in row 1  one_row    x as one row
cell blank word_cell                         one number, one blank cell, one text
data         12 rows of 3 lines              headed_data  the same below names
gappy_data   data with three blank cells     wordy_data   data with a text in row 3, column 2
constant_data  data with a constant line     first_rows   its first 2 rows
matrix       3 x 3 correlations              broken     the same, not symmetric
impossible   3 x 3, not feasible             wide       2 x 3 numbers
uniforms     12 rows of 3 in (0;1)           outside    the same with 1.5 in row 4, column 2
margins      3 lines of a distribution       terms      3 lines: excess, limit, share
faulty       x with an error cell in row 4
long_x long_y  whole columns that begin with x and y
long_data      three whole columns that begin with data
long_uniforms  three whole columns that begin with uniforms
"""
import random

X = [2.1, 3.4, 1.2, 5.6, 4.3, 7.7, 6.5, 9.2, 8.8, 10.4, 12.5, 11.1]
Y = [1.0, 2.6, 1.9, 4.1, 5.2, 6.0, 7.9, 7.1, 9.5, 8.4, 11.2, 12.8]
Z = [30.0, 12.0, 25.0, 18.0, 22.0, 8.0, 15.0, 27.0, 10.0, 20.0, 5.0, 14.0]

MATRIX = [[1, 0.3, 0.2], [0.3, 1, 0.1], [0.2, 0.1, 1]]
BROKEN = [[1, 0.3, 0.2], [0.4, 1, 0.1], [0.2, 0.1, 1]]
IMPOSSIBLE = [[1, 0.9, -0.9], [0.9, 1, 0.9], [-0.9, 0.9, 1]]
MARGINS = [['gamma', 2, 1000], ['lognormal', 7, 0.8], ['exponential', 1500]]
TERMS = [[500, 1000, 1], [0, 2000, 0.5], [1000, '', 0.8]]


def replaced(values, **at):
    return [at.get('at%d' % (i + 1), v) for i, v in enumerate(values)]


def column(values):
    return [[v] for v in values]


def blocks():
    data = [list(row) for row in zip(X, Y, Z)]
    rnd = random.Random(7)
    uniforms = [[round(rnd.uniform(0.05, 0.95), 4) for _ in range(3)] for _ in range(12)]
    outside = [row[:] for row in uniforms]
    outside[3][1] = 1.5
    gappy_data = [row[:] for row in data]
    gappy_data[1][0] = gappy_data[4][2] = gappy_data[9][1] = ''
    wordy_data = [row[:] for row in data]
    wordy_data[2][1] = 'n/a'
    return {
        'x': column(X), 'y': column(Y), 'short': column(X[:11]),
        'headed': column(['motor'] + X), 'gappy': column(replaced(X, at3='', at8='')),
        'blanks': column([''] * 12), 'constant': column([4.0] * 12),
        'wordy': column(replaced(X, at7='n/a')), 'texted': column(replaced(X, at5="'5")),
        'commaed': column(["'5,5"] + X[1:]), 'one_row': [X],
        'cell': [[0.5]], 'blank': [['']], 'word_cell': [['motor']],
        'data': data, 'headed_data': [['motor', 'property', 'cargo']] + data,
        'gappy_data': gappy_data, 'wordy_data': wordy_data,
        'constant_data': [[row[0], 3.0, row[2]] for row in data], 'first_rows': data[:2],
        'matrix': MATRIX, 'broken': BROKEN, 'impossible': IMPOSSIBLE, 'wide': MATRIX[:2],
        'faulty': column(replaced(X, at4='=1/0')),
        'uniforms': uniforms, 'outside': outside, 'margins': MARGINS, 'terms': TERMS,
    }


def put(cell, v):
    if isinstance(v, str):
        if v.startswith("'"):
            cell.String = v[1:]
        elif v.startswith('='):
            cell.Formula = v
        elif v:
            cell.String = v
    else:
        cell.Value = v


def name_range(document, name, content):
    from com.sun.star.table import CellAddress
    document.NamedRanges.addNewByName(name, content, CellAddress(), 0)


def lay_out(document):
    """Puts the blocks into a sheet of their own, one below the other, and names them."""
    document.Sheets.insertNewByName('Cells', 1)
    document.Sheets.insertNewByName('Long', 2)
    sheet = document.Sheets.getByName('Cells')
    top = 0
    for name, rows in blocks().items():
        width = max(map(len, rows))
        for i, row in enumerate(rows):
            for j, v in enumerate(row):
                put(sheet.getCellByPosition(j, top + i), v)
        area = sheet.getCellRangeByPosition(0, top, width - 1, top + len(rows) - 1)
        name_range(document, name, area.AbsoluteName)
        top += len(rows) + 1
    sheet = document.Sheets.getByName('Long')
    for i, row in enumerate(zip(X, Y, Z, *zip(*blocks()['uniforms']))):
        for j, v in enumerate(row):
            sheet.getCellByPosition(j, i).Value = v
    name_range(document, 'long_x', '$Long.$A$1:$A$1048576')
    name_range(document, 'long_y', '$Long.$B$1:$B$1048576')
    name_range(document, 'long_data', '$Long.$A$1:$C$1048576')
    name_range(document, 'long_uniforms', '$Long.$D$1:$F$1048576')
