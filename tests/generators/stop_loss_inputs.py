"""The sheets of stop_loss.py that lead from data to models: loss ratios, dependence, models,
margins.
"""

from flat_chart import Chart
from flat_sheet import letters
from stop_loss_account import (
    CHOSEN_DEVIATIONS, CHOSEN_MEANS, COLOURS, COPULAS, DISTRIBUTIONS, FIRST, LAST, LINES,
    LOSS_RATIOS, N, PREMIUMS, REPAIR_NOTE, grid, opened, section, shifted, span)


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
                   [3.9] + [1.9] * N + [0.8] + [3.9] + [1.9] * N)
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
            "JOINT.CLASHES(GREINER_MAP;1), lines by number")
    sheet.row("A46", ["First", "Second", "Third", "lowest eigenv.", "last from", "last to"],
              ["lefthead"] + ["head"] * 5)
    sheet.heights[46] = 0.9
    sheet.array("A47", 1, 6, "=JOINT.CLASHES(GREINER_MAP;1)",
                ["whole left cell", "whole cell", "whole cell"] + ["three cell"] * 3)
    first, second, third = ("INDEX($'Loss ratios'.B7:F7;%s47)" % c for c in "ABC")
    sheet.put("A48", "=IF(A47=0;\"No triple clashes.\";\"With those of \"&%s&\" held, the "
              "correlation of \"&%s&\" and \"&%s&\" can lie\")" % (first, second, third), "note")
    sheet.put("A49", "=IF(A47=0;\"\";\"only from \"&ROUND(E47;2)&\" to \"&ROUND(F47;2)&\"; the map "
              "has \"&ROUND(INDEX(I10:M14;B47;C47);2)&\".\")", "note")


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


def margins(book):
    sheet = opened(book, "Margins", "Margins: one cover year, line by line",
                   "Means and standard deviations from the data unless a choice is entered; "
                   "amounts in thousands", [3.2] + [2.7] * 11)
    section(sheet, "A5", "Moments")
    sheet.row("A6", ["Line", "Earned premium", "Mean, data", "Mean, choice", "Mean, used",
                     "Std dev., data", "Std dev., choice", "Std dev., used", "Distribution",
                     "Mean loss", "Std dev. of the loss", "Variation"],
              ["lefthead"] + ["head"] * 11)
    sheet.heights[6] = 0.95
    for i, line in enumerate(LINES):
        row, statistic = 7 + i, letters(14 + i)
        sheet.row("A%d" % row, [
            "=$'Loss ratios'.%s7" % letters(i + 1), PREMIUMS[i],
            "=$'Loss ratios'.%s11" % statistic, CHOSEN_MEANS[i],
            "=IF(ISNUMBER(D%d);D%d;C%d)" % (row, row, row),
            "=$'Loss ratios'.%s12" % statistic, CHOSEN_DEVIATIONS[i],
            "=IF(ISNUMBER(G%d);G%d;F%d)" % (row, row, row), DISTRIBUTIONS[i],
            "=B%d*E%d" % (row, row), "=B%d*H%d" % (row, row), "=K%d/J%d" % (row, row)],
            ["cell", "whole input", "percent cell", "percent input", "percent cell",
             "percent cell", "percent input", "percent cell", "right input", "whole cell",
             "whole cell", "two cell"])
        book.choice(sheet, "I%d" % row, ["gamma", "lognormal", "weibull", "lomax", "pareto",
                                         "normal"])
    last = 6 + N
    sheet.row("A%d" % (last + 1), ["Total", "=SUM(B7:B%d)" % last], ["key", "whole key"])
    sheet.put("E%d" % (last + 1), "=J%d/B%d" % (last + 1, last + 1), "percent key")
    sheet.put("J%d" % (last + 1), "=SUM(J7:J%d)" % last, "whole key")
    sheet.put("A%d" % (last + 2), "Liability: the mean is chosen above the data, as claims "
              "inflation in the line has run ahead of the index used to bring old years to "
              "today's level.", "note")
    margin_block(sheet)
    distances(sheet)
    likelihoods(sheet)


def margin_block(sheet):
    section(sheet, "A15", "As the functions read them",
            "a, b, c: JOINT.MOMENTS(distribution;mean;sd), the method of moments")
    sheet.row("A17", ["name", "distribution", "a", "b", "c"],
              ["lefthead", "lefthead"] + ["head"] * 3)
    section(sheet, "G15", "What they imply", "JOINT.QUANTILE and JOINT.PROBABILITY, over premium")
    sheet.row("G17", ["1 in 10", "1 in 100", "1 in 200", "P(loss above premium)"], "head")
    sheet.heights[17] = 0.95
    for i in range(N):
        row = 18 + i
        sheet.row("A%d" % row, ["=A%d" % (7 + i), "=I%d" % (7 + i)])
        sheet.array("C%d" % row, 1, 3, "=JOINT.MOMENTS(I%d;J%d;K%d)" % ((7 + i,) * 3), "four cell")
        given = "$B%d;$C%d;$D%d" % (row, row, row)
        sheet.row("G%d" % row, ["=JOINT.QUANTILE(%g;%s)/$B%d" % (p, given, 7 + i)
                                for p in (0.9, 0.99, 0.995)], "percent cell")
        sheet.put("J%d" % row, "=1-JOINT.PROBABILITY($B%d;%s)" % (7 + i, given), "percent2 cell")
    sheet.book.name("MARGINS", sheet, "A17:E%d" % (17 + N))


CANDIDATES = ["gamma", "lognormal", "weibull", "lomax"]


def distances(sheet):
    section(sheet, "A25", "How far from the years are the distributions?",
            "largest difference between JOINT.PROBABILITY, fitted by JOINT.MOMENTS to the data, "
            "and JOINT.RANKS; below about 0.2 it is within chance at forty years")
    sheet.row("A27", ["Line"] + CANDIDATES + ["nearest", "used"], ["lefthead"] + ["head"] * 6)
    for i in range(N):
        row, column = 28 + i, letters(i + 1)
        data = "$'Loss ratios'.%s%d:%s%d" % (column, FIRST, column, LAST)
        sheet.put("A%d" % row, "=A%d" % (7 + i))
        for j, word in enumerate(CANDIDATES):
            sheet.array("%s%d" % (letters(j + 1), row), 1, 1, distance(word, data, 7 + i),
                        "three right cell")
        sheet.put("F%d" % row, "=INDEX(B$27:E$27;MATCH(MIN(B%d:E%d);B%d:E%d;0))" % ((row,) * 4),
                  "right cell")
        sheet.put("G%d" % row, "=I%d" % (7 + i), "right cell")
    sheet.put("A%d" % (28 + N), "Property: the lognormal is as near as the gamma and has the "
              "heavier tail. None: a lomax has a coefficient of variation above 1.", "note")


def distance(word, data, row):
    """Of a distribution fitted by moments from the empirical one, as an array formula."""
    moments = "JOINT.MOMENTS(\"%s\";$C%d;$F%d)" % (word, row, row)
    fitted = "JOINT.PROBABILITY(%s;\"%s\";INDEX(%s;1;1);INDEX(%s;1;2))" % (
        data, word, moments, moments)
    furthest = "MAX(IF(ISNUMBER(%s);ABS(%s-JOINT.RANKS(%s));0))" % (data, fitted, data)
    return "=IF($F%d>$C%d;%s;\"none\")" % (row, row, furthest) if word == "lomax" \
        else "=" + furthest


def likelihoods(sheet):
    section(sheet, "A35", "And by likelihood",
            "AIC of the maximum likelihood fit to the loss ratios, JOINT.MARGINFIT; lower is "
            "better, a difference below about 2 says little")
    sheet.row("A37", ["Line"] + CANDIDATES + ["lowest"], ["lefthead"] + ["head"] * 5)
    for i in range(N):
        row, column = 38 + i, letters(i + 1)
        sheet.put("A%d" % row, "=A%d" % (7 + i))
        for j, word in enumerate(CANDIDATES):
            fit = "INDEX(JOINT.MARGINFIT(\"%s\";$'Loss ratios'.%s%d:%s%d);1;8)" % (
                word, column, FIRST, column, LAST)
            sheet.put("%s%d" % (letters(j + 1), row),
                      "=IF($F%d>$C%d;%s;\"none\")" % (7 + i, 7 + i, fit) if word == "lomax"
                      else "=" + fit, "two right cell")
        sheet.put("F%d" % row, "=INDEX(B$37:E$37;MATCH(MIN(B%d:E%d);B%d:E%d;0))" % ((row,) * 4),
                  "right cell")
