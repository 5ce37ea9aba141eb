"""The interaction figure as a chart that the slide program itself draws: its place, its axes, its series, all editable."""

from lxml import etree
from pptx.chart.axis import ValueAxis
from pptx.chart.chart import Chart
from pptx.dml.color import RGBColor
from pptx.enum.chart import XL_CHART_TYPE, XL_TICK_LABEL_POSITION, XL_TICK_MARK
from pptx.oxml import parse_xml
from pptx.oxml.ns import qn
from pptx.shapes.placeholder import ChartPlaceholder, PlaceholderGraphicFrame
from pptx.util import Pt

from analysis import rounding
from app.exports import fit, series
from app.exports.master import FACE, SMALLEST, Box, Inks
from app.exports.plot import START, Plot

_CHART = "http://schemas.openxmlformats.org/drawingml/2006/chart"
_SLACK = 0.02  # of a place; what stands on the very end of an axis is drawn by one program and left out by another


def add(placeholder: ChartPlaceholder, plot: Plot, inks: Inks) -> PlaceholderGraphicFrame:
    """Draw the figure in the chart placeholder of a slide."""
    strands = series.strands(plot, inks)
    frame = placeholder.insert_chart(XL_CHART_TYPE.XY_SCATTER, series.data(strands))
    chart = frame.chart
    chart.has_legend, chart.has_title = False, False
    chart.font.size, chart.font.name = Pt(SMALLEST), FACE
    _place_plot(chart, plot)
    _draw_axes(chart, plot, inks)
    series.fill(chart, strands)
    return frame


def _place_plot(chart: Chart, plot: Plot) -> None:
    """Keep the sides of the chart free for names and numbers."""
    area, wide, tall = chart._chartSpace.chart.plotArea, plot.body.wide, plot.body.tall
    for layout in area.findall(qn("c:layout")):
        area.remove(layout)
    area.insert(0, _layout(plot.left / wide, plot.top / tall, plot.wide / wide, plot.tall / tall))


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
    across.minimum_scale, across.maximum_scale, across.major_unit = START, plot.end + _SLACK, 1
    across.tick_label_position = XL_TICK_LABEL_POSITION.NONE
    across.has_major_gridlines = False
    _draw_scale(up, plot, inks)
    for axis in (across, up):
        axis.major_tick_mark = axis.minor_tick_mark = XL_TICK_MARK.NONE
        axis.format.line.fill.background()
    _cross(across, plot.axis.low)
    _cross(up, START)
    response = fit.shorten(plot.response, SMALLEST, plot.body.tall - plot.top)
    from_top = plot.top + (plot.tall - min(fit.width(response, SMALLEST), plot.tall)) / 2
    _title(up, response, inks, 0.0, from_top, plot.body)
    factor = fit.shorten(plot.column_factor, SMALLEST, plot.wide)
    from_left = plot.left + (plot.wide - fit.width(factor, SMALLEST)) / 2
    _title(across, factor, inks, from_left, plot.body.tall - fit.height(1, SMALLEST) - 0.05, plot.body)


def _draw_scale(up: ValueAxis, plot: Plot, inks: Inks) -> None:
    up.minimum_scale, up.maximum_scale = plot.axis.low, plot.axis.high
    if plot.axis.is_log:  # its numbers and rules are drawn by a series, since the program would name powers of ten alone
        up._element.find(qn("c:scaling")).insert(0, parse_xml(f'<c:logBase xmlns:c="{_CHART}" val="10"/>'))
        up.tick_label_position, up.has_major_gridlines = XL_TICK_LABEL_POSITION.NONE, False
        return
    up.major_unit = plot.axis.step
    up.has_major_gridlines = True
    up.major_gridlines.format.line.color.rgb = RGBColor.from_string(inks.rule)
    up.major_gridlines.format.line.width = Pt(1)
    up.tick_label_position = XL_TICK_LABEL_POSITION.LOW  # at the left edge, also where the scale runs through zero
    up.tick_labels.number_format = _ticks(plot)
    up.tick_labels.number_format_is_linked = False
    series.write_in(up.tick_labels.font, inks.ink)


def _ticks(plot: Plot) -> str:
    """Return how the numbers of the scale are shown, with the true minus sign and thousands set apart."""
    digits = "0" + (f".{'0' * plot.axis.decimals}" if plot.axis.decimals else "")
    if plot.axis.low >= 0 and 1_000 <= plot.axis.high < 1_000_000:
        return f"[>=1000]#\\{rounding.NARROW_SPACE}##{digits};{digits}"
    return f"{digits};{rounding.MINUS}{digits}"


def _cross(axis: ValueAxis, at: float) -> None:
    """Let an axis meet the other one at this value of the other, its low end."""
    element = axis._element
    for name in ("c:crosses", "c:crossesAt"):
        for crossing in element.findall(qn(name)):
            element.remove(crossing)
    element.find(qn("c:crossAx")).addnext(parse_xml(f'<c:crossesAt xmlns:c="{_CHART}" val="{at!r}"/>'))


def _title(axis: ValueAxis, words: str, inks: Inks, from_left: float, from_top: float, body: Box) -> None:
    """Write the title of an axis at a place of its own, in inches from the corner of the chart."""
    frame = axis.axis_title.text_frame
    frame.text = words
    series.write_in(frame.paragraphs[0].runs[0].font, inks.quiet)
    title = axis._element.find(qn("c:title"))
    for layout in title.findall(qn("c:layout")):
        title.remove(layout)
    title.find(qn("c:tx")).addnext(_layout(max(0.0, from_left) / body.wide, max(0.0, from_top) / body.tall))
