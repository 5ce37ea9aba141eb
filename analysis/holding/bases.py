"""What each question adds to the rest of the model: orthonormal directions over the strata, one reduced model a question."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray
from scipy import linalg

from analysis.anova import INTERACTION, Names
from analysis.cells import Matrix, Vector
from analysis.coding import sum_to_zero
from analysis.design import Design
from analysis.means import stratum_of


@dataclass(frozen=True, eq=False)
class Basis:
    """One question's hypothesis: the model without it, and what it adds; arrays (strata, directions), rows of one observation."""

    reduced: Matrix
    added: Matrix


@dataclass(frozen=True, eq=False)
class Bases:
    """The observations and every question's hypothesis of the model analysed, for equal-weight (Type III) tests."""

    values: Vector  # (n,) offsets in response units
    stratum: NDArray[np.intp]  # (n,) of each observation
    block: NDArray[np.intp] | None  # (n,) of each observation, where there are blocks
    counts: Vector  # (strata,) observations in each
    questions: Mapping[str, Basis]
    whole: Matrix  # (strata, parameters) orthonormal directions of the whole model, the mean and the blocks first
    rest: int  # how many of them belong to the mean and the blocks
    cell_rows: Matrix  # (cells, parameters) what those directions give each cell, averaged over blocks with equal weight
    residual_df: int

    @property
    def effects(self) -> Matrix:
        """Orthonormal directions of all effects of the factors over the strata."""
        return self.whole[:, self.rest :]

    @cached_property
    def coordinates(self) -> Vector:
        """What the whole model fits, in its directions (parameters,)."""
        return np.asarray(self.whole.T @ self._sums)

    @cached_property
    def _sums(self) -> Vector:
        return np.asarray(np.bincount(self.stratum, self.values, self.counts.size), dtype=np.float64)

    def left_over(self, basis: Matrix) -> Vector:
        """Return the residuals (n,) of the model with these directions."""
        return np.asarray(self.values - (basis @ (basis.T @ self._sums))[self.stratum])

    def leverage(self, basis: Matrix) -> Vector:
        """Return the leverages (n,) of the model with these directions."""
        return np.asarray((basis * basis).sum(axis=1)[self.stratum])


def bases_of(layout: Design, names: Names) -> Bases | None:
    """Return the questions' hypotheses, None where the layout leaves some effect open (empty cells, separate parts).

    Source: sum-to-zero coding and orthogonal projections, Searle (1987), Linear Models for Unbalanced Data, ch. 8.
    """
    strata, model, observed = layout.strata, layout.analysed, layout.observed
    terms = _terms(strata.row, strata.column, strata.levels, names, interaction=model.interaction)
    rest = np.column_stack([np.ones(strata.n.size), sum_to_zero(strata.block, strata.levels[2])])
    if rest.shape[1] + sum(part.shape[1] for part in terms.values()) != model.parameters:
        return None
    root = np.sqrt(strata.n)[:, None]
    questions = {}
    for term, part in terms.items():
        without = np.column_stack([rest, *(other for name, other in terms.items() if name != term)])
        directions = np.linalg.qr(root * np.column_stack([without, part]))[0] / root
        questions[term] = Basis(directions[:, : without.shape[1]], directions[:, without.shape[1] :])
    whole, triangle = np.linalg.qr(root * np.column_stack([rest, *terms.values()]))
    cells = _cell_columns(strata.levels, rest.shape[1], names, interaction=model.interaction)
    return Bases(
        values=observed.offsets,
        stratum=stratum_of(observed, strata),
        block=observed.block.codes.astype(np.intp) if strata.has_blocks and observed.block is not None else None,
        counts=strata.n,
        questions=questions,
        whole=whole / root,
        rest=rest.shape[1],
        cell_rows=linalg.solve_triangular(triangle, cells.T, trans="T").T,
        residual_df=model.residual_df,
    )


Codes = NDArray[np.intp]


def _terms(row: Codes, column: Codes, levels: tuple[int, int, int], names: Names, *, interaction: bool) -> dict[str, Matrix]:
    """Return the columns of every term, its effects summing to zero, for pairs of a row and a column level."""
    rows, columns = sum_to_zero(row, levels[0]), sum_to_zero(column, levels[1])
    terms = {names.row: rows, names.column: columns}
    if interaction:
        terms[INTERACTION] = (rows[:, :, None] * columns[:, None, :]).reshape(row.size, -1)
    return terms


def _cell_columns(levels: tuple[int, int, int], rest: int, names: Names, *, interaction: bool) -> Matrix:
    """Return the columns of every cell; effects of blocks average to zero."""
    a, b, _ = levels
    terms = _terms(np.repeat(np.arange(a), b), np.tile(np.arange(b), a), levels, names, interaction=interaction)
    mean_and_blocks = np.zeros((a * b, rest))
    mean_and_blocks[:, 0] = 1
    return np.column_stack([mean_and_blocks, *terms.values()])
