"""Which row of a file names its columns: titles and remarks above it, a spanning row over it, a row of units under it."""

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

from analysis import refusals
from analysis.reading import missing, names, numerals, units
from analysis.reading.records import Found, Record, Span
from analysis.reading.words import counted
from analysis.table import Decision

_LOOK = 20  # records below the header that tell which columns hold numbers


@dataclass(frozen=True)
class Heading:
    """The header of a file."""

    cells: tuple[str, ...]  # the names row, "" where blank; as wide as the table
    spanning: tuple[str, ...] | None  # the row above it, every name repeated over the columns that it spans
    units: tuple[str | None, ...]
    start: int  # number of the first record below the header, counted from 0
    row: int  # row of the file that holds the names
    decisions: tuple[Decision, ...]

    @property
    def width(self) -> int:
        """How many columns the header covers."""
        return len(self.cells)

    def joined(self) -> tuple[str, ...]:
        """One name for each column: the spanning name and the name under it, joined by a space."""
        if self.spanning is None:
            return self.cells
        return tuple(f"{over} {under}".strip() for over, under in zip(self.spanning, self.cells, strict=True))


def find(head: Sequence[Record], found: Found, layout: str = "auto") -> Heading:
    """Find the header among the first records of a file, which a grid always has; raises HeaderWithoutRows and EmptyFile."""
    places = [index for index, record in enumerate(head) if record.filled]
    if not places:
        raise refusals.EmptyFile()
    remarks = _remarks(head, places)
    places = places[len(remarks) :]
    if not places:
        raise refusals.HeaderWithoutRows(())
    at = _header_place(head, places)
    if at is None and layout == "grid":
        at = places[0]
    if at is None:
        return _without_header(head, places, remarks)
    return _with_header(head, places, at, found.spans, remarks)


def _remarks(head: Sequence[Record], places: Sequence[int]) -> list[int]:
    """The leading records that start with "#", except one that is the header itself."""
    remarks = []
    for index in places:
        if not next(cell for cell in head[index].cells if cell).startswith("#"):
            break
        remarks.append(index)
    after = places[len(remarks) : len(remarks) + 1]
    if remarks and after and _is_header_remark(head[remarks[-1]], head[after[0]]):
        remarks.pop()
    return remarks


def _is_header_remark(remark: Record, first: Record) -> bool:
    """Whether a "#" line names the columns of the row that follows: as many cells, and numbers below its words."""
    same = len(remark.cells) == len(first.cells) > 1 and remark.filled == len(remark.cells)
    return same and any(is_number(cell) for cell in first.cells) and not any(is_number(cell) for cell in remark.cells)


def _header_place(head: Sequence[Record], places: Sequence[int]) -> int | None:
    """The record that names the columns, or None where the first full row is all numbers."""
    width = _usual_width(head, places)
    full = next((index for index in places if head[index].filled >= width), places[0])
    if _has_numbers(head[full]):
        above = (index for index in reversed(places) if index < full and _names_columns(head[index], width))
        named = next(above, None)
        if named is not None:
            return named
    if width > 1 and all(is_number(cell) for cell in head[full].cells):
        return None
    return full


def _usual_width(head: Sequence[Record], places: Sequence[int]) -> int:
    """How many columns are filled by the records that reach as far to the right as most do (the farther of two common reaches).

    A level written once leaves blanks below it, so that single records say little.
    """
    counts = Counter(len(head[index].cells) for index in places)
    most = max(counts.values())
    usual = max(reach for reach, count in counts.items() if count == most)
    records = [head[index].cells for index in places if len(head[index].cells) == usual]
    return sum(any(cells) for cells in zip(*records, strict=True))


def _names_columns(record: Record, width: int) -> bool:
    """Whether a row above the first full one is the header, some of its cells blank."""
    if record.cells[0] == "" and len(record.cells) == width == record.filled + 1:
        return True  # a grid's blank corner before its levels, which may be numbers
    if any(is_number(cell) for cell in record.cells):
        return False
    return record.filled >= max(2, width - 1) or (record.filled > 2 and len(record.cells) >= width - 1)


def is_number(cell: str) -> bool:
    """Whether a cell is a bare number, with or without a unit."""
    return numerals.find(cell) is not None


def _has_numbers(record: Record) -> bool:
    return any(is_number(cell) for cell in record.cells)


def _without_header(head: Sequence[Record], places: Sequence[int], remarks: Sequence[int]) -> Heading:
    width = _usual_width(head, places)
    start = next((index for index in places if head[index].filled >= width), places[0])
    cells = tuple(f"column {index + 1}" for index in range(len(head[start].cells)))
    sentence = f"The file has no header: its columns were named {cells[0]} to {cells[-1]}."
    passed = _passed_over(head, [*remarks, *(index for index in places if index < start)])
    return Heading(cells, None, (None,) * len(cells), start, head[start].row, (*passed, Decision("header", sentence)))


def _with_header(head: Sequence[Record], places: Sequence[int], at: int, spans: Sequence[Span], remarks: Sequence[int]) -> Heading:
    above = [index for index in places if index < at]
    below = [index for index in places if index > at]
    header = _without_mark(_padded(head[at].cells, _full_width(head[at], spans)))
    if not below:
        raise refusals.HeaderWithoutRows(header)
    second = _second_row(header, head, below)
    spanning = names.spread(head[above[-1]], header, spans) if above and not second else None
    decisions = _passed_over(head, [*remarks, *(above[:-1] if spanning else above)]) + _trimmed(head[at])
    unit_row: tuple[str | None, ...] = (None,) * len(header)
    start = at + 1
    if second == "names":
        spanning, header = names.spread(head[at], head[below[0]].cells, spans, force=True), _padded(head[below[0]].cells, len(header))
        spanning, start = _padded(spanning or (), len(header)), below[0] + 1
    elif second == "units":
        unit_row, start = _unit_row(head[below[0]].cells, len(header)), below[0] + 1
        decisions = (*decisions, Decision("units", f"Row {head[below[0]].row} under the header was read as units."))
    if spanning:
        spanning, header = _same_width(spanning, header)
        decisions = (*decisions, Decision("header", "The names stand in two rows and were joined, the spanning name first."))
        unit_row = unit_row + (None,) * (len(header) - len(unit_row))
    if len([index for index in places if index >= start]) == 0:
        raise refusals.HeaderWithoutRows(header)
    return Heading(header, spanning, unit_row, start, head[at].row, decisions)


def _without_mark(cells: tuple[str, ...]) -> tuple[str, ...]:
    """A header behind a "#" loses the mark."""
    return (cells[0].lstrip("# "), *cells[1:]) if cells[0].startswith("# ") or (cells[0].startswith("#") and len(cells[0]) > 1) else cells


def _full_width(record: Record, spans: Sequence[Span]) -> int:
    """How many columns a header covers: merged cells, or names at equal distances, reach beyond its last name."""
    merged = max((span.last_column + 1 for span in spans if span.first_row <= record.row <= span.last_row), default=0)
    filled = [index for index, cell in enumerate(record.cells) if cell and index]
    gaps = {right - left for left, right in pairwise(filled)}
    spread = filled[-1] + gaps.pop() if len(gaps) == 1 and filled[0] == 1 else 0
    return max(len(record.cells), record.width, merged, spread)


def _same_width(spanning: tuple[str, ...], header: tuple[str, ...]) -> tuple[tuple[str, ...], tuple[str, ...]]:
    width = max(len(spanning), len(header))
    return _padded(spanning, width), _padded(header, width)


def _padded(cells: Sequence[str], width: int) -> tuple[str, ...]:
    return (*cells, *[""] * (width - len(cells)))


def _unit_row(cells: Sequence[str], width: int) -> tuple[str | None, ...]:
    """The unit of each column without its brackets; a dash stands for none."""
    found = [None if not cell or missing.is_missing(cell) else units.normal(cell) or cell for cell in cells[:width]]
    return (*found, *[None] * (width - len(found)))


def _second_row(header: Sequence[str], head: Sequence[Record], below: Sequence[int]) -> str:
    """Tell whether the row under the header holds further "names", "units", or ("") observations."""
    row, rest = head[below[0]], [head[index] for index in below[1 : _LOOK + 1]]
    filled = [index for index, cell in enumerate(row.cells) if cell and not missing.is_missing(cell)]
    if not rest or not filled or _has_numbers(row):
        return ""
    numeric = [_mostly_numbers([record.cells[index] if index < len(record.cells) else "" for record in rest]) for index in filled]
    over_numbers = [index for index, number in zip(filled, numeric, strict=True) if number]
    if not over_numbers:
        return ""
    if all(units.is_known(row.cells[index]) for index in filled):
        return "units"
    blank_names = any(index >= len(header) or not header[index] for index in filled)
    repeated = any(index + 1 < len(header) and header[index] and header[index] == header[index + 1] for index in filled)
    if len(over_numbers) == len(filled) or repeated or blank_names:
        return "names" if len(row.cells) > 1 and (blank_names or repeated or len(filled) > 1) else ""
    return ""


def _mostly_numbers(cells: Sequence[str]) -> bool:
    filled = [cell for cell in cells if cell and not missing.is_missing(cell)]
    return bool(filled) and 2 * sum(is_number(cell) for cell in filled) > len(filled)


def _trimmed(record: Record) -> tuple[Decision, ...]:
    return (Decision("names", "White space in and around the names of columns was trimmed."),) if record.trimmed else ()


def _passed_over(head: Sequence[Record], indices: Sequence[int]) -> tuple[Decision, ...]:
    if not indices:
        return ()
    rows = [head[index].row for index in indices]
    sentence = (
        f"{counted(len(rows), 'line')} above the header ({refusals.rows_told(rows)}) {'was' if len(rows) == 1 else 'were'} passed over."
    )
    return (Decision("header", sentence),)
