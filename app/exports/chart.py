"""The interaction figure as a chart that the slide program itself draws: lines, confidence bars and points that stay editable."""

import io
from collections.abc import Sequence
from dataclasses import replace

from lxml import etree
from openpyxl.reader.excel import load_workbook
from pptx.chart.axis import ValueAxis
from pptx.chart.chart import Chart
from pptx.chart.data import XyChartData
from pptx.chart.series import XySeries
from pptx.dml.color import RGBColor
from pptx.enum.chart import XL_CHART_TYPE, XL_LABEL_POSITION, XL_MARKER_STYLE, XL_TICK_LABEL_POSITION, XL_TICK_MARK
from pptx.enum.dml import MSO_LINE
from pptx.oxml import parse_xml
from pptx.oxml.ns import qn
from pptx.shapes.placeholder import ChartPlaceholder, PlaceholderGraphicFrame
from pptx.text.text import Font, TextFrame
from pptx.util import Pt

from analysis import rounding
from app.exports import fit, zips
from app.exports.master import BODY, FACE, SMALLEST, Inks
from app.exports.plot import Line, Plot

# The slide program knows fewer markers and dashes than a browser; each level still differs from every other.
MARKERS = {
    "circle": XL_MARKER_STYLE.CIRCLE,
    "square": XL_MARKER_STYLE.SQUARE,
    "diamond": XL_MARKER_STYLE.DIAMOND,
    "triangle-up": XL_MARKER_STYLE.TRIANGLE,
    "triangle-down": XL_MARKER_STYLE.STAR,
    "cross": XL_MARKER_STYLE.PLUS,
    "x": XL_MARKER_STYLE.X,
    "pentagon": XL_MARKER_STYLE.DASH,
}
DASHES = {
    "solid": MSO_LINE.SOLID,
    "dash": MSO_LINE.DASH,
    "dot": MSO_LINE.ROUND_DOT,
    "dashdot": MSO_LINE.DASH_DOT,
    "longdash": MSO_LINE.LONG_DASH,
    "longdashdot": MSO_LINE.LONG_DASH_DOT,
    "3px,2px": MSO_LINE.SQUARE_DOT,
    "14px,3px,3px,3px,3px,3px": MSO_LINE.DASH_DOT_DOT,
}
_STROKES = frozenset({XL_MARKER_STYLE.PLUS, XL_MARKER_STYLE.X, XL_MARKER_STYLE.STAR, XL_MARKER_STYLE.DASH})  # drawn by their outline
LINE_WIDE, BAR_WIDE, MEAN_SIZE, POINT_SIZE = 3.0, 2.25, 12, 6  # points
POINT_STRENGTH = 0.45
_CHART = "http://schemas.openxmlformats.org/drawingml/2006/chart"
_DRAWING = "http://schemas.openxmlformats.org/drawingml/2006/main"
_SHEET = "Sheet1"


def add(placeholder: ChartPlaceholder, plot: Plot, inks: Inks) -> PlaceholderGraphicFrame:
    """Draw the figure in the chart placeholder of a slide."""
    frame = placeholder.insert_chart(XL_CHART_TYPE.XY_SCATTER, _data(plot))
    chart = frame.chart
    chart.has_legend, chart.has_title = False, False
    chart.font.size, chart.font.name = Pt(SMALLEST), FACE
    _place_plot(chart, plot)
    _draw_axes(chart, plot, inks)
    _draw_series(chart, plot, inks)
    _write_bars_and_gaps(chart, plot)
    return frame


def _data(plot: Plot) -> XyChartData:
    """Return the series: one of points and one of means for each line, then the places of the names."""
    data = XyChartData(number_format="General")
    for line in plot.lines:
        if line.points:
            _series(data, f"{line.level}: observations", line.point_places, line.points)
    for line in plot.lines:
        _series(data, line.level, line.places, [estimate or 0.0 for estimate in line.estimates])
    _series(data, f"places of the names of {plot.column_factor}", range(len(plot.names)), [plot.axis.low] * len(plot.names))
    heights = [*(line.name_height for line in plot.lines), plot.heading_height]
    _series(data, f"places of the names of {plot.row_factor}", [plot.end] * len(heights), heights)
    return data


def _series(data: XyChartData, name: str, places: Sequence[float], heights: Sequence[float]) -> None:
    series = data.add_series(name)
    for place, height in zip(places, heights, strict=True):
        series.add_data_point(place, height)


def _place_plot(chart: Chart, plot: Plot) -> None:
    """Keep the sides of the chart free for names and numbers."""
    wide, tall = BODY.wide - plot.left - plot.right, BODY.tall - plot.top - plot.bottom
    area = chart._chartSpace.chart.plotArea
    for layout in area.findall(qn("c:layout")):
        area.remove(layout)
    area.insert(0, _layout(plot.left / BODY.wide, plot.top / BODY.tall, wide / BODY.wide, tall / BODY.tall))


def _layout(x: float, y: float, wide: float | None = None, tall: float | None = None) -> etree._Element:
    """Return a place inside the chart, in shares of its width and height."""
    inner = '<c:layoutTarget val="inner"/>' if wide is not None else ""
    size = f'<c:w val="{wide:.5f}"/><c:h val="{tall:.5f}"/>' if wide is not None else ""
    return parse_xml(
        f'<c:layout xmlns:c="{_CHART}"><c:manualLayout>{inner}<c:xMode val="edge"/><c:yMode val="edge"/>'
        f'<c:x val="{x:.5f}"/><c:y val="{y:.5f}"/>{size}</c:manualLayout></c:layout>'
    )


def _draw_axes(chart: Chart, plot: Plot, inks: Inks) -> None:
    across, up = chart.category_axis, chart.value_axis
    across.minimum_scale, across.maximum_scale, across.major_unit = -0.5, plot.end + 0.02, 1
    across.tick_label_position = XL_TICK_LABEL_POSITION.NONE
    across.has_major_gridlines = False
    up.minimum_scale, up.maximum_scale, up.major_unit = plot.axis.low, plot.axis.high, plot.axis.step
    up.has_major_gridlines = True
    up.major_gridlines.format.line.color.rgb = RGBColor.from_string(inks.rule)
    up.major_gridlines.format.line.width = Pt(1)
    up.tick_label_position = XL_TICK_LABEL_POSITION.LOW  # at the left edge, also where the scale runs through zero
    up.tick_labels.number_format = _ticks(plot)
    up.tick_labels.number_format_is_linked = False
    _type(up.tick_labels.font, inks.ink)
    for axis in (across, up):
        axis.major_tick_mark = axis.minor_tick_mark = XL_TICK_MARK.NONE
        axis.format.line.fill.background()
    _cross_at_edges(across, up, plot)
    _title(up, fit.shorten(plot.response, SMALLEST, BODY.tall - plot.top), inks)
    _title(across, plot.column_factor, inks)
    _place_titles(chart, plot)


def _ticks(plot: Plot) -> str:
    """Return how the numbers of the scale are shown, with the true minus sign and thousands set apart."""
    digits = "0" + (f".{'0' * plot.axis.decimals}" if plot.axis.decimals else "")
    if plot.axis.low >= 0 and 1_000 <= plot.axis.high < 1_000_000:
        return f"[>=1000]#\\{rounding.NARROW_SPACE}##{digits};{digits}"
    return f"{digits};{rounding.MINUS}{digits}"


def _cross_at_edges(across: ValueAxis, up: ValueAxis, plot: Plot) -> None:
    """Let each axis stand at the low end of the other."""
    for axis, at in ((across, plot.axis.low), (up, -0.5)):
        element = axis._element
        for name in ("c:crosses", "c:crossesAt"):
            for crossing in element.findall(qn(name)):
                element.remove(crossing)
        element.find(qn("c:crossAx")).addnext(parse_xml(f'<c:crossesAt xmlns:c="{_CHART}" val="{at!r}"/>'))


def _title(axis: ValueAxis, words: str, inks: Inks) -> None:
    frame = axis.axis_title.text_frame
    frame.text = words
    _type(frame.paragraphs[0].runs[0].font, inks.quiet)


def _place_titles(chart: Chart, plot: Plot) -> None:
    """Put the response's name along the left edge and the column factor's below its levels."""
    row = fit.height(1, SMALLEST)
    middle = plot.left + (BODY.wide - plot.left - plot.right) / 2 - fit.width(plot.column_factor, SMALLEST) / 2
    centre = plot.top + (BODY.tall - plot.top - plot.bottom) / 2
    long = min(fit.width(fit.shorten(plot.response, SMALLEST, BODY.tall - plot.top), SMALLEST), BODY.tall)
    places = {
        chart.category_axis: (max(0.0, middle) / BODY.wide, (BODY.tall - row - 0.05) / BODY.tall),
        chart.value_axis: (0.0, max(0.0, centre - long / 2) / BODY.tall),
    }
    for axis, place in places.items():
        title = axis._element.find(qn("c:title"))
        for layout in title.findall(qn("c:layout")):
            title.remove(layout)
        title.find(qn("c:tx")).addnext(_layout(*place))


def _type(font: Font, colour: str, bold: bool = False) -> None:
    font.size, font.bold, font.name, font.color.rgb = Pt(SMALLEST), bold, FACE, RGBColor.from_string(colour)


def _draw_series(chart: Chart, plot: Plot, inks: Inks) -> None:
    """Give every series its look: faint points, strong lines, and names without marks."""
    series = list(chart.plots[0].series)
    for line, points in zip([line for line in plot.lines if line.points], series, strict=False):
        _draw_points(points, line, inks)
    for line, means in zip(plot.lines, _means(chart, plot), strict=True):
        _draw_line(means, line, inks)
    levels, names = series[-2:]
    for helper in (levels, names):
        helper.format.line.fill.background()
        helper.marker.style = XL_MARKER_STYLE.NONE
    for number, name in enumerate(plot.names):
        wide = (BODY.wide - plot.left - plot.right) / (plot.end + 0.5)
        _label(levels, number, "\n".join(fit.wrap(name, SMALLEST, wide * 0.94)), XL_LABEL_POSITION.BELOW, inks.ink)
    for number, line in enumerate(plot.lines):
        _label(names, number, line.name, XL_LABEL_POSITION.RIGHT, line.ink, bold=True)
    _label(names, len(plot.lines), plot.row_factor, XL_LABEL_POSITION.RIGHT, inks.quiet)


def _means(chart: Chart, plot: Plot) -> list[XySeries]:
    """Return the series of the estimates, one for each line; the two behind them hold the places of names."""
    return list(chart.plots[0].series)[-2 - len(plot.lines) : -2]


def _draw_points(series: XySeries, line: Line, inks: Inks) -> None:
    """Draw observations in a pale hue; mixed, not transparent, since not every program draws transparent marks."""
    series.format.line.fill.background()
    pale = mixed(line.hue, inks.paper, POINT_STRENGTH)
    _mark(series, replace(line, hue=pale), POINT_SIZE, pale)


def mixed(hue: str, ground: str, strength: float) -> str:
    """Return a hue thinned by its ground, each as six hexadecimal digits."""
    pairs = zip(bytes.fromhex(hue), bytes.fromhex(ground), strict=True)
    return bytes(round(strength * mine + (1 - strength) * below) for mine, below in pairs).hex().upper()


def _draw_line(series: XySeries, line: Line, inks: Inks) -> None:
    series.format.line.color.rgb = RGBColor.from_string(line.hue)
    series.format.line.width = Pt(LINE_WIDE)
    series.format.line.dash_style = DASHES[line.dash]
    _mark(series, line, MEAN_SIZE, inks.paper)


def _mark(series: XySeries, line: Line, size: int, outline: str) -> None:
    """Draw the marker of a level; hollow ones are filled with nothing, stroked ones drawn in their hue."""
    shape = MARKERS[line.marker.removesuffix("-open")]
    marker, hue = series.marker, RGBColor.from_string(line.hue)
    marker.style, marker.size = shape, size
    hollow = line.marker.endswith("-open")
    if hollow:
        marker.format.fill.background()
    else:
        marker.format.fill.solid()
        marker.format.fill.fore_color.rgb = hue
    marker.format.line.color.rgb = hue if hollow or shape in _STROKES else RGBColor.from_string(outline)
    marker.format.line.width = Pt(1.5 if hollow or shape in _STROKES else 0.75)


def _label(series: XySeries, number: int, words: str, position: XL_LABEL_POSITION, colour: str, bold: bool = False) -> None:
    """Write words beside a point that has no mark of its own."""
    label = series.points[number].data_label
    frame: TextFrame = label.text_frame
    frame.text = words
    frame.word_wrap = False
    for paragraph in frame.paragraphs:
        for run in paragraph.runs:
            _type(run.font, colour, bold)
    label.position = position


def _write_bars_and_gaps(chart: Chart, plot: Plot) -> None:
    """Add the intervals beside the means in the chart's own workbook and as bars; leave gaps where there is no estimate."""
    part = chart.part.chart_workbook
    book = load_workbook(io.BytesIO(part.xlsx_part.blob))
    sheet = book[_SHEET]
    for line, series in zip(plot.lines, _means(chart, plot), strict=True):
        first, last = _rows(series)
        sheet.cell(first - 1, 1, "place")
        sheet.cell(first - 1, 3, "down to")
        sheet.cell(first - 1, 4, "up to")
        for row, estimate, below, above in zip(range(first, last + 1), line.estimates, line.below, line.above, strict=True):
            sheet.cell(row, 3, below)
            sheet.cell(row, 4, above)
            if estimate is None:
                sheet.cell(row, 2).value = None
                _make_gap(series, row - first)
        series._element.find(qn("c:xVal")).addprevious(_bars(line, first, last))
    changed = io.BytesIO()
    book.save(changed)
    part.update_from_xlsx_blob(zips.settled(changed.getvalue()))


def _rows(series: XySeries) -> tuple[int, int]:
    """Return the first and the last row of a series in the chart's workbook."""
    formula = series._element.find(qn("c:yVal")).find(".//" + qn("c:f")).text
    first, _, last = formula.rpartition("!")[2].partition(":")
    return int(first.rpartition("$")[2]), int((last or first).rpartition("$")[2])


def _make_gap(series: XySeries, number: int) -> None:
    """Take the estimate of a cell that has none out of the line."""
    for point in series._element.find(qn("c:yVal")).iter(qn("c:pt")):
        if point.get("idx") == str(number):
            point.getparent().remove(point)
            return


def _bars(line: Line, first: int, last: int) -> etree._Element:
    """Return the error bars of a line, drawn from the chart's workbook."""
    up, down = (_cached(letter, first, last, ends) for letter, ends in (("D", line.above), ("C", line.below)))
    return parse_xml(
        f'<c:errBars xmlns:c="{_CHART}" xmlns:a="{_DRAWING}"><c:errDir val="y"/><c:errBarType val="both"/><c:errValType val="cust"/>'
        f'<c:noEndCap val="1"/><c:plus>{up}</c:plus><c:minus>{down}</c:minus><c:spPr><a:ln w="{Pt(BAR_WIDE)}" cap="flat"><a:solidFill>'
        f'<a:srgbClr val="{line.hue}"/></a:solidFill><a:prstDash val="solid"/></a:ln></c:spPr></c:errBars>'
    )


def _cached(letter: str, first: int, last: int, ends: Sequence[float | None]) -> str:
    """Write a reference to cells of the chart's workbook with a copy of their numbers."""
    points = "".join(f'<c:pt idx="{k}"><c:v>{end!r}</c:v></c:pt>' for k, end in enumerate(ends) if end is not None)
    return (
        f"<c:numRef><c:f>{_SHEET}!${letter}${first}:${letter}${last}</c:f><c:numCache><c:formatCode>General</c:formatCode>"
        f'<c:ptCount val="{len(ends)}"/>{points}</c:numCache></c:numRef>'
    )
