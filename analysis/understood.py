"""The first rows of a study's table as they are understood: numbers as the numbers that they are taken for, levels as they are written."""

from dataclasses import dataclass

import numpy as np

from analysis.refusals import Refusal
from analysis.rounding import shortest
from analysis.study import Study
from analysis.table import Column

MOST_CELLS = 4_000_000  # of a table whose columns of numbers are all read for it; beyond, only the response is


@dataclass(frozen=True)
class FirstRows:
    """Some rows with their numbers in the file; a number that could not be used is told as missing."""

    columns: tuple[str, ...]
    numbers: tuple[bool, ...]  # whether the column is one of numbers
    rows: tuple[tuple[int, tuple[str, ...]], ...]


def first_rows(study: Study, count: int) -> FirstRows:
    """Return the first rows of a study's table, at most `count`."""
    table = study.table
    all_read = table.rows * len(table.columns) <= MOST_CELLS
    levels = (study.row_factor, study.column_factor, study.block, study.unit)
    shown = [
        (level_cells(c, 0, count), False) if c.name in levels else _cells(c, count, all_read or c.name == study.response)
        for c in table.columns
    ]
    lines = zip(*(cells for cells, _ in shown), strict=True)
    rows = tuple((int(row), cells) for row, cells in zip(table.file_rows[:count], lines, strict=True))
    return FirstRows(table.names, tuple(are_numbers for _, are_numbers in shown), rows)


def level_cells(column: Column, start: int, stop: int) -> list[str]:
    """Return the level of some rows of a column, which is there also where the file leaves it to the row above."""
    levels = column.as_levels()
    return [levels.labels[code] if code >= 0 else "" for code in levels.codes[start:stop]]


def _cells(column: Column, count: int, is_read: bool) -> tuple[list[str], bool]:
    """Return the first cells of a column, and whether they are numbers."""
    written = column.text(0, count)
    if not (is_read and column.looks_numeric):
        return written, False
    try:
        values = column.as_response().values[:count]
    except Refusal:
        return written, False
    return [_number(value, cell) for value, cell in zip(values, written, strict=True)], True


def _number(value: float, written: str) -> str:
    return shortest(value) if np.isfinite(value) else f"{written} (missing)".strip()
