"""The sheet of stop_loss.py for the margins: each line's distribution, and how near it is."""

from flat_sheet import letters
from stop_loss_account import (
    CHOSEN_DEVIATIONS, CHOSEN_MEANS, DISTRIBUTIONS, FIRST, LAST, LINES, N, PREMIUMS, REASONS,
    opened, section)


def margins(book):
    sheet = opened(book, "Margins", "Margins: one cover year, line by line",
                   "Means and standard deviations from the data unless a choice is entered; "
                   "amounts in thousands", [3.2] + [2.7] * 11)
    section(sheet, "A5", "Moments")
    sheet.row("A6", ["Line", "Earned premium", "Mean, data", "Mean, choice", "Mean, used",
                     "Std dev., data", "Std dev., choice", "Std dev., used", "Distribution",
                     "Mean loss", "Std dev. of the loss", "Coefficient of variation"],
              ["lefthead"] + ["head"] * 11)
    sheet.heights[6] = 0.95
    for i, line in enumerate(LINES):
        row, statistic = 7 + i, letters(14 + i)
        sheet.row("A%d" % row, [
            "=$'Loss ratios'.%s7" % letters(i + 1), PREMIUMS[i],
            "=$'Loss ratios'.%s11" % statistic, CHOSEN_MEANS[i],
            "=IF(LEN(D%d)>0;D%d;C%d)" % (row, row, row),
            "=$'Loss ratios'.%s12" % statistic, CHOSEN_DEVIATIONS[i],
            "=IF(LEN(G%d)>0;G%d;F%d)" % (row, row, row), DISTRIBUTIONS[i],
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
            "and JOINT.RANKS; the limit is indicative, see below")
    sheet.row("A27", ["Line"] + CANDIDATES + ["nearest", "used", "5 % limit"],
              ["lefthead"] + ["head"] * 7)
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
        sheet.put("H%d" % row, "=0.886/SQRT(COUNT(%s))" % data, "three cell")
    sheet.put("A%d" % (28 + N), "Limit: 0.886/sqrt(n), of a normal distribution fitted to the same "
              "n years (Lilliefors 1967); other families have others near it. A distance below it "
              "does not prove the family. None: a lomax has a coefficient of variation above 1.",
              "note")


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
    sheet.row("A37", ["Line"] + CANDIDATES + ["lowest", "used", "above lowest"],
              ["lefthead"] + ["head"] * 7)
    sheet.put("I37", "Reason where they differ (input)", "center head", span=4)
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
        sheet.put("G%d" % row, "=I%d" % (7 + i), "right cell")
        sheet.put("H%d" % row, "=IFERROR(INDEX(B%d:E%d;MATCH(G%d;B$37:E$37;0))-MIN(B%d:E%d);"
                  "\"not tried\")" % ((row,) * 5), "two right cell")
        sheet.put("I%d" % row, REASONS[i], "remark", span=4)
    wanting = "(F38:F%d<>G38:G%d)*(LEN(I38:I%d)=0)" % ((37 + N,) * 3)
    sheet.put("A%d" % (38 + N), "=IF(SUMPRODUCT(%s)=0;\"\";\"Choices that differ from the "
              "lowest and have no reason yet: \"&SUMPRODUCT(%s))" % (wanting, wanting), "alarm")
