"""Files that the tests of the reader build: text, workbooks of three kinds, Parquet, archives that mean harm."""

import io
import zipfile
from collections.abc import Callable, Iterable, Sequence
from xml.sax.saxutils import escape, quoteattr

import openpyxl
import pandas as pd
import xlwt
from openpyxl.worksheet.worksheet import Worksheet

from analysis.reading.entry import read_table
from analysis.table import Table

Row = Sequence[object]
BALANCED: tuple[Row, ...] = (
    ("feed", "shade", "yield"),
    ("grain", "none", 12.5),
    ("grain", "none", 13.0),
    ("grain", "half", 10.25),
    ("grain", "half", 11.0),
    ("grass", "none", 9.5),
    ("grass", "none", 8.75),
    ("grass", "half", 7.0),
    ("grass", "half", 7.5),
)
YIELDS = [12.5, 13.0, 10.25, 11.0, 9.5, 8.75, 7.0, 7.5]


def text(rows: Iterable[Row], separator: str = ",", decimal: str = ".", end: str = "\n") -> str:
    """Delimited text with a decimal mark for its floats."""
    return "".join(
        separator.join(str(cell).replace(".", decimal) if isinstance(cell, float) else str(cell) for cell in row) + end for row in rows
    )


def read(content: str, encoding: str = "utf-8", **choices: str) -> Table:
    """Read text as if it came as a file."""
    return read_table(content.encode(encoding), **choices)


def values(table: Table, column: str) -> list[float]:
    """The values of a response."""
    return [float(value) for value in table.column(column).as_response().values]


def labels(table: Table, column: str) -> list[str]:
    """The level of every row."""
    levels = table.column(column).as_levels()
    return [levels.labels[code] if code >= 0 else "" for code in levels.codes]


def told(table: Table, *columns: str) -> str:
    """All notes of a table, and of these of its columns as levels and as responses."""
    notes = list(table.notes)
    for name in columns:
        notes += table.column(name).as_levels().notes
    return " ".join(notes)


def xlsx(rows: Iterable[Row], change: Callable[[Worksheet], None] | None = None, title: str = "Data") -> bytes:
    """An .xlsx workbook with one sheet; change may alter it before it is saved."""
    book = openpyxl.Workbook()
    sheet = book.active
    assert isinstance(sheet, Worksheet)
    sheet.title = title
    for row in rows:
        sheet.append(list(row))
    if change is not None:
        change(sheet)
    return saved(book)


def saved(book: openpyxl.Workbook) -> bytes:
    """The bytes of a workbook."""
    stream = io.BytesIO()
    book.save(stream)
    return stream.getvalue()


def xls(rows: Iterable[Row], name: str = "Data", formats: dict[tuple[int, int], str] | None = None) -> bytes:
    """An .xls workbook with one sheet; formats gives number formats to cells (row, column)."""
    book = xlwt.Workbook()
    sheet = book.add_sheet(name)
    for i, row in enumerate(rows):
        for j, cell in enumerate(row):
            style = xlwt.easyxf(num_format_str=(formats or {}).get((i, j), "General"))
            if cell is not None:
                sheet.write(i, j, cell, style)
    stream = io.BytesIO()
    book.save(stream)
    return stream.getvalue()


def ods(rows: Iterable[Row], raw_rows: str = "", name: str = "Data") -> bytes:
    """An .ods workbook with one sheet; raw_rows are further rows as XML."""
    body = "".join(f"<table:table-row>{''.join(map(ods_cell, row))}</table:table-row>" for row in rows)
    return ods_of(f"<table:table table:name={quoteattr(name)}>{body}{raw_rows}</table:table>")


def ods_cell(cell: object) -> str:
    """One cell of an .ods sheet."""
    if cell is None:
        return "<table:table-cell/>"
    if isinstance(cell, (int, float)):
        return f'<table:table-cell office:value-type="float" office:value="{cell}"><text:p>{cell}</text:p></table:table-cell>'
    return f'<table:table-cell office:value-type="string"><text:p>{escape(str(cell))}</text:p></table:table-cell>'


def ods_of(tables: str, manifest: str = "") -> bytes:
    """An .ods workbook around the XML of its tables."""
    spaces = " ".join(f'xmlns:{p}="urn:oasis:names:tc:opendocument:xmlns:{p}:1.0"' for p in ("office", "table", "text"))
    content = (
        f'<?xml version="1.0" encoding="UTF-8"?><office:document-content {spaces} '
        f'xmlns:calcext="urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0">'
        f"<office:body><office:spreadsheet>{tables}</office:spreadsheet></office:body></office:document-content>"
    )
    parts = {"mimetype": "application/vnd.oasis.opendocument.spreadsheet", "content.xml": content}
    parts["META-INF/manifest.xml"] = manifest or '<manifest:manifest xmlns:manifest="urn:oasis:names:tc:opendocument:xmlns:manifest:1.0"/>'
    return archive(parts)


def archive(parts: dict[str, str | bytes]) -> bytes:
    """A zip archive."""
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as packed:
        for name, content in parts.items():
            packed.writestr(name, content)
    return stream.getvalue()


def replaced(book: bytes, name: str, change: Callable[[bytes], bytes]) -> bytes:
    """An archive with one of its parts changed."""
    with zipfile.ZipFile(io.BytesIO(book)) as packed:
        parts: dict[str, str | bytes] = {part: packed.read(part) for part in packed.namelist()}
    parts[name] = change(parts[name] if isinstance(parts[name], bytes) else str(parts[name]).encode())  # type: ignore[arg-type]
    return archive(parts)


def parquet(frame: pd.DataFrame) -> bytes:
    """A Parquet file."""
    stream = io.BytesIO()
    frame.to_parquet(stream)
    return stream.getvalue()
