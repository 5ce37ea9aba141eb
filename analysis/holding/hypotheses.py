"""Which cells each question weighs: its hypothesis over cell means, and the one largest contrast told for every analysis."""

import itertools
from collections.abc import Mapping

import numpy as np

from analysis.anova import INTERACTION, Names
from analysis.cells import Matrix, Vector
from analysis.coding import contrast_rows
from analysis.design import Design
from analysis.model import column_averaging, row_averaging


def hypotheses(shape: tuple[int, int], names: Names) -> Mapping[str, Matrix]:
    """Return the equal-weight hypothesis of each question over the cells, rows running slowest."""
    a, b = shape
    row, column = contrast_rows(a), contrast_rows(b)
    return {
        INTERACTION: np.asarray(np.kron(row, column)),
        names.row: np.asarray(row @ row_averaging(a, b)),
        names.column: np.asarray(column @ column_averaging(a, b)),
    }


def largest_contrasts(layout: Design, names: Names) -> Mapping[str, Vector]:
    """Return the weights (cells,) of each question's largest difference as analysed, pointed so that it is positive.

    For a factor a pair of equal-weight means, for the interaction a difference of differences; the interaction is looked for in
    the model with it, whichever is analysed.
    """
    a, b = layout.observed.shape
    model = layout.analysed
    cells = layout.full.cells.value.reshape(a, b)
    return {
        INTERACTION: _pair_of_pairs(cells),
        names.row: _pair(model.row_means.value) @ row_averaging(a, b),
        names.column: _pair(model.column_means.value) @ column_averaging(a, b),
    }


def _pair(means: Vector) -> Vector:
    weights = np.zeros(means.size)
    weights[int(means.argmax())] += 1
    weights[int(means.argmin())] -= 1
    return weights


def _pair_of_pairs(cells: Matrix) -> Vector:
    """Return the weights of the largest difference of differences: per pair of rows, the ends of their difference."""
    best, weights = -1.0, np.zeros(cells.shape)
    for one, other in itertools.combinations(range(cells.shape[0]), 2):
        apart = cells[one] - cells[other]
        high, low = int(apart.argmax()), int(apart.argmin())
        if apart[high] - apart[low] > best:
            best, weights = float(apart[high] - apart[low]), np.zeros(cells.shape)
            weights[one, high] += 1
            weights[other, low] += 1
            weights[one, low] -= 1
            weights[other, high] -= 1
    return weights.ravel()
