"""The sheet of stop_loss.py that a reviewer of the dependence asks for: how sure each tau is, and
what the years say of the tail of one pair.
"""

from itertools import combinations

from flat_chart import Chart
from flat_sheet import letters
from stop_loss_account import COLOURS, DASHES, FIRST, LAST, N, opened, section

PAIRS = list(combinations(range(1, N + 1), 2))
FIRST_PAIR, LAST_PAIR = 12, 11 + len(PAIRS)    # rows of the bands
CURVE = 16                                     # points of a tail curve: one a year of 32
LIMIT = LAST_PAIR + 7                          # row of the tails in the limit
LAST_POINT = LIMIT + CURVE
SIMULATED = 20000
AREA = "A5:L%d" % (LAST_POINT + 5)             # of the formulas

METHODS = ["free", "binormal", "fisherz", "jackknife", "bootstrap"]


def evidence(book):
    sheet = opened(book, "Evidence", "Evidence for the dependence",
                   "How far each tau may be from its true value, and what the years say of the "
                   "tail of one pair", [3.9] + [2.35] * 11 + [0.6] + [2.0] * 7)
    inputs(book, sheet)
    bands(sheet)
    band_chart(sheet)
    tail(sheet)
    tail_chart(sheet)
    reading(sheet)


def inputs(book, sheet):
    sheet.row("A5", ["Coverage of a band", 0.95], ["cell", "percent input"])
    sheet.row("A6", ["Method", "free"], ["cell", "right input"])
    book.choice(sheet, "B6", METHODS)
    sheet.put("C6", "free: without assuming a distribution", "aside")
    for row, which, line in ((5, "First", 2), (6, "Second", 5)):
        sheet.put("H%d" % row, "%s line of the tail, by number" % which, "cell", span=3)
        sheet.put("K%d" % row, line, "whole input")
        sheet.put("L%d" % row, "=INDEX($'Loss ratios'.B7:F7;K%d)" % row, "aside")
        book.choice(sheet, "K%d" % row, [str(j) for j in range(1, N + 1)])
    sheet.put("H7", "Years that have both", "cell", span=3)
    sheet.put("K7", "=SUMPRODUCT(ISNUMBER(%s)*ISNUMBER(%s))" % tuple(YEARS), "whole cell")
    for name, cell in (("BAND_COVERAGE", "B5"), ("BAND_METHOD", "B6"),
                       ("TAIL_FIRST", "K5"), ("TAIL_SECOND", "K6"), ("TAIL_YEARS", "K7")):
        book.name(name, sheet, cell)


def years_of(line):
    return "$'Loss ratios'.%s$%d:%s$%d" % (letters(line), FIRST, letters(line), LAST)


def bands(sheet):
    section(sheet, "A8", "How sure is each tau?", "JOINT.TAUBAND(x;y;BAND_COVERAGE;BAND_METHOD), "
            "JOINT.TAUTEST(x;y) against independence, and the tau of each copula, in bold where "
            "the band leaves it out")
    heads(sheet, 10, [("Data", 6), ("Tau of the copula", 3), ("Error bars of the chart", 2)],
          ["Pair", "tau", "low", "high", "std error", "years", "p-value", "gaussian, t", "gumbel",
           "independent", "tau - low", "high - tau"])
    for row, (first, second) in enumerate(PAIRS, FIRST_PAIR):
        pair = "%s;%s" % (years_of(first), years_of(second))
        sheet.put("A%d" % row, "=$'Loss ratios'.%s7&\" / \"&$'Loss ratios'.%s7"
                  % (letters(first), letters(second)))
        sheet.array("B%d" % row, 1, 5, "=JOINT.TAUBAND(%s;BAND_COVERAGE;BAND_METHOD)" % pair,
                    ["three key"] + ["three cell"] * 3 + ["whole cell"])
        sheet.row("G%d" % row, [
            "=JOINT.TAUTEST(%s)" % pair, "=INDEX(JOINT.TAUOF(MODEL_T);%d;%d)" % (first, second),
            "=JOINT.TAUOF(MODEL_GUMBEL)", "=JOINT.TAUOF(MODEL_INDEPENDENT)",
            "=B%d-C%d" % (row, row), "=D%d-B%d" % (row, row)],
            ["four cell"] + ["three outside"] * 3 + ["three cell"] * 2)
    left_out(sheet, LAST_PAIR + 1)


def heads(sheet, row, groups, words):
    """Two rows of headings: groups of columns from B on, and each column."""
    sheet.put("A%d" % row, None, "lefthead")
    at = 1
    for text, columns in groups:
        sheet.put("%s%d" % (letters(at), row), text, "center head", span=columns)
        at += columns
    sheet.row("A%d" % (row + 1), words, ["lefthead"] + ["head"] * (len(words) - 1))


def left_out(sheet, row):
    sheet.put("A%d" % row, "Bands that leave it out", "key")
    sheet.row("B%d" % row, [None] * 6, "key")
    low, high = ("%s%d:%s%d" % (c, FIRST_PAIR, c, LAST_PAIR) for c in "CD")
    for letter in "HIJ":
        taus = "%s%d:%s%d" % (letter, FIRST_PAIR, letter, LAST_PAIR)
        sheet.put("%s%d" % (letter, row), "=SUMPRODUCT((%s<%s)+(%s>%s))" % (
            taus, low, taus, high), "whole key")


def stretch(letter, first, last):
    return "Evidence.%s%d:Evidence.%s%d" % (letter, first, letter, last)


def band_chart(sheet):
    chart = Chart("line", "Kendall's tau: bands of the data, and the copulas", "Pair", "tau",
                  x={"axis-label-position": "outside-start"}, size=9,
                  y={"minimum": -1, "maximum": 1, "interval-major": 0.5, "format": "tenths"})

    def add(letter, colour, symbol, around=None):
        chart.add("Evidence.%s%d" % (letter, FIRST_PAIR - 1),
                  stretch("A", FIRST_PAIR, LAST_PAIR), stretch(letter, FIRST_PAIR, LAST_PAIR),
                  colour, symbol=symbol, around=around)
    add("B", COLOURS["gaussian"], "circle",
        [stretch(letter, FIRST_PAIR, LAST_PAIR) for letter in "KL"])
    add("H", COLOURS["t"], "diamond")
    add("I", COLOURS["gumbel"], "horizontal-bar")
    sheet.place(chart, "N2", 14.0, 11.0)


def pair_of(table):
    """The two lines of the tail in a table with a column a line."""
    return ["INDEX(%s;0;TAIL_%s)" % (table, which) for which in ("FIRST", "SECOND")]


YEARS = pair_of("$'Loss ratios'.$B$%d:$F$%d" % (FIRST, LAST))
NAMES = pair_of("$'Loss ratios'.$B$7:$F$7")


def tail(sheet):
    section(sheet, "A%d" % (LIMIT - 4), "=\"The tail of \"&%s&\" and \"&%s" % tuple(NAMES),
            "JOINT.TAILCURVE of the years, and of %s years simulated by JOINT.DRAW; in the limit, "
            "fraction 0, JOINT.TAILOF" % format(SIMULATED, ","))
    heads(sheet, LIMIT - 2, [("Data", 2), ("Upper tail of the copula", 4),
                             ("In years: the worst, and those shared", 5)],
          ["Fraction", "lower tail", "upper tail", "gaussian", "t", "gumbel", "independent",
           "worst", "data", "gaussian", "t", "gumbel"])
    sheet.array("A%d" % (LIMIT + 1), CURVE, 3, "=" + curve(YEARS),
                ["three left cell", "three cell", "three key"])
    limits(sheet)
    for letter, word in zip("DEF", ("gaussian", "t", "gumbel")):
        drawn = "JOINT.DRAW(MODEL_%s;%d;INDEX(SETTINGS;2;2))" % (word.upper(), SIMULATED)
        sheet.array("%s%d" % (letter, LIMIT + 1), CURVE, 1,
                    "=INDEX(%s;0;3)" % curve(pair_of(drawn)), "three cell")
    for row in range(LIMIT + 1, LAST_POINT + 1):
        sheet.row("G%d" % row, ["=A%d" % row, "=MAX(1;ROUND(A%d*TAIL_YEARS;0))" % row]
                  + ["=$H%d*%s%d" % (row, letter, row) for letter in "CDEF"],
                  ["three cell", "whole cell", "whole key"] + ["two cell"] * 3)


def curve(pair):
    return "JOINT.TAILCURVE(%s;%s;%d)" % (*pair, CURVE)


def limits(sheet):
    each = "=JOINT.TAILOF(MODEL_%s;\"upper\")"
    matrix = "=INDEX(JOINT.TAILOF(MODEL_%s;\"upper\");TAIL_FIRST;TAIL_SECOND)"
    sheet.row("A%d" % LIMIT, [0, None, None, matrix % "GAUSSIAN", matrix % "T", each % "GUMBEL",
                              each % "INDEPENDENT", None, None, None, None, None],
              ["three left cell"] + ["three cell"] * 11)


def tail_chart(sheet):
    chart = Chart("scatter", "Tail dependence at a fraction of the years", "Fraction of years",
                  "Share of them in the tail of both",
                  x={"minimum": 0, "maximum": 0.5, "interval-major": 0.1, "format": "tenths"},
                  y={"minimum": 0, "maximum": 1, "interval-major": 0.2, "format": "tenths"},
                  size=9)
    for letter, colour, line, symbol in (
            ("C", "#1c2833", "solid", "circle"), ("B", COLOURS["independent"], None, "diamond"),
            ("D", COLOURS["gaussian"], DASHES["gaussian"], None),
            ("E", COLOURS["t"], DASHES["t"], None),
            ("F", COLOURS["gumbel"], DASHES["gumbel"], None),
            ("G", COLOURS["independent"], DASHES["independent"], None)):
        chart.add("Evidence.%s%d" % (letter, LIMIT - 1), stretch("A", LIMIT, LAST_POINT),
                  stretch(letter, LIMIT, LAST_POINT), colour, line, symbol)
    sheet.place(chart, "N%d" % (LIMIT - 4), 14.0, 13.2)


def reading(sheet):
    top, quarter = LAST_POINT + 2, LIMIT + CURVE // 2
    section(sheet, "A%d" % top, "Reading")
    half = "INDEX(JOINT.TAIL(%s;%s;\"upper\";0.5);1;2)" % tuple(YEARS)
    for i, text in enumerate((
            "=\"Bands. Each is for its pair alone. Zero lies in \"&({0}-J{1})&\" of {0} bands; "
            "were no lines dependent, about one p-value below 0.1 would come by chance. The one "
            "tau that a gumbel copula gives all pairs lies outside \"&I{1}&\".\"".format(
                len(PAIRS), LAST_PAIR + 1),
            "=\"Tail. Of the \"&H{0}&\" worst years of each line out of \"&TAIL_YEARS&\", \"&"
            "ROUND(I{0};0)&\" are shared. The gaussian copula expects \"&ROUND(J{0};1)&\", the t "
            "\"&ROUND(K{0};1)&\": too little apart for so few years to choose, although in the "
            "limit one has \"&ROUND(D{1};2)&\" and the other \"&ROUND(E{1};2)&\".\"".format(
                quarter, LIMIT),
            "=\"Left of that the curve of the data moves in steps of one year, and no standard "
            "error is given under ten shared years\"&IF(ISNUMBER(%s);\"; at one half it is \"&"
            "ROUND(%s;2);\"\")&\". The tail of the copula remains a judgement: see the price by "
            "copula.\"" % (half, half))):
        sheet.put("A%d" % (top + 1 + i), text, "caution", span=12)
        sheet.heights[top + 1 + i] = 1.05
