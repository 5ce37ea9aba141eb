"""How a table stands on a slide as a table that the slide program knows: its cells, rules and fields."""

from collections.abc import Sequence

from pptx.dml.color import RGBColor
from pptx.enum.text import MSO_ANCHOR, PP_ALIGN
from pptx.oxml import parse_xml
from pptx.oxml.ns import qn
from pptx.shapes.placeholder import PlaceholderGraphicFrame, TablePlaceholder
from pptx.table import Table, _Cell
from pptx.util import Inches, Pt

from app import words
from app.exports.master import FACE, Inks
from app.exports.setting import PAD_END, PAD_SIDE, Dress, Fitted, is_numeric

_PLAIN = "{2D5ABB26-0587-4C30-8999-92F81FD0307C}"  # the table style without any style
_DRAWING = "http://schemas.openxmlformats.org/drawingml/2006/main"
_EDGES = ("lnL", "lnR", "lnT", "lnB")  # in the order in which the file wants them


def add(placeholder: TablePlaceholder, content: Fitted, dress: Dress, inks: Inks) -> PlaceholderGraphicFrame:
    """Draw a fitted table in the table placeholder of a slide."""
    frame = placeholder.insert_table(len(content.rows), len(content.widths))
    table = frame.table
    table.horz_banding, table.first_row = False, True
    table._tbl.tblPr.find(qn("a:tableStyleId")).text = _PLAIN
    _set_sizes(table, content)
    frame.width, frame.height = Inches(sum(content.widths)), Inches(sum(content.heights))
    sides = [_side(column, dress) for column in zip(*content.rows[1:], strict=True)]
    for row, texts in enumerate(content.rows):
        for column, text in enumerate(texts):
            cell = table.cell(row, column)
            _write(cell, text, content.points, inks.ink if row else inks.quiet, bool(row) and column == dress.strong, sides[column])
            _draw(cell, row, column, dress, inks)
    return frame


def _set_sizes(table: Table, content: Fitted) -> None:
    for column, width in zip(iter(table.columns), content.widths, strict=True):
        column.width = Inches(width)
    for row, height in zip(table.rows, content.heights, strict=True):
        row.height = Inches(height)


def _side(column: Sequence[str], dress: Dress) -> PP_ALIGN:
    """Return where a column stands: numbers flush right, or in the middle of their fields, words flush left."""
    if not is_numeric(column):
        return PP_ALIGN.LEFT
    return PP_ALIGN.CENTER if dress.tiles else PP_ALIGN.RIGHT


def _write(cell: _Cell, text: str, points: int, colour: str, bold: bool, side: PP_ALIGN) -> None:
    cell.margin_left = cell.margin_right = Inches(PAD_SIDE)
    cell.margin_top = cell.margin_bottom = Inches(PAD_END)
    cell.vertical_anchor = MSO_ANCHOR.MIDDLE
    cell.fill.background()
    cell.text_frame.word_wrap = True
    paragraph = cell.text_frame.paragraphs[0]
    paragraph.alignment = side
    run = paragraph.add_run()
    run.text = text
    run.font.size, run.font.bold, run.font.name = Pt(points), bold, FACE
    run.font.color.rgb = RGBColor.from_string(colour)


def _draw(cell: _Cell, row: int, column: int, dress: Dress, inks: Inks) -> None:
    """Draw a rule below the cell, or a field around it."""
    if not dress.tiles:
        _edge(cell, ("lnB",), inks.rule if row else inks.accent, 0.75 if row else 1.5)
    elif row and column:
        cell.fill.solid()
        cell.fill.fore_color.rgb = RGBColor.from_string(inks.paper if cell.text == words.EMPTY else inks.field)
        _edge(cell, _EDGES, inks.paper, 4)


def _edge(cell: _Cell, sides: Sequence[str], colour: str, points: float) -> None:
    """Draw some edges of a cell, and none of the others."""
    properties = cell._tc.get_or_add_tcPr()
    drawn = f'<a:solidFill><a:srgbClr val="{colour}"/></a:solidFill>'
    for place, side in enumerate(_EDGES):
        wide, ink = (Pt(points), drawn) if side in sides else (0, "<a:noFill/>")
        properties.insert(place, parse_xml(f'<a:{side} xmlns:a="{_DRAWING}" w="{wide}">{ink}</a:{side}>'))
