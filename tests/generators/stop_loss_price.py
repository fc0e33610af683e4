"""The sheets of stop_loss.py that lead from models to a price: terms, past years, price, blocks,
exceedance, checks.
"""

from flat_chart import Chart
from flat_sheet import address, letters
from stop_loss_account import (
    BLOCK, COLOURS, COPULAS, DASHES, FIRST, LAST, LIMITS, N, POINTS, SHARES, figure, opened,
    section, shifted, span)
from stop_loss_evidence import AREA, LAST_POINT, YEARS


def terms(book):
    sheet = opened(book, "Terms", "Terms of the cover", "Per line what it brings into the cover, "
                   "then the stop-loss on their sum; amounts in thousands",
                   [3.2] + [2.5] * 5 + [0.8, 3.2] + [2.5] * 3)
    section(sheet, "A5", "Per line, of premium (input)")
    sheet.row("A6", ["Line", "Earned premium", "Excess", "Limit", "Share", "Subject premium"],
              ["lefthead"] + ["head"] * 5)
    section(sheet, "H5", "In money, as the functions read it")
    sheet.row("H6", ["name", "excess", "limit", "share"], ["lefthead"] + ["head"] * 3)
    sheet.heights[6] = 0.95
    for i in range(N):
        row = 7 + i
        sheet.row("A%d" % row, ["=Margins.A%d" % row, "=Margins.B%d" % row, None, LIMITS[i],
                                SHARES[i], "=B%d*E%d" % (row, row)],
                  ["cell", "whole cell"] + ["percent input"] * 3 + ["whole cell"])
        sheet.row("H%d" % row, ["=A%d" % row, "=IF(ISNUMBER(C%d);C%d*B%d;\"\")" % (row, row, row),
                                "=IF(ISNUMBER(D%d);D%d*B%d;\"\")" % (row, row, row), "=E%d" % row],
                  ["cell", "whole cell", "whole cell", "percent cell"])
    book.name("TERMS", sheet, "H6:K%d" % (6 + N))
    sheet.row("A%d" % (7 + N), ["Total", "=SUM(B7:B%d)" % (6 + N)], ["key", "whole key"])
    sheet.put("F%d" % (7 + N), "=SUM(F7:F%d)" % (6 + N), "whole key")
    book.name("SUBJECT_PREMIUM", sheet, "F%d" % (7 + N))
    sheet.put("A%d" % (8 + N), "No entry under excess: none. No entry under limit: unlimited. "
              "40 % of marine is ceded under a quota share that inures to this cover; crop hail "
              "counts up to 250 % of its premium.", "note")
    stop_loss(sheet)


def stop_loss(sheet):
    section(sheet, "A15", "Stop-loss on the sum, of subject premium (input)")
    sheet.row("A16", ["", "Excess", "Limit", "Share"], ["lefthead"] + ["head"] * 3)
    sheet.row("A17", ["Cover", 0.78, 0.25, 0.9], ["cell"] + ["percent input"] * 3)
    section(sheet, "H15", "In money")
    sheet.row("H16", ["excess", "limit", "share"], "head")
    sheet.row("H17", ["=B17*SUBJECT_PREMIUM", "=C17*SUBJECT_PREMIUM", "=D17"],
              ["whole cell", "whole cell", "percent cell"])
    sheet.book.name("STOP_LOSS", sheet, "H16:J17")
    sheet.put("A18", "Ceded = share x min(max(sum of the lines' parts - excess; 0); limit). Most "
              "that can be ceded:", "note")
    sheet.put("H18", "=I17*J17", "whole key")
    sheet.book.name("MOST_CEDED", sheet, "H18")
    sheet.put("I18", "limit x share", "aside")
    payoff(sheet)


def payoff(sheet):
    section(sheet, "H20", "What the cover pays")
    sheet.row("H21", ["Subject loss", "of premium", "Ceded"], ["lefthead", "head", "head"])
    for i, share in enumerate((0.6, "=B17", "=B17+C17", 1.2)):
        row = 22 + i
        sheet.row("H%d" % row, ["=I%d*SUBJECT_PREMIUM" % row, share,
                                "=J$17*MIN(MAX(H%d-H$17;0);I$17)" % row],
                  ["whole left cell", "percent cell", "whole cell"])
    chart = Chart("scatter", "Ceded loss against the subject loss",
                  "Subject loss, of subject premium", "Ceded, thousands", legend=False,
                  x={"minimum": 0.6, "maximum": 1.2, "interval-major": 0.1, "format": "percent"},
                  y={"minimum": 0, "format": "grouped"})
    chart.add("Terms.J21", "Terms.I22:Terms.I25", "Terms.J22:Terms.J25",
              COLOURS["gaussian"], "solid")
    sheet.place(chart, "A20", 15.0, 7.5)


def as_if(book):
    """Every past year under this cover, in plain spreadsheet arithmetic."""
    sheet = opened(book, "As if", "As if: past years under this cover",
                   "Loss ratios of each year times the premium of the cover year; plain "
                   "arithmetic, amounts in thousands",
                   [1.6] + [2.0] * N + [0.4] + [2.1] * 5 + [0.6, 5.4] + [2.2] * 5, 7)
    sheet.put("A5", "Losses", "section")
    sheet.put("H5", "Under the cover", "section")
    sheet.put("H6", "a line not known stands at its mean", "note")
    sheet.row("A7", ["Year"] + ["=$'Loss ratios'.%s7" % letters(j + 1) for j in range(N)],
              ["lefthead"] + ["head"] * N)
    sheet.row("H7", ["Subject loss", "Subject loss ratio", "Ceded", "Excess", "Exhausted at"],
              "head")
    sheet.heights[7] = 0.95
    for row in range(FIRST, LAST + 1):
        as_if_year(sheet, row)
    burning_cost(sheet)


def as_if_year(sheet, row):
    sheet.put("A%d" % row, "=$'Loss ratios'.A%d" % row, "year left cell")
    parts = []
    for j in range(N):
        source, here, line = "$'Loss ratios'.%s%d" % (letters(j + 1), row), letters(j + 1), 7 + j
        sheet.put("%s%d" % (here, row), "=IF(ISNUMBER(%s);%s*Margins.$B$%d;\"\")"
                  % (source, source, line), "whole cell")
        loss = "IF(ISNUMBER(%s%d);%s%d;Margins.$J$%d)" % (here, row, here, row, line)
        above = "MAX(%s-N(Terms.$I$%d);0)" % (loss, line)
        limit = "IF(ISNUMBER(Terms.$J$%d);Terms.$J$%d;%s)" % (line, line, above)
        parts.append("Terms.$K$%d*MIN(%s;%s)" % (line, above, limit))
    enough = "COUNT(B%d:F%d)>=%d-LINES_UNKNOWN" % (row, row, N)
    known = "=IF(ISNUMBER(H%d);%%s;\"\")" % row
    sheet.put("H%d" % row, "=IF(%s;%s;\"\")" % (enough, "+".join(parts)), "whole cell")
    sheet.put("I%d" % row, known % ("H%d/SUBJECT_PREMIUM" % row), "percent cell")
    sheet.put("J%d" % row, known % ("Terms.$J$17*MIN(MAX(H%d-Terms.$H$17;0);Terms.$I$17)" % row),
              "whole cell")
    sheet.put("K%d" % row, "=Terms.$B$17", "percent cell")
    sheet.put("L%d" % row, "=Terms.$B$17+Terms.$C$17", "percent cell")


def burning_cost(sheet):
    ceded = "J%d:J%d" % (FIRST, LAST)
    sheet.put("N5", "Burning cost and model", "section")
    sheet.row("N7", ["", "As if", "Model"], ["lefthead", "head", "head"])
    chosen = "INDEX(PRICE_TABLE;MATCH(CHOSEN_COPULA;INDEX(PRICE_TABLE;0;1);0);%d)"
    rows = [("Years", "=COUNT(%s)" % ceded, "=INDEX(SETTINGS;1;2)", "whole"),
            ("Ceded, mean", "=AVERAGE(%s)" % ceded, "=" + chosen % 2, "whole"),
            ("Standard error of the mean", "=STDEV(%s)/SQRT(O8)" % ceded, "=" + chosen % 3,
             "whole"),
            ("Years attaching", "=COUNTIF(%s;\">0\")/O8" % ceded, "=" + chosen % 4, "percent"),
            ("Ceded, highest year", "=MAX(%s)" % ceded, "=MOST_CEDED", "whole")]
    for i, (label, past, model, style) in enumerate(rows):
        sheet.row("N%d" % (8 + i), [label, past, model], ["cell"] + [style + " cell"] * 2)
    sheet.row("N14", ["Lines a year may lack", 1], ["cell", "whole input"])
    sheet.book.name("LINES_UNKNOWN", sheet, "O14")
    sheet.put("N13", "The model's highest year is the most that can be ceded.", "note")
    sheet.put("N15", "At 0 the bad year 1997 drops out, for which marine is not known; years "
              "before 1989 lack two lines.", "note")
    chart = Chart("scatter", "Subject loss of past years", "Year", "Subject loss ratio",
                  x={"minimum": 1985, "maximum": 2025, "interval-major": 5},
                  y={"minimum": 0.4, "maximum": 1.2, "interval-major": 0.2, "format": "percent"},
                  size=10)
    where = "'As if'.%s" + str(FIRST) + ":'As if'.%s" + str(LAST)
    for column, colour, line, symbol in (("I", COLOURS["gaussian"], "solid", "circle"),
                                         ("K", COLOURS["t"], "dashes", None),
                                         ("L", COLOURS["independent"], "dots", None)):
        chart.add("'As if'.%s7" % column, where % ("A", "A"), where % (column, column), colour,
                  line, symbol)
    sheet.place(chart, "N17", 16.2, 11.5)


def block_names():
    return ["PRICE_" + word.upper() for word in COPULAS]


def price(book):
    sheet = opened(book, "Price", "Price", "Simulated inside JOINT.PRICE; amounts in thousands",
                   [3.9, 2.9] + [2.25] * 11)
    settings(book, sheet)
    section(sheet, "A12", "By copula", "the same margins, terms and random seed; "
            "JOINT.PRICE(model;MARGINS;TERMS;STOP_LOSS;SETTINGS), blocks on sheet Blocks; "
            "standard errors are those of the simulation only")
    sheet.row("A14", ["Copula", "Expected ceded", "Standard error", "P(attach)", "P(exhaust)",
                      "Std dev. ceded", "VaR ceded", "TVaR ceded", "Loading", "Price",
                      "of subject premium", "Rate on line", "Above indepen- dent"],
              ["lefthead"] + ["head"] * 12)
    sheet.heights[14] = 1.35
    for i, word in enumerate(COPULAS):
        price_row(sheet, 15 + i, word)
    book.name("PRICE_TABLE", sheet, "A15:M%d" % (14 + len(COPULAS)))
    section(sheet, "A21", "The chosen copula in full")
    sheet.put("C21", "=CHOSEN_COPULA", "section")
    rows, columns = BLOCK
    for i in range(rows):
        for j in range(columns):
            sheet.put(address(21 + i, j), "=INDEX(CHOOSE(CHOSEN_NUMBER;%s);%d;%d)" % (
                ";".join(block_names()), i + 1, j + 1), block_style(i, j))
    chart = Chart("bar", "Probability of exhausting the cover", "", "Probability", legend=False,
                  y={"minimum": 0, "format": "percent2"})
    chart.add("Price.E14", "Price.A15:Price.A18", "Price.E15:Price.E18", COLOURS["gaussian"],
              "solid")
    sheet.place(chart, "I22", 10.8, 8.2)
    tail_sensitivity(sheet)
    tau_sensitivity(sheet)


def tail_sensitivity(sheet):
    section(sheet, "I40", "If the tail of the t were another", "the rest as above; fewer degrees "
            "of freedom, heavier joint tail")
    sheet.row("I42", ["df", "Exp. ceded", "P(attach)", "TVaR ceded"], "head")
    sheet.heights.pop(40)        # the block beside it keeps even rows
    for i, df in enumerate((2.5, 4, 8, 30)):
        row = 43 + i
        run = ("JOINT.PRICE(JOINT.MODEL(\"t\";CORRELATION;$I%d);MARGINS;TERMS;STOP_LOSS;SETTINGS)"
               % row)
        sheet.row("I%d" % row, [df] + ["=" + figure(run, word)
                                       for word in ("mean", "attaching", "TVaR")],
                  ["two input", "whole cell", "percent cell", "whole cell"])


def tau_sensitivity(sheet):
    section(sheet, "A47", "If every tau were off by standard errors",
            "JOINT.MODEL(\"t\";JOINT.REPAIR(JOINT.GREINER(tau + number x standard error);floor);df)"
            ", priced as above; all together is a stress, not a confidence limit")
    sheet.row("A49", ["Standard errors", "Exp. ceded", "P(attach)", "P(exhaust)",
                      "TVaR ceded"], ["lefthead"] + ["head"] * 4)
    taus = "Dependence.B10:F14+A%d*Dependence.B19:F23"
    run = ("JOINT.PRICE(JOINT.MODEL(\"t\";JOINT.REPAIR(JOINT.GREINER(" + taus
           + ");EIGENVALUE_FLOOR);T_DF);MARGINS;TERMS;STOP_LOSS;SETTINGS)")
    for i, number in enumerate((-1, 0, 1)):
        row = 50 + i
        sheet.put("A%d" % row, number, "whole left input")
        for j, (word, style) in enumerate((("mean", "whole"), ("attaching", "percent"),
                                           ("exhausting", "percent2"), ("TVaR", "whole"))):
            sheet.array(address(row - 1, 1 + j), 1, 1, "=" + figure(run % row, word),
                        style + " cell")


def settings(book, sheet):
    section(sheet, "A5", "Simulation (input)")
    for i, (label, value) in enumerate([("rows", 100000), ("seed", 1), ("scheme", "plain"),
                                        ("level", 0.99)]):
        sheet.row("A%d" % (6 + i), [label, value],
                  ["cell", "whole input" if i == 0 else "right input"])
    book.name("SETTINGS", sheet, "A6:B9")
    section(sheet, "D5", "Choice and loadings (input)")
    for i, (label, value, style, name) in enumerate([
            ("Copula of the price", "t", "right input", "CHOSEN_COPULA"),
            ("Loading, share of std dev.", 0.2, "percent input", "LOADING"),
            ("Brokerage, of price", 0.1, "percent input", "BROKERAGE"),
            ("Expenses, of price", 0.05, "percent input", "EXPENSES")]):
        sheet.put("D%d" % (6 + i), label, "cell", span=2)
        sheet.put("F%d" % (6 + i), value, style)
        book.name(name, sheet, "F%d" % (6 + i))
    book.choice(sheet, "F6", COPULAS)
    sheet.put("H6", "Price = (expected ceded + loading x std dev. ceded) / (1 - brokerage - "
              "expenses)", "note")
    sheet.put("H7", "The loading stands for the reinsurer's cost of capital; there is no margin",
              "note")
    sheet.put("H8", "for parameter uncertainty in it.", "note")
    sheet.put("D10", "its row in the table", "cell", span=2)
    sheet.put("F10", "=MATCH(CHOSEN_COPULA;INDEX(PRICE_TABLE;0;1);0)", "whole cell")
    book.name("CHOSEN_NUMBER", sheet, "F10")


def price_row(sheet, row, word):
    block = "PRICE_" + word.upper()
    independent = "J$%d" % (15 + COPULAS.index("independent"))
    sheet.row("A%d" % row, [
        word, "=" + figure(block, "mean"), "=" + figure(block, "mean", error=True),
        "=" + figure(block, "attaching"), "=" + figure(block, "exhausting"),
        "=" + figure(block, "sd"), "=" + figure(block, "VaR"), "=" + figure(block, "TVaR"),
        "=LOADING*F%d" % row,
        "=(B%d+I%d)/(1-BROKERAGE-EXPENSES)" % (row, row), "=J%d/SUBJECT_PREMIUM" % row,
        "=J%d/MOST_CEDED" % row, "=J%d/%s-1" % (row, independent)],
        ["key", "whole key", "whole cell", "percent cell", "percent2 cell"] + ["whole cell"] * 4
        + ["whole key", "percent2 cell", "percent2 cell", "percent cell"])


def block_style(i, j):
    if i == 0:
        return "head" if j else "lefthead"
    if j == 0:
        return "cell"
    if i == 12 + 2 * N:
        return "right shrunk"
    special = {3: "percent2", 4: "percent2", 8 + 2 * N: "year", 10 + 2 * N: "two"}
    return special.get(i, "whole") + " right cell"


def blocks(book):
    sheet = opened(book, "Blocks", "Blocks", "What JOINT.PRICE gave under each copula, as it came; "
                   "amounts in thousands",
                   [3.4, 2.9] + [2.1] * 5 + [0.8, 3.4, 2.9] + [2.1] * 5)
    rows, columns = BLOCK
    for i, word in enumerate(COPULAS):
        where = address(4 + (i // 2) * (rows + 4), (i % 2) * (columns + 1))
        formula = "=JOINT.PRICE(MODEL_%s;MARGINS;TERMS;STOP_LOSS;SETTINGS)" % word.upper()
        section(sheet, where, "The %s copula" % word, formula[1:])
        corner = shifted(where, 2)
        sheet.array(corner, rows, columns, formula, block_style)
        book.name("PRICE_" + word.upper(), sheet, span(corner, rows, columns))


def exceedance(book):
    sheet = opened(book, "Exceedance", "How often is the subject loss exceeded?",
                   "Sum of what the lines bring into the cover, 20,000 simulated years under each "
                   "copula; amounts in thousands",
                   [2.0] * 8 + [0.5, 2.2, 2.2, 1.6, 0.6] + [2.6] * 7, 8)
    sheet.put("A5", "JOINT.EXCEEDANCE(JOINT.CEDE(JOINT.LOSSES(JOINT.DRAW(model;20000;seed);"
              "MARGINS);TERMS);%d)" % POINTS, "note")
    for i, word in enumerate(COPULAS):
        x, p = letters(2 * i), letters(2 * i + 1)
        sheet.put(x + "7", word, "center head", span=2)
        sheet.row(x + "8", ["loss", "P(above)"], "head")
        sheet.array(x + "9", POINTS, 2, "=JOINT.EXCEEDANCE(JOINT.CEDE(JOINT.LOSSES(JOINT.DRAW("
                    "MODEL_%s;20000;INDEX(SETTINGS;2;2));MARGINS);TERMS);%d)"
                    % (word.upper(), POINTS),
                    ["whole cell", "four cell"])
    sheet.row("J7", ["attaching", "exhausting", ""], "head")
    sheet.row("J8", ["loss", "loss", "P"], "head")
    sheet.row("J9", ["=Terms.H17", "=Terms.H17+Terms.I17", 1],
              ["whole cell", "whole cell", "four cell"])
    sheet.row("J10", ["=J9", "=K9", 0.001], ["whole cell", "whole cell", "four cell"])
    chart = Chart("scatter", "Exceedance of the subject loss, one year", "Subject loss, thousands",
                  "Probability of exceeding it",
                  x={"minimum": 150000, "maximum": 350000,
                     "interval-major": 50000, "format": "grouped"},
                  y={"logarithmic": "true", "minimum": 0.001, "maximum": 1,
                     "format": "percent2"}, size=10)
    where = "Exceedance.%s9:Exceedance.%s" + str(8 + POINTS)
    for i, word in enumerate(COPULAS):
        x, p = letters(2 * i), letters(2 * i + 1)
        chart.add("Exceedance.%s7" % x, where % (x, x), where % (p, p), COLOURS[word], DASHES[word])
    for column in "JK":
        chart.add("Exceedance.%s7" % column, "Exceedance.%s9:Exceedance.%s10" % (column, column),
                  "Exceedance.L9:Exceedance.L10", "#1c2833", "dots")
    sheet.place(chart, "N7", 18.2, 17.0)


CEDED_YEAR = 2005


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
         "=IF(%s<=%s;1;0)" % (chosen % 5, chosen % 4), 1, 0, "whole"),
        ("1 if TVaR ceded is at least VaR and at most what can be ceded",
         "=IF(AND(%s>=%s;%s<=MOST_CEDED*(1+1E-12));1;0)" % (chosen % 8, chosen % 7, chosen % 8),
         1, 0, "whole"),
        ("1 if expected ceded is at most P(attach) times the most that can be ceded",
         "=IF(%s<=%s*MOST_CEDED;1;0)" % (chosen % 2, chosen % 4), 1, 0, "whole"),
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
