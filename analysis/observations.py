"""The analysed observations: their values, the cell each stands in, and the rows left out."""

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from analysis.scales import Scale
from analysis.table import LeftOut

Codes = NDArray[np.intp]


@dataclass(frozen=True, eq=False)
class Factor:
    """One factor, or the block, over the analysed observations."""

    name: str
    levels: tuple[str, ...]
    codes: Codes  # one per observation, into levels
    amounts: tuple[float, ...] | None = None  # the levels as numbers, where all are numbers

    @property
    def size(self) -> int:
        """Number of levels."""
        return len(self.levels)

    def at(self, rows: NDArray[np.intp]) -> "Factor":
        """Return the factor over some of the observations."""
        return replace(self, codes=self.codes[rows])


@dataclass(frozen=True, eq=False)
class Observations:
    """The analysed observations of a study; arrays hold one entry per observation (or per unit, where readings were averaged)."""

    response: str
    response_unit: str | None
    row: Factor
    column: Factor
    block: Factor | None
    scale: Scale
    pivot: float  # on the analysed scale; observation = pivot + offset
    offsets: NDArray[np.float64]
    file_rows: NDArray[np.int64]  # for a unit: the row of its first reading
    readings: int  # rows used; more than the observations where units were read repeatedly
    left_out: tuple[LeftOut, ...]
    notes: tuple[str, ...]

    @property
    def shape(self) -> tuple[int, int]:
        """Numbers of row levels and column levels."""
        return self.row.size, self.column.size

    @property
    def size(self) -> int:
        """Number of observations analysed (units, where readings were averaged)."""
        return int(self.offsets.size)

    @property
    def factors(self) -> tuple[Factor, ...]:
        """The row factor, the column factor, and the block where there is one."""
        return (self.row, self.column) if self.block is None else (self.row, self.column, self.block)

    @cached_property
    def values(self) -> NDArray[np.float64]:
        """Observations on the analysed scale."""
        return self.pivot + self.offsets
