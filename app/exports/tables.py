"""How a table of text stands on a slide: type, widths, what is shortened and how many rows there is room for."""

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace

import pandas as pd
from pptx.dml.color import RGBColor
from pptx.enum.text import MSO_ANCHOR, PP_ALIGN
from pptx.oxml import parse_xml
from pptx.oxml.ns import qn
from pptx.shapes.placeholder import PlaceholderGraphicFrame, TablePlaceholder
from pptx.table import Table, _Cell
from pptx.util import Inches, Pt

from app.exports import fit
from app.exports.master import BODY, FACE, SMALLEST, Inks

PAD_SIDE, PAD_END = 0.12, 0.06  # inches between a text and the edges of its cell
BOLD = 1.07  # bold type is so much wider
MOST_LINES = 3  # of one cell, where rows may be left away
HEAD_LINES = 3
WIDEST_FIELD, TALLEST_FIELD = 2.6, 0.9  # inches of a field in a table of counts
NARROWEST = 0.95  # inches of a column; more columns than fit are left away
_PLAIN = "{2D5ABB26-0587-4C30-8999-92F81FD0307C}"  # the table style without any style
_NUMBER = re.compile(r"empty|–|(< )?[−\d][−\d\s.,]*( \([−\d\s.,]+ to [−\d\s.,]+\))?")
_EDGES = ("lnL", "lnR", "lnT", "lnB")  # in the order in which the file wants them
_DRAWING = "http://schemas.openxmlformats.org/drawingml/2006/main"


@dataclass(frozen=True)
class Dress:
    """How one kind of table is set."""

    sizes: tuple[int, ...] = (28, 26, 24, 22, 20, SMALLEST)  # points, the largest at which the whole table fits
    strong: int | None = None  # the column in bold
    tiles: bool = False  # a field for each cell, spread over the slide, numbers in the middle
    every_row: bool = False  # long cells lose words before the table loses rows
    ordered_by: str = "first"  # what the rows at the top are


@dataclass(frozen=True)
class Fitted:
    """A table as it stands on the slide, and what was done to make it fit."""

    points: int
    widths: tuple[float, ...]  # inches
    heights: tuple[float, ...]  # inches, the head first
    head: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]
    cut: str  # the rule in words where rows or columns were left away
    shortened: tuple[tuple[str, str], ...]  # what reads differently on the slide, and the whole of it

    @property
    def whole(self) -> bool:
        """Return whether everything stands there as it is, no word broken."""
        return not self.cut and not self.shortened and not any(map(self._breaks, (self.head, *self.rows)))

    def _breaks(self, row: Sequence[str]) -> bool:
        return not all(fit.fits(text, self.points, _inside(width), 99) for text, width in zip(row, self.widths, strict=True))


def fitted(table: pd.DataFrame, dress: Dress) -> Fitted:
    """Return a table fitted to the body of a slide at the largest type that holds it all, else as much as fits at the smallest.

    Rule: where rows may go, the first ones stay ("the 8 largest of 42"); where they may not, long cells are shortened instead. Columns
    that would get too narrow to read go from the right.
    """
    for points in dress.sizes:
        found = _at(table, points, dress)
        if found.whole:
            break
    return _spread(found) if dress.tiles else found


def _spread(content: Fitted) -> Fitted:
    """Return the table with its columns and rows grown towards the edges of the body, the counts in fields of one size."""
    head, *fields = content.widths
    field = max(max(fields), min(WIDEST_FIELD, (BODY.wide - head) / len(fields)))
    if head + field * len(fields) > BODY.wide + 1e-6:
        return content
    room = BODY.tall / sum(content.heights)
    heights = tuple(max(height, min(TALLEST_FIELD, height * room)) for height in content.heights[1:])
    return replace(content, widths=(head, *[field] * len(fields)), heights=(content.heights[0], *heights))


def _at(table: pd.DataFrame, points: int, dress: Dress) -> Fitted:
    """Return the table fitted at one size of type."""
    columns = min(len(table.columns), int(BODY.wide // NARROWEST))
    cut = f"{columns - 1} of {len(table.columns) - 1} columns" if columns < len(table.columns) else ""
    texts = [[str(name) for name in table.columns[:columns]], *(list(map(str, row[:columns])) for row in table.itertuples(index=False))]
    widths = _tile_widths(texts, points) if dress.tiles else _widths(texts, points)
    most = _lines_for(len(texts), points) if dress.every_row else MOST_LINES
    short = [_short_head(texts[0], widths, points), *(_short_row(row, widths, points, most) for row in texts[1:])]
    if dress.tiles:
        _keep_apart(short, texts, widths, points, most)
    heights = [_height(row, widths, points) for row in short]
    shown = len(short) if dress.every_row else _rows_that_fit(heights)
    if shown < len(short):
        cut = "; ".join(filter(None, (cut, f"the {shown - 1} {dress.ordered_by} of {len(short) - 1} rows")))
    pairs = [(a, b) for mine, whole in zip(short[:shown], texts, strict=False) for a, b in zip(mine, whole, strict=True) if a != b]
    return Fitted(
        points, tuple(widths), tuple(heights[:shown]), tuple(short[0]), tuple(map(tuple, short[1:shown])), cut, tuple(dict.fromkeys(pairs))
    )


def _needs(column: Sequence[str], points: int) -> float:
    """Return the width at which no text of a column has to be wrapped."""
    return max(fit.width(text, points) for text in column) * BOLD + 2 * PAD_SIDE


def _widths(texts: Sequence[Sequence[str]], points: int) -> list[float]:
    """Return the widths of the columns: what each needs where that fits.

    Else numbers keep what they need, no column gets less than its widest word, and what is left goes to words in proportion to need.
    """
    columns = list(zip(*texts, strict=True))
    needs = [_needs(column, points) for column in columns]
    if sum(needs) <= BODY.wide:
        return needs
    least = [need if is_numeric(column[1:]) else _least(column, points) for need, column in zip(needs, columns, strict=True)]
    over = [need - low for need, low in zip(needs, least, strict=True)]
    room = max(0.0, BODY.wide - sum(least))
    widths = [low + room * more / max(sum(over), 1e-9) for low, more in zip(least, over, strict=True)]
    return [width * min(1.0, BODY.wide / sum(widths)) for width in widths]


def _least(column: Sequence[str], points: int) -> float:
    """Return the width at which no word of a column has to be broken, and none gets all the room."""
    return min(_needs([word for text in column for word in fit.spaced(text)] or [""], points), BODY.wide / 4)


def _tile_widths(texts: Sequence[Sequence[str]], points: int) -> list[float]:
    """Return the widths of a table of counts: its names down the side get up to a third, the fields share the rest alike."""
    first, *fields = zip(*texts, strict=True)
    field = max(_needs(column, points) for column in fields)
    side = min(max(_needs(first[1:], points), _least(first[:1], points)), BODY.wide / 3)
    return [side, *[min(field, (BODY.wide - side) / len(fields))] * len(fields)]


def _inside(width: float) -> float:
    return (width - 2 * PAD_SIDE) / BOLD + 1e-6


def _lines_for(rows: int, points: int) -> int:
    """Return how many lines each cell may take where every row has to stay."""
    return fit.lines_in((BODY.tall - 0.5) / max(rows - 1, 1) - 2 * PAD_END, points)


def _short_head(head: Sequence[str], widths: Sequence[float], points: int) -> list[str]:
    return [fit.shorten(text, points, _inside(width), HEAD_LINES) for text, width in zip(head, widths, strict=True)]


def _short_row(row: Sequence[str], widths: Sequence[float], points: int, most: int) -> list[str]:
    """Return the cells of a row, those that are too long shortened in their middle."""
    return [fit.shorten(text, points, _inside(width), most, from_end=len(text) // 3) for text, width in zip(row, widths, strict=True)]


def _keep_apart(short: list[list[str]], texts: Sequence[Sequence[str]], widths: Sequence[float], points: int, most: int) -> None:
    """Keep names of levels different across the top and down the side of a table of counts, also when they are short."""
    short[0][1:] = fit.names(texts[0][1:], points, min(map(_inside, widths[1:])), HEAD_LINES)
    for row, name in zip(short[1:], fit.names([row[0] for row in texts[1:]], points, _inside(widths[0]), most), strict=True):
        row[0] = name


def _height(row: Sequence[str], widths: Sequence[float], points: int) -> float:
    lines = max(len(fit.wrap(text, points, _inside(width))) for text, width in zip(row, widths, strict=True))
    return fit.height(lines, points) + 2 * PAD_END


def _rows_that_fit(heights: Sequence[float]) -> int:
    """Return how many rows, the head included, stand in the body."""
    total = 0.0
    for count, height in enumerate(heights):
        total += height
        if total > BODY.tall + 1e-9:
            return max(count, 2)
    return len(heights)


def add(placeholder: TablePlaceholder, content: Fitted, dress: Dress, inks: Inks) -> PlaceholderGraphicFrame:
    """Draw a fitted table in the table placeholder of a slide."""
    frame = placeholder.insert_table(len(content.rows) + 1, len(content.head))
    table = frame.table
    table.horz_banding, table.first_row = False, True
    table._tbl.tblPr.find(qn("a:tableStyleId")).text = _PLAIN
    _set_sizes(table, content)
    frame.width, frame.height = Inches(sum(content.widths)), Inches(sum(content.heights))
    sides = [_side(column, dress) for column in zip(*content.rows, strict=True)]
    for row, texts in enumerate((content.head, *content.rows)):
        for column, text in enumerate(texts):
            cell = table.cell(row, column)
            _write(cell, text, content.points, inks.quiet if row == 0 else inks.ink, row > 0 and column == dress.strong, sides[column])
            if not dress.tiles:
                _edge(cell, ("lnB",), inks.accent if row == 0 else inks.rule, 1.5 if row == 0 else 0.75)
            elif row and column:
                _fill(cell, inks.field if text[:1].isdigit() else inks.paper)
                _edge(cell, _EDGES, inks.paper, 4)
    return frame


def _set_sizes(table: Table, content: Fitted) -> None:
    for column, width in zip(table.columns, content.widths, strict=True):
        column.width = Inches(width)
    for row, height in zip(table.rows, content.heights, strict=True):
        row.height = Inches(height)


def is_numeric(column: Sequence[str]) -> bool:
    """Return whether a column reads as numbers, with or without intervals."""
    return all(_NUMBER.fullmatch(text) for text in column)


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


def _fill(cell: _Cell, colour: str) -> None:
    cell.fill.solid()
    cell.fill.fore_color.rgb = RGBColor.from_string(colour)


def _edge(cell: _Cell, sides: Sequence[str], colour: str, points: float) -> None:
    """Draw some edges of a cell, and none of the others."""
    properties = cell._tc.get_or_add_tcPr()
    drawn = f'<a:solidFill><a:srgbClr val="{colour}"/></a:solidFill>'
    for place, side in enumerate(_EDGES):
        wide, ink = (Pt(points), drawn) if side in sides else (0, "<a:noFill/>")
        properties.insert(place, parse_xml(f'<a:{side} xmlns:a="{_DRAWING}" w="{wide}">{ink}</a:{side}>'))
