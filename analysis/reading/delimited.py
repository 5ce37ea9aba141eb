"""How delimited text becomes records and columns: quickly where every line is regular, carefully where one is not."""

import csv
import io
import re
from collections import deque
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property
from itertools import islice

import numpy as np
import pyarrow as pa
from pyarrow import csv as arrow_csv

from analysis import refusals
from analysis.reading import limits, line_lengths, spaces
from analysis.reading.records import HEAD, Body, Found, Record, filled_part, record_of
from analysis.table import Rows

_END = "\x03"  # a last record of our own; where it is swallowed, a quotation mark was left open
_CHUNK = 4_000  # records turned into columns at a time; more would keep the collector of cycles busy
_LOOSE = 1 << 21  # bytes up to which several tables are looked for
_GAP = re.compile(rb"\n[ \t,;|]*\n")  # a blank line
_BLOCK = 1 << 22  # bytes that Arrow parses at a time


@dataclass(frozen=True, eq=False)
class Delimited:
    """A text file (UTF-8, \\n line ends) with its separator."""

    data: bytes
    delimiter: str
    found: Found
    declared: int = 0  # lines at the start that only name the separator

    @cached_property
    def lines(self) -> int:
        """How many line ends there are."""
        return self.data.count(b"\n")

    @cached_property
    def head(self) -> Sequence[Record]:
        """The first records, those that only name the separator taken as blank."""
        records = islice(self._records(self._start_text()), HEAD)
        return tuple(self._record(row, cells) for row, cells in records)

    def _record(self, row: int, cells: list[str]) -> Record:
        """One record, tidied; a line that only names the separator is blank. Raises TooManyColumns."""
        if len(cells) > limits.COLUMNS and any(cells[limits.COLUMNS :]):
            raise refusals.TooManyColumns(row, len(filled_part(cells)), limits.COLUMNS)
        return Record(row, ()) if row <= self.declared else record_of(row, cells, len(cells))

    def _start_text(self) -> str:
        """Enough of the file for its head, up to the end of a line."""
        limit = 64 * HEAD * 200
        if len(self.data) <= limit:
            return self.data.decode("utf-8")
        end = self.data.rfind(b"\n", 0, limit)
        long = end < limit // 2  # a line of that length is turned down where it is parsed
        return self.data[: limit if long else end].decode("utf-8", errors="ignore")

    def _records(self, text: str) -> Iterator[tuple[int, list[str]]]:
        """Every record with its row number; raises UnclosedQuote or CellTooLong with the row where it happens."""
        row = 0
        reader = csv.reader(
            io.StringIO(text + "\n" + _END, newline="\n"), delimiter=self.delimiter, strict=True, skipinitialspace=self._spaced_quotes
        )
        try:
            for cells in reader:
                row += 1
                if cells == [_END]:
                    return
                yield row, cells
        except csv.Error as error:
            self._refuse(row + 1, text, error)
        raise refusals.UnclosedQuote(row)

    @cached_property
    def loose(self) -> Sequence[Sequence[str]]:
        """All cells where blank lines or cells may set several tables apart in a file that is not large, else none."""
        if len(self.data) > _LOOSE or not (_GAP.search(self.data) or 2 * self.delimiter.encode() in self.data):
            return ()
        records = self._records(self.data.decode("utf-8"))
        return [[] if row <= self.declared else cells for row, cells in records]

    @cached_property
    def _spaced_quotes(self) -> bool:
        """Whether quotation marks follow the separator after a space."""
        return b'"' in self.data and f'{self.delimiter} "'.encode() in self.data

    def _refuse(self, row: int, text: str, error: csv.Error) -> None:
        if "field larger" in str(error) and text.count('"') % 2 == 0:
            raise refusals.CellTooLong(row, limits.CELL_CHARACTERS) from error
        raise refusals.UnclosedQuote(row) from error

    def body(self, start: int, width: int) -> Body:
        """The columns from record number start on; raises TooManyFields, UnclosedQuote or CellTooLong."""
        quick = self._quick(start, width)
        columns, rows = quick if quick is not None else self._careful(start, width)
        blank: tuple[None, ...] = (None,) * width
        return Body(columns, rows, blank, blank)

    def _quick(self, start: int, width: int) -> tuple[tuple[pa.StringArray, ...], Rows] | None:
        """Let Arrow parse the lines below the header; None where quotation marks ask for more care than it takes."""
        offset = self._offset(start)
        if offset is None or len(self.delimiter.encode()) > 1:
            return None
        marks = self.data.count(b'"', offset)
        if marks % 2 or (marks and self._spaced_quotes):
            return None
        lines = self.lines - start + (not self.data.endswith(b"\n"))
        columns = _parsed(self.data, offset, self.delimiter, width)
        if columns is not None and len(columns[0]) == lines:
            return columns, np.arange(start + 1, start + 1 + lines, dtype=np.int64)
        if marks:
            return None
        regular = line_lengths.regular(self.data, offset, self.delimiter, width, start + 1)
        columns = _parsed(regular.data, 0, self.delimiter, width)
        return None if columns is None or len(columns[0]) != regular.rows.size else (columns, regular.rows)

    def _offset(self, start: int) -> int | None:
        """Where record number start begins, or None where a record before it runs over several lines."""
        offset = 0
        for _ in range(start):
            end = self.data.find(b"\n", offset)
            if end < 0 or self.data.count(b'"', offset, end) % 2:
                return None
            offset = end + 1
        return offset

    def _careful(self, start: int, width: int) -> tuple[tuple[pa.StringArray, ...], Rows]:
        """Read record by record: short rows are filled with blanks, blank ones passed over, wide ones refused."""
        parts: list[list[pa.StringArray]] = [[] for _ in range(width)]
        numbers: list[int] = []
        text = self.data.decode("utf-8")
        if text.count('"') % 2:
            deque(self._records(text), maxlen=0)  # an open mark is told at once, before anything is kept
        records = islice(self._records(text), start, None)
        while chunk := list(islice(records, _CHUNK)):
            filled = [(row, _fitted(row, cells, width)) for row, cells in chunk if any(cells)]
            numbers.extend(row for row, _ in filled)
            for part, texts in zip(parts, zip(*(cells for _, cells in filled), strict=True), strict=False):
                part.append(pa.array(texts, pa.string()))
        columns = tuple(pa.concat_arrays(part) if part else pa.array([], pa.string()) for part in parts)
        return columns, np.array(numbers, dtype=np.int64)


def _parsed(data: bytes, offset: int, delimiter: str, width: int) -> tuple[pa.StringArray, ...] | None:
    """Parse regular lines from a place on, every cell as text; None where a line is not regular."""
    names = [str(index) for index in range(width)]
    try:
        table = arrow_csv.read_csv(
            pa.BufferReader(pa.py_buffer(data).slice(offset)),
            read_options=arrow_csv.ReadOptions(column_names=names, block_size=_BLOCK),
            parse_options=arrow_csv.ParseOptions(delimiter=delimiter),
            convert_options=arrow_csv.ConvertOptions(column_types=dict.fromkeys(names, pa.string()), strings_can_be_null=False),
        )
    except pa.ArrowInvalid:
        return None
    return tuple(table.column(index).combine_chunks() for index in range(width))


def _fitted(row: int, cells: list[str], width: int) -> list[str]:
    """Bring a row to the width of the header; raises TooManyFields where filled cells would be lost."""
    if len(cells) == width:
        return cells
    if len(cells) < width:
        return cells + [""] * (width - len(cells))
    if any(not spaces.is_blank(cell) for cell in cells[width:]):
        raise refusals.TooManyFields(row, len(filled_part(cells)), width)
    return cells[:width]
