"""How the sheets of a workbook become records and columns; cells give their value, not their format."""

import datetime
import io
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import cached_property, partial
from typing import TypeVar

import numpy as np
import pyarrow as pa
import python_calamine as calamine

from analysis import refusals
from analysis.reading import archives, cell_values, ods_marks, spaces, xls_marks, xlsx_marks
from analysis.reading.cell_values import Value
from analysis.reading.records import HEAD, Body, Found, Record, Span, trimmed
from analysis.reading.sheet_marks import Marks
from analysis.reading.signatures import Kind
from analysis.reading.words import several
from analysis.table import Decision

T = TypeVar("T")
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
        return tuple(Record(i + 1, trimmed([spaces.tidy(cell_values.text_of(value)) for value in row])) for i, row in rows)

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


def read(data: bytes, kind: Kind, wanted: str | None) -> Sheet:
    """Read the wanted sheet of a workbook, or the first that holds a table.

    Raises MissingSheet, NoSheetWithTable, Encrypted, DamagedFile, UnpacksTooLarge or TooManyCellsInSheet.
    """
    if kind != "xls":
        archives.check(data)
    marks = _marks(data, kind)
    book = _guarded(lambda: calamine.CalamineWorkbook.from_filelike(io.BytesIO(data)))
    known = _sheet_names(book)
    if wanted is not None and wanted not in known:
        raise refusals.MissingSheet(wanted, known)
    if wanted is not None:
        return _sheet(book, marks, wanted, [])
    for name in known:
        sheet = _sheet(book, marks, name, [other for other in known if other != name])
        if _holds_table(sheet) or len(known) == 1:
            return sheet
    raise refusals.NoSheetWithTable(known)


def _guarded(call: Callable[[], T]) -> T:
    """Run a part of the workbook library; whatever it stumbles over in a file means that the file is damaged."""
    try:
        return call()
    except calamine.PasswordError as error:
        raise refusals.Encrypted() from error
    except (KeyboardInterrupt, SystemExit, MemoryError):
        raise
    except BaseException as error:  # a fault inside the library is no ordinary exception
        raise refusals.DamagedFile("workbook") from error


def _sheet_names(book: calamine.CalamineWorkbook) -> list[str]:
    """Sheets of cells, the visible ones first."""
    sheets = [sheet for sheet in book.sheets_metadata if sheet.typ == calamine.SheetTypeEnum.WorkSheet]
    return [s.name for s in sorted(sheets, key=lambda sheet: sheet.visible != calamine.SheetVisibleEnum.Visible)]


def _marks(data: bytes, kind: Kind) -> Callable[[str], Marks]:
    """How the marks of a sheet are found; those of .ods before anything else, since its cells may repeat without end."""
    if kind == "ods":
        sheets = ods_marks.read(data)
        for name, marks in sheets.items():
            _refuse_vast(name, marks)
        return lambda name: sheets.get(name, Marks())
    return partial(xlsx_marks.read if kind == "xlsx" else xls_marks.read, data)


def _refuse_vast(name: str, marks: Marks) -> None:
    if marks.rows * marks.columns > MOST_CELLS:
        raise refusals.TooManyCellsInSheet(name, marks.rows, marks.columns)


def _sheet(book: calamine.CalamineWorkbook, marks_of: Callable[[str], Marks], name: str, others: Sequence[str]) -> Sheet:
    marks = marks_of(name)
    _refuse_vast(name, marks)
    found = _guarded(lambda: book.get_sheet_by_name(name))
    if not marks.spans:  # those of .ods are known already
        marks.spans.extend(Span(a[0] + 1, b[0] + 1, a[1], b[1]) for a, b in _guarded(lambda: found.merged_cell_ranges) or [])
    values = cell_values.marked(_guarded(lambda: found.to_python(skip_empty_area=False)), marks)
    return Sheet(name, values, marks, Found(_decisions(name, others, marks), spans=tuple(marks.spans)))


def _decisions(name: str, others: Sequence[str], marks: Marks) -> tuple[Decision, ...]:
    decisions = []
    if others:
        sentence = f"The sheet “{name}” was read; the workbook also holds {several(others, 8)}."
        decisions.append(Decision("sheet", sentence, tuple(others)))
    if marks.hidden:
        decisions.append(Decision("hidden", f"Hidden rows of the sheet were kept ({refusals.rows_told(marks.hidden)})."))
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
