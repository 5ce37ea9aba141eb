"""The analysed observations: their values, the cell each stands in, and the rows left out."""

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from analysis.naming import level_told, listed, word_and_unit
from analysis.scales import Scale
from analysis.table import Codes, LeftOut, Rows


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

    @property
    def word(self) -> str:
        """The name as it reads in a sentence, without a unit in brackets."""
        return word_and_unit(self.name)[0]

    def told(self, *levels: str) -> str:
        """Return levels as they read in a sentence."""
        word, unit = word_and_unit(self.name)
        return listed([level_told(word, unit, level) for level in levels])

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
    file_rows: Rows  # for a unit: the row of its first reading
    readings: int  # rows used; more than the observations where units were read repeatedly
    left_out: tuple[LeftOut, ...]
    notes: tuple[str, ...]

    @property
    def shape(self) -> tuple[int, int]:
        """Numbers of row levels and column levels."""
        return self.row.size, self.column.size

    @property
    def word(self) -> str:
        """The response as it reads in a sentence, without a unit in brackets."""
        return word_and_unit(self.response)[0]

    @property
    def unit(self) -> str | None:
        """The unit of the response: from its cells, or in brackets behind its name."""
        return self.response_unit or word_and_unit(self.response)[1]

    def factor(self, name: str) -> Factor:
        """Return the row or column factor of this name."""
        return self.row if name == self.row.name else self.column

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
