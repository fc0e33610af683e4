"""The sheet of stop_loss.py that works out the same thing in two ways."""

from stop_loss_account import (
    BLOCK, COPULAS, FIRST, LAST, LINES, N, POINTS, figure, opened, section)
from stop_loss_evidence import AREA, FIRST_PAIR, LAST_PAIR, LAST_POINT, YEARS, years_of
from stop_loss_price import block_names


CEDED_YEAR = 2005
MOST = "IF(ISNUMBER(MOST_CEDED);MOST_CEDED;1E+300)"     # without a limit, any amount


def check(book):
    sheet = opened(book, "Check", "Checks", "Each compares two ways of working out one thing",
                   [1.0, 12.5] + [2.9] * 3 + [2.0, 0.6, 4.6, 10.0], 5)
    sheet.row("A5", ["No.", "Check", "value", "expected", "tolerance", "verdict"],
              ["lefthead", "lefthead", "head", "head", "head", "center head"])
    every = dependence_checks() + price_checks() + function_checks()
    for i, (text, value, expected, tolerance, style) in enumerate(every):
        row = 6 + i
        sheet.row("A%d" % row, [i + 1, text, value, expected, tolerance],
                  ["whole left cell", "cell", style + " cell", style + " cell",
                   "whole cell" if tolerance == 0 or isinstance(tolerance, str) else "small cell"])
        sheet.put("F%d" % row, "=IFERROR(IF(ABS(C%d-D%d)<=E%d;\"pass\";\"fail\");\"fail\")"
                  % ((row,) * 3), "verdict")
    last = 5 + len(every)
    sheet.put("B%d" % (last + 2), "Checks that fail", "key")
    sheet.put("C%d" % (last + 2), "=COUNTIF(F6:F%d;\"fail\")" % last, "whole key")
    book.name("CHECKS_FAILED", sheet, "C%d" % (last + 2))
    sheet.put("B%d" % (last + 3), "=JOINT.ABOUT()", "note")
    small_run(sheet, last + 5)
    reasons(sheet)


def dependence_checks():
    on_diagonal = ("(ROW(TAU_COUNTS)-MIN(ROW(TAU_COUNTS))=COLUMN(TAU_COUNTS)"
                   "-MIN(COLUMN(TAU_COUNTS)))")
    ranks = "$'Loss ratios'.H%d:L%d" % (FIRST, LAST)
    first, top = "$'Loss ratios'.B%d:B%d" % (FIRST, LAST), "$'Loss ratios'.%%s%d" % FIRST
    return [
        ("Every observation has a rank", "=COUNT(%s)" % ranks, "=COUNT(LOSS_RATIOS)", 0, "whole"),
        ("Rank of the first year's first line: JOINT.RANKS and RANK.AVG", "=N(%s)" % top % "H",
         "=IF(ISNUMBER(%s);RANK.AVG(%s;%s;1)/(COUNT(%s)+1);0)" % (
             top % "B", top % "B", first, first), 1e-12, "four"),
        ("Pair counts: the diagonal holds every observation",
         "=SUMPRODUCT(TAU_COUNTS*%s)" % on_diagonal, "=COUNT(LOSS_RATIOS)", 0, "whole"),
        ("Tau of property and crop hail: JOINT.TAU and JOINT.TAUGRID",
         "=JOINT.TAU($'Loss ratios'.C%d:C%d;$'Loss ratios'.F%d:F%d)" % ((FIRST, LAST) * 2),
         "=Dependence.F11", 1e-12, "four"),
        ("Its standard error: JOINT.TAUBAND, method free, and JOINT.TAUGRID",
         "=INDEX(JOINT.TAUBAND($'Loss ratios'.C%d:C%d;$'Loss ratios'.F%d:F%d);1;4)" % (
             (FIRST, LAST) * 2), "=Dependence.F20", 1e-12, "four"),
        ("Upper tail of the pair at one half: JOINT.TAILCURVE and JOINT.TAIL",
         "=Evidence.C%d" % LAST_POINT,
         "=INDEX(JOINT.TAIL(%s;%s;\"upper\";0.5);1;1)" % tuple(YEARS), 1e-12, "four"),
        ("The repaired matrix is feasible at the floor",
         "=JOINT.FEASIBLE(CORRELATION;EIGENVALUE_FLOOR)", 1, 0, "whole"),
        ("Its eigenvalues add up to the number of lines", "=SUM(Dependence.C37:C41)", N, 1e-9,
         "four"),
        ("Their product is its determinant", "=PRODUCT(Dependence.C37:C41)",
         "=MDETERM(Dependence.I19:M23)", 1e-9, "four"),
        ("The gumbel copula has the mean tau", "=JOINT.TAUOF(MODEL_GUMBEL)", "=MEAN_TAU", 1e-12,
         "four"),
        ("Tau of the gaussian copula, property and crop hail: 2/pi asin(r)",
         "=INDEX(JOINT.TAUOF(MODEL_GAUSSIAN);2;5)", "=2/PI()*ASIN(Dependence.M20)", 1e-12, "four"),
    ]


def price_checks():
    chosen = "INDEX(PRICE_TABLE;CHOSEN_NUMBER;%d)"
    block = "CHOOSE(CHOSEN_NUMBER;%s)" % ";".join(block_names())

    def lines(first, column):
        return "=SUM(INDEX(%s;%d;%d):INDEX(%s;%d;%d))" % (
            block, first, column, block, first + N - 1, column)

    means = "=SUM(Margins.J7:J%d)" % (6 + N)
    return [
        ("The margins' parameters give back the mean losses (closed forms)",
         "=" + "+".join(closed_mean(18 + i) for i in range(N)), means, 1e-3, "whole"),
        ("Gross mean, simulated and given: within four standard errors", 
         "=" + figure(block, "mean", "gross"), means,
         "=4*" + figure(block, "mean", "gross", error=True), "whole"),
        ("Ceded and retained mean add up to gross",
         "=%s+%s" % (figure(block, "mean"), figure(block, "mean", "retained")),
         "=" + figure(block, "mean", "gross"), 1e-6, "whole"),
        ("The lines' ceded means add up", lines(8, 4), "=" + figure(block, "mean"), 1e-6, "whole"),
        ("The lines' parts of the gross TVaR add up", lines(8 + N, 2),
         "=" + figure(block, "TVaR", "gross"), 1e-6, "whole"),
        ("1 if exhausting is no more frequent than attaching",
         "=IF(ISNUMBER({0});IF({0}<={1};1;0);1)".format(chosen % 5, chosen % 4), 1, 0, "whole"),
        ("1 if TVaR ceded is at least VaR and at most what can be ceded",
         "=IF(AND(%s>=%s;%s<=%s*(1+1E-12));1;0)" % (chosen % 8, chosen % 7, chosen % 8, MOST),
         1, 0, "whole"),
        ("1 if expected ceded is at most P(attach) times the most that can be ceded",
         "=IF(%s<=%s*%s;1;0)" % (chosen % 2, chosen % 4, MOST), 1, 0, "whole"),
    ]


def function_checks():
    ceded = FIRST + CEDED_YEAR - 1986
    areas = ["$'Loss ratios'.A5:S%d" % LAST, "Dependence.A5:M49", "Evidence." + AREA,
             "Models.A4:M40", "Margins.A6:L43",
             "Terms.A6:K25", "$'As if'.A8:P%d" % LAST, "Price.A6:M52", "Blocks.A7:O58",
             "Exceedance.A9:L%d" % (8 + POINTS)]
    return [
        ("Ceded loss of %d: JOINT.CEDE and plain arithmetic" % CEDED_YEAR,
         "=SUM(JOINT.CEDE($'As if'.B%d:F%d;TERMS;STOP_LOSS))" % (ceded, ceded),
         "=$'As if'.J%d" % ceded, 1e-6, "whole"),
        ("PRICE and REPORT of LOSSES of DRAW: largest difference (below)", "=DIFFERENCE", 0, 1e-6,
         "whole"),
        ("JOINT.SELFCHECK: published values met, of those recomputed",
         "=SUMPRODUCT(JOINT.SELFCHECK()&\"\"=\"pass\")", "=ROWS(JOINT.SELFCHECK())-1", 0, "whole"),
        ("Error cells on the other sheets",
         "=" + "+".join("SUMPRODUCT(ISERROR(%s))" % area for area in areas), 0, 0, "whole"),
    ]


def closed_mean(row):
    b, c, d = ("Margins.%s%d" % (column, row) for column in "BCD")
    return ("IF(%s=\"gamma\";%s*%s;IF(%s=\"lognormal\";EXP(%s+N(%s)^2/2);IF(%s=\"weibull\";"
            "%s*GAMMA(1+1/%s);IF(%s=\"lomax\";%s/(%s-1);IF(%s=\"pareto\";%s*%s/(%s-1);%s)))))" % (
                b, c, d, b, c, d, b, d, c, b, d, c, b, c, d, c, c))


def suspects():
    """What can go wrong, from the data on: a name, whether it did, and the sentence for it."""
    def failed(name):
        return "SUMPRODUCT(ISERROR(%s))>0" % name

    def why(*arguments):
        return "JOINT.WHY(%s)" % ";".join(arguments)

    chosen = "CHOOSE(CHOSEN_NUMBER;%s)" % ";".join("MODEL_" + word.upper() for word in COPULAS)
    yield "Copula of the price", "NOT(ISNUMBER(CHOSEN_NUMBER))", (
        "CHOSEN_COPULA&\" is none of: %s\"" % ", ".join(COPULAS))
    yield "Loss ratios", failed("TAU"), why("\"TAUGRID\"", "LOSS_RATIOS")
    yield "Map of the taus", failed("GREINER_MAP"), why("\"GREINER\"", "Dependence.B10:F14")
    yield "Repair", failed("CORRELATION"), why("\"REPAIR\"", "GREINER_MAP", "EIGENVALUE_FLOOR")
    yield "Model t", failed("MODEL_T"), why("\"MODEL\"", "\"t\"", "CORRELATION", "T_DF")
    yield "Theta of gumbel", "ISERROR(GUMBEL_THETA)", why("\"THETA\"", "\"gumbel\"", "MEAN_TAU")
    yield "Earned premiums", "COUNT(Margins.B7:B%d)<%d" % (6 + N, N), "\"one is not a number\""
    for i, line in enumerate(LINES):
        yield "Margin, " + line, failed("Margins.C%d:E%d" % (18 + i, 18 + i)), (
            "IF(COUNT(Margins.J{0}:K{0})<2;\"the mean or standard deviation is not a number\";{1})"
            .format(7 + i, why("\"MOMENTS\"", *("Margins.%s%d" % (c, 7 + i) for c in "IJK"))))
    yield "Chosen price", "ISERROR(INDEX(PRICE_TABLE;CHOSEN_NUMBER;2))", why(
        "\"PRICE\"", chosen, "MARGINS", "TERMS", "STOP_LOSS", "SETTINGS")
    yield "Loadings", "ISERROR(INDEX(PRICE_TABLE;CHOSEN_NUMBER;10))", (
        "\"loading, brokerage and expenses must be numbers, the last two below 100 % together\"")
    yield "Bands of the taus", failed("Evidence.B%d:F%d" % (FIRST_PAIR, LAST_PAIR)), why(
        "\"TAUBAND\"", *(years_of(line) for line in (1, 2)), "BAND_COVERAGE", "BAND_METHOD")
    yield "Lines of the tail", failed("Evidence.L5:L6"), "\"not numbers from 1 to %d\"" % N


def reasons(sheet):
    """The first bad input on the way from the data to the price, in REASON."""
    every = list(suspects())
    sheet.row("H5", ["Where an error can begin", "Finding"], "lefthead")
    for i, (name, failed, sentence) in enumerate(every):
        sheet.row("H%d" % (6 + i), [name, "=IF(%s;IFERROR(%s;\"it reads cells with errors\");"
                                    "\"fine\")" % (failed, sentence)])
    last = 5 + len(every)
    first = "\"\""
    for i in reversed(range(6, last + 1)):
        first = "IF(I%d<>\"fine\";H%d&\": \"&I%d;%s)" % (i, i, i, first)
    sheet.row("H%d" % (last + 2), ["The first of them", "=" + first], "key")
    sheet.row("H%d" % (last + 3), ["Row of the chosen copula",
                                   "=MATCH(CHOSEN_COPULA;INDEX(PRICE_TABLE;0;1);0)"],
              ["cell", "whole left cell"])
    sheet.put("H%d" % (last + 4), "Rows and columns in a sentence are counted within the range "
              "that the function reads, with its head.", "note")
    sheet.book.name("REASON", sheet, "I%d" % (last + 2))
    sheet.book.name("CHOSEN_NUMBER", sheet, "I%d" % (last + 3))


def small_run(sheet, row):
    rows, columns = BLOCK
    section(sheet, "A%d" % row, "A small run both ways, model t")
    sheet.row("B%d" % (row + 1), ["rows", 2000], ["cell", "whole input"])
    sheet.row("B%d" % (row + 2), ["seed", 7], ["cell", "whole input"])
    small = "B%d:C%d" % (row + 1, row + 2)
    run = "JOINT.PRICE(MODEL_T;MARGINS;TERMS;STOP_LOSS;%s)" % small
    report = ("JOINT.REPORT(JOINT.LOSSES(JOINT.DRAW(MODEL_T;C%d;C%d);MARGINS);TERMS;STOP_LOSS)"
              % (row + 1, row + 2))
    sheet.row("B%d" % (row + 4), ["Figure", "PRICE", "REPORT", "difference"],
              ["lefthead"] + ["head"] * 3)
    for i, (word, side) in enumerate(SMALL):
        here = row + 5 + i
        sheet.row("B%d" % here, ["%s, %s" % (word, side), "=" + figure(run, word, side),
                                 "=" + figure(report, word, side), "=D%d-C%d" % (here, here)],
                  ["cell", "four cell", "four cell", "four cell"])
    sheet.book.name("DIFFERENCE", sheet, "E%d" % (row + 5 + len(SMALL)))
    sheet.put("B%d" % (row + 5 + len(SMALL)), "Largest difference", "key")
    sheet.put("E%d" % (row + 5 + len(SMALL)), "=MAX(MAX(E%d:E%d);-MIN(E%d:E%d))" % (
        (row + 5, row + 4 + len(SMALL)) * 2), "four key")


SMALL = [("mean", "gross"), ("mean", "ceded"), ("sd", "ceded"), ("attaching", "ceded"),
         ("VaR", "ceded"), ("TVaR", "ceded"), ("TVaR", "retained")]
