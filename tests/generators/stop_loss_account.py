"""The account of stop_loss.py: its data and choices, and what its sheets have in common.

The insurer, its lines and all figures are invented. The loss ratios were drawn once and are
frozen here.
"""

from flat_sheet import address, letters, position

LINES = ["Motor", "Property", "Liability", "Marine", "Crop hail"]
N = len(LINES)

# Ultimate loss ratios by year, line by line; None is a gap.
LOSS_RATIOS = [
    (1986, 0.805, 0.583, 0.590, None, None),
    (1987, 0.833, 0.803, 0.592, None, None),
    (1988, 0.691, 0.532, 0.808, None, None),
    (1989, 0.833, 0.940, 0.767, 1.043, None),
    (1990, 0.763, 0.669, 0.708, 0.779, None),
    (1991, 0.703, 0.582, 0.740, 0.677, None),
    (1992, 0.552, 0.353, 0.636, 0.432, None),
    (1993, 0.669, 0.597, 0.733, 0.476, 0.853),
    (1994, 0.656, 0.604, 0.742, 0.383, 0.311),
    (1995, 0.662, 0.555, 0.620, 0.497, 0.074),
    (1996, 0.555, 0.411, 0.726, 0.314, 0.027),
    (1997, 0.844, 0.865, 0.923, None, 2.064),
    (1998, 0.868, 0.608, 0.786, 0.791, 0.244),
    (1999, 0.679, 0.753, 0.895, 0.714, 1.138),
    (2000, 0.648, 0.646, 0.634, 0.544, 0.355),
    (2001, 0.694, 0.485, 0.822, 0.848, 0.087),
    (2002, 0.745, 0.704, 0.838, 0.718, 0.621),
    (2003, 0.727, 0.490, 0.751, 0.718, 0.173),
    (2004, 0.806, 0.802, 0.822, 0.999, 0.350),
    (2005, 0.751, 0.714, 0.545, 0.277, 3.810),
    (2006, 0.701, 0.624, 0.931, 0.814, 0.105),
    (2007, 0.798, 0.607, 0.784, 0.572, 0.161),
    (2008, 0.649, 0.510, 0.744, 0.572, 0.239),
    (2009, 0.890, None, 0.849, 0.320, 1.160),
    (2010, 0.725, 0.612, 0.718, 0.660, 0.333),
    (2011, 0.840, 0.686, 0.911, 0.640, 0.991),
    (2012, 0.774, 0.811, 0.695, 0.649, 0.506),
    (2013, 0.611, 0.563, 0.690, 0.661, 0.277),
    (2014, 0.681, 0.589, 0.624, 0.679, 0.286),
    (2015, 0.685, 0.616, 0.710, 0.383, 0.617),
    (2016, 0.649, 0.651, 0.873, 0.730, 0.452),
    (2017, 0.755, 0.649, 0.632, 0.564, 0.839),
    (2018, 0.634, 0.472, 0.821, 0.680, 0.022),
    (2019, 0.670, 0.539, 1.000, 1.105, 0.051),
    (2020, 0.628, 0.615, 0.658, 0.924, 0.108),
    (2021, 0.743, 0.641, 0.758, 0.716, 0.277),
    (2022, 0.653, 0.515, 0.691, 0.467, 0.341),
    (2023, 0.761, 0.642, 0.709, 0.593, 0.821),
    (2024, 0.666, 0.663, 0.707, 0.910, 0.189),
    (2025, 0.664, 0.740, 0.732, 0.701, 0.708),]

PREMIUMS = [118000, 74000, 42000, 21000, 25000]
DISTRIBUTIONS = ["lognormal", "lognormal", "gamma", "weibull", "lomax"]
REASONS = [None, "the heavier upper tail, on the side of caution",
           "as in earlier years' reviews; the two hardly differ", None,
           "a power tail: the worst year on record need not be the worst"]
CHOSEN_MEANS = [None, None, 0.77, None, None]
CHOSEN_DEVIATIONS = [None] * N
SHARES = [1, 1, 1, 0.6, 1]
LIMITS = [None, None, None, None, 2.5]

COPULAS = ["gaussian", "t", "gumbel", "independent"]
COLOURS = {"gaussian": "#0b4f6c", "t": "#8a3b00", "gumbel": "#3f7d3a", "independent": "#6b7280"}
DASHES = {"gaussian": "dashes", "t": "solid", "gumbel": "dots", "independent": "solid"}

FIRST, LAST = 8, 7 + len(LOSS_RATIOS)          # rows of the years on sheet Loss ratios
POINTS = 40                                    # of an exceedance curve
REPAIR_NOTE = (8, 4)                           # rows, columns
BLOCK = (24, 7)                                # a price block: rows, columns

INVENTED = "Invented data: the insurer, its lines and every figure were made up for this workbook."


def figure(block, label, side="ceded", error=False):
    """One figure of a price block. (A lookup by MATCH would not do: text in the cells of an array
    does not compare equal to the same text typed.)"""
    column = 2 * ["gross", "ceded", "retained"].index(side) + 2
    return "JOINT.READ(%s;\"%s\";%s)" % (block, label, column if error else "\"%s\"" % side)


def opened(book, name, title, subtitle, widths, frozen=0, reason=False):
    sheet = book.sheet(name, widths, frozen)
    sheet.heights.update({1: 0.85, 2: 0.55, 3: 0.5})
    sheet.put("A1", title, "title")
    sheet.put("A2", subtitle, "subtitle")
    sheet.put("A3", INVENTED, "invented")
    if reason:
        sheet.put("A4", "=IF(LEN(REASON)=0;\"\";\"Reason: \"&REASON&\" (sheet Check)\")", "alarm")
    return sheet


def shifted(where, rows=0, columns=0):
    row, column = position(where)
    return address(row + rows, column + columns)


def span(where, rows, columns):
    return "%s:%s" % (where, shifted(where, rows - 1, columns - 1))


def section(sheet, where, text, note=None):
    sheet.put(where, text, "section")
    sheet.heights[position(where)[0] + 1] = 0.7
    if note:
        sheet.put(shifted(where, 1), note, "note")


def grid(sheet, where, title, formula, style, name=None):
    """A matrix between lines: title, formula in words, header row, names and values."""
    section(sheet, where, title, formula.lstrip("="))
    corner = shifted(where, 2)
    sheet.put(corner, None, "lefthead")
    for j, line in enumerate(LINES, 1):
        sheet.put(shifted(corner, 0, j), "=$'Loss ratios'.%s$7" % letters(j), "head")
        sheet.put(shifted(corner, j), "=$'Loss ratios'.%s$7" % letters(j), "cell")
    sheet.array(shifted(corner, 1, 1), N, N, formula, style)
    if name:
        sheet.book.name(name, sheet, span(corner, N + 1, N + 1))
    return shifted(corner, 1, 1)


def quoted_link(name):
    return "'%s'.A1" % name if " " in name else name + ".A1"
