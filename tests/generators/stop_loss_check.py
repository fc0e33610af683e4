"""The sheet of stop_loss.py that works out the same thing in two ways."""

from stop_loss_account import (
    BLOCK, COPULAS, FIRST, LAST, N, POINTS, figure, opened, section)
from stop_loss_evidence import AREA, LAST_POINT, YEARS
from stop_loss_price import block_names


CEDED_YEAR = 2005
MOST = "IF(ISNUMBER(MOST_CEDED);MOST_CEDED;1E+300)"     # without a limit, any amount


def check(book):
    sheet = opened(book, "Check", "Checks", "Each compares two ways of working out one thing",
                   [1.0, 12.5] + [2.9] * 3 + [2.0], 5)
    sheet.row("A5", ["No.", "Check", "value", "expected", "tolerance", "verdict"],
              ["lefthead", "lefthead", "head", "head", "head", "center head"])
    every = dependence_checks() + price_checks() + function_checks()
    for i, (text, value, expected, tolerance, style) in enumerate(every):
        row = 6 + i
        sheet.row("A%d" % row, [i + 1, text, value, expected, tolerance],
                  ["whole left cell", "cell", style + " cell", style + " cell",
                   "small cell" if tolerance else "whole cell"])
        sheet.put("F%d" % row, "=IFERROR(IF(ABS(C%d-D%d)<=E%d;\"pass\";\"fail\");\"fail\")"
                  % ((row,) * 3), "verdict")
    last = 5 + len(every)
    sheet.put("B%d" % (last + 2), "Checks that fail", "key")
    sheet.put("C%d" % (last + 2), "=COUNTIF(F6:F%d;\"fail\")" % last, "whole key")
    book.name("CHECKS_FAILED", sheet, "C%d" % (last + 2))
    sheet.put("B%d" % (last + 3), "=JOINT.ABOUT()", "note")
    small_run(sheet, last + 5)


def dependence_checks():
    on_diagonal = ("(ROW(TAU_COUNTS)-MIN(ROW(TAU_COUNTS))=COLUMN(TAU_COUNTS)"
                   "-MIN(COLUMN(TAU_COUNTS)))")
    return [
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
    areas = ["Dependence.A5:M49", "Evidence." + AREA, "Models.A4:M40", "Margins.A6:L42",
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
