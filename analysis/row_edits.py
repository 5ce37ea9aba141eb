"""Which rows are set aside: row numbers as a person writes them, and what setting aside or putting back makes of a study."""

import re
from collections.abc import Iterable, Mapping, Sequence
from typing import Any

from analysis import understood
from analysis.refusals import UnknownRow
from analysis.study import Study
from analysis.table import Table

Changes = Mapping[str, Any]  # fields of a study and their new values
_DASH = re.compile(r"\s*[-–—]\s*")
_PART = re.compile(r"(\d{1,9})(?:-(\d{1,9}))?")


def rows_named(text: str, table: Table) -> tuple[int, ...]:
    """Return the rows of a table that text such as "12, 15-18" names by their numbers in the file.

    A stretch takes the rows of the table that lie in it. Raises UnknownRow for text that names none.
    """
    parts = [part for part in re.split(r"[,;\s]+", _DASH.sub("-", text)) if part] or [text]
    return tuple(dict.fromkeys(row for part in parts for row in _rows_of(part, table)))


def _rows_of(part: str, table: Table) -> list[int]:
    found = _PART.fullmatch(part)
    first, last = (0, -1) if found is None else (int(found[1]), int(found[2] or found[1]))
    rows = table.file_rows[(table.file_rows >= first) & (table.file_rows <= last)]
    if not rows.size:
        raise UnknownRow(part, int(table.file_rows.min()), int(table.file_rows.max()))
    return [int(row) for row in rows]


def set_aside(study: Study, text: str, why: str) -> Changes:
    """Return the change that sets rows aside for one reason, which the study refuses to do without."""
    return {"set_aside": {**study.set_aside, **dict.fromkeys(rows_named(text, study.table), why)}}


def only_aside(study: Study, rows: Iterable[int]) -> Changes:
    """Return the change that puts back every row set aside but these."""
    kept = set(rows)
    return {"set_aside": {row: why for row, why in study.set_aside.items() if row in kept}}


def with_levels(study: Study, columns: Sequence[str], start: int, stop: int) -> list[list[str]]:
    """Return the cells of some columns over table rows `start` to `stop`, levels under their names of now, anything else as written."""
    told = [_told(study, column, start, stop) for column in columns]
    return [list(row) for row in zip(*told, strict=True)]


def _told(study: Study, column: str, start: int, stop: int) -> list[str]:
    read, names = study.table.column(column), study.relabel.get(column, {})
    if column == study.response:
        return read.text(start, stop)
    return [names.get(level, level) for level in understood.level_cells(read, start, stop)]


def stretches(table: Table, size: int) -> list[tuple[int, int]]:
    """Return the table rows in stretches of at most `size`, each as start and stop."""
    return [(start, min(start + size, table.rows)) for start in range(0, table.rows, size)]
