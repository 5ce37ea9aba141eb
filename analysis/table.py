"""What a table is once it has been read: its columns, where its rows stood in the file, and what the reader decided."""

from dataclasses import dataclass
from functools import cached_property
from hashlib import sha256
from typing import Any, Protocol

import numpy as np
import numpy.typing as npt
import pandas as pd

from analysis import refusals
from analysis.reading.choices import NOTHING_ASKED, Reading

STRETCH = 1 << 18  # rows handled at a time
Floats = npt.NDArray[np.float64]
Codes = npt.NDArray[np.integer[Any]]  # the narrowest whole numbers that hold them, for tables of millions of rows
Rows = npt.NDArray[np.int64] | npt.NDArray[np.int32]
NO_ROWS: Rows = np.empty(0, dtype=np.int64)


@dataclass(frozen=True)
class LeftOut:
    """One row that takes no part, and the reason in a few words."""

    row: int  # its number in the file as a spreadsheet shows it, the first line being 1
    why: str


@dataclass(frozen=True)
class Alternative:
    """What could be read instead, in a few words, and everything to ask of the reader to get it."""

    words: str
    reading: Reading


@dataclass(frozen=True)
class Decision:
    """One thing the reader decided: a plain sentence, and what it could have decided instead."""

    kind: str
    sentence: str
    alternatives: tuple[Alternative, ...] = ()
    ordinary: bool = False  # nothing unusual, and no note to anybody who does not look for it


@dataclass(frozen=True)
class RawLine:
    """A line of a file, or a row of a sheet, as it stands there."""

    row: int
    text: str


@dataclass(frozen=True, eq=False)  # eq off: arrays have no single truth value
class Response:
    """A column read as measurements; every array has one entry for each row of the table and is read-only."""

    values: Floats  # NaN where nothing usable was measured
    pivot: float  # a value near the data, 0 unless their spread is tiny beside their size
    offsets: Floats  # value - pivot, from the decimals as written where there are any
    unit: str | None
    missing: tuple[LeftOut, ...]  # one for each NaN, in the order of the file
    notes: tuple[str, ...]

    def __repr__(self) -> str:
        return f"Response({self.values.size} rows, {len(self.missing)} missing, unit={self.unit!r})"


@dataclass(frozen=True, eq=False)
class Levels:
    """A column read as levels of a factor, a block or a unit."""

    codes: Codes  # index into labels for each row of the table, -1 where the cell is empty
    labels: tuple[str, ...]  # in natural order, only those that occur
    amounts: tuple[float, ...] | None  # the number of each level, where every level is one
    notes: tuple[str, ...]

    def __repr__(self) -> str:
        return f"Levels({', '.join(self.labels[:6])}{', …' if len(self.labels) > 6 else ''})"


class Cells(Protocol):
    """The cells of one column in whatever form they came: text, numbers, categories."""

    @property
    def unit(self) -> str | None:
        """The unit of the column, where the file names one."""

    @property
    def looks_numeric(self) -> bool:
        """Whether most of the filled cells are numbers."""

    def response(self) -> Response:
        """Read the cells as measurements; raises a refusal where they cannot be."""

    def levels(self) -> Levels:
        """Read the cells as levels."""

    def text(self, start: int, stop: int) -> list[str]:
        """The cells of these rows as a person would see them."""

    def digest(self) -> bytes:
        """A digest of every cell."""


@dataclass(frozen=True, eq=False)
class Column:
    """One named column, read as measurements or as levels when first asked for."""

    name: str
    cells: Cells

    @property
    def unit(self) -> str | None:
        """The unit of the column, where the file names one."""
        return self.cells.unit

    @cached_property
    def looks_numeric(self) -> bool:
        """Whether most of the filled cells are numbers."""
        return self.cells.looks_numeric

    @cached_property
    def _response(self) -> Response:
        return self.cells.response()

    @cached_property
    def _levels(self) -> Levels:
        return self.cells.levels()

    def as_response(self) -> Response:
        """Read the column as measurements; raises a refusal for mixed units, for too much text, or without any number."""
        return self._response

    def as_levels(self) -> Levels:
        """Read the column as levels; only an empty cell is missing."""
        return self._levels

    def text(self, start: int = 0, stop: int = 20) -> list[str]:
        """The cells of these rows of the table as a person would see them."""
        return self.cells.text(start, stop)

    def __repr__(self) -> str:
        return f"Column({self.name!r})"


@dataclass(frozen=True, eq=False)
class Table:
    """A table as read: the rows that hold observations, and an account of everything else in the file."""

    name: str
    columns: tuple[Column, ...]
    file_rows: Rows  # the number in the file of each row of the table
    left_out: tuple[LeftOut, ...]  # totals, remarks and the like; missing values are told by the response
    decisions: tuple[Decision, ...]
    seal: str | None  # the fingerprint where reading gave one; a frame is digested only when it is asked for
    reading: Reading = NOTHING_ASKED  # what was asked of the reader
    raw: tuple[RawLine, ...] = ()  # the first lines before anything was understood; none of a frame

    @cached_property
    def fingerprint(self) -> str:
        """64 hexadecimal digits that change with the content and with how it was read."""
        if self.seal is not None:
            return self.seal
        digest = sha256()
        for column in self.columns:
            digest.update(column.name.encode("utf-8", "surrogatepass") + b"\0")
            digest.update(column.cells.digest())
        return digest.hexdigest()

    @property
    def names(self) -> tuple[str, ...]:
        """The names of the columns in the order of the file."""
        return tuple(column.name for column in self.columns)

    @property
    def rows(self) -> int:
        """How many rows hold observations."""
        return int(self.file_rows.size)

    @property
    def notes(self) -> tuple[str, ...]:
        """What the reader decided beyond the ordinary, a sentence each."""
        return tuple(decision.sentence for decision in self.decisions if not decision.ordinary)

    @cached_property
    def _by_name(self) -> dict[str, Column]:
        return {column.name: column for column in self.columns}

    def column(self, name: str) -> Column:
        """Return the column of this name; raises UnknownColumn, which names the nearest one."""
        if name not in self._by_name:
            raise refusals.UnknownColumn(name, self.names)
        return self._by_name[name]

    def preview(self, n: int = 20) -> pd.DataFrame:
        """The first n rows as understood, every cell as text, the index being the row numbers of the file."""
        columns = {column.name: column.text(0, n) for column in self.columns}
        return pd.DataFrame(columns, index=self.file_rows[:n], dtype=object)

    def __repr__(self) -> str:
        return f"Table({self.name!r}, {self.rows} rows, {len(self.columns)} columns)"


def frozen(array: npt.NDArray[np.float64]) -> Floats:
    """Return a read-only view of an array; the array itself stays as it was."""
    view = array.view()
    view.flags.writeable = False
    return view


def counts(codes: Codes, size: int) -> npt.NDArray[np.int64]:
    """Return how often each of `size` codes occurs, -1 aside; a stretch at a time, since counting widens the codes."""
    found = np.zeros(size + 1, dtype=np.int64)
    for start in range(0, codes.size, STRETCH):
        found += np.bincount(codes[start : start + STRETCH] + np.int64(1), minlength=size + 1)
    return found[1:]
