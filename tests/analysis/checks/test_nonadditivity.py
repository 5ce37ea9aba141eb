"""One degree of freedom for non-additivity: a printed example, explicit least squares, and what must hold."""

import csv
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy import stats

from analysis.checks.nonadditivity import nonadditivity, nonadditivity_general

REFERENCE = Path(__file__).parents[2] / "reference"
Matrix = NDArray[np.float64]


def impurity() -> Matrix:
    """Return the impurities, temperatures by pressures."""
    with (REFERENCE / "impurity" / "data.csv").open(encoding="utf-8") as file:
        return np.array([float(row["impurity"]) for row in csv.DictReader(file)]).reshape(3, 5)


def unbalanced() -> tuple[Matrix, NDArray[np.intp], NDArray[np.intp]]:
    """Return y, row and column of a layout with unequal cells."""
    generator = np.random.default_rng(9)
    row, column = generator.integers(0, 3, 40), generator.integers(0, 4, 40)
    return (1 + row) * (2.0 + column) + generator.normal(size=40), row, column


def test_impurity() -> None:
    # Montgomery (2013), Example 5.2, Table 5.11, read here: F = 0.36 on 1 and 7, from 0.0985 and 1.9015; p printed from the rounded F.
    found = nonadditivity(impurity())
    assert found is not None
    assert found.f == pytest.approx(0.36, abs=0.005)
    assert (found.df1, found.df2) == (1, 7)
    assert found.p == pytest.approx(0.5674, abs=0.002)
    assert found.ss == pytest.approx(0.0985, abs=5.1e-5)
    assert found.remainder_ss == pytest.approx(1.9015, abs=5.1e-5)


def test_an_unbalanced_layout_by_explicit_least_squares() -> None:
    # The squared fit as one more column: the F for adding it (Milliken and Graybill 1970).
    y, row, column = unbalanced()
    x = np.hstack([np.eye(3)[row], np.eye(4)[column][:, 1:]])

    def residuals(values: Matrix) -> Matrix:
        return values - x @ np.linalg.lstsq(x, values, rcond=None)[0]

    coefficients = np.linalg.lstsq(x, y, rcond=None)[0]
    wider = np.column_stack([x, (x @ coefficients) ** 2])
    before, after = (residuals(y) ** 2).sum(), ((y - wider @ np.linalg.lstsq(wider, y, rcond=None)[0]) ** 2).sum()
    f = (before - after) / (after / 33)
    # Effects from any origin give the same: here column effects from the first column, row effects with the constant in them.
    found = nonadditivity_general(residuals(y), coefficients[:3][row], np.append(0, coefficients[3:])[column], residuals, 34)
    assert found is not None
    assert found.f == pytest.approx(f, rel=1e-9)
    assert (found.df1, found.df2) == (1, 33)
    assert found.p == pytest.approx(stats.f.sf(f, 1, 33), rel=1e-8)


def test_neither_place_nor_unit_nor_sides_matter() -> None:
    y = impurity()
    plain = nonadditivity(y)
    assert plain is not None
    for changed in (y.T, y[::-1, ::-1], -3 * y + 1000):
        found = nonadditivity(changed)
        assert found is not None
        assert found.f == pytest.approx(plain.f, rel=1e-9)


@pytest.mark.parametrize(
    "y",
    [
        np.array([[1.0, 2], [3, 7]]),  # 2 × 2: no degree of freedom left
        np.arange(3.0)[:, None] + np.arange(4.0),  # additive without error
        np.outer([1.0, 2, 4], [1.0, 3, 7, 2]),  # nothing but the product
        np.array([[1.0, 2, 3], [3, 1, 2], [2, 3, 1]]),  # neither factor has an effect
        np.ones((3, 3)),
    ],
)
def test_where_it_is_not_defined(y: Matrix) -> None:
    assert nonadditivity(y) is None
