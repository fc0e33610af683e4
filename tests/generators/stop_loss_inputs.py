"""The sheets of stop_loss.py that lead from data to models: loss ratios, dependence, models."""

from flat_chart import Chart
from flat_sheet import letters
from stop_loss_account import (
    COLOURS, COPULAS, FIRST, LAST, LINES, LOSS_RATIOS, N, REPAIR_NOTE, grid, opened, section,
    shifted, span)


def loss_ratios(book):
    sheet = opened(book, "Loss ratios", "Loss ratios",
                   "Ultimate losses over earned premium, at the rate level and exposure of the "
                   "cover year", [1.5] + [1.9] * N + [0.5] + [1.9] * N + [0.6, 4.4] + [2.0] * N, 7)
    sheet.put("A5", "By year (input)", "section")
    sheet.put("H5", "Scaled ranks r/(n+1)", "section")
    data = "B%d:F%d" % (FIRST, LAST)
    sheet.put("H6", "JOINT.RANKS(%s)" % data, "note")
    sheet.put("A6", "an empty cell is a gap: the line was not written, or the record is lost",
              "note")
    sheet.put("A7", "Year", "lefthead")
    sheet.row("B7", LINES, "head")
    sheet.row("H7", ["=%s7" % letters(j + 1) for j in range(N)], "head")
    for i, (year, *ratios) in enumerate(LOSS_RATIOS):
        sheet.put("A%d" % (FIRST + i), year, "year left cell")
        sheet.row("B%d" % (FIRST + i), ratios, "percent input")
    sheet.array("H%d" % FIRST, len(LOSS_RATIOS), N, "=JOINT.RANKS(%s)" % data, "three cell")
    sheet.book.name("LOSS_RATIOS", sheet, "B7:F%d" % LAST)
    statistics(sheet)
    x, y = "'Loss ratios'.I%d:'Loss ratios'.I%d", "'Loss ratios'.L%d:'Loss ratios'.L%d"
    chart = Chart("scatter", "Property and crop hail, scaled ranks", "Property", "Crop hail",
                  x={"minimum": 0, "maximum": 1, "interval-major": 0.2, "format": "tenths"},
                  y={"minimum": 0, "maximum": 1, "interval-major": 0.2, "format": "tenths"},
                  legend=False, size=10)
    chart.add("'Loss ratios'.L7", x % (FIRST, LAST), y % (FIRST, LAST), COLOURS["t"],
              symbol="circle")
    sheet.place(chart, "N19", 14.4, 12.8)


def statistics(sheet):
    sheet.put("N5", "In figures", "section")
    sheet.put("N7", None, "lefthead")
    sheet.row("O7", ["=%s7" % letters(j + 1) for j in range(N)], "head")
    rows = [("Years observed", "=COUNT(%s)", "whole"),
            ("Gaps", "=ROWS(%s)-COUNT(%s)", "whole"),
            ("Years tied with another", "=SUMPRODUCT((COUNTIF(%s;%s)>1)*ISNUMBER(%s))", "whole"),
            ("Mean", "=AVERAGE(%s)", "percent"),
            ("Standard deviation", "=STDEV(%s)", "percent"),
            ("Coefficient of variation", "=O12/O11", "three"),
            ("Lowest", "=MIN(%s)", "percent"),
            ("Highest", "=MAX(%s)", "percent"),
            ("Years above 100 %", "=COUNTIF(%s;\">1\")", "whole")]
    for i, (label, formula, style) in enumerate(rows):
        row = FIRST + i
        sheet.put("N%d" % row, label)
        for j in range(N):
            data = "%s$%d:%s$%d" % (letters(j + 1), FIRST, letters(j + 1), LAST)
            text = formula.replace("%s", data).replace("O1", letters(14 + j) + "1")
            sheet.put("%s%d" % (letters(14 + j), row), text, style + " cell")


def dependence(book):
    sheet = opened(book, "Dependence", "Dependence between the lines",
                   "From pairwise Kendall's tau to a correlation matrix that can be drawn from",
                   [3.9] + [2.2] * N + [0.8] + [3.9] + [2.2] * N)
    sheet.put("A5", "Floor for eigenvalues", "cell")
    sheet.put("B5", 0.01, "three input")
    book.name("EIGENVALUE_FLOOR", sheet, "B5")
    grid(sheet, "A7", "Kendall's tau, each pair on the years it has",
         "=JOINT.TAUGRID(LOSS_RATIOS)", "three cell", "TAU")
    grid(sheet, "A16", "Standard error of tau",
         "=JOINT.TAUGRID(LOSS_RATIOS;\"pairs\";;\"error\")", "three cell")
    grid(sheet, "A25", "Years behind each pair",
         "=JOINT.TAUGRID(LOSS_RATIOS;\"pairs\";;\"count\")", "whole cell")
    book.name("TAU_COUNTS", sheet, "B28:F32")
    grid(sheet, "H7", "Correlation of an elliptical copula with these taus",
         "=JOINT.GREINER(B10:F14)", "three cell", "GREINER_MAP")
    grid(sheet, "H16", "Nearest matrix with every eigenvalue at or above the floor",
         "=JOINT.REPAIR(GREINER_MAP;EIGENVALUE_FLOOR)", "three cell", "CORRELATION")
    grid(sheet, "H25", "Moved by the repair (0.02 and more in bold)", "=I19:M23-I10:M14",
         "three change")
    sheet.put("H26", "repaired less mapped", "note")
    eigenvalues(sheet)
    section(sheet, "H34", "Note on the repair", "JOINT.REPAIRNOTE(GREINER_MAP;EIGENVALUE_FLOOR)")
    sheet.array("H36", *REPAIR_NOTE, "=JOINT.REPAIRNOTE(GREINER_MAP;EIGENVALUE_FLOOR)",
                lambda i, j: "cell" if not j else
                "four cell" if i not in (4, 5, 6) and j == 1 else "whole cell")
    sheet.put("L39", "=IF(N(J39)=0;\"\";%s&\", \"&%s)" % tuple(
        "INDEX($'Loss ratios'.B7:F7;%s39)" % column for column in "JK"), "aside")
    worst_triple(sheet)


def eigenvalues(sheet):
    section(sheet, "A34", "Feasible?", "JOINT.EIGEN and JOINT.FEASIBLE, before and after")
    sheet.row("A36", ["Eigenvalue", "mapped", "repaired"], ["lefthead", "head", "head"])
    for i in range(N):
        sheet.put("A%d" % (37 + i), i + 1, "whole left cell")
    sheet.array("B37", N, 1, "=JOINT.EIGEN(GREINER_MAP)", "four cell")
    sheet.array("C37", N, 1, "=JOINT.EIGEN(CORRELATION)", "four cell")
    sheet.put("A42", "Feasible")
    for column, name in (("B", "GREINER_MAP"), ("C", "CORRELATION")):
        sheet.put(column + "42", "=IF(JOINT.FEASIBLE(%s)=1;\"yes\";\"no\")" % name,
                  "right key")


def worst_triple(sheet):
    section(sheet, "A44", "Worst triple that cannot stand together",
            "JOINT.CLASHES(GREINER_MAP;1), by name")
    sheet.row("A46", ["First", "Second", "Third", "lowest eigenvalue", "last from", "last to"],
              ["lefthead"] + ["head"] * 5)
    sheet.heights[46] = 0.9
    each = ["INDEX(JOINT.CLASHES(GREINER_MAP;1);1;%d)" % k for k in range(1, 7)]
    sheet.row("A47", ["=IF(%s=0;\"none\";INDEX($'Loss ratios'.B7:F7;%s))" % (number, number)
                      for number in each[:3]] + ["=" + number for number in each[3:]],
              ["cell", "right cell", "right cell"] + ["three cell"] * 3)
    sheet.put("A48", "=IF(%s=0;\"No triple clashes.\";\"With those of \"&A47&\" held, the "
              "correlation of \"&B47&\" and \"&C47&\" can lie\")" % each[0], "note")
    sheet.put("A49", "=IF(%s=0;\"\";\"only from \"&ROUND(E47;2)&\" to \"&ROUND(F47;2)&\"; the map "
              "has \"&ROUND(INDEX(I10:M14;%s;%s);2)&\".\")" % tuple(each[:3]), "note")


def models(book):
    sheet = opened(book, "Models", "Models of dependence",
                   "Four copulas from the same data: what differs most between them is the tail",
                   [5.2] + [2.2] * N + [0.8] + [3.4] + [2.2] * N)
    section(sheet, "A4", "Parameters")
    sheet.put("A5", "Mean tau of all pairs")
    sheet.put("B5", "=(SUM(Dependence.B10:F14)-%d)/%d" % (N, N * (N - 1)), "three cell")
    sheet.put("A6", "theta of the gumbel copula")
    sheet.put("B6", "=JOINT.THETA(\"gumbel\";MEAN_TAU)", "three cell")
    sheet.put("A7", "Degrees of freedom of the t")
    sheet.put("B7", 4, "two input")
    sheet.put("C6", "JOINT.THETA(\"gumbel\";MEAN_TAU): one theta for all pairs", "aside")
    for name, cell in (("MEAN_TAU", "B5"), ("GUMBEL_THETA", "B6"), ("T_DF", "B7")):
        book.name(name, sheet, cell)
    for where, word in zip(("A9", "H9", "A22", "H22"), COPULAS):
        model(sheet, where, word)
    implied(sheet)


MODELS = {
    "gaussian": ("=JOINT.MODEL(\"gaussian\";CORRELATION)", 8, N + 1),
    "t": ("=JOINT.MODEL(\"t\";CORRELATION;T_DF)", 9, N + 1),
    "gumbel": ("=JOINT.MODEL(\"gumbel\";GUMBEL_THETA;;;%d)" % N, 3, 2),
    "independent": ("=JOINT.MODEL(\"independent\";;;;%d)" % N, 2, 2),
}


def model(sheet, where, word):
    formula, rows, columns = MODELS[word]
    section(sheet, where, "The %s copula" % word, formula[1:])
    matrix = rows - N

    def style(i, j):
        if j == 0:
            return "cell"
        return "three right cell" if i >= matrix and columns > 2 or i == 2 and columns == 2 \
            else "right cell"
    sheet.array(shifted(where, 2), rows, columns, formula, style)
    sheet.book.name("MODEL_" + word.upper(), sheet, span(shifted(where, 2), rows, columns))


def implied(sheet):
    """What each copula implies for the pair that drives the tail."""
    section(sheet, "A29", "What they imply for property and crop hail",
            "JOINT.TAUOF(model), JOINT.TAILOF(model;\"upper\")")
    sheet.row("A31", ["Copula", "tau", "upper tail"], ["lefthead", "head", "head"])
    for i, word in enumerate(COPULAS):
        row = 32 + i
        sheet.put("A%d" % row, word)
        for column, function in (("B", "TAUOF(MODEL_%s)"), ("C", "TAILOF(MODEL_%s;\"upper\")")):
            call = "JOINT." + function % word.upper()
            sheet.put("%s%d" % (column, row), "=INDEX(%s;2;5)" % call if word in (
                "gaussian", "t") else "=" + call, "three cell")
    pair = "$'Loss ratios'.C%d:C%d;$'Loss ratios'.F%d:F%d" % ((FIRST, LAST) * 2)
    sheet.put("A36", "data; worst quarter of years")
    sheet.put("B36", "=JOINT.TAU(%s)" % pair, "three cell")
    sheet.put("C36", "=INDEX(JOINT.TAIL(%s;\"upper\";0.25);1;1)" % pair, "three cell")
    sheet.put("D36", "=\"at a quarter, not in the limit; \"&INDEX(JOINT.TAIL(%s;\"upper\";0.25);"
              "1;3)&\" years in common\"" % pair, "aside")
    sheet.put("D32", "Upper tail: the chance that one line is in its worst years, given that",
              "aside")
    sheet.put("D33", "the other is, in the limit. A gaussian copula has none, whatever its tau.",
              "aside")
