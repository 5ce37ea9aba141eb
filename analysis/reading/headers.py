"""Which row of a file names its columns: titles and remarks above it, a spanning row over it, a row of units under it."""

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import pairwise

from analysis import refusals
from analysis.reading import header_choice, missing, names, numerals, units
from analysis.reading.choices import Reading
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
    names_rows: tuple[int, ...] = ()  # all rows of the file that the names come from, none where they are our own
    told: str = ""  # what is unusual about them
    for_grid: bool = False  # whether a row is taken for the header only because a grid was asked for

    @property
    def width(self) -> int:
        """How many columns the header covers."""
        return len(self.cells)

    def joined(self) -> tuple[str, ...]:
        """One name for each column: the spanning name and the name under it, joined by a space."""
        if self.spanning is None:
            return self.cells
        return tuple(f"{over} {under}".strip() for over, under in zip(self.spanning, self.cells, strict=True))


def find(head: Sequence[Record], found: Found, reading: Reading) -> Heading:
    """Find the header among the first records of a file, which a grid always has, unless the user named its row.

    Raises EmptyFile, HeaderWithoutRows, and NoSuchHeader where the row asked for is blank or too far down.
    """
    filled = [index for index, record in enumerate(head) if record.filled]
    if not filled:
        raise refusals.EmptyFile()
    remarks = _remarks(head, filled)
    places = filled[len(remarks) :]
    at = _header_place(head, places) if places else None
    for_grid = at is None and bool(places) and reading.layout == "grid"
    at = places[0] if for_grid else at
    if reading.header_row is not None:
        heading = _asked(head, filled, reading.header_row, found.spans)
    elif not places:
        raise refusals.HeaderWithoutRows(())
    else:
        heading = _without_header(head, places, remarks) if at is None else _with_header(head, places, at, found.spans, remarks)
    found_row = None if at is None else head[at].row
    decision = header_choice.decision(head, heading.names_rows, found_row, heading.told, reading)
    return replace(heading, decisions=(*heading.decisions, decision), for_grid=for_grid)


def _asked(head: Sequence[Record], places: Sequence[int], row: int, spans: Sequence[Span]) -> Heading:
    """The header that the user named: this row alone, or none at all."""
    if row == 0:
        return _without_header(head, places, ())
    at = next((index for index in places if head[index].row == row), None)
    if at is None:
        raise refusals.NoSuchHeader(row, head[-1].row)
    header = _without_mark(_padded(head[at].cells, _full_width(head[at], spans)))
    below = [index for index in places if index > at]
    if not below:
        raise refusals.HeaderWithoutRows(header)
    decisions = _passed_over(head, [index for index in places if index < at]) + _trimmed(head[at])
    if _second_row(header, head, below) != "units":
        return Heading(header, None, (None,) * len(header), at + 1, row, decisions, (row,))
    return _over_units(Heading(header, None, (), below[0] + 1, row, decisions, (row,)), head[below[0]])


def _over_units(heading: Heading, row: Record) -> Heading:
    """A header with a row of units under it."""
    decision = Decision("units", f"Row {row.row} under the header was read as units.")
    return replace(heading, units=_unit_row(row.cells, heading.width), decisions=(*heading.decisions, decision))


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
    return Heading(cells, None, (None,) * len(cells), start, head[start].row, passed, (), sentence)


def _with_header(head: Sequence[Record], places: Sequence[int], at: int, spans: Sequence[Span], remarks: Sequence[int]) -> Heading:
    above = [index for index in places if index < at]
    below = [index for index in places if index > at]
    header = _without_mark(_padded(head[at].cells, _full_width(head[at], spans)))
    if not below:
        raise refusals.HeaderWithoutRows(header)
    second = _second_row(header, head, below)
    over = names.spread(head[above[-1]], header, spans) if above and not second else None
    decisions = _passed_over(head, [*remarks, *(above[:-1] if over else above)]) + _trimmed(head[at])
    heading = Heading(header, None, (None,) * len(header), at + 1, head[at].row, decisions, (head[at].row,))
    if second == "names":
        over = names.spread(head[at], head[below[0]].cells, spans, force=True)
        under = _padded(head[below[0]].cells, len(header))
        heading = replace(heading, cells=under, start=below[0] + 1, names_rows=(head[at].row, head[below[0]].row))
    elif second == "units":
        heading = _over_units(replace(heading, start=below[0] + 1), head[below[0]])
    elif over:
        heading = replace(heading, names_rows=(head[above[-1]].row, head[at].row))
    heading = _under(heading, over) if over else heading
    if not any(index >= heading.start for index in places):
        raise refusals.HeaderWithoutRows(heading.cells)
    return heading


def _under(heading: Heading, over: tuple[str, ...]) -> Heading:
    """A header with a spanning row above its names, both of one width."""
    width = max(len(over), heading.width)
    told = "The names stand in two rows and were joined, the spanning name first."
    padding = (None,) * (width - len(heading.units))
    return replace(heading, cells=_padded(heading.cells, width), spanning=_padded(over, width), units=(*heading.units, *padding), told=told)


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
    return (Decision("remarks", sentence),)
