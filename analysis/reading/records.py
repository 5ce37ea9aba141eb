"""What every kind of file is turned into first: records of cells at the head, then columns of text with row numbers."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Protocol

import pyarrow as pa

from analysis.reading import spaces
from analysis.reading.marks import NOTHING_KNOWN, Known
from analysis.table import Decision, Floats, RawLine, Rows

HEAD = 200  # records looked at to find the header
RAW = 12  # lines kept as they stand, to be shown beside what was understood
RAW_BYTES = 1 << 16  # from which they are taken
_RAW_WIDTH = 500  # characters of such a line


@dataclass(frozen=True)
class Record:
    """One line of the file, or one row of a sheet."""

    row: int  # its number as a spreadsheet shows it
    cells: tuple[str, ...]  # tidy text, "" where blank, without blank cells at the end
    width: int = 0  # cells that the row has in the file, blank ones at its end included, where the file tells
    trimmed: bool = False  # whether white space was taken out of its cells

    @property
    def filled(self) -> int:
        """How many cells are not blank."""
        return sum(bool(cell) for cell in self.cells)


@dataclass(frozen=True)
class Span:
    """A merged range of cells, all numbers inclusive; columns count from 0, rows as a spreadsheet shows them."""

    first_row: int
    last_row: int
    first_column: int
    last_column: int


@dataclass(frozen=True, eq=False)
class Body:
    """The rows below the header; every column has one entry for each of them."""

    columns: tuple[pa.StringArray, ...]
    rows: Rows
    numbers: tuple[Floats | None, ...]  # the values of number cells, where the file holds values and not text
    units: tuple[str | None, ...]
    dates: tuple[tuple[int, ...], ...] = ()  # rows of the file with dates in them, where the file tells dates from text


@dataclass(frozen=True)
class Found:
    """What a file turned out to be, before its header is looked for."""

    decisions: tuple[Decision, ...] = ()
    known: Known = NOTHING_KNOWN
    spans: tuple[Span, ...] = ()
    hidden: tuple[int, ...] = ()  # rows to leave out because the sheet hides them
    raw: tuple[RawLine, ...] = ()


class Source(Protocol):
    """A file of any kind that gives its first records, and the columns below the header once that is known."""

    @property
    def found(self) -> Found:
        """What was decided about the file."""

    @property
    def head(self) -> Sequence[Record]:
        """The first records, blank ones included."""

    def body(self, start: int, width: int) -> Body:
        """The columns from record number start (counted from 0) on; raises TooManyFields where a row is wider."""


def record_of(row: int, raw: Sequence[str], width: int = 0) -> Record:
    """Tidy the cells of a row and drop the blank ones at its end."""
    cells = [spaces.tidy(cell) for cell in raw]
    changed = any(before != after for before, after in zip(raw, cells, strict=True) if after)
    return Record(row, filled_part(cells), width, changed)


def raw_line(row: int, text: str) -> RawLine:
    """A line to be shown, cut where it is long."""
    return RawLine(row, text if len(text) <= _RAW_WIDTH else text[: _RAW_WIDTH - 1] + "…")


def filled_part(cells: Sequence[str]) -> tuple[str, ...]:
    """The cells of a row up to the last one that is not blank."""
    end = len(cells)
    while end and not cells[end - 1]:
        end -= 1
    return tuple(cells[:end])
