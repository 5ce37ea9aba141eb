"""A second way to every sum of squares: least squares on an explicit design matrix, row by row, to confirm the tables."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
import pandas as pd

from analysis.anova import INTERACTION, RESIDUAL, Names
from analysis.cells import Matrix
from analysis.coding import sum_to_zero
from analysis.observations import Observations
from analysis.refusals import TwoRoutesDisagree

MOST_ENTRIES = 1_000_000  # entries of the design matrix beyond which a study is not of ordinary size
RELATIVE = 1e-8
FLOOR = 1e-12  # of the total: what rounding of the row-by-row route can make of a sum of squares near zero
RANK = 1e-9


@dataclass(frozen=True, eq=False)
class Route:
    """Residual sums of squares and ranks of every model between the mean and the one analysed: QR, then singular values."""

    observed: Observations
    interaction: bool
    names: Names

    @cached_property
    def columns(self) -> Mapping[str, Matrix]:
        """Sum-to-zero columns of each term, one row an observation."""
        observed = self.observed
        row, column = (sum_to_zero(factor.codes, factor.size) for factor in (observed.row, observed.column))
        terms = {self.names.row: row, self.names.column: column}
        if observed.block is not None:
            terms = {str(self.names.block): sum_to_zero(observed.block.codes, observed.block.size)} | terms
        if self.interaction:
            terms[INTERACTION] = (row[:, :, None] * column[:, None, :]).reshape(len(row), -1)
        return terms

    @cached_property
    def _known(self) -> dict[frozenset[str], tuple[float, int]]:
        return {}

    def residual(self, terms: Sequence[str]) -> tuple[float, int]:
        """Return the residual sum of squares and the rank of the model with these terms, each model solved once."""
        if frozenset(terms) not in self._known:
            self._known[frozenset(terms)] = self._solved(terms)
        return self._known[frozenset(terms)]

    @cached_property
    def _triangle(self) -> Matrix:
        """The triangular factor of all columns with the response behind them: it holds every model's residual, in few rows."""
        y = self.observed.offsets - self.observed.offsets.mean()
        return np.asarray(np.linalg.qr(np.column_stack([np.ones(y.size), *self.columns.values(), y]), mode="r"))

    def _solved(self, terms: Sequence[str]) -> tuple[float, int]:
        places, start = [0], 1
        for term, columns in self.columns.items():
            places += range(start, start + columns.shape[1]) if term in terms else ()
            start += columns.shape[1]
        x, y = self._triangle[:, places], self._triangle[:, -1]
        effects, _, rank, _ = np.linalg.lstsq(x, y, rcond=RANK)
        apart = y - x @ effects
        return float(apart @ apart), int(rank)

    def added(self, term: str, to: Sequence[str]) -> tuple[int, float]:
        """Return the degrees of freedom and the sum of squares that a term adds to others."""
        (less, small), (more, large) = self.residual(to), self.residual([*to, term])
        return large - small, less - more

    def beside(self, term: str, kind: str) -> list[str]:
        """Return the terms for which a type of table adjusts this one."""
        terms = list(self.columns)
        factors = [self.names.row, self.names.column]
        if kind == "type_1_column_first":
            at = terms.index(factors[0])  # the row factor, which the column factor follows
            terms[at : at + 2] = factors[::-1]
        if kind.startswith("type_1"):
            return terms[: terms.index(term)]
        others = [other for other in terms if other != term]
        return [other for other in others if other != INTERACTION] if kind == "type_2" and term in factors else others


def confirm(observed: Observations, interaction: bool, names: Names, tables: Mapping[str, pd.DataFrame]) -> None:
    """Raise TwoRoutesDisagree unless a second route gives the tables' degrees of freedom and sums of squares.

    Studies whose design matrix is too large for this are passed over. Source: common practice; least squares by orthogonal
    factors and singular values, Golub and Van Loan, Matrix Computations, sections 5.3 and 5.5.
    """
    a, b = observed.shape
    if observed.size * (a * b + (0 if observed.block is None else observed.block.size)) > MOST_ENTRIES:
        return
    route = Route(observed, interaction, names)
    total, _ = route.residual([])
    for kind, table in tables.items():
        for term, df, ss in table[["term", "df", "ss"]].itertuples(index=False):
            if term in route.columns and df == df and not _agrees((df, ss), route.added(term, route.beside(term, kind)), total):
                raise TwoRoutesDisagree(term)
        df, ss = table.loc[table["term"] == RESIDUAL, ["df", "ss"]].iloc[0]
        left, rank = route.residual(list(route.columns))
        if not _agrees((df, ss), (observed.size - rank, left), total):
            raise TwoRoutesDisagree(RESIDUAL)


def _agrees(one: tuple[float, float], other: tuple[int, float], total: float) -> bool:
    return int(one[0]) == other[0] and abs(one[1] - other[1]) <= max(RELATIVE * abs(one[1]), FLOOR * total)
