"""Charts of a flat XML workbook, as short as the office accepts them."""

from xml.sax.saxutils import escape, quoteattr

from flat_style import INK, MUTED, RULE


# Number formats of axes.
NUMBERS = ["<number:number-style style:name='plain'><number:number number:min-integer-digits='1'/>"
           "</number:number-style>",
           "<number:number-style style:name='tenths'><number:number number:decimal-places='1'"
           " number:min-integer-digits='1'/></number:number-style>",
           "<number:percentage-style style:name='percent2'><number:number number:decimal-places='2'"
           " number:min-integer-digits='1'/><number:text>%</number:text></number:percentage-style>",
           "<number:percentage-style style:name='percent'><number:number number:decimal-places='0'"
           " number:min-integer-digits='1'/><number:text>%</number:text></number:percentage-style>",
           "<number:number-style style:name='grouped'><number:number number:decimal-places='0'"
           " number:min-integer-digits='1' number:grouping='true'/></number:number-style>"]

# Dashed lines: name and length of a dash.
DASHES = ["<draw:stroke-dash draw:name='%s' draw:style='rect' draw:dots1='1'"
          " draw:dots1-length='%gcm' draw:distance='0.12cm'/>" % dash
          for dash in (("dashes", 0.25), ("dots", 0.08))]


class Chart:
    """A chart of ranges: scatter, or by the names in x: bars with one series, or a line chart."""

    def __init__(self, kind, title, x_title, y_title, **settings):
        self.kind, self.title, self.x_title, self.y_title = kind, title, x_title, y_title
        self.settings, self.series, self.styles = settings, [], []
        self.named = kind in ("bar", "line")

    def add(self, label, x, y, colour, line=None, symbol=None, around=None):
        """A series: the cell that names it, its ranges, and how it is drawn; around are the
        ranges of how far an error bar reaches below and above."""
        self.series.append((label, x, y, self.series_style(colour, line, symbol),
                            self.error_bars(colour, around) if around else ""))

    def error_bars(self, colour, around):
        style = self.style(
            "chart:error-category='cell-range' chart:error-lower-indicator='true'"
            " chart:error-upper-indicator='true' chart:error-lower-range=%s"
            " chart:error-upper-range=%s" % tuple(map(quoteattr, around)),
            "draw:stroke='solid' svg:stroke-width='0.05cm' svg:stroke-color='%s'" % colour)
        return "<chart:error-indicator chart:style-name='%s' chart:dimension='y'/>" % style

    def style(self, chart="", graphic="", text="", more=""):
        name = "c%d" % (len(self.styles) + 1)
        self.styles.append(
            "<style:style style:name='%s' style:family='chart' %s>"
            "<style:chart-properties %s/><style:graphic-properties %s/>"
            "<style:text-properties style:font-name='Sans' fo:font-family='Liberation Sans'"
            " fo:color='%s' %s/></style:style>" % (name, more, chart, graphic, INK, text))
        return name

    def series_style(self, colour, line, symbol):
        chart = "chart:link-data-style-to-source='true' "
        chart += ("chart:symbol-type='named-symbol' chart:symbol-name='%s'"
                  " chart:symbol-width='0.2cm' chart:symbol-height='0.2cm'" % symbol
                  if symbol else "chart:symbol-type='none'")
        stroke = {None: "none", "solid": "solid"}.get(line, "dash")
        graphic = "draw:stroke='%s' svg:stroke-width='0.06cm' svg:stroke-color='%s'" % (
            stroke, colour)
        if stroke == "dash":
            graphic += " draw:stroke-dash='%s'" % line
        return self.style(chart, graphic + " draw:fill='solid' draw:fill-color='%s'" % colour)

    def axis(self, dimension, title, settings):
        chart = "chart:display-label='true' chart:link-data-style-to-source='false'"
        for word, value in settings.items():
            if word != "format":
                chart += " chart:%s='%s'" % (word, value)
        label = self.style(chart, "svg:stroke-color='%s'" % MUTED, self.font(),
                           "style:data-style-name='%s'" % settings.get("format", "plain"))
        angle = "style:rotation-angle='%d'" % (0 if dimension == "x" else 90)
        heading = self.style(angle, "draw:stroke='none'", self.font(1))
        grid = self.style("", "svg:stroke-color='%s'" % RULE)
        lines = "" if dimension == "x" and self.named else (
            "<chart:grid chart:style-name='%s' chart:class='major'/>" % grid)
        return ("<chart:axis chart:dimension='%s' chart:name='primary-%s' chart:style-name='%s'>"
                "<chart:title chart:style-name='%s'><text:p>%s</text:p></chart:title>%s%s"
                "</chart:axis>" % (dimension, dimension, label, heading, escape(title),
                                   self.categories(dimension), lines))

    def categories(self, dimension):
        if dimension != "x" or not self.named:
            return ""
        return "<chart:categories table:cell-range-address=%s/>" % quoteattr(self.series[0][1])

    def drawn(self, x, y, width, height):
        """The frame of the chart as it stands in a sheet; lengths in cm."""
        size = "svg:width='%gcm' svg:height='%gcm'" % (width, height)
        body = self.body(size)             # first, as it adds to the styles
        return "\n".join(
            ["<draw:frame draw:style-name='frame' svg:x='%gcm' svg:y='%gcm' %s><draw:object>"
             % (x, y, size),
             "<office:document office:version='1.3'"
             " office:mimetype='application/vnd.oasis.opendocument.chart'>",
             "<office:styles>"] + DASHES + ["</office:styles>", "<office:automatic-styles>"]
            + NUMBERS + self.styles + ["</office:automatic-styles>"] + body
            + ["</office:document></draw:object></draw:frame>"])

    def body(self, size):
        blank = self.style("", "draw:stroke='none' draw:fill='none'")
        heading = self.style("", "draw:stroke='none'", self.font(3) + " fo:font-weight='bold'")
        legend = self.style("", "draw:stroke='none' draw:fill='none'", self.font(1))
        plot = self.style("chart:include-hidden-cells='false' chart:treat-empty-cells='leave-gap'"
                          " chart:auto-size='true' chart:gap-width='80'")
        lines = ["<office:body><office:chart>",
                 "<chart:chart chart:class='chart:%s' chart:style-name='%s' %s>"
                 % ("bar" if self.named else self.kind, blank, size),
                 "<chart:title chart:style-name='%s'><text:p>%s</text:p></chart:title>"
                 % (heading, escape(self.title))]
        if self.settings.get("legend", True):
            lines.append("<chart:legend chart:legend-position='bottom'"
                         " style:legend-expansion='wide' chart:style-name='%s'/>" % legend)
        lines += ["<chart:plot-area chart:style-name='%s'>" % plot,
                  self.axis("x", self.x_title, self.settings.get("x", {})),
                  self.axis("y", self.y_title, self.settings.get("y", {}))]
        lines += [self.one_series(*s) for s in self.series]
        return lines + ["<chart:wall chart:style-name='%s'/></chart:plot-area>" % blank,
                        "</chart:chart></office:chart></office:body>"]

    def font(self, larger=0):
        return "fo:font-size='%dpt'" % (self.settings.get("size", 8) + larger)

    def one_series(self, label, x, y, style, bars):
        domain = "" if self.named else (
            "<chart:domain table:cell-range-address=%s/>" % quoteattr(x))
        return ("<chart:series chart:style-name='%s' chart:class='chart:%s'"
                " chart:values-cell-range-address=%s chart:label-cell-address=%s>%s%s"
                "</chart:series>" % (style, self.kind, quoteattr(y), quoteattr(label), domain,
                                     bars))
