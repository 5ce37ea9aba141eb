"""What each question adds to the rest of the model: orthonormal directions over the strata, one reduced model a question."""

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

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
    size: int  # number of strata
    questions: Mapping[str, Basis]
    residual_df: int

    def left_over(self, basis: Matrix) -> Vector:
        """Return the residuals (n,) of the model with these directions."""
        sums = np.bincount(self.stratum, weights=self.values, minlength=self.size)
        return np.asarray(self.values - (basis @ (basis.T @ sums))[self.stratum])

    def leverage(self, basis: Matrix) -> Vector:
        """Return the leverages (n,) of the model with these directions."""
        return np.asarray((basis * basis).sum(axis=1)[self.stratum])


def bases_of(layout: Design, names: Names) -> Bases | None:
    """Return the questions' hypotheses, None where the layout leaves some effect open (empty cells, separate parts).

    Source: sum-to-zero coding and orthogonal projections, Searle (1987), Linear Models for Unbalanced Data, ch. 8.
    """
    strata, model = layout.strata, layout.analysed
    row, column = sum_to_zero(strata.row, strata.levels[0]), sum_to_zero(strata.column, strata.levels[1])
    terms = {names.row: row, names.column: column}
    if model.interaction:
        terms[INTERACTION] = (row[:, :, None] * column[:, None, :]).reshape(strata.n.size, -1)
    rest = np.column_stack([np.ones(strata.n.size), sum_to_zero(strata.block, strata.levels[2])])
    if rest.shape[1] + sum(part.shape[1] for part in terms.values()) != model.parameters:
        return None
    questions = {}
    for term, part in terms.items():
        others = [other for name, other in terms.items() if name != term]
        without = np.column_stack([rest, *others])
        root = np.sqrt(strata.n)[:, None]
        directions = np.linalg.qr(root * np.column_stack([without, part]))[0] / root
        questions[term] = Basis(directions[:, : without.shape[1]], directions[:, without.shape[1] :])
    stratum = stratum_of(layout.observed, strata)
    return Bases(layout.observed.offsets, stratum, strata.n.size, questions, model.residual_df)
