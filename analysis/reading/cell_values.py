"""How the value of a workbook's cell is written as text, and when it counts as a number."""

import datetime
from collections.abc import Sequence
from decimal import Decimal
from typing import TypeGuard

import numpy as np

from analysis.reading import numerals, spaces, value_cells
from analysis.reading.sheet_marks import Marks
from analysis.table import Floats

Value = int | float | str | bool | datetime.time | datetime.date | datetime.datetime | datetime.timedelta


def text_of(value: Value) -> str:
    """Write the value of a cell as text; a whole number has no decimals, a day no time."""
    if isinstance(value, str):
        return value
    if is_number(value):
        return value_cells.number_text(value)
    if isinstance(value, datetime.datetime):
        return value.isoformat(sep=" ").removesuffix(" 00:00:00")
    return str(value).upper() if isinstance(value, bool) else str(value)


def is_number(value: Value) -> TypeGuard[int | float]:
    """Whether a cell holds a number; true and false are words."""
    return isinstance(value, (int, float)) and not isinstance(value, bool)


def is_blank(value: Value) -> bool:
    """Whether a cell holds nothing but white space."""
    return value == "" or (isinstance(value, str) and spaces.is_blank(value))


def numbers_of(column: Sequence[Value]) -> Floats | None:
    """The numbers among the cells, NaN elsewhere; None where there are none."""
    numbers = np.array([value if is_number(value) else np.nan for value in column], dtype=np.float64)
    return None if np.isnan(numbers).all() else numbers


def marked(values: list[list[Value]], marks: Marks) -> Sequence[Sequence[Value]]:
    """Give cells what their marks say: an error its word, a percentage its hundred parts."""
    for (row, column), text in marks.errors.items():
        _extend(values, row, column)
        values[row][column] = text
    for row, column in marks.percent:
        value = values[row][column] if row < len(values) and column < len(values[row]) else ""
        if is_number(value):
            values[row][column] = float(Decimal(repr(value)) * 100)
    return values


def _extend(values: list[list[Value]], row: int, column: int) -> None:
    """Make room for a cell beyond the last one that holds a value."""
    values.extend([] for _ in range(row + 1 - len(values)))
    values[row].extend("" for _ in range(column + 1 - len(values[row])))


def reference(row: int, column: int) -> str:
    """The name of a cell, rows and columns counted from 0: (0, 27) is AB1."""
    return f"{letters(column)}{row + 1}"


def letters(column: int) -> str:
    """The name of a column, counted from 0."""
    found, number = "", column + 1
    while number:
        number, rest = divmod(number - 1, 26)
        found = chr(65 + rest) + found
    return found


def has_number(cells: Sequence[str]) -> bool:
    """Whether any of these texts is a number."""
    return any(numerals.find(cell) is not None for cell in cells)
