"""Wald tests with an HC3 covariance: a printed value, statsmodels as a second route, and what must hold."""

import csv
from pathlib import Path

import numpy as np
import pytest
import statsmodels.api as sm
from numpy.typing import NDArray
from scipy import stats

from analysis.checks import hc3

REFERENCE = Path(__file__).parents[2] / "reference"
Matrix = NDArray[np.float64]


def moore() -> tuple[Matrix, NDArray[np.intp]]:
    """Return conformity and the cell of each of 45 persons: authoritarianism (3) by partner's status (2)."""
    with (REFERENCE / "moore" / "data.csv").open(encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    cell = [2 * ["low", "medium", "high"].index(row["fcategory"]) + ["low", "high"].index(row["partner"]) for row in rows]
    return np.array([float(row["conformity"]) for row in rows]), np.array(cell)


def by_cells(y: Matrix, cell: NDArray[np.intp], hypothesis: Matrix) -> hc3.FTest | None:
    """Test a hypothesis about cell means."""
    n = np.bincount(cell)
    means = np.bincount(cell, y) / n
    spread = hc3.spread_by_row(y - means[cell], (1 / n)[cell], cell, n.size)
    return hc3.wald_hc3_cells(means, n, spread, hypothesis, y.size - n.size)


def differences(k: int) -> Matrix:
    """Return the differences of levels 2 … k from level 1, (k - 1, k)."""
    return np.hstack([-np.ones((k - 1, 1)), np.eye(k - 1)])


HYPOTHESES = {
    "row": np.kron(differences(3), [[0.5, 0.5]]),
    "column": np.kron(np.full((1, 3), 1 / 3), differences(2)),
    "interaction": np.kron(differences(3), differences(2)),
}


def test_conformity() -> None:
    # Moore and Krupat (1971), Sociometry 34, 122-135; HC3 F of the interaction (which is the same for types II and III) as
    # printed in public transcripts of the data set's documentation, read here.
    found = by_cells(*moore(), HYPOTHESES["interaction"])
    assert found is not None
    assert found.f == pytest.approx(2.8294, abs=5.1e-5)
    assert found.p == pytest.approx(0.0712175, abs=5.1e-8)
    assert (found.df1, found.df2) == (2, 39)


@pytest.mark.parametrize("term", HYPOTHESES)
def test_cells_agree_with_statsmodels(term: str) -> None:
    y, cell = moore()
    robust = sm.OLS(y, np.eye(6)[cell]).fit(cov_type="HC3", use_t=True).f_test(HYPOTHESES[term])
    found = by_cells(y, cell, HYPOTHESES[term])
    assert found is not None
    assert found.f == pytest.approx(float(robust.fvalue), rel=1e-9)
    assert found.p == pytest.approx(float(robust.pvalue), rel=1e-8)


def test_a_design_with_blocks_agrees_with_statsmodels() -> None:
    generator = np.random.default_rng(12)
    row, column, block = (generator.integers(0, k, 60) for k in (3, 2, 4))
    y = generator.normal(size=60) * (1 + row)
    x = np.column_stack([np.ones(60), *(np.eye(k)[codes][:, 1:] for k, codes in ((3, row), (2, column), (4, block)))])
    hypothesis = np.eye(x.shape[1])[1:3]
    robust = sm.OLS(y, x).fit(cov_type="HC3", use_t=True)
    rows, at = np.unique(x, axis=0, return_inverse=True)
    leverage = np.einsum("ij,jk,ik->i", x, np.linalg.inv(x.T @ x), x)
    spread = hc3.spread_by_row(y - x @ robust.params, leverage, at, len(rows))
    found = hc3.wald_hc3(rows, np.bincount(at).astype(float), spread, robust.params, hypothesis, 60 - x.shape[1])
    assert found is not None
    assert found.f == pytest.approx(float(robust.f_test(hypothesis).fvalue), rel=1e-9)


def test_two_cells_are_a_t_test_with_unequal_variances() -> None:
    # Each variance of a mean is Σe² / (n - 1)², by hand 14/4 + 8/1 for 1 2 6 and 3 7.
    found = by_cells(np.array([1.0, 2, 6, 3, 7]), np.array([0, 0, 0, 1, 1]), np.array([[-1.0, 1.0]]))
    assert found is not None
    assert found.f == pytest.approx(4 / (14 / 4 + 8))
    assert found.p == pytest.approx(stats.f.sf(4 / 11.5, 1, 3))


def test_the_choice_of_contrasts_does_not_matter() -> None:
    y, cell = moore()
    turned = np.array([[2.0, -1.0], [1.0, 5.0]]) @ HYPOTHESES["interaction"]
    one, other = by_cells(y, cell, HYPOTHESES["interaction"]), by_cells(y, cell, turned)
    assert one is not None
    assert other is not None
    assert one.f == pytest.approx(other.f, rel=1e-9)


def test_a_cell_with_one_observation_leaves_its_hypotheses_open() -> None:
    y, cell = np.array([1.0, 2, 6, 3, 7, 9]), np.array([0, 0, 0, 1, 1, 2])
    assert by_cells(y, cell, np.array([[-1.0, 0, 1.0]])) is None
    assert by_cells(y, cell, np.array([[-1.0, 1.0, 0]])) is not None


def test_cells_without_spread_leave_their_hypotheses_open() -> None:
    assert by_cells(np.array([1.0, 1, 4, 4]), np.array([0, 0, 1, 1]), np.array([[-1.0, 1.0]])) is None


def test_rows_that_depend_on_each_other_are_no_hypothesis() -> None:
    assert by_cells(*moore(), np.vstack([HYPOTHESES["row"], HYPOTHESES["row"].sum(axis=0)])) is None
