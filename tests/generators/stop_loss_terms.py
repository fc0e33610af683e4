"""The sheets of stop_loss.py for the cover: its terms, and past years under it."""

from flat_chart import Chart
from flat_sheet import letters
from stop_loss_account import (
    COLOURS, FIRST, LAST, LIMITS, N, SHARES, opened, section)


def terms(book):
    sheet = opened(book, "Terms", "Terms of the cover", "Per line what it brings into the cover, "
                   "then the stop-loss on their sum; amounts in thousands",
                   [3.2] + [2.5] * 5 + [0.8, 3.2] + [2.5] * 3, reason=True)
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
        sheet.row("H%d" % row, ["=A%d" % row, in_money("C%d" % row, "B%d" % row),
                                in_money("D%d" % row, "B%d" % row), in_money("E%d" % row)],
                  ["cell", "whole cell", "whole cell", "percent cell"])
        book.between(sheet, "E%d" % row, 0, 1, "A share, from 0 % to 100 %.", empty=False)
    book.name("TERMS", sheet, "H6:K%d" % (6 + N))
    sheet.row("A%d" % (7 + N), ["Total", "=SUM(B7:B%d)" % (6 + N)], ["key", "whole key"])
    sheet.put("F%d" % (7 + N), "=SUM(F7:F%d)" % (6 + N), "whole key")
    book.name("SUBJECT_PREMIUM", sheet, "F%d" % (7 + N))
    sheet.put("A%d" % (8 + N), "No entry under excess: none. No entry under limit: unlimited. "
              "40 % of marine is ceded under a quota share that inures to this cover; crop hail "
              "counts up to 250 % of its premium.", "note")
    stop_loss(sheet)


def in_money(share, of="1"):
    """A term as the functions read it: an empty cell stays empty, and wrong text stays as it is,
    so that the function refuses it by name."""
    return "=IF(ISNUMBER(%s);%s*%s;%s&\"\")" % (share, share, of, share)


def ceded(subject):
    """What the stop-loss pays of a subject loss, in plain arithmetic."""
    above = "MAX(%s-N(Terms.$H$17);0)" % subject
    return "Terms.$J$17*IF(ISNUMBER(Terms.$I$17);MIN(%s;Terms.$I$17);%s)" % (above, above)


def stop_loss(sheet):
    section(sheet, "A15", "Stop-loss on the sum, of subject premium (input)")
    sheet.row("A16", ["", "Excess", "Limit", "Share"], ["lefthead"] + ["head"] * 3)
    sheet.book.between(sheet, "D17", 0, 1, "A share, from 0 % to 100 %.")
    sheet.row("A17", ["Cover", 0.78, 0.25, 0.9], ["cell"] + ["percent input"] * 3)
    section(sheet, "H15", "In money")
    sheet.row("H16", ["excess", "limit", "share"], "head")
    sheet.row("H17", [in_money("B17", "SUBJECT_PREMIUM"), in_money("C17", "SUBJECT_PREMIUM"),
                      "=IF(ISBLANK(D17);1;D17)"],
              ["whole right cell", "whole right cell", "percent right cell"])
    sheet.book.name("STOP_LOSS", sheet, "H16:J17")
    sheet.put("A18", "Ceded = share x min(max(sum of the lines' parts - excess; 0); limit). No "
              "entry under limit: unlimited; under share: 100 %.", "note")
    sheet.put("H18", "=IF(ISNUMBER(I17);I17*J17;\"unlimited\")", "whole right key")
    sheet.book.name("MOST_CEDED", sheet, "H18")
    sheet.put("I18", "the most that can be ceded", "aside")
    payoff(sheet)


def payoff(sheet):
    section(sheet, "H20", "What the cover pays")
    sheet.row("H21", ["Subject loss", "of premium", "Ceded"], "head")
    for i, share in enumerate(("=MIN(0.6;N(B17))", "=N(B17)", "=N(B17)+N(C17)",
                               "=MAX(1.2;I24+0.1)")):
        row = 22 + i
        sheet.row("H%d" % row, ["=I%d*SUBJECT_PREMIUM" % row, share, "=" + ceded("H%d" % row)],
                  ["whole cell", "percent cell", "whole cell"])
    chart = Chart("scatter", "Ceded loss against the subject loss",
                  "Subject loss, of subject premium", "Ceded, thousands", legend=False,
                  x={"format": "percent"}, y={"minimum": 0, "format": "grouped"})
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
    sheet.put("J%d" % row, known % ceded("H%d" % row), "whole cell")
    sheet.put("K%d" % row, "=N(Terms.$B$17)", "percent cell")
    sheet.put("L%d" % row, "=IF(ISNUMBER(Terms.$C$17);N(Terms.$B$17)+Terms.$C$17;\"\")",
              "percent cell")


def burning_cost(sheet):
    each = "J%d:J%d" % (FIRST, LAST)
    sheet.put("N5", "Burning cost and model", "section")
    sheet.row("N7", ["", "As if", "Model"], ["lefthead", "head", "head"])
    chosen = "INDEX(PRICE_TABLE;CHOSEN_NUMBER;%d)"
    rows = [("Years", "=COUNT(%s)" % each, "=INDEX(SETTINGS;1;2)", "whole"),
            ("Ceded, mean", "=AVERAGE(%s)" % each, "=" + chosen % 2, "whole"),
            ("Standard error of the mean", "=STDEV(%s)/SQRT(O8)" % each, "=" + chosen % 3,
             "whole"),
            ("Years attaching", "=COUNTIF(%s;\">0\")/O8" % each, "=" + chosen % 4, "percent"),
            ("Ceded, highest year", "=MAX(%s)" % each, "=MOST_CEDED", "whole")]
    for i, (label, past, model, style) in enumerate(rows):
        sheet.row("N%d" % (8 + i), [label, past, model], ["cell"] + [style + " right cell"] * 2)
    sheet.row("N14", ["Lines a year may lack", 1], ["cell", "whole input"])
    sheet.book.name("LINES_UNKNOWN", sheet, "O14")
    sheet.put("N13", "The highest year of the model is the most that can be ceded.", "note")
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
