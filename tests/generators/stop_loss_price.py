"""The sheets of stop_loss.py that lead from models and terms to a price: price, blocks, exceedance.
"""

from flat_chart import Chart
from flat_sheet import address, letters
from stop_loss_account import (
    BLOCK, COLOURS, COPULAS, DASHES, N, POINTS, figure, opened, section, shifted, span)


RETAINED = ("Retained is gross less ceded under this cover: what marine cedes under its quota "
            "share is still in it.")


def block_names():
    return ["PRICE_" + word.upper() for word in COPULAS]


def price(book):
    sheet = opened(book, "Price", "Price", "Simulated inside JOINT.PRICE; amounts in thousands",
                   [3.9, 3.3] + [2.25] * 10 + [2.6], reason=True)
    settings(book, sheet)
    section(sheet, "A12", "By copula", "the same margins, terms and random seed; "
            "JOINT.PRICE(model;MARGINS;TERMS;STOP_LOSS;SETTINGS), blocks on sheet Blocks; "
            "standard errors are those of the simulation only")
    sheet.row("A14", ["Copula", "Expected ceded", "Standard error", "P(attach)", "P(exhaust)",
                      "Std dev. ceded", "VaR ceded", "TVaR ceded", "Loading", "Price",
                      "of subject premium", "Rate on line", "Above independent"],
              ["lefthead"] + ["head"] * 12)
    sheet.heights[14] = 0.95
    for i, word in enumerate(COPULAS):
        price_row(sheet, 15 + i, word)
    book.name("PRICE_TABLE", sheet, "A15:M%d" % (14 + len(COPULAS)))
    sheet.put("A19", apart(), "note")
    sheet.put("A20", "=\"gumbel gives every pair the mean tau, \"&ROUND(MEAN_TAU;3)&\", where the "
              "data have \"&ROUND(Dependence.F11;3)&\" for \"&Dependence.A11&\" and "
              "\"&Dependence.F9&\" and as low as \"&ROUND(MIN(Dependence.B10:F14);3)&\": read its "
              "price as a scenario of the tail, not as a fit.\"", "note")
    section(sheet, "A21", "The chosen copula in full")
    sheet.put("D21", RETAINED, "note")
    sheet.heights[21] = 1.0
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


def apart():
    """How far the copulas lie from the chosen one beside the error of the simulation."""
    here, error = ("INDEX(PRICE_TABLE;CHOSEN_NUMBER;%d)" % k for k in (2, 3))
    each = ["IF(CHOSEN_NUMBER=%d;\"\";\" %s \"&IFERROR(TEXT((B%d-%s)/SQRT(C%d^2+%s^2);\"0.0\");"
            "\"n/a\")&\",\")" % (i + 1, word, 15 + i, here, 15 + i, error)
            for i, word in enumerate(COPULAS)]
    return ("=\"Expected ceded less that of the chosen copula, in standard errors of the "
            "simulation:\"&%s&\" where below about 2 it may be the draws that differ.\""
            % "&".join(each))


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
                      "TVaR ceded"], "head")
    taus = "Dependence.B10:F14+A%d*Dependence.B19:F23"
    run = ("JOINT.PRICE(JOINT.MODEL(\"t\";JOINT.REPAIR(JOINT.GREINER(" + taus
           + ");EIGENVALUE_FLOOR);T_DF);MARGINS;TERMS;STOP_LOSS;SETTINGS)")
    for i, number in enumerate((-1, 0, 1)):
        row = 50 + i
        sheet.put("A%d" % row, number, "whole input")
        for j, (word, style) in enumerate((("mean", "whole"), ("attaching", "percent"),
                                           ("exhausting", "percent2"), ("TVaR", "whole"))):
            sheet.array(address(row - 1, 1 + j), 1, 1, "=" + figure(run % row, word),
                        style + " cell")


SCHEMES = ["plain", "antithetic", "latin", "sobol"]


def settings(book, sheet):
    section(sheet, "A5", "Simulation (input)")
    for i, (label, value) in enumerate([("rows", 131072), ("seed", 1), ("scheme", "sobol"),
                                        ("level", 0.99)]):
        sheet.row("A%d" % (6 + i), [label, value],
                  ["cell", "whole input" if i == 0 else "right input"])
    sheet.put("A10", "=IF(B8=\"plain\";\"\";\"16 parts of \"&TEXT(B6/16;\"#,##0\")&"
              "\" rows; errors from their spread\")", "note")
    book.choice(sheet, "B8", SCHEMES)
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


def price_row(sheet, row, word):
    block = "PRICE_" + word.upper()
    independent = "J$%d" % (15 + COPULAS.index("independent"))
    sheet.row("A%d" % row, [
        word, "=" + figure(block, "mean"), "=" + figure(block, "mean", error=True),
        "=" + figure(block, "attaching"),
        "=IF(ISTEXT({0});\"n/a\";{0})".format(figure(block, "exhausting")),
        "=" + figure(block, "sd"), "=" + figure(block, "VaR"), "=" + figure(block, "TVaR"),
        "=LOADING*F%d" % row,
        "=(B%d+I%d)/(1-BROKERAGE-EXPENSES)" % (row, row), "=J%d/SUBJECT_PREMIUM" % row,
        "=IF(ISNUMBER(MOST_CEDED);J%d/MOST_CEDED;\"n/a\")" % row, "=J%d/%s-1" % (row, independent)],
        ["key", "whole key", "whole cell", "percent cell", "percent2 right cell"]
        + ["whole cell"] * 4
        + ["whole key", "percent2 cell", "percent2 right cell", "percent cell"])


def block_style(i, j):
    if i == 0:
        return "head" if j else "lefthead"
    if j == 0:
        return "cell"
    special = {3: "percent2", 4: "percent2", 8 + 2 * N: "year", 10 + 2 * N: "two"}
    return special.get(i, "whole") + " right cell"


def blocks(book):
    sheet = opened(book, "Blocks", "Blocks", "What JOINT.PRICE gave under each copula, as it came; "
                   "amounts in thousands. " + RETAINED,
                   [3.4, 3.3] + [2.1] * 5 + [0.8, 3.4, 3.3] + [2.1] * 5, reason=True)
    rows, columns = BLOCK
    for i, word in enumerate(COPULAS):
        where = address(4 + (i // 2) * (rows + 4), (i % 2) * (columns + 1))
        formula = "=JOINT.PRICE(MODEL_%s;MARGINS;TERMS;STOP_LOSS;SETTINGS)" % word.upper()
        section(sheet, where, "The %s copula" % word, formula[1:])
        corner = shifted(where, 2)
        sheet.array(corner, rows, columns, formula, block_style)
        book.name("PRICE_" + word.upper(), sheet, span(corner, rows, columns))


def exceedance(book):
    sheet = opened(book, "Exceedance", "How often does the subject loss reach an amount?",
                   "Sum of what the lines bring into the cover, 20,000 simulated years under each "
                   "copula; amounts in thousands",
                   [2.0] * 8 + [0.5, 2.2, 2.2, 1.6, 0.6] + [2.6] * 7, 8)
    sheet.put("A5", "JOINT.EXCEEDANCE(JOINT.CEDE(JOINT.LOSSES(JOINT.DRAW(model;20000;seed);"
              "MARGINS);TERMS);%d)" % POINTS, "note")
    for i, word in enumerate(COPULAS):
        x, p = letters(2 * i), letters(2 * i + 1)
        sheet.put(x + "7", word, "center head", span=2)
        sheet.row(x + "8", ["loss", "P(at least)"], "head")
        sheet.array(x + "9", POINTS, 2, "=JOINT.EXCEEDANCE(JOINT.CEDE(JOINT.LOSSES(JOINT.DRAW("
                    "MODEL_%s;20000;INDEX(SETTINGS;2;2));MARGINS);TERMS);%d)"
                    % (word.upper(), POINTS),
                    ["whole cell", "five cell"])
    sheet.row("J7", ["attaching", "exhausting", ""], "head")
    sheet.row("J8", ["loss", "loss", "P"], "head")
    sheet.row("J9", ["=N(Terms.H17)", "=IF(ISNUMBER(Terms.I17);N(Terms.H17)+Terms.I17;\"\")", 1],
              ["whole cell", "whole cell", "four cell"])
    sheet.row("J10", ["=J9", "=K9", 0.001], ["whole cell", "whole cell", "four cell"])
    chart = Chart("scatter", "Exceedance of the subject loss, one year", "Subject loss, thousands",
                  "Probability of reaching it",
                  x={"minimum": 150000, "maximum": 350000,
                     "interval-major": 50000, "format": "grouped"},
                  y={"logarithmic": "true", "minimum": 0.001, "maximum": 1,
                     "format": "percent2"}, size=10)
    where = "Exceedance.%s9:Exceedance.%s" + str(8 + POINTS)
    for i, word in enumerate(COPULAS):
        x, p = letters(2 * i), letters(2 * i + 1)
        chart.add("Exceedance.%s7" % x, where % (x, x), where % (p, p), COLOURS[word], DASHES[word])
    for column, line in (("J", "solid"), ("K", "dashes")):
        chart.add("Exceedance.%s7" % column, "Exceedance.%s9:Exceedance.%s10" % (column, column),
                  "Exceedance.L9:Exceedance.L10", "#1c2833", line)
    sheet.place(chart, "N7", 18.2, 17.0)
