"""Where several tables stand on one sheet, apart from each other by blank rows or columns and each with a header of its own."""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property
from itertools import islice

from analysis.reading import cell_values, grid_signs, missing, numerals, spaces
from analysis.reading.cell_values import Value

MOST_ROWS = 20_000  # of a sheet on which several tables are looked for
_LEAST_COLUMNS = 3  # a response and two factors, or a label and two levels
_TITLES = 3  # lines in one cell above a header
_MOST_BLOCKS = 60
_DEEPEST = 8  # cuts within cuts
_LOOK = 20  # rows below a header that tell which columns hold numbers


@dataclass(frozen=True)
class Block:
    """A rectangle of cells, rows and columns counted from 0."""

    rows: range
    columns: range

    @property
    def name(self) -> str:
        """How a spreadsheet shows its rows and columns."""
        first, last = (cell_values.letters(column) for column in (self.columns.start, self.columns.stop - 1))
        return f"rows {self.rows.start + 1} to {self.rows.stop}, columns {first} to {last}"

    @property
    def rows_name(self) -> str:
        """How a spreadsheet shows its rows."""
        return f"rows {self.rows.start + 1} to {self.rows.stop}"


@dataclass(frozen=True, eq=False)
class Region:
    """One of several tables: its name, and the part of the sheet that is read as it."""

    name: str
    block: Block


def find(values: Sequence[Sequence[Value]]) -> tuple[Region, ...]:
    """Return the tables of a sheet in reading order; none where it holds at most one."""
    if len(values) > MOST_ROWS:
        return ()
    sheet = _Sheet(values)
    blocks = list(islice(_cut(sheet, sheet.all), _MOST_BLOCKS + 1))
    if not 1 < len(blocks) <= _MOST_BLOCKS:
        return ()
    firsts = [(row, tuple(sheet.texts(row, block.columns))) for block in blocks if (row := _first_row(sheet, block)) is not None]
    tables = _apart([table for block in blocks if (table := _table(sheet, block, firsts)) is not None])
    if len(tables) < 2:
        return ()
    beside = any(_overlap(one.block.rows, other.block.rows) for one in tables for other in tables if one is not other)
    names = [table.filled.name if beside else table.filled.rows_name for table in tables]
    parts = [_part(sheet, table, [other for other in tables if other is not table]) for table in tables]
    return tuple(Region(name, part) for name, part in zip(names, parts, strict=True))


@dataclass(frozen=True, eq=False)
class _Sheet:
    """The cells of a sheet as tidy text."""

    values: Sequence[Sequence[Value]]

    @cached_property
    def width(self) -> int:
        return max(map(len, self.values), default=0)

    @cached_property
    def filled(self) -> list[frozenset[int]]:
        """For each row, its filled columns."""
        return [frozenset(i for i, value in enumerate(row) if not cell_values.is_blank(value)) for row in self.values]

    @property
    def all(self) -> Block:
        return Block(range(len(self.values)), range(self.width))

    def text(self, row: int, column: int) -> str:
        cells = self.values[row]
        return spaces.tidy(cell_values.text_of(cells[column])) if column < len(cells) else ""

    def texts(self, row: int, columns: range) -> list[str]:
        return [self.text(row, column) for column in columns]


@dataclass(frozen=True, eq=False)
class _Table:
    """A block that is a table, with its header."""

    block: Block
    header_row: int
    header: tuple[str, ...]

    @property
    def filled(self) -> Block:
        """The block without the titles above the header."""
        return Block(range(self.header_row, self.block.rows.stop), self.block.columns)


def _cut(sheet: _Sheet, block: Block, depth: int = 0) -> Iterator[Block]:
    """Cut a block at its blank rows and columns, and the pieces in turn, until none has any."""
    pieces = []
    for rows in _runs(block.rows, lambda row: any(column in block.columns for column in sheet.filled[row])):
        used = frozenset[int]().union(*(sheet.filled[row] for row in rows))
        pieces += [Block(rows, columns) for columns in _runs(block.columns, used.__contains__)]
    for piece in pieces:
        if piece == block or depth == _DEEPEST:
            yield piece
        else:
            yield from _cut(sheet, piece, depth + 1)


def _runs(places: range, filled: Callable[[int], bool]) -> list[range]:
    """The runs of filled places."""
    runs: list[range] = []
    for place in places:
        if filled(place):
            joined = bool(runs) and runs[-1].stop == place
            runs[-1:] = [range(runs[-1].start, place + 1)] if joined else [*runs[-1:], range(place, place + 1)]
    return runs


def _first_row(sheet: _Sheet, block: Block) -> int | None:
    """The row that may be the header of a block: its first with several cells, and two rows or more below it."""
    rows = [row for row in block.rows[: _TITLES + 1] if len(sheet.filled[row] & set(block.columns)) > 1]
    return rows[0] if rows and len(block.columns) >= _LEAST_COLUMNS and rows[0] + 2 < block.rows.stop else None


def _table(sheet: _Sheet, block: Block, firsts: Sequence[tuple[int, tuple[str, ...]]]) -> _Table | None:
    """A block as a table, where its first full row names columns with numbers below them.

    firsts are the first full rows of all blocks with their numbers: levels that are numbers are a header where another block repeats it.
    """
    row = _first_row(sheet, block)
    if row is None:
        return None
    header = tuple(sheet.texts(row, block.columns))
    below = [sheet.texts(place, block.columns) for place in range(row + 1, min(row + 1 + _LOOK, block.rows.stop))]
    numeric = [grid_signs.numeric(column) and any(column) for column in zip(*below, strict=True)]
    if all(numeric) or sum(map(bool, header)) < _LEAST_COLUMNS - 1 or not any(map(all, zip(header, numeric, strict=True))):
        return None
    named = not any(cell and (numerals.find(cell) or missing.is_missing(cell)) for cell in header)
    repeated = sum(header[1:] == other[1:] for _, other in firsts) > 1
    recurs = _recurs(sheet, block.columns, header, frozenset(place for place, _ in firsts))
    return _Table(block, row, header) if repeated or (named and not recurs) else None


def _recurs(sheet: _Sheet, columns: range, header: tuple[str, ...], firsts: frozenset[int]) -> bool:
    """Whether a cell of a would-be header stands in its column further down in a block too, as levels do and names do not."""
    rows = (sheet.texts(row, columns) for row in range(len(sheet.values)) if row not in firsts)
    return any(cell and cell == name for row in rows for cell, name in zip(row, header, strict=True))


def _apart(tables: Sequence[_Table]) -> list[_Table]:
    """The tables that stand for themselves: beside another one only with a name in common or another number of rows.

    A header that repeats what stands in the cells of a table before it is a row of that table.
    """
    found: list[_Table] = []
    for table in sorted(tables, key=lambda table: (table.block.rows.start, table.block.columns.start)):
        beside = [other for other in found if _overlap(other.block.rows, table.block.rows)]
        if all(_differ(other, table) for other in beside):
            found.append(table)
    return found


def _differ(left: _Table, right: _Table) -> bool:
    names = {name.casefold() for name in left.header} & {name.casefold() for name in right.header}
    return left.block.rows != right.block.rows or bool(names - {""})


def _overlap(left: range, right: range) -> bool:
    return left.start < right.stop and right.start < left.stop


def _part(sheet: _Sheet, table: _Table, others: Sequence[_Table]) -> Block:
    """The part of the sheet that belongs to a table: up to the next tables, with the remarks and further rows below it."""
    rows, columns = table.block.rows, table.block.columns
    first = 0 if all(other.block.rows.start >= rows.start for other in others) else rows.start
    below = [other.block.rows.start for other in others if other.block.rows.start >= rows.stop]
    beside = [other.block.columns for other in others if _overlap(other.block.rows, rows)]
    left = max((other.stop for other in beside if other.stop <= columns.start), default=0)
    right = min((other.start for other in beside if other.start >= columns.stop), default=sheet.width)
    stop = min(below, default=len(sheet.values))
    while below and stop > rows.stop and len(sheet.filled[stop - 1]) < 2:
        stop -= 1  # blank rows and the title of the next table
    return Block(range(first, stop), range(left, right))
