"""The power that suits a response: the example of Box and Cox, the log-likelihood written out, and what must hold."""

import csv
import math
from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy import stats

from analysis.checks.box_cox import box_cox

REFERENCE = Path(__file__).parents[2] / "reference"
Floats = NDArray[np.float64]


def poisons(full: bool) -> tuple[Floats, Callable[[Floats], float]]:
    """Return the survival times and the residual sum of squares of the model with or without the interaction."""
    with (REFERENCE / "poisons" / "data.csv").open(encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    poison, treatment = (np.unique([row[name] for row in rows], return_inverse=True)[1] for name in ("poison", "treatment"))
    a, b = np.eye(3)[poison], np.eye(4)[treatment]
    x = (a[:, :, None] * b[:, None, :]).reshape(len(rows), -1) if full else np.hstack([a, b])
    return np.array([float(row["time"]) for row in rows]), lambda z: float(((z - x @ np.linalg.lstsq(x, z, rcond=None)[0]) ** 2).sum())


def about_a_mean(z: Floats) -> float:
    return float(((z - z.mean()) ** 2).sum())


def test_survival_times_without_interaction() -> None:
    # Box and Cox (1964), JRSS B 26, 211-252: maximum at -0.75, 95% interval from -1.13 to -0.37 read off a graph (from memory).
    found = box_cox(*poisons(full=False), confidence=0.95)
    assert found is not None
    assert found.lam == pytest.approx(-0.75, abs=0.0051)
    assert (found.lower, found.upper) == pytest.approx((-1.13, -0.37), abs=0.02)


def test_survival_times_with_interaction() -> None:
    # A published course script, read here: maximum at -0.82 on a grid of step 0.01; the interval holds -1.
    found = box_cox(*poisons(full=True), confidence=0.95)
    assert found is not None
    assert found.lam == pytest.approx(-0.82, abs=0.0051)
    assert found.lower < -1 < found.upper


def test_the_interval_ends_where_the_likelihood_has_fallen_enough() -> None:
    # The log-likelihood as written by Box and Cox, equations 8 and 9.
    y, residual_ss = poisons(full=False)
    n = y.size

    def log_likelihood(power: float) -> float:
        return -n / 2 * math.log(residual_ss((y**power - 1) / power) / n) + (power - 1) * float(np.log(y).sum())

    found = box_cox(y, residual_ss, confidence=0.9)
    assert found is not None
    top = log_likelihood(found.lam)
    for bound in (found.lower, found.upper):
        assert 2 * (top - log_likelihood(bound)) == pytest.approx(stats.chi2.ppf(0.9, 1), abs=1e-6)
    for step in (-0.01, 0.01):
        assert log_likelihood(found.lam + step) < top


def test_one_sample_agrees_with_scipy() -> None:
    y = np.random.default_rng(1).gamma(3, size=50)
    found = box_cox(y, about_a_mean, 0.95)
    _, lam, (lower, upper) = stats.boxcox(y, alpha=0.05)
    assert found is not None
    assert (found.lam, found.lower, found.upper) == pytest.approx((lam, lower, upper), abs=1e-5)


def test_the_unit_does_not_matter() -> None:
    y, residual_ss = poisons(full=True)
    here, there = box_cox(y, residual_ss, 0.95), box_cox(y * 1e9, residual_ss, 0.95)
    assert here is not None
    assert there is not None
    assert (here.lam, here.lower, here.upper) == pytest.approx((there.lam, there.lower, there.upper), abs=1e-5)


def test_a_reciprocal_response_turns_the_sign() -> None:
    y, residual_ss = poisons(full=True)
    here, there = box_cox(y, residual_ss, 0.95), box_cox(1 / y, residual_ss, 0.95)
    assert here is not None
    assert there is not None
    assert (here.lam, here.lower, here.upper) == pytest.approx((-there.lam, -there.upper, -there.lower), abs=1e-5)


def test_values_that_hardly_differ_leave_every_power_open() -> None:
    y = 1000 + np.random.default_rng(8).normal(size=30) * 0.001
    found = box_cox(y, about_a_mean, 0.95)
    assert found is not None
    assert (found.lower, found.upper) == (-5, 5)


@pytest.mark.parametrize("y", [[1.0, 0.0, 2.0], [1.0, -3.0, 2.0], [2.0, 2.0, 2.0], []])
def test_where_it_is_not_defined(y: list[float]) -> None:
    assert box_cox(np.array(y), about_a_mean, 0.95) is None


def test_a_perfect_fit_has_no_best_power() -> None:
    assert box_cox(np.array([1.0, 2.0, 5.0]), lambda z: 0.0, 0.95) is None
