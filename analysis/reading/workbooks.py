"""How the sheets of a workbook become records and columns; cells give their value, not their format."""

import datetime
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import cached_property, partial

import numpy as np
import pyarrow as pa

from analysis import refusals
from analysis.reading import archives, books, cell_values, ods_marks, ole, sheet_choice, xls_marks, xlsx_marks
from analysis.reading.books import Book
from analysis.reading.cell_values import Value
from analysis.reading.choices import Reading
from analysis.reading.marks import Known
from analysis.reading.records import HEAD, RAW, Body, Found, Record, filled_part, raw_line, record_of
from analysis.reading.sheet_marks import Marks
from analysis.reading.signatures import Kind
from analysis.table import Decision

MOST_CELLS = 40_000_000  # of the rectangle that a sheet spans


@dataclass(frozen=True, eq=False)
class Sheet:
    """One sheet, its cells as values; rows and columns count from the first of the sheet."""

    name: str
    values: Sequence[Sequence[Value]]
    marks: Marks
    found: Found

    @cached_property
    def head(self) -> Sequence[Record]:
        """The first rows as records."""
        rows = enumerate(self.values[:HEAD])
        return tuple(record_of(i + 1, [cell_values.text_of(value) for value in row]) for i, row in rows)

    def body(self, start: int, width: int) -> Body:
        """The columns below the header; raises TooManyFields where a cell beside the header is filled, or CellTooLong."""
        rows = self.values[start:]
        for offset, row in enumerate(rows):
            if len(row) > width and any(value != "" for value in row[width:]):
                raise refusals.TooManyFields(start + offset + 1, sum(value != "" for value in row), width)
        columns = [[row[index] if index < len(row) else "" for row in rows] for index in range(width)]
        texts = tuple(pa.array([cell_values.text_of(value) for value in column], pa.string()) for column in columns)
        numbers = tuple(cell_values.numbers_of(column) for column in columns)
        units = tuple(self._percent(index, start, column) for index, column in enumerate(columns))
        dates = tuple(tuple(start + i + 1 for i, value in enumerate(column) if isinstance(value, datetime.date)) for column in columns)
        return Body(texts, np.arange(start + 1, start + 1 + len(rows), dtype=np.int64), numbers, units, dates)

    def _percent(self, index: int, start: int, column: Sequence[Value]) -> str | None:
        """The unit of a column all of whose numbers are shown as percent."""
        if not self.marks.percent:
            return None
        places = [start + i for i, value in enumerate(column) if cell_values.is_number(value)]
        return "%" if places and all((row, index) in self.marks.percent for row in places) else None


def read(data: bytes, kind: Kind, reading: Reading) -> Sheet:
    """Read the wanted sheet of a workbook, or the first that holds a table.

    Raises MissingSheet, NoSheetWithTable, Encrypted, DamagedFile, UnpacksTooLarge or TooManyCellsInSheet.
    """
    if kind != "xls":
        archives.check(data)
    marks = _marks(data, kind)
    book = books.opened_apart(data) if kind == "xls" else books.opened(data)
    if reading.sheet is not None and reading.sheet not in book.names:
        raise refusals.MissingSheet(reading.sheet, book.names)
    if reading.sheet is not None:
        return _sheet(book, marks, reading.sheet, reading)
    for name in book.names:
        sheet = _sheet(book, marks, name, reading)
        if _holds_table(sheet) or len(book.names) == 1:
            return sheet
    raise refusals.NoSheetWithTable(book.names)


def _marks(data: bytes, kind: Kind) -> Callable[[str], Marks]:
    """How the marks of a sheet are found; those of .ods before anything else, since its cells may repeat without end."""
    if kind == "ods":
        sheets = ods_marks.read(data)
        for name, marks in sheets.items():
            _refuse_vast(name, marks)
        return lambda name: sheets.get(name, Marks())
    if kind == "xls":
        ole.stream(data, xls_marks.STREAMS)  # broken chains are told before the workbook is opened
    return partial(xlsx_marks.read if kind == "xlsx" else xls_marks.read, data)


def _refuse_vast(name: str, marks: Marks) -> None:
    if marks.rows * marks.columns > MOST_CELLS:
        raise refusals.TooManyCellsInSheet(name, marks.rows, marks.columns)


def _sheet(book: Book, marks_of: Callable[[str], Marks], name: str, reading: Reading) -> Sheet:
    marks = marks_of(name)
    _refuse_vast(name, marks)
    values, spans = book.load(name)
    marks.spans.extend([] if marks.spans else spans)  # those of .ods are known already
    cells = cell_values.marked(values, marks)
    decisions = (sheet_choice.decision(name, book.names, reading), *_decisions(marks, reading))
    hidden = tuple(marks.hidden) if reading.hidden == "leave out" else ()
    raw = tuple(
        raw_line(i + 1, " | ".join(filled_part([cell_values.text_of(value) for value in row]))) for i, row in enumerate(cells[:RAW])
    )
    return Sheet(name, cells, marks, Found(decisions, Known(decimal=reading.decimal), tuple(marks.spans), hidden, raw))


def _decisions(marks: Marks, reading: Reading) -> tuple[Decision, ...]:
    """What the marks of a sheet have to tell."""
    decisions = [sheet_choice.hidden(marks.hidden, reading)]
    if marks.unsaved:
        cells = [cell_values.reference(*cell) for cell in marks.unsaved]
        told = ", ".join(cells[:5]) + (f" and {len(cells) - 5} more" if len(cells) > 5 else "")
        sentence = f"Formulas without a stored value were read as blank ({told}): save the file in a spreadsheet program first."
        decisions.append(Decision("formulas", sentence))
    return tuple(decisions)


def _holds_table(sheet: Sheet) -> bool:
    """Whether at least two rows fill at least two cells each, one of them below the first with a number in it."""
    rows = [record for record in sheet.head if record.filled > 1]
    return len(rows) > 1 and any(cell_values.has_number(record.cells) for record in rows[1:])
