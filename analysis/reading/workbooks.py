"""How the sheets of a workbook become records and columns; cells give their value, not their format."""

import datetime
import io
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
import pyarrow as pa
import python_calamine as calamine

from analysis import refusals
from analysis.reading import spaces, value_cells
from analysis.reading.records import HEAD, Body, Found, Record, Span, trimmed
from analysis.table import Floats

Value = int | float | str | bool | datetime.time | datetime.date | datetime.datetime | datetime.timedelta


@dataclass(frozen=True, eq=False)
class Sheet:
    """One sheet, its cells as values; rows and columns count from the first of the sheet."""

    name: str
    values: Sequence[Sequence[Value]]
    found: Found

    @cached_property
    def head(self) -> Sequence[Record]:
        """The first rows as records."""
        return tuple(Record(i + 1, trimmed([spaces.tidy(text_of(value)) for value in row])) for i, row in enumerate(self.values[:HEAD]))

    def body(self, start: int, width: int) -> Body:
        """The columns below the header; raises TooManyFields where a cell beside the header is filled."""
        rows = self.values[start:]
        for offset, row in enumerate(rows):
            if len(row) > width and any(value != "" for value in row[width:]):
                raise refusals.TooManyFields(start + offset + 1, sum(value != "" for value in row), width)
        columns = [[row[index] if index < len(row) else "" for row in rows] for index in range(width)]
        texts = tuple(pa.array([text_of(value) for value in column], pa.string()) for column in columns)
        numbers = tuple(_numbers(column) for column in columns)
        return Body(texts, np.arange(start + 1, start + 1 + len(rows), dtype=np.int64), numbers, (None,) * width)


def text_of(value: Value) -> str:
    """Write the value of a cell as text; a whole number has no decimals."""
    if isinstance(value, str):
        return value
    if isinstance(value, bool):
        return str(value).upper()
    if isinstance(value, (int, float)):
        return value_cells.number_text(value)
    return str(value)


def _numbers(column: Sequence[Value]) -> Floats | None:
    found = [float(value) if isinstance(value, (int, float)) and not isinstance(value, bool) else np.nan for value in column]
    numbers = np.array(found, dtype=np.float64)
    return None if np.isnan(numbers).all() else numbers


def read(data: bytes, sheet: str | None) -> Sheet:
    """Read one sheet of a workbook."""
    book = calamine.CalamineWorkbook.from_filelike(io.BytesIO(data))
    name = sheet if sheet is not None else book.sheet_names[0]
    if name not in book.sheet_names:
        raise refusals.MissingSheet(name, book.sheet_names)
    found = book.get_sheet_by_name(name)
    spans = tuple(Span(a[0] + 1, b[0] + 1, a[1], b[1]) for a, b in found.merged_cell_ranges or [])
    return Sheet(name, found.to_python(skip_empty_area=False), Found(spans=spans))
