"""Generates sample-sheets/stop-loss.fods: an aggregate stop-loss on five lines of business.

The insurer, its lines and all figures are invented; the same input always gives the same
file. Usage: stop_loss.py [file]
"""

import pathlib
import sys

from flat_chart import Chart
from flat_sheet import Book
from stop_loss_account import COLOURS, COPULAS, INVENTED, opened, quoted_link, section
from stop_loss_check import check
from stop_loss_evidence import evidence
from stop_loss_inputs import dependence, loss_ratios, models
from stop_loss_margins import margins
from stop_loss_price import blocks, exceedance, price
from stop_loss_terms import as_if, terms


def summary(book):
    sheet = opened(book, "Summary", book.title, book.subject,
                   [5.6] + [2.7] * 5 + [0.8, 3.0, 11.0], reason=True)
    answer(sheet)
    guide(sheet)


def answer(sheet):
    section(sheet, "A5", "Answer")
    chosen = "=INDEX(PRICE_TABLE;CHOSEN_NUMBER;%d)"
    rows = [("Copula of the price", "=CHOSEN_COPULA", "right key", ""),
            ("Subject premium", "=SUBJECT_PREMIUM", "whole cell", ""),
            ("Excess", "=N(Terms.H17)", "whole cell", "=N(Terms.B17)"),
            ("Limit", "=IF(ISNUMBER(Terms.I17);Terms.I17;\"unlimited\")", "whole right cell",
             "=IF(ISNUMBER(Terms.C17);Terms.C17;\"\")"),
            ("Share ceded", "=Terms.J17", "percent cell", ""),
            ("Expected ceded loss", chosen % 2, "whole key", "=B11/SUBJECT_PREMIUM"),
            ("simulation error of it", chosen % 3, "whole cell", ""),
            ("Probability of attaching", chosen % 4, "percent cell", ""),
            ("Probability of exhausting", chosen % 5, "percent2 right cell", ""),
            ("=\"TVaR ceded, level \"&INDEX(SETTINGS;4;2)", chosen % 8, "whole cell",
             "=B15/SUBJECT_PREMIUM"),
            ("Price", chosen % 10, "whole key", "=B16/SUBJECT_PREMIUM"),
            ("Burning cost of past years", "=$'As if'.O9", "whole cell", "=B17/SUBJECT_PREMIUM"),
            ("Checks that fail", "=CHECKS_FAILED", "whole key", "")]
    sheet.put("C5", "of subject premium", "right note")
    for i, (label, value, style, share) in enumerate(rows):
        sheet.row("A%d" % (6 + i), [label, value], ["cell", style])
        sheet.put("C%d" % (6 + i), share or None, "percent2 cell")
    chart = Chart("bar", "Price by copula", "", "thousands", legend=False,
                  y={"minimum": 0, "format": "grouped"})
    chart.add("Summary.F21", "Summary.A22:Summary.A25", "Summary.F22:Summary.F25",
              COLOURS["gaussian"], "solid")
    sheet.place(chart, "D5", 8.8, 7.0)
    section(sheet, "A20", "By copula")
    sheet.row("A21", ["Copula", "Expected ceded", "Simulation error", "P(attach)", "P(exhaust)",
                      "Price"], ["lefthead"] + ["head"] * 5)
    sheet.heights[21] = 0.95
    for i in range(len(COPULAS)):
        sheet.row("A%d" % (22 + i), ["=INDEX(PRICE_TABLE;%d;%d)" % (i + 1, k)
                                     for k in (1, 2, 3, 4, 5, 10)],
                  ["cell", "whole cell", "whole cell", "percent cell", "percent2 right cell",
                   "whole key"])
    sheet.put("A27", "=IFERROR(Price.A20;\"\")", "note")
    sheet.put("A26", "=IFERROR(\"Taken as independent, the lines would seem to make the price "
              "\"&ROUND(100*(1-F%d/B16);0)&\" %% lower than under the chosen copula.\";\"\")" % (
                  22 + COPULAS.index("independent")), "note")


def guide(sheet):
    section(sheet, "H5", "Sheets")
    for i, (name, text) in enumerate([
            ("Loss ratios", "forty years, five lines: the data"),
            ("Dependence", "Kendall's tau, pair by pair; the matrix it implies, and its repair"),
            ("Evidence", "how sure each tau is, and what the years say of a tail"),
            ("Models", "four copulas from these taus"),
            ("Margins", "each line's distribution for the cover year"),
            ("Terms", "per line and for the sum"),
            ("As if", "past years under this cover"),
            ("Price", "settings, loadings and the price under each copula"),
            ("Blocks", "the four price blocks in full"),
            ("Exceedance", "how often the subject loss reaches an amount"),
            ("Check", "the same thing worked out in two ways; where an error began")]):
        sheet.put("H%d" % (6 + i), (quoted_link(name), name), "link")
        sheet.put("I%d" % (6 + i), text)
    section(sheet, "H20", "Cells")
    for i, (style, text) in enumerate([
            ("center input", "input: may be changed, everything else follows"),
            ("center cell", "worked out"), ("center key", "worked out, and a result to look at")]):
        sheet.put("H%d" % (22 + i), "1,234", style)
        sheet.put("I%d" % (22 + i), text)
    caution(sheet)


def caution(sheet):
    section(sheet, "A28", "Caution")
    sheet.heights[28] = 1.0
    for i, text in enumerate((
            "Model risk. A copula is a choice, not a finding: forty years cannot tell a gaussian "
            "tail from a t or gumbel tail. Read the table by copula as the range of one uncertain "
            "answer, and look beyond the mean: at the chance of exhausting the cover.",
            "Parameter uncertainty. The standard errors shown are errors of the simulation only. "
            "Those of the taus (sheet Evidence), the loss ratios, the fitted margins and the "
            "chosen degrees of freedom are larger and are not in the price.",
            "Judgement and law. Trend, development, exposure, cover wording and accumulations "
            "outside the data are for the actuary. Local regulation and professional standards "
            "come before anything in this workbook, and no figure of it should be used without "
            "the sign-off of a qualified actuary.")):
        sheet.put("A%d" % (29 + i), text, "caution", span=9)
        sheet.heights[29 + i] = 1.05
    section(sheet, "A33", "Review")
    for i, label in enumerate(("Prepared by", "Reviewed by", "Date and decision")):
        sheet.put("A%d" % (34 + i), label)
        sheet.put("B%d" % (34 + i), None, "input", span=5)


def main():
    path = pathlib.Path(sys.argv[1]) if len(sys.argv) > 1 else (
        pathlib.Path(__file__).parents[2] / "sample-sheets" / "stop-loss.fods")
    book = Book("Stop-loss on five lines of business",
                "Orrinby Mutual, cover year 2027; amounts in thousands", INVENTED)
    for make in (summary, loss_ratios, dependence, evidence, models, margins, terms, as_if, price,
                 blocks, exceedance, check):
        make(book)
    book.write(path)


if __name__ == "__main__":
    main()
