"""The workbook of a study: typed numbers at full precision, shown with the digits they deserve; text that never turns into a formula."""

import io
import re
from collections.abc import Mapping, Sequence
from typing import Any

import pandas as pd
from openpyxl.cell.cell import ILLEGAL_CHARACTERS_RE, Cell
from openpyxl.styles.alignment import Alignment
from openpyxl.styles.borders import Border, Side
from openpyxl.styles.fills import PatternFill
from openpyxl.styles.fonts import Font
from openpyxl.utils.cell import get_column_letter
from openpyxl.workbook.workbook import Workbook
from openpyxl.worksheet.properties import PageSetupProperties
from openpyxl.worksheet.worksheet import Worksheet

from analysis import log, rounding
from analysis.findings import Findings
from app import words
from app.exports import fit, sheets, zips
from app.exports.master import FACE
from app.look import DESK

LONGEST = 32_767  # characters that a cell can hold
NARROWEST, WIDEST = 9, 46  # characters of a column
SIZE, LINE = 10, 13.5  # points: type, and a line of it
HEAD_WIDE, TEXT_WIDE = 2.4, 7.6  # inches of the two columns of the first sheet
_FORMULA = tuple("=+-@\t\r")
_P = '[<0.001]"< 0.001";0.0000'
_RATIOS = "0.0000"
_COUNTS = frozenset({"df", "n", "df1", "df2", "residual_df", "family_size", "row of the file"})
_PLAIN_RATIOS = frozenset({"f", "t", "w", "chi2", "partial_eta2", "partial_eta2_lower", "partial_eta2_upper", "omega2", "partial_omega2"})
_SQUARES = frozenset({"ss", "ms"})
_RATIO = re.compile("leverage|student|cook|lambda|original units")


def build(findings: Findings, decisions: Sequence[log.Entry] = ()) -> bytes:
    """Return the workbook as an .xlsx file, the same bytes for the same findings."""
    book = Workbook()
    others = sheets.all_sheets(findings, decisions)
    _write_first(book.active, sheets.read_me(findings, others))
    formats = _formats(findings)
    for name, frame in others.items():
        _write_sheet(book.create_sheet(name), sheets.held(name, frame), formats)
    book.properties.creator, book.properties.title = "Crossgrain", words.response_label(findings)
    stream = io.BytesIO()
    book.save(stream)
    return zips.settled(stream.getvalue())


def _formats(findings: Findings) -> Mapping[str, str]:
    """Return the display formats that depend on the data: of values in units of the response, and of sums of squares."""
    spread = findings.cells["se"].min()
    return {
        "value": _places(rounding.decimals_for(None if pd.isna(spread) else float(spread)) + 1),
        "square": _places(rounding.decimals_for(findings.fit["residual_ms"]) + 1),
    }


def _places(decimals: int) -> str:
    return f"0.{'0' * decimals}" if decimals else "0"


def _format_of(head: str, value: object, formats: Mapping[str, str]) -> str:
    """Return how a number under a heading is shown; what it holds is never rounded."""
    if isinstance(value, int) or head in _COUNTS:
        return "0"
    if head in ("p", "p_adjusted"):
        return _P
    if head in _SQUARES:
        return formats["square"]
    return _RATIOS if head in _PLAIN_RATIOS or _RATIO.search(head) else formats["value"]


def _write_first(sheet: Worksheet, lines: Sequence[tuple[str, object]]) -> None:
    """Write the sheet that says what the workbook is."""
    sheet.title = "read me"
    sheet.append(["Crossgrain", "two factors, one response"])
    for row, (head, text) in enumerate(lines, start=2):
        write(sheet.cell(row, 1), head)
        write(sheet.cell(row, 2), text)
    for head, text in sheet.iter_rows():
        head.font, text.font = Font(FACE, SIZE, bold=True, color=DESK.accent.lstrip("#")), Font(FACE, SIZE)
        for cell in (head, text):
            cell.alignment = Alignment(wrap_text=True, vertical="top", horizontal="left")
        tall = max(len(fit.wrap(str(text.value), SIZE, TEXT_WIDE)), len(fit.wrap(str(head.value), SIZE, HEAD_WIDE)))
        sheet.row_dimensions[head.row].height = tall * LINE
    sheet.column_dimensions["A"].width, sheet.column_dimensions["B"].width = 34, 110
    sheet.freeze_panes = "A2"
    sheet.sheet_view.showGridLines = False
    _set_page(sheet)


def _set_page(sheet: Worksheet) -> None:
    """Print all columns of a sheet on one page across, its first row on every page."""
    sheet.page_setup.orientation = "landscape"
    sheet.sheet_properties.pageSetUpPr = PageSetupProperties(fitToPage=True)
    sheet.page_setup.fitToWidth, sheet.page_setup.fitToHeight = 1, 0
    sheet.print_title_rows = "1:1"


def _write_sheet(sheet: Worksheet, frame: pd.DataFrame, formats: Mapping[str, str]) -> None:
    """Write a frame below a frozen row of headings."""
    heads, styles = [str(name) for name in frame.columns], _styles(sheet, formats)
    for column, head in enumerate(heads, start=1):
        write(sheet.cell(1, column), heading(head))
        _dress_head(sheet.cell(1, column), pd.api.types.is_numeric_dtype(frame.iloc[:, column - 1]))
    sheet.row_dimensions[1].height = 2.2 * LINE
    for row, values in enumerate(frame.itertuples(index=False), start=2):
        for column, (head, value) in enumerate(zip(heads, values, strict=True), start=1):
            typed = sheets.number_or_text(value)
            if typed is None:
                continue
            cell = sheet.cell(row, column)
            write(cell, typed)
            # Looked up once and shared: setting font and format cell by cell takes twice the time of everything else.
            cell._style = styles[cell.quotePrefix if isinstance(typed, str) else _format_of(head, typed, formats)]
    _set_widths(sheet, frame)
    sheet.freeze_panes = "A2"
    sheet.auto_filter.ref = sheet.dimensions
    _set_page(sheet)


def _styles(sheet: Worksheet, formats: Mapping[str, str]) -> Mapping[str | bool, Any]:
    """Return how cells are styled: numbers by their format, text by whether it has to be kept from turning into a formula."""
    known: list[str | bool] = ["0", _P, _RATIOS, *formats.values(), True, False]
    samples = {key: Cell(sheet, 1, 1) for key in known}
    for key, sample in samples.items():
        sample.font = Font(FACE, SIZE)
        if isinstance(key, bool):
            sample.alignment, sample.quotePrefix = Alignment(indent=1), key
        else:
            sample.number_format = key
    return {key: sample._style for key, sample in samples.items()}


def heading(name: str) -> str:
    """Return what heads a column: the words of the screen where it has some, else the plain name."""
    group, separator, own = name.rpartition(": ")
    told = words.COLUMNS.get(own, own.replace("_", " ").replace("eta2", "η²").replace("omega2", "ω²"))
    return group + separator + told


def _dress_head(cell: Cell, of_numbers: bool) -> None:
    cell.font = Font(FACE, SIZE, bold=True, color=DESK.ink.lstrip("#"))
    cell.fill = PatternFill("solid", fgColor=DESK.shades[0].lstrip("#"))
    cell.border = Border(bottom=Side(style="medium", color=DESK.accent.lstrip("#")))
    side = {"horizontal": "right"} if of_numbers else {"indent": 1}
    cell.alignment = Alignment(wrap_text=True, vertical="bottom", **side)


def _set_widths(sheet: Worksheet, frame: pd.DataFrame) -> None:
    """Make each column as wide as its texts, its heading on two lines."""
    for column, name in enumerate(frame.columns, start=1):
        texts = [len(value) for value in frame.iloc[:200, column - 1] if isinstance(value, str)]
        heading = max(len(word) for word in [*str(sheet.cell(1, column).value).split(), ""]) + 3
        widest = max([NARROWEST, heading, len(str(name)) // 2 + 2, *(length + 2 for length in texts)])
        sheet.column_dimensions[get_column_letter(column)].width = min(WIDEST, widest)


def write(cell: Cell, value: object) -> None:
    """Write a number as a number and text as text; text that starts like a formula stays text, here and when it is copied on."""
    if not isinstance(value, str):
        cell.value = value
        return
    text = ILLEGAL_CHARACTERS_RE.sub("\N{REPLACEMENT CHARACTER}", value)[:LONGEST]
    cell.value = text
    cell.data_type = "s"
    if text.startswith(_FORMULA):
        cell.quotePrefix = True
