"""What the series of the interaction chart hold and how each is drawn: observations, estimates with bars, names in their places."""

import io
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from functools import partial
from typing import Any

from lxml import etree
from openpyxl.reader.excel import load_workbook
from pptx.chart.chart import Chart
from pptx.chart.data import XyChartData
from pptx.chart.series import XySeries
from pptx.dml.color import RGBColor
from pptx.enum.chart import XL_LABEL_POSITION, XL_MARKER_STYLE
from pptx.enum.dml import MSO_LINE
from pptx.oxml import parse_xml
from pptx.oxml.ns import qn
from pptx.text.text import Font
from pptx.util import Pt

from app.exports import fit, zips
from app.exports.master import FACE, SMALLEST, Inks
from app.exports.plot import START, Line, Plot

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


@dataclass(frozen=True)
class Strand:
    """One series before it stands in the chart."""

    name: str
    places: Sequence[float]
    heights: Sequence[float | None]
    draw: Callable[[XySeries], None]
    line: Line | None = None  # whose estimates the series holds


def strands(plot: Plot, inks: Inks) -> list[Strand]:
    """Return the series of the chart: points behind, estimates before them, names in their places.

    The longest come first: LibreOffice (seen in 7.4) leaves out a series that stands before a longer one.
    """
    heights = [line.name_height for line in plot.lines if line.name] + [plot.heading_height]
    found = [
        *(
            Strand(f"{line.level}: observations", line.point_places, line.points, partial(_draw_points, line, inks))
            for line in plot.lines
            if line.points
        ),
        *(Strand(line.level, line.places, line.estimates, partial(_draw_line, line, inks), line) for line in plot.lines),
        Strand(
            f"places of {plot.column_factor}", range(len(plot.names)), [plot.axis.low] * len(plot.names), partial(_write_levels, plot, inks)
        ),
        Strand(f"places of {plot.row_factor}", [plot.end] * len(heights), heights, partial(_write_lines, plot, inks)),
        *(
            [Strand("scale", [START] * len(plot.axis.named), plot.axis.named, partial(_write_scale, plot, inks))]
            if plot.axis.is_log
            else []
        ),
    ]
    return sorted(found, key=lambda strand: -len(strand.places))


def data(found: Sequence[Strand]) -> XyChartData:
    """Return the series as the chart's data; a missing height is told as 0 here and taken out by `fill`."""
    chart_data = XyChartData(number_format="General")
    for strand in found:
        series = chart_data.add_series(strand.name)
        for place, height in zip(strand.places, strand.heights, strict=True):
            series.add_data_point(place, 0.0 if height is None else height)
    return chart_data


def fill(chart: Chart, found: Sequence[Strand]) -> None:
    """Draw every series, and hold the intervals beside the estimates in the chart's own workbook, from which its bars are drawn."""
    part: Any = chart.part
    book = load_workbook(io.BytesIO(part.chart_workbook.xlsx_part.blob))
    for strand, series in zip(found, list(chart.plots[0].series), strict=True):
        strand.draw(series)
        if strand.line is not None:
            _hold_intervals(book[_SHEET], series, strand.line)
    changed = io.BytesIO()
    book.save(changed)
    part.chart_workbook.update_from_xlsx_blob(zips.settled(changed.getvalue()))


def _hold_intervals(sheet: Any, series: XySeries, line: Line) -> None:
    first, last = _rows(series)
    for column, head in {1: "place", 3: "down to", 4: "up to"}.items():
        sheet.cell(first - 1, column, head)
    for row, estimate, below, above in zip(range(first, last + 1), line.estimates, line.below, line.above, strict=True):
        sheet.cell(row, 3, below)
        sheet.cell(row, 4, above)
        if estimate is None:
            sheet.cell(row, 2).value = None
            _make_gap(series, row - first)
    series._element.find(qn("c:xVal")).addprevious(_bars(line, first, last))


def _rows(series: XySeries) -> tuple[int, int]:
    """Return the first and the last row of a series in the chart's workbook."""
    formula = series._element.find(qn("c:yVal")).find(".//" + qn("c:f")).text
    first, _, last = formula.rpartition("!")[2].partition(":")
    return int(first.rpartition("$")[2]), int((last or first).rpartition("$")[2])


def _make_gap(series: XySeries, number: int) -> None:
    """Take the estimate of a cell that has none out of the line."""
    for point in list(series._element.find(qn("c:yVal")).iter(qn("c:pt"))):
        if point.get("idx") == str(number):
            point.getparent().remove(point)


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


def _draw_points(line: Line, inks: Inks, series: XySeries) -> None:
    """Draw observations in a pale hue; mixed, not transparent, since not every program draws transparent marks."""
    series.format.line.fill.background()
    pale = mixed(line.hue, inks.paper, POINT_STRENGTH)
    _mark(series, replace(line, hue=pale), POINT_SIZE, pale)


def mixed(hue: str, ground: str, strength: float) -> str:
    """Return a hue thinned by its ground, each as six hexadecimal digits."""
    pairs = zip(bytes.fromhex(hue), bytes.fromhex(ground), strict=True)
    return bytes(round(strength * mine + (1 - strength) * below) for mine, below in pairs).hex().upper()


def _draw_line(line: Line, inks: Inks, series: XySeries) -> None:
    series.format.line.color.rgb = RGBColor.from_string(line.hue)
    series.format.line.width = Pt(LINE_WIDE)
    series.format.line.dash_style = DASHES[line.dash]
    _mark(series, line, MEAN_SIZE, inks.paper)


def _mark(series: XySeries, line: Line, size: int, outline: str) -> None:
    """Draw the marker of a level; hollow ones are filled with nothing, stroked ones drawn in their hue."""
    shape, hollow = MARKERS[line.marker.removesuffix("-open")], line.marker.endswith("-open")
    marker, hue = series.marker, RGBColor.from_string(line.hue)
    marker.style, marker.size = shape, size
    if hollow:
        marker.format.fill.background()
    else:
        marker.format.fill.solid()
        marker.format.fill.fore_color.rgb = hue
    marker.format.line.color.rgb = hue if hollow or shape in _STROKES else RGBColor.from_string(outline)
    marker.format.line.width = Pt(1.5 if hollow or shape in _STROKES else 0.75)


def _write_levels(plot: Plot, inks: Inks, series: XySeries) -> None:
    """Write the levels of the column factor below their places."""
    _unmark(series)
    for number, name in enumerate(plot.names):
        _label(series, number, "\n".join(fit.wrap(name, SMALLEST, plot.slot)), XL_LABEL_POSITION.BELOW, inks.ink)


def _write_lines(plot: Plot, inks: Inks, series: XySeries) -> None:
    """Write the names of the lines beside their ends, and the name of their factor above them."""
    _unmark(series)
    named = [line for line in plot.lines if line.name]
    for number, line in enumerate(named):
        _label(series, number, line.name, XL_LABEL_POSITION.RIGHT, line.ink, bold=True)
    _label(series, len(named), plot.heading, XL_LABEL_POSITION.RIGHT, inks.quiet)


def _write_scale(plot: Plot, inks: Inks, series: XySeries) -> None:
    """Write the numbers of a logarithmic scale at its left edge, each with a rule across the figure."""
    _unmark(series)
    for number, name in enumerate(plot.axis.names):
        _label(series, number, name, XL_LABEL_POSITION.LEFT, inks.ink)
    rule = (
        f'<c:errBars xmlns:c="{_CHART}" xmlns:a="{_DRAWING}"><c:errDir val="x"/><c:errBarType val="plus"/><c:errValType val="fixedVal"/>'
        f'<c:noEndCap val="1"/><c:val val="{plot.end - START!r}"/><c:spPr><a:ln w="{Pt(1)}"><a:solidFill><a:srgbClr val="{inks.rule}"/>'
        "</a:solidFill></a:ln></c:spPr></c:errBars>"
    )
    series._element.find(qn("c:xVal")).addprevious(parse_xml(rule))


def _unmark(series: XySeries) -> None:
    series.format.line.fill.background()
    series.marker.style = XL_MARKER_STYLE.NONE


def _label(series: XySeries, number: int, words: str, position: XL_LABEL_POSITION, colour: str, bold: bool = False) -> None:
    """Write words beside a point that has no mark of its own."""
    label = series.points[number].data_label
    label.text_frame.text = words
    label.text_frame.word_wrap = False
    for paragraph in label.text_frame.paragraphs:
        for run in paragraph.runs:
            write_in(run.font, colour, bold)
    label.position = position


def write_in(font: Font, colour: str, bold: bool = False) -> None:
    """Set the type of a text in the chart."""
    font.size, font.bold, font.name, font.color.rgb = Pt(SMALLEST), bold, FACE, RGBColor.from_string(colour)
