"""A second way to every sum of squares: least squares on an explicit design matrix, to confirm the tables."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from analysis.anova import INTERACTION, RESIDUAL, Names
from analysis.cells import Matrix, Vector
from analysis.coding import sum_to_zero
from analysis.observations import Observations
from analysis.refusals import TwoRoutesDisagree

MOST_ENTRIES = 1_000_000  # entries of the design matrix beyond which a study is not of ordinary size
MOST_ROWS = 200_000
RELATIVE = 1e-8
FLOOR = 1e-12  # of the total: what rounding on this route can make of a sum of squares near zero
RANK = 1e-9


@dataclass(frozen=True, eq=False)
class Route:
    """Residual sums of squares and ranks of every model between the mean and the one analysed, by singular values.

    Observations with the same row of the design matrix are replaced by their mean, weighted by the root of their number; what
    they differ by is added to every residual.
    """

    observed: Observations
    interaction: bool
    names: Names

    @cached_property
    def columns(self) -> Mapping[str, Matrix]:
        """Sum-to-zero columns of each term, one row a distinct combination of levels."""
        factors = self.observed.factors[2:] + self.observed.factors[:2]  # the block first, as Type I takes it
        coded = [sum_to_zero(factor.codes[self._groups[0]], factor.size) for factor in factors]
        row, column = coded[-2:]
        names = [name for name in (self.names.block, self.names.row, self.names.column) if name is not None]
        terms = dict(zip(names, coded, strict=True))
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
    def _groups(self) -> tuple[NDArray[np.intp], NDArray[np.intp], NDArray[np.intp]]:
        """First observation of each distinct combination of levels, the combination of each observation, and their numbers."""
        key = np.zeros(self.observed.size, dtype=np.int64)
        for factor in self.observed.factors:
            key = key * factor.size + factor.codes
        _, first, group, n = np.unique(key, return_index=True, return_inverse=True, return_counts=True)
        return first, group, n

    @cached_property
    def _means(self) -> tuple[Vector, float]:
        """Mean of each combination, and the sum of squares inside them."""
        _, group, n = self._groups
        y = self.observed.offsets - self.observed.offsets.mean()
        means = np.bincount(group, weights=y) / n
        apart = y - means[group]
        return means, float(apart @ apart)

    def _solved(self, terms: Sequence[str]) -> tuple[float, int]:
        means, inside = self._means
        root = np.sqrt(self._groups[2])
        x = root[:, None] * np.column_stack([np.ones(means.size), *(self.columns[term] for term in terms)])
        effects, _, rank, _ = np.linalg.lstsq(x, root * means, rcond=RANK)
        apart = root * means - x @ effects
        return inside + float(apart @ apart), int(rank)

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

    Studies that are too large for this are passed over. Source: common practice; least squares by singular values, Golub and
    Van Loan, Matrix Computations, section 5.5.
    """
    a, b = observed.shape
    blocks = 1 if observed.block is None else observed.block.size
    if observed.size > MOST_ROWS or min(observed.size, a * b * blocks) * (a * b + blocks) > MOST_ENTRIES:
        return
    route = Route(observed, interaction, names)
    total, _ = route.residual([])
    for kind, table in tables.items():
        told = zip(table["term"].tolist(), table["df"].tolist(), table["ss"].tolist(), strict=True)
        for term, df, ss in told:
            if term == RESIDUAL:
                left, rank = route.residual(list(route.columns))
                other = (observed.size - rank, left)
            elif term in route.columns and df == df:  # not the total, nor a hypothesis that is not defined
                other = route.added(term, route.beside(term, kind))
            else:
                continue
            if not _agrees((df, ss), other, total):
                raise TwoRoutesDisagree(term)


def _agrees(one: tuple[float, float], other: tuple[int, float], total: float) -> bool:
    return int(one[0]) == other[0] and abs(one[1] - other[1]) <= max(RELATIVE * abs(one[1]), FLOOR * total)
