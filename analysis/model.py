"""The two-way model fitted to the strata, with or without the interaction: residual, estimates of cells and of margins."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from analysis import tails
from analysis.cells import Matrix, Strata
from analysis.estimates import Estimates
from analysis.surfaces import BLOCK, CELL, COLUMN, ROW, Surface, connected_parts


class Surfaces:
    """The surfaces over one set of strata, each fitted once; the block joins every one where there are blocks."""

    def __init__(self, strata: Strata) -> None:
        self.strata = strata
        self._made: dict[frozenset[str], Surface] = {}

    def over(self, *factors: str) -> Surface:
        """Return the surface over the factors named and the block."""
        return self.without_block(*factors, *((BLOCK,) if self.strata.has_blocks else ()))

    def without_block(self, *factors: str) -> Surface:
        """Return the surface over exactly the factors named."""
        key = frozenset(factors)
        if key not in self._made:
            self._made[key] = Surface(self.strata, factors)
        return self._made[key]


@dataclass(frozen=True, eq=False)
class Model:
    """One fitted model y = μ + α + β (+ αβ) (+ block) + ε."""

    surfaces: Surfaces
    interaction: bool

    @property
    def strata(self) -> Strata:
        """The strata that the model is fitted to."""
        return self.surfaces.strata

    @cached_property
    def surface(self) -> Surface:
        """The fitted surface."""
        return self.surfaces.over(CELL) if self.interaction else self.surfaces.over(ROW, COLUMN)

    @cached_property
    def parameters(self) -> int:
        """Number of independent parameters, the mean included."""
        return self.surface.rank

    @cached_property
    def residual_df(self) -> int:
        """Degrees of freedom of the residual."""
        return self.strata.observations - self.parameters

    @cached_property
    def residual_ss(self) -> float:
        """Residual sum of squares, 0 where rounding alone could have made it."""
        return self.strata.without_rounding(float(self.strata.within_ss.sum()) + self.surface.lack_of_fit)

    @cached_property
    def residual_ms(self) -> float:
        """Residual mean square, NaN without residual degrees of freedom."""
        return self.residual_ss / self.residual_df if self.residual_df > 0 else float("nan")

    def quantile(self, confidence: float) -> float:
        """Return the two-sided t quantile for an interval at this confidence."""
        return float(tails.t_quantile((1 - confidence) / 2, self.residual_df)) if self.residual_df > 0 else float("nan")

    @cached_property
    def cells(self) -> Estimates:
        """Estimates of all cells, rows running slowest, as offsets from the pivot, averaged over blocks with equal weight."""
        if self.interaction and not self.strata.has_blocks:
            return _own_means(self.strata)
        a, b, blocks = self.strata.levels
        weights = {
            CELL: np.eye(a * b),
            ROW: np.kron(np.eye(a), np.ones((b, 1))),
            COLUMN: np.kron(np.ones((a, 1)), np.eye(b)),
            BLOCK: np.full((a * b, blocks), 1.0 / blocks),
        }
        return self.surface.functional(weights)

    @cached_property
    def row_means(self) -> Estimates:
        """Equal-weight means of the rows, as offsets from the pivot."""
        return self.cells.combined(row_averaging(self.strata.levels[0], self.strata.levels[1]))

    @cached_property
    def column_means(self) -> Estimates:
        """Equal-weight means of the columns, as offsets from the pivot."""
        return self.cells.combined(column_averaging(self.strata.levels[0], self.strata.levels[1]))


def row_averaging(a: int, b: int) -> Matrix:
    """Return the weights that average cells into row means: (a, a·b)."""
    return np.kron(np.eye(a), np.full((1, b), 1.0 / b))


def column_averaging(a: int, b: int) -> Matrix:
    """Return the weights that average cells into column means: (b, a·b)."""
    return np.kron(np.full((1, a), 1.0 / a), np.eye(b))


def _own_means(strata: Strata) -> Estimates:
    """Return the cells' own means: independent, each empty cell free on its own."""
    value, variance = np.zeros(strata.cells), np.ones(strata.cells)
    value[strata.cell], variance[strata.cell] = strata.mean, 1.0 / strata.n
    empty = np.setdiff1d(np.arange(strata.cells), strata.cell)
    free = np.zeros((strata.cells, empty.size))
    free[empty, np.arange(empty.size)] = 1.0
    return Estimates(value, variance, free)


def row_column_parts(strata: Strata) -> tuple[tuple[int, ...], tuple[int, ...]]:
    """Return the connected part of the layout in which each row level and each column level lies."""
    a, b, _ = strata.levels
    parts = connected_parts(strata.row, strata.column, a, b)
    return tuple(int(p) for p in parts[:a]), tuple(int(p) for p in parts[a:])
