"""A two-factor experiment as explicit design matrices over fractions."""

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property

from tests.oracle.sweep import Fit, Vector, fit

Cell = tuple[int, int]
ZERO, ONE = Fraction(0), Fraction(1)


@dataclass(frozen=True)
class Reading:
    """One analysed value with the places of its levels; the block is 0 throughout where there are none."""

    row: int
    column: int
    block: int
    y: Fraction


Column = Callable[[Reading], Fraction]


@dataclass(frozen=True, eq=False)
class Experiment:
    """Readings in the crossed layout; a design is a list of columns, each a function of a reading."""

    rows: tuple[str, ...]
    columns: tuple[str, ...]
    blocks: tuple[str, ...]  # empty without blocks
    readings: tuple[Reading, ...]

    @cached_property
    def cells(self) -> tuple[Cell, ...]:
        """Filled cells, row by row."""
        return tuple(sorted({(r.row, r.column) for r in self.readings}))

    @property
    def complete(self) -> bool:
        """Every cell holds a reading."""
        return len(self.cells) == len(self.rows) * len(self.columns)

    def values(self, row: int | None = None, column: int | None = None) -> Vector:
        """The readings of a cell, of a margin, or all of them."""
        return [r.y for r in self.readings if row in (None, r.row) and column in (None, r.column)]

    def fit(self, columns: list[Column]) -> Fit:
        """Least squares on these columns."""
        return fit([[column(reading) for column in columns] for reading in self.readings], [r.y for r in self.readings])

    def mean_column(self) -> list[Column]:
        """The constant."""
        return [lambda reading: ONE]

    def row_columns(self) -> list[Column]:
        """One indicator for each row level."""
        return [lambda reading, i=i: Fraction(int(reading.row == i)) for i in range(len(self.rows))]

    def column_columns(self) -> list[Column]:
        """One indicator for each column level."""
        return [lambda reading, j=j: Fraction(int(reading.column == j)) for j in range(len(self.columns))]

    def block_columns(self) -> list[Column]:
        """One indicator for each block."""
        return [lambda reading, k=k: Fraction(int(reading.block == k)) for k in range(len(self.blocks))]

    def cell_columns(self, merge: Callable[[Cell], Cell] = lambda cell: cell) -> list[Column]:
        """One indicator for each filled cell, or for each set of cells that a hypothesis makes equal."""
        kept = sorted({merge(cell) for cell in self.cells})
        return [lambda reading, cell=cell: Fraction(int(merge((reading.row, reading.column)) == cell)) for cell in kept]

    @cached_property
    def full(self) -> Fit:
        """The model of cell means (and blocks)."""
        return self.fit(self.cell_columns() + self.block_columns())

    @cached_property
    def additive(self) -> Fit:
        """The model of row, column (and block) effects."""
        return self.fit(self.row_columns() + self.column_columns() + self.block_columns())

    def block_weights(self) -> Vector:
        """Each block counts the same."""
        return [Fraction(1, len(self.blocks)) for _ in self.blocks]

    def cell_weights(self, row: int, column: int) -> Vector | None:
        """What the full model's parameters say about one cell; None when the cell is empty."""
        if (row, column) not in self.cells:
            return None
        return [Fraction(int(cell == (row, column))) for cell in self.cells] + self.block_weights()

    def additive_weights(self, row: int, column: int) -> Vector:
        """What the additive model's parameters say about one cell, filled or not."""
        in_row = [Fraction(int(i == row)) for i in range(len(self.rows))]
        in_column = [Fraction(int(j == column)) for j in range(len(self.columns))]
        return in_row + in_column + self.block_weights()


def average(vectors: list[Vector | None]) -> Vector | None:
    """Equal-weight mean of weight vectors; None as soon as one is missing."""
    if any(vector is None for vector in vectors):
        return None
    return [sum(parts, ZERO) / len(vectors) for parts in zip(*vectors, strict=True)]


def minus(left: Vector | None, right: Vector | None) -> Vector | None:
    """Difference of two weight vectors."""
    return None if left is None or right is None else [a - b for a, b in zip(left, right, strict=True)]
