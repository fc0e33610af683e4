"""How cells look: colours, number formats, and what a cell can be."""

INK, MUTED, ACCENT = "#1c2833", "#5a6672", "#0b4f6c"
BAND, RULE, PAPER = "#e6ecf0", "#cfd6db", "#fff6d0"

# Number formats: decimals, percentage, grouping of thousands; None is powers of ten.
FORMATS = {
    "whole": (0, False, True), "year": (0, False, False), "percent": (1, True, False),
    "percent2": (2, True, False), "two": (2, False, True), "three": (3, False, False),
    "four": (4, False, True), "five": (5, False, False), "small": None,
}

# The rule under a cell, its text near it.
LINE = ("style:vertical-align='bottom' fo:padding-bottom='0cm'"
        " fo:border-bottom='0.5pt solid %s'" % RULE)

# What a cell is: its text, its cell and its paragraph properties.
ROLES = {
    "title": ("fo:font-size='16pt' fo:font-weight='bold' fo:color='%s'" % ACCENT, "", ""),
    "subtitle": ("fo:font-size='11pt' fo:color='%s'" % MUTED, "", ""),
    "invented": ("fo:font-weight='bold' fo:color='%s'" % ACCENT, "", ""),
    "section": ("fo:font-size='11pt' fo:font-weight='bold' fo:color='%s'" % ACCENT,
                "style:vertical-align='bottom'", ""),
    "head": ("fo:font-weight='bold'", "fo:background-color='%s' fo:wrap-option='wrap' "
             "style:vertical-align='bottom' fo:border-bottom='0.75pt solid %s'" % (BAND, ACCENT),
             "fo:text-align='end'"),
    "lefthead": ("fo:font-weight='bold'", "fo:background-color='%s' fo:wrap-option='wrap' "
                 "style:vertical-align='bottom' fo:border-bottom='0.75pt solid %s'"
                 % (BAND, ACCENT), "fo:text-align='start'"),
    "cell": ("", LINE, ""),
    "key": ("fo:font-weight='bold'", LINE, ""),
    "input": ("fo:color='#12348a'", "fo:background-color='%s' " % PAPER + LINE, ""),
    "remark": ("fo:color='#12348a'", "fo:background-color='%s' fo:padding-left='0.2cm' " % PAPER
               + LINE, ""),
    "alarm": ("fo:font-weight='bold' fo:color='#a61b1b'", "style:vertical-align='middle'", ""),
    "note": ("fo:font-size='8.5pt' fo:color='%s'" % MUTED, "style:vertical-align='bottom'", ""),
    "aside": ("fo:font-size='8.5pt' fo:color='%s'" % MUTED,
              "style:vertical-align='bottom' fo:padding-left='0.2cm'", ""),
    "wrapped": ("", "fo:wrap-option='wrap' style:vertical-align='top'", ""),
    "caution": ("", "fo:wrap-option='wrap' style:vertical-align='top' "
                "fo:border-left='2pt solid %s' fo:padding='0.1cm'" % ACCENT, ""),
    "link": ("fo:color='%s' style:text-underline-style='solid'" % ACCENT, LINE, ""),
    "pass": ("fo:font-weight='bold' fo:color='#17603a'", LINE, "fo:text-align='center'"),
    "fail": ("fo:font-weight='bold' fo:color='#ffffff'",
             "style:vertical-align='middle' fo:background-color='#a61b1b'",
             "fo:text-align='center'"),
    "moved": ("fo:font-weight='bold' fo:color='#8a3b00'", LINE, ""),
}

ALIGN = {"left": "start", "right": "end", "center": "center"}

# A style that changes with the cell's content: role, condition, the role then. In a condition
# {cell} is the cell, {row} its row; "outside" is of a band that stands in columns C and D.
CONDITIONS = {
    "verdict": ("pass", "cell-content()!=\"pass\"", "fail"),
    "outside": ("cell", "is-true-formula(OR({cell}<[.$C{row}];{cell}>[.$D{row}]))", "moved"),
    "change": ("cell", "cell-content-is-not-between(-0.0199999,0.0199999)", "moved"),
}
