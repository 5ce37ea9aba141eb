"""What a doubt looks at: the residuals of the model analysed with where and in what order they were seen."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from analysis import tails
from analysis.cells import Matrix, Vector
from analysis.checks.influence import influence
from analysis.design import Design
from analysis.doubting.beside import Beside
from analysis.holding import refits
from analysis.holding.analysed import Analysed
from analysis.holding.bases import bases_of
from analysis.means import fitted_values, stratum_of

AMBER, NOTE = "amber", "note"
SEEN = 0.005  # p of an outlying observation, already adjusted for how many there are
LOOSE = 0.02  # p below which the rest of an observation's cell spreads more than the other cells
MOST_OUTLYING = 3  # told as single observations; more of them are a shape


@dataclass(frozen=True)
class Doubt:
    """One doubt: what kind, how serious, some sentences, and the file rows it is about."""

    kind: str
    level: str  # "amber" or "note"
    sentence: str
    rows: tuple[int, ...] = ()


@dataclass(frozen=True, eq=False)
class Left:
    """What the model leaves of some observations; arrays (n,)."""

    layout: Design
    residual: Vector  # on the analysed scale
    leverage: Vector
    fitted: Vector
    stratum: NDArray[np.intp]

    @property
    def n(self) -> int:
        """Number of observations."""
        return int(self.residual.size)

    @cached_property
    def cell(self) -> NDArray[np.intp]:
        """Index of each observation's cell, of those that are filled."""
        return np.asarray(np.unique(self.layout.strata.cell[self.stratum], return_inverse=True)[1])

    @cached_property
    def counts(self) -> Vector:
        """Observations in each filled cell."""
        return np.bincount(self.cell).astype(float)

    @cached_property
    def even(self) -> Vector:
        """Residuals brought to the same expected spread, NaN where an observation determines its own fitted value."""
        free = np.where(1 - self.leverage > 1e-9, 1 - self.leverage, np.nan)
        return np.asarray(self.residual / np.sqrt(free))

    @cached_property
    def student(self) -> Vector:
        """Externally studentised residuals, NaN where not defined."""
        model = self.layout.analysed
        return influence(self.residual, self.leverage, model.residual_ms, model.residual_df, model.parameters).student_external

    def by_cell(self, values: Vector) -> Vector:
        """Return the means of values over filled cells."""
        return np.asarray(np.bincount(self.cell, values) / self.counts)


def left_of(layout: Design) -> Left:
    """Return what the model analysed leaves of a layout."""
    stratum = stratum_of(layout.observed, layout.strata)
    fitted = fitted_values(layout.observed, layout.strata, layout.analysed)
    return Left(layout, layout.observed.offsets - fitted, layout.analysed.surface.leverage()[stratum], fitted, stratum)


@dataclass(frozen=True, eq=False)
class Signs:
    """Everything that the doubts of one study are read from."""

    analysed: Analysed
    holds: pd.DataFrame
    beside: tuple[Beside, ...]  # columns of the table that play no role

    @property
    def layout(self) -> Design:
        """The layout analysed."""
        return self.analysed.layout

    @property
    def checks(self) -> Mapping[str, Any]:
        """The checks made on the residuals."""
        return self.analysed.checks

    @cached_property
    def whole(self) -> Left:
        """What is left of every observation."""
        return left_of(self.layout)

    @cached_property
    def file_rows(self) -> NDArray[np.int64]:
        """Row of each observation in the file."""
        return np.asarray(self.layout.observed.file_rows, dtype=np.int64)

    @cached_property
    def outlying(self) -> tuple[tuple[int, float], ...]:
        """Index and Bonferroni p-value of every observation that stands far out, the farthest first, each judged without those before.

        None where more than a few do: then it is the shape of all.
        """
        found: list[tuple[int, float]] = []
        kept, left = np.arange(self.whole.n), self.whole
        while True:
            at, p = farthest(left)
            if p >= SEEN or _in_a_loose_cell(left, at):
                break
            if len(found) == MOST_OUTLYING:
                return ()
            found.append((int(kept[at]), p))
            left = left_of(refits.without(left.layout, np.arange(left.n) == at))
            kept = np.delete(kept, at)
        return tuple(found)

    @cached_property
    def rest(self) -> Left:
        """What is left of the observations that do not stand far out, of a fit to them alone."""
        if not self.outlying:
            return self.whole
        return left_of(refits.without(self.layout, ~self.in_rest))

    @cached_property
    def in_rest(self) -> NDArray[np.bool_]:
        """Which observations do not stand far out."""
        kept = np.ones(self.whole.n, dtype=bool)
        kept[[at for at, _ in self.outlying]] = False
        return kept

    def added_p(self, columns: Matrix) -> float | None:
        """Return the p-value of columns (n, k) added to the model of the rest; None where they add nothing that can be tested.

        Source: Searle (1971), Linear Models, section 6.2: the F test of a larger model against a smaller one.
        """
        left = self.rest
        apart = self._without_model(columns[self.in_rest])
        if apart is None:
            return None
        directions, sizes, _ = np.linalg.svd(apart, full_matrices=False)
        directions = directions[:, sizes > 1e-9 * max(float(sizes.max(initial=0.0)), 1e-300)]
        df1, df2 = directions.shape[1], left.layout.analysed.residual_df - directions.shape[1]
        ss, total = float(np.sum((directions.T @ left.residual) ** 2)), float(left.residual @ left.residual)
        if df1 == 0 or df2 < 3 or not ss < total:
            return None
        return float(tails.f_upper(ss / df1 / ((total - ss) / df2), df1, df2))

    def _without_model(self, columns: Matrix) -> Matrix | None:
        """Return what the model leaves of columns; None where that is not to be had in closed form."""
        left = self.rest
        if left.layout.analysed.interaction and not left.layout.strata.has_blocks:
            means = np.column_stack([left.by_cell(column) for column in columns.T])
            return np.asarray(columns - means[left.cell])
        bases = bases_of(left.layout, self.analysed.names)
        if bases is None:
            return None
        sums = np.column_stack([np.bincount(left.stratum, column, bases.counts.size) for column in columns.T])
        return np.asarray(columns - (bases.whole @ (bases.whole.T @ sums))[left.stratum])


def farthest(left: Left) -> tuple[int, float]:
    """Return the observation that lies farthest from what the others lead one to expect, and its Bonferroni p-value.

    Source: Cook and Weisberg (1982), Residuals and Influence in Regression, section 2.2.2.
    """
    df = left.layout.analysed.residual_df - 1
    if df < 1 or left.layout.analysed.residual_ms == 0 or not np.isfinite(left.student).any():
        return 0, 1.0
    at = int(np.nanargmax(np.abs(left.student)))
    return at, float(min(1.0, left.n * tails.t_two_sided(left.student[at], df)))


def _in_a_loose_cell(left: Left, at: int) -> bool:
    """Return whether the other observations of a cell spread so much more than the rest that this one may belong to them."""
    mates = (left.cell == left.cell[at]) & (np.arange(left.n) != at)
    others, df = left.even[left.cell != left.cell[at]], int(mates.sum()) - 1
    if df < 2 or not np.isfinite(others).any():
        return False
    ms = float(np.nanmean(others**2))
    rest_df = max(left.layout.analysed.residual_df - df - 1, 1)
    own = float(left.residual[mates].var(ddof=1))
    return bool(ms > 0 and tails.f_upper(own / ms, df, rest_df) < LOOSE)
