"""The report as a document for a word processor: real headings, tables and captions, pictures with descriptions, blanks marked."""

import io
from collections.abc import Sequence
from dataclasses import replace
from datetime import UTC, datetime
from typing import Any

from docx import Document
from docx.enum.text import WD_ALIGN_PARAGRAPH, WD_COLOR_INDEX
from docx.oxml import OxmlElement
from docx.oxml.ns import qn
from docx.shared import Cm, Pt, RGBColor
from docx.text.paragraph import Paragraph

from analysis.refusals import NoBrowser
from app.exports import fit, images, zips
from app.exports.figure_files import Wanted
from app.exports.master import FACE
from app.look import DESK
from app.paper import Sheet
from app.report_parts import BLANK, Part, Picture, Rows, Text

TYPE, SMALL = 10.5, 8.5  # points, of text and of tables
WIDE_CM, MARGIN_CM, CM_TO_THE_INCH = 16.5, 2.2, 2.54
NO_PICTURE = "The figure is missing here, since a picture needs a browser of the Chromium family; the report as a page holds it."
LONG_AGO = datetime(1980, 1, 1, tzinfo=UTC)


def build(title: str, parts: Sequence[Part]) -> bytes:
    """Return the document as a .docx file, the same bytes for the same parts; without a browser it says where a figure is missing."""
    document = Document()
    _dress(document)
    document.add_heading(title, 0)
    drawn = iter(_drawn([block for part in parts for block in part.blocks if isinstance(block, Picture)]))
    count = {"Table": 0, "Figure": 0}
    for part in parts:
        document.add_heading(part.heading, 1)
        for block in part.blocks:
            if isinstance(block, Text):
                _text(document.add_paragraph(), block.text)
            elif isinstance(block, Rows):
                _caption(document, count, "Table", block.caption, above=True)
                _table(document, block.sheet)
            else:
                _picture(document, block, next(drawn))
                _caption(document, count, "Figure", block.caption, above=False)
    return _saved(document, title)


def _dress(document: Any) -> None:
    """Set type, colours and margins."""
    section = document.sections[0]
    section.page_width, section.page_height = Cm(21.0), Cm(29.7)
    section.left_margin = section.right_margin = section.top_margin = section.bottom_margin = Cm(MARGIN_CM)
    for name, points in (("Normal", TYPE), ("Title", 20), ("Heading 1", 14), ("Caption", 9)):
        style = document.styles[name]
        style.font.name, style.font.size = FACE, Pt(points)
        fonts = style.element.get_or_add_rPr().get_or_add_rFonts()
        for theme in [name for name in fonts.attrib if name.endswith("Theme")]:  # would come before the face
            del fonts.attrib[theme]
        fonts.set(qn("w:eastAsia"), FACE)
        style.font.color.rgb = RGBColor.from_string((DESK.accent if name in ("Title", "Heading 1") else DESK.ink).lstrip("#"))
    document.styles["Caption"].font.bold = False


def _drawn(pictures: Sequence[Picture]) -> list[bytes | None]:
    """Return every picture at print size, None for each where there is no browser."""
    look = replace(Wanted(WIDE_CM * 10, 8.5).look, height=400)
    try:
        return [png for png, _ in images.pngs_and_svgs([picture.figure(look) for picture in pictures])] if pictures else []
    except NoBrowser:
        return [None] * len(pictures)


def _text(paragraph: Paragraph, text: str) -> None:
    """Write text with its blanks marked."""
    at = 0
    for blank in BLANK.finditer(text):
        paragraph.add_run(text[at : blank.start()])
        paragraph.add_run(blank.group()).font.highlight_color = WD_COLOR_INDEX.YELLOW
        at = blank.end()
    paragraph.add_run(text[at:])


def _caption(document: Any, count: dict[str, int], kind: str, text: str, above: bool) -> None:
    count[kind] += 1
    paragraph = document.add_paragraph(style="Caption")
    paragraph.add_run(f"{kind} {count[kind]}. ").bold = True
    paragraph.add_run(text)
    paragraph.paragraph_format.keep_with_next = above


def _table(document: Any, sheet: Sheet) -> None:
    """Write a table with rules and no colours; its head is repeated on every page."""
    wide = len(sheet.columns)
    table = document.add_table(rows=len(sheet.rows) + 1, cols=wide)
    table.autofit = False
    _rule(table)
    for column, width in zip(table.columns, _widths(sheet), strict=True):
        column.width = Cm(width)
    texts = [text for row in (sheet.columns, *sheet.rows) for text in row]
    for place, (cell, text) in enumerate(zip(table._cells, texts, strict=True)):  # asked for once: row by row takes the square of it
        cell.width, paragraph = table.columns[place % wide].width, cell.paragraphs[0]
        run = paragraph.add_run(str(text))
        run.font.size, run.bold = Pt(SMALL), place < wide
        paragraph.paragraph_format.space_after = Pt(0)
        paragraph.alignment = WD_ALIGN_PARAGRAPH.LEFT if place % wide in sheet.words else WD_ALIGN_PARAGRAPH.RIGHT
    _repeat_head(table)
    document.add_paragraph().paragraph_format.space_after = Pt(4)


def _widths(sheet: Sheet) -> list[float]:
    """Return the widths of columns in cm: what each needs where that fits, else no less than its widest word, the rest by need."""
    columns = list(zip(sheet.columns, *sheet.rows, strict=True))
    pad = 0.45
    needs = [max(fit.width(str(text), SMALL) for text in column) * CM_TO_THE_INCH * fit.BOLD + pad for column in columns]
    words = [[word for text in column for word in fit.spaced(str(text))] for column in columns]
    least = [max((fit.width(word, SMALL) for word in found), default=0.0) * CM_TO_THE_INCH * fit.BOLD + pad for found in words]
    if sum(needs) <= WIDE_CM:
        return needs
    room, over = max(0.0, WIDE_CM - sum(least)), [need - low for need, low in zip(needs, least, strict=True)]
    widths = [low + room * more / max(sum(over), 1e-9) for low, more in zip(least, over, strict=True)]
    return [width * min(1.0, WIDE_CM / sum(widths)) for width in widths]


def _rule(table: Any) -> None:
    """Give a table a rule above, below and between its rows, and none between columns."""
    edges = OxmlElement("w:tblBorders")
    for name, colour in (("top", DESK.quiet), ("bottom", DESK.quiet), ("insideH", DESK.rule)):
        edge = OxmlElement(f"w:{name}")
        for key, value in (("val", "single"), ("sz", "4"), ("space", "0"), ("color", colour.lstrip("#"))):
            edge.set(qn(f"w:{key}"), value)
        edges.append(edge)
    table._tbl.tblPr.append(edges)


def _repeat_head(table: Any) -> None:
    mark = OxmlElement("w:tblHeader")
    mark.set(qn("w:val"), "true")
    table.rows[0]._tr.get_or_add_trPr().append(mark)


def _picture(document: Any, block: Picture, png: bytes | None) -> None:
    """Put a picture in with its description, or say why it is missing."""
    if png is None:
        document.add_paragraph().add_run(NO_PICTURE).italic = True
        return
    drawn = document.add_picture(io.BytesIO(png), width=Cm(WIDE_CM))
    drawn._inline.docPr.set("descr", block.alt)
    document.paragraphs[-1].paragraph_format.keep_with_next = True


def _saved(document: Any, title: str) -> bytes:
    properties = document.core_properties
    properties.title, properties.author, properties.comments, properties.last_modified_by = title, "", "", "Crossgrain"
    properties.created = properties.modified = LONG_AGO
    stream = io.BytesIO()
    document.save(stream)
    return zips.settled(stream.getvalue())
