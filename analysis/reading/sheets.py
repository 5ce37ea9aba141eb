"""The cells of one sheet, or of a part of it, as records and columns; cells give their value, not their format."""

import datetime
from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from analysis import refusals
from analysis.reading import cell_values, sheet_columns
from analysis.reading.cell_values import Value
from analysis.reading.records import HEAD, RAW, Body, Found, Record, Span, filled_part, raw_line, record_of
from analysis.reading.sheet_marks import Marks
from analysis.table import RawLine


@dataclass(frozen=True, eq=False)
class Sheet:
    """The cells of a sheet, or of a part of it, as values."""

    values: Sequence[Sequence[Value]]
    marks: Marks  # of the whole sheet
    found: Found
    above: int = 0  # rows of the sheet above this part
    left: int = 0  # columns of the sheet to the left of it

    @cached_property
    def head(self) -> Sequence[Record]:
        """The first rows as records."""
        rows = enumerate(self.values[:HEAD])
        return tuple(record_of(self.above + i + 1, [cell_values.text_of(value) for value in row]) for i, row in rows)

    def body(self, start: int, width: int) -> Body:
        """The columns below the header; raises TooManyFields where a cell beside the header is filled, or CellTooLong."""
        rows, first = self.values[start:], self.above + start + 1
        for offset, row in enumerate(rows):
            if len(row) > width and any(not cell_values.is_blank(value) for value in row[width:]):
                raise refusals.TooManyFields(first + offset, sum(not cell_values.is_blank(value) for value in row), width)
        columns = [[row[index] if index < len(row) else "" for row in rows] for index in range(width)]
        texts, numbers = zip(*map(sheet_columns.read, columns), strict=True)
        units = tuple(self._percent(index, start, column) for index, column in enumerate(columns))
        dates = tuple(_dates(column, first) for column in columns)
        return Body(texts, np.arange(first, first + len(rows), dtype=np.int64), numbers, units, dates)

    def _percent(self, index: int, start: int, column: Sequence[Value]) -> str | None:
        """The unit of a column all of whose numbers are shown as percent."""
        if not self.marks.percent:
            return None
        places = [self.above + start + i for i, value in enumerate(column) if cell_values.is_number(value)]
        return "%" if places and all((row, self.left + index) in self.marks.percent for row in places) else None

    def part(self, rows: range, columns: range) -> "Sheet":
        """The cells of these rows and columns, counted from 0."""
        values = [self.values[row][columns.start : columns.stop] for row in rows]
        found = replace(self.found, spans=tuple(_shifted(span, columns) for span in self.found.spans), raw=raw_rows(values, rows.start))
        return Sheet(values, self.marks, found, rows.start, columns.start)


def _dates(column: Sequence[Value], first: int) -> tuple[int, ...]:
    """The rows of a column that hold dates."""
    if not any(issubclass(kind, datetime.date) for kind in set(map(type, column))):
        return ()
    return tuple(first + i for i, value in enumerate(column) if isinstance(value, datetime.date))


def _shifted(span: Span, columns: range) -> Span:
    return replace(
        span, first_column=span.first_column - columns.start, last_column=min(span.last_column, columns.stop - 1) - columns.start
    )


def raw_rows(values: Sequence[Sequence[Value]], above: int = 0) -> tuple[RawLine, ...]:
    """The first rows of a sheet or a part as they stand."""
    rows = [[cell_values.text_of(value) for value in row] for row in values[:RAW]]
    return tuple(raw_line(above + i + 1, " | ".join(filled_part(row))) for i, row in enumerate(rows))
