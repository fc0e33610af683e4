"""Writes a workbook as flat XML (.fods) that reads well in a diff.

A row of cells is one line of the file, styles have short names, formulas carry
no cached values and charts no preview images: the office works all of that out
when it opens the file.

Formulas are written as a user types them, `=JOINT.TAU(B7:B46;C7:C46)`; the file
gets the stored form of function names and references. A cell's style is named
by words: a number format, and what the cell is, as in "percent input".
"""

import re
from xml.sax.saxutils import escape, quoteattr

from flat_style import ALIGN, CONDITIONS, FORMATS, INK, MUTED, ROLES

NAMESPACES = {
    "office": "urn:oasis:names:tc:opendocument:xmlns:office:1.0",
    "table": "urn:oasis:names:tc:opendocument:xmlns:table:1.0",
    "text": "urn:oasis:names:tc:opendocument:xmlns:text:1.0",
    "style": "urn:oasis:names:tc:opendocument:xmlns:style:1.0",
    "number": "urn:oasis:names:tc:opendocument:xmlns:datastyle:1.0",
    "fo": "urn:oasis:names:tc:opendocument:xmlns:xsl-fo-compatible:1.0",
    "svg": "urn:oasis:names:tc:opendocument:xmlns:svg-compatible:1.0",
    "draw": "urn:oasis:names:tc:opendocument:xmlns:drawing:1.0",
    "chart": "urn:oasis:names:tc:opendocument:xmlns:chart:1.0",
    "meta": "urn:oasis:names:tc:opendocument:xmlns:meta:1.0",
    "config": "urn:oasis:names:tc:opendocument:xmlns:config:1.0",
    "ooo": "http://openoffice.org/2004/office",
    "dc": "http://purl.org/dc/elements/1.1/",
    "xlink": "http://www.w3.org/1999/xlink",
    "of": "urn:oasis:names:tc:opendocument:xmlns:of:1.2",
    "loext": "urn:org:documentfoundation:names:experimental:office:xmlns:loext:1.0",
}

REFERENCE = re.compile(r"(\"[^\"]*\")|((?:\$?'[^']+'\.|\$?[A-Za-z_]+\.)?)"
                       r"(\$?[A-Z]{1,2}\$?[0-9]+)(?::(\$?[A-Z]{1,2}\$?[0-9]+))?(?![A-Za-z0-9_(])")

# How functions are typed, and the prefix that files keep instead.
PREFIXES = [(r"JOINT\.(?=[A-Z])", "ORG.JOINTSHEET.FUNCTIONS."),
            (r"(?=RANK\.AVG\()", "COM.MICROSOFT.")]


def letters(column):
    """0 -> A, 26 -> AA."""
    return letters(column // 26 - 1) + letters(column % 26) if column > 25 else chr(65 + column)


def position(address):
    """B7 -> (6, 1): row and column from 0."""
    word, number = re.fullmatch(r"([A-Z]+)([0-9]+)", address).groups()
    column = 0
    for letter in word:
        column = column * 26 + ord(letter) - 64
    return int(number) - 1, column - 1


def address(row, column):
    return letters(column) + str(row + 1)


def stored(formula):
    """The formula as files hold it: references in brackets, functions by their service."""
    def bracket(match):
        text, sheet, first, last = match.groups()
        if text:
            return text
        before = formula[match.start() - 1]
        if not sheet and (before.isalnum() or before in "_."):
            return match.group()
        sheet = ("" if sheet.startswith("$") or not sheet else "$") + sheet[:-1]
        return "[%s.%s%s]" % (sheet, first, ":." + last if last else "")
    parts = REFERENCE.sub(bracket, formula).split('"')        # every other one is text in quotes
    for i in range(0, len(parts), 2):
        for typed, kept in PREFIXES:
            parts[i] = re.sub(r"\b%s" % typed, kept, parts[i])
    return "of:" + '"'.join(parts)


class Sheet:
    """A grid of cells with column widths and row heights in cm."""

    def __init__(self, book, name, widths, frozen=0):
        self.book, self.name, self.widths, self.frozen = book, name, widths, frozen
        self.cells, self.heights, self.charts, self.spans = {}, {}, [], {}
        self.last = (0, len(widths) - 1)
        self.validations = {}

    def put(self, where, content, style="cell", span=1, down=1):
        row, column = position(where)
        self.cells[row, column] = (content, self.book.style(style, self.name, where), None)
        self.spans[row, column] = (span, down)
        for i in range(row, row + down):
            for j in range(column, column + span):
                if (i, j) != (row, column):
                    self.cells[i, j] = (None, self.book.style(style, self.name, where), "covered")
        self.reach(row + down - 1, column + span - 1)

    def row(self, where, contents, styles="cell"):
        """Cells side by side; one style for all, or a list of them."""
        row, column = position(where)
        for j, content in enumerate(contents):
            style = styles if isinstance(styles, str) else styles[j]
            self.put(address(row, column + j), content, style)

    def array(self, where, rows, columns, formula, style="cell"):
        """An array formula; style is one for all, one a column, or a function of (i, j)."""
        top, left = position(where)
        for i in range(rows):
            for j in range(columns):
                named = style(i, j) if callable(style) else (
                    style if isinstance(style, str) else style[j])
                named = self.book.style(named, self.name, address(top + i, left + j))
                content, kind = (formula, (rows, columns)) if i == j == 0 else (None, None)
                self.cells[top + i, left + j] = (content, named, kind)
        self.reach(top + rows - 1, left + columns - 1)

    def reach(self, row, column):
        self.last = max(self.last[0], row), max(self.last[1], column)

    def height(self, row):
        return self.heights.get(row + 1, 0.53)

    def place(self, chart, where, width, height):
        """Puts a chart with its upper left corner on a cell."""
        row, column = position(where)
        x = sum(self.widths[:column])
        y = sum(self.height(i) for i in range(row))
        self.charts.append(chart.drawn(x, y, width, height))
        bottom, i = y + height, row
        while sum(self.height(k) for k in range(i)) < bottom:
            i += 1
        self.reach(i - 1, column)

    def area(self):
        return "$%s.A1:.%s" % (quoted(self.name), address(*self.last))

    def written(self):
        yield "<table:table table:name=%s table:style-name='sheet' table:print-ranges=%s>" % (
            quoteattr(self.name), quoteattr(self.area().replace(":.", ":$%s." % quoted(self.name))
                                            .replace("$", "")))
        if self.charts:
            yield "<table:shapes>"
            yield from self.charts
            yield "</table:shapes>"
        for width in self.widths:
            yield "<table:table-column table:style-name='%s'/>" % self.book.column(width)
        for i in range(self.last[0] + 1):
            yield "<table:table-row table:style-name='%s'>%s</table:table-row>" % (
                self.book.row_style(self.height(i)), "".join(self.row_cells(i)))
        yield "</table:table>"

    def row_cells(self, i):
        j = 0
        while j <= self.last[1]:
            if (i, j) in self.cells:
                yield self.cell(i, j)
                j += 1
            else:
                first = j
                while j <= self.last[1] and (i, j) not in self.cells:
                    j += 1
                yield "<table:table-cell%s/>" % repeated(j - first)

    def cell(self, i, j):
        content, style, kind = self.cells[i, j]
        if kind == "covered":
            return "<table:covered-table-cell table:style-name='%s'/>" % style
        attributes = " table:style-name='%s'" % style
        span, down = self.spans.get((i, j), (1, 1))
        if span > 1 or down > 1:
            attributes += " table:number-columns-spanned='%d' table:number-rows-spanned='%d'" % (
                span, down)
        if (i, j) in self.validations:
            attributes += " table:content-validation-name='%s'" % self.validations[i, j]
        if kind:
            attributes += (" table:number-matrix-columns-spanned='%d'"
                           " table:number-matrix-rows-spanned='%d'" % (kind[1], kind[0]))
        return "<table:table-cell%s" % attributes + filled(content)


def filled(content):
    """The rest of a cell's element: its content and its end."""
    if content is None:
        return "/>"
    if isinstance(content, (int, float)):
        return " office:value-type='float' office:value='%r'/>" % content
    if isinstance(content, tuple):
        target, text = content
        return (" office:value-type='string'><text:p><text:a xlink:type='simple' xlink:href=%s>%s"
                "</text:a></text:p></table:table-cell>" % (quoteattr("#" + target), escape(text)))
    if content.startswith("="):
        return " table:formula=%s/>" % quoteattr(stored(content))
    return " office:value-type='string'>%s</table:table-cell>" % "".join(
        "<text:p>%s</text:p>" % escape(line) for line in content.split("\n"))


def repeated(count):
    return "" if count == 1 else " table:number-columns-repeated='%d'" % count


def quoted(name):
    return "'%s'" % name if " " in name else name


class Book:
    """Sheets, named ranges and the styles they use."""

    def __init__(self, title, subject, footer):
        self.title, self.subject, self.footer = title, subject, footer
        self.sheets, self.names, self.styles, self.rules = [], [], {}, []
        self.columns, self.rows = {}, {}

    def sheet(self, name, widths, frozen=0):
        self.sheets.append(Sheet(self, name, widths, frozen))
        return self.sheets[-1]

    def name(self, name, sheet, cells):
        """A named range; cells such as B7:F46."""
        self.names.append((name, sheet.name, cells))

    def choice(self, sheet, where, words):
        """Lets a cell hold only one of these words."""
        listed = ";".join('"%s"' % word for word in words)
        self.rule(sheet, where, "cell-content-is-in-list(%s)" % listed,
                  "One of: %s." % ", ".join(words), False)

    def between(self, sheet, where, low, high, says, empty=True):
        """Lets a cell hold only a number in these bounds; what a refusal says."""
        self.rule(sheet, where, "cell-content-is-decimal-number() and "
                  "cell-content-is-between(%s,%s)" % (low, high), says, empty)

    def rule(self, sheet, where, condition, says, empty):
        rule = ("of:" + condition, says, "true" if empty else "false")
        if rule not in self.rules:
            self.rules.append(rule)
        sheet.validations[position(where)] = "rule%d" % (self.rules.index(rule) + 1)

    def style(self, words, sheet, where):
        """Remembers a style by its words and gives its name in the file."""
        name = "-".join(words.split())
        self.styles.setdefault(name, (words.split(), sheet, where))
        return name

    def column(self, width):
        return self.columns.setdefault(width, "w%d" % round(width * 100))

    def row_style(self, height):
        return self.rows.setdefault(height, "h%d" % round(height * 100))

    def write(self, path):
        body = [line for sheet in self.sheets for line in sheet.written()]
        with open(path, "w", encoding="utf-8") as file:
            for line in self.document(body):
                file.write(line + "\n")

    def document(self, body):
        yield '<?xml version="1.0" encoding="UTF-8"?>'
        yield "<office:document office:version=\"1.3\""
        yield " office:mimetype=\"application/vnd.oasis.opendocument.spreadsheet\""
        for prefix, address_ in NAMESPACES.items():
            yield " xmlns:%s=\"%s\"" % (prefix, address_)
        yield ">"
        yield "<office:meta><dc:title>%s</dc:title><dc:subject>%s</dc:subject></office:meta>" % (
            escape(self.title), escape(self.subject))
        yield from self.settings()
        yield "<office:font-face-decls>"
        yield ("<style:font-face style:name='Sans' svg:font-family=\"'Liberation Sans'\""
               " style:font-family-generic='swiss' style:font-pitch='variable'/>")
        yield "</office:font-face-decls>"
        yield from self.common_styles()
        yield from self.automatic_styles()
        yield from self.master()
        yield "<office:body><office:spreadsheet>"
        yield ("<table:calculation-settings table:automatic-find-labels='false'"
               " table:use-regular-expressions='false' table:use-wildcards='true'/>")
        if self.rules:
            yield "<table:content-validations>"
            for i, (condition, says, empty) in enumerate(self.rules, 1):
                yield ("<table:content-validation table:name='rule%d' table:condition=%s"
                       " table:allow-empty-cell='%s' table:display-list='unsorted'>"
                       "<table:error-message table:display='true' table:message-type='stop'"
                       " table:title='Not possible here'><text:p>%s</text:p></table:error-message>"
                       "</table:content-validation>" % (i, quoteattr(condition), empty,
                                                        escape(says)))
            yield "</table:content-validations>"
        yield from body
        yield "<table:named-expressions>"
        for name, sheet, cells in self.names:
            first, _, last = cells.partition(":")
            dollars = lambda a: re.sub(r"([A-Z]+)([0-9]+)", r"$\1$\2", a)
            yield ("<table:named-range table:name='%s' table:base-cell-address=%s"
                   " table:cell-range-address=%s/>" % (
                       name, quoteattr("$%s.$A$1" % quoted(sheet)),
                       quoteattr("$%s.%s%s" % (quoted(sheet), dollars(first),
                                               ":." + dollars(last) if last else ""))))
        yield "</table:named-expressions>"
        yield "</office:spreadsheet></office:body></office:document>"

    def settings(self):
        item = "<config:config-item config:name='%s' config:type='%s'>%s</config:config-item>"
        yield "<office:settings><config:config-item-set config:name='ooo:view-settings'>"
        yield ("<config:config-item-map-indexed config:name='Views'>"
               "<config:config-item-map-entry>")
        yield item % ("ViewId", "string", "view1")
        yield "<config:config-item-map-named config:name='Tables'>"
        for sheet in self.sheets:
            yield "<config:config-item-map-entry config:name=%s>" % quoteattr(sheet.name)
            if sheet.frozen:
                yield item % ("VerticalSplitMode", "short", 2)
                yield item % ("VerticalSplitPosition", "int", sheet.frozen)
                yield item % ("ActiveSplitRange", "short", 2)
                yield item % ("PositionBottom", "int", sheet.frozen)
            yield "</config:config-item-map-entry>"
        yield "</config:config-item-map-named>"
        yield item % ("ActiveTable", "string", self.sheets[0].name)
        yield item % ("ShowGrid", "boolean", "false")
        yield "</config:config-item-map-entry></config:config-item-map-indexed>"
        yield "</config:config-item-set></office:settings>"

    def common_styles(self):
        yield "<office:styles>"
        yield ("<style:default-style style:family='table-cell'><style:text-properties"
               " style:font-name='Sans' fo:font-size='10pt' fo:color='%s' fo:language='en'"
               " fo:country='GB'/></style:default-style>" % INK)
        yield ("<number:number-style style:name='n-small'><number:scientific-number"
               " number:decimal-places='0' number:min-integer-digits='1'"
               " number:min-exponent-digits='2'/></number:number-style>")
        for name, (decimals, percent, grouped) in sorted(
                (name, facts) for name, facts in FORMATS.items() if facts):
            kind = "percentage" if percent else "number"
            yield ("<number:%s-style style:name='n-%s'><number:number number:decimal-places='%d'"
                   " number:min-decimal-places='%d' number:min-integer-digits='1'%s/>%s"
                   "</number:%s-style>" % (
                       kind, name, decimals, decimals, " number:grouping='true'" * grouped,
                       "<number:text>%</number:text>" * percent, kind))
        yield "<style:style style:name='Default' style:family='table-cell'/>"
        for words, _, _ in self.styles.values():
            if words[-1] in CONDITIONS:
                then = words[:-1] + [CONDITIONS[words[-1]][2]]
                yield from self.cell_style("-".join(then), then)
        yield "</office:styles>"

    def automatic_styles(self):
        yield "<office:automatic-styles>"
        yield ("<style:style style:name='sheet' style:family='table' style:master-page-name='wide'>"
               "<style:table-properties table:display='true' style:writing-mode='lr-tb'/>"
               "</style:style>")
        for width, name in sorted(self.columns.items()):
            yield ("<style:style style:name='%s' style:family='table-column'>"
                   "<style:table-column-properties style:column-width='%gcm'/></style:style>"
                   % (name, width))
        for height, name in sorted(self.rows.items()):
            yield ("<style:style style:name='%s' style:family='table-row'>"
                   "<style:table-row-properties style:row-height='%gcm'"
                   " style:use-optimal-row-height='false'/></style:style>" % (name, height))
        for name, (words, sheet, where) in sorted(self.styles.items()):
            yield from self.cell_style(name, words, sheet, where)
        yield ("<style:style style:name='frame' style:family='graphic'><style:graphic-properties"
               " draw:stroke='none' draw:fill='none'/></style:style>")
        yield ("<style:page-layout style:name='landscape'><style:page-layout-properties"
               " fo:page-width='29.7cm' fo:page-height='21cm' style:print-orientation='landscape'"
               " fo:margin='1.2cm' style:scale-to-X='1' style:scale-to-Y='1'"
               " style:table-centering='horizontal' style:print='charts drawings objects"
               " zero-values'/>")
        for part in ("header", "footer"):
            yield ("<style:%s-style><style:header-footer-properties fo:min-height='0.8cm'"
                   " fo:margin-left='0cm' fo:margin-right='0cm' fo:margin-%s='0.3cm'/>"
                   "</style:%s-style>"
                   % (part, "bottom" if part == "header" else "top", part))
        yield "</style:page-layout>"
        yield ("<style:style style:name='small' style:family='text'><style:text-properties"
               " fo:font-size='8pt' fo:color='%s'/></style:style>" % MUTED)
        yield "</office:automatic-styles>"

    def cell_style(self, name, words, sheet=None, where=None):
        role = words[-1] if words[-1] in ROLES or words[-1] in CONDITIONS else "cell"
        condition = CONDITIONS.get(role)
        text, cell, paragraph = ROLES[condition[0] if condition else role]
        number = [w for w in words if w in FORMATS]
        for word in words:
            if word in ALIGN:
                paragraph = "fo:text-align='%s'" % ALIGN[word]
        yield "<style:style style:name='%s' style:family='table-cell'%s%s>%s</style:style>" % (
            name, " style:parent-style-name='Default'",
            " style:data-style-name='n-%s'" % number[0] if number else "",
            self.properties(text, cell, paragraph) + (
                self.condition(condition, words, sheet, where) if condition and sheet else ""))

    @staticmethod
    def properties(text, cell, paragraph):
        if paragraph:
            cell += " style:text-align-source='fix'"
        out = "<style:table-cell-properties %s/>" % cell if cell else ""
        out += "<style:paragraph-properties %s/>" % paragraph if paragraph else ""
        return out + ("<style:text-properties %s/>" % text if text else "")

    @staticmethod
    def condition(condition, words, sheet, where):
        _, when, then = condition
        when = when.format(cell="[.%s]" % where, row=position(where)[0] + 1)
        return ("<style:map style:condition=%s style:apply-style-name='%s'"
                " style:base-cell-address=%s/>" % (
                    quoteattr(when), "-".join(words[:-1] + [then]),
                    quoteattr("%s.%s" % (quoted(sheet), where))))

    def master(self):
        small = "<text:p><text:span text:style-name='small'>%s</text:span></text:p>"
        yield ("<office:master-styles><style:master-page style:name='wide'"
               " style:page-layout-name='landscape'>")
        yield "<style:header><style:region-left>%s</style:region-left>" % (
            small % escape(self.title))
        yield "<style:region-right>%s</style:region-right></style:header>" % (
            small % "<text:sheet-name>sheet</text:sheet-name>")
        yield "<style:footer><style:region-left>%s</style:region-left>" % (
            small % escape(self.footer))
        yield "<style:region-right>%s</style:region-right></style:footer>" % (
            small % "Page <text:page-number>1</text:page-number>"
            " of <text:page-count>1</text:page-count>")
        yield "</style:master-page></office:master-styles>"
