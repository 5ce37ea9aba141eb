"""Studentised residuals and Cook's distance: a printed table, refits without each observation, and what must hold."""

import csv
import json
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray

from analysis.checks.influence import influence

REFERENCE = Path(__file__).parents[2] / "reference"
Floats = NDArray[np.float64]


def fit(x: Floats, y: Floats) -> tuple[Floats, Floats, float, int]:
    """Return residuals, leverages, residual mean square and df of a least squares fit."""
    q = np.linalg.qr(x)[0]
    residual = y - q @ (q.T @ y)
    df = len(y) - x.shape[1]
    return residual, (q**2).sum(axis=1), float(residual @ residual) / df, df


def test_battery_life() -> None:
    # Montgomery (2013), Figure 5.10, read here: three decimals, a unit in the last place.
    with (REFERENCE / "battery" / "data.csv").open(encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    life = np.array([float(row["life"]) for row in rows])
    cell = np.unique([f"{row['material']} {row['temperature']}" for row in rows], return_inverse=True)[1]
    residual, leverage, ms, df = fit(np.eye(9)[cell], life)
    found = influence(residual, leverage, ms, df, 9)
    printed = json.loads((REFERENCE / "battery" / "about.json").read_text(encoding="utf-8"))["runs"][0]["published"]
    checked = 0
    for path, told in printed.items():
        if path.startswith("checks/influence/row="):
            row, field = path.removeprefix("checks/influence/row=").split("/")
            assert getattr(found, field)[int(row) - 2] == pytest.approx(float(told["value"]), abs=told["tolerance"]), path
            checked += 1
    assert checked == 180


def test_every_form_by_leaving_observations_out() -> None:
    # Cook and Weisberg (1982), sections 2.2.1 and 3.5.1: the deleted residual over its own standard error, and the shift of all
    # fitted values.
    generator = np.random.default_rng(11)
    x, y = np.column_stack([np.ones(15), generator.normal(size=(15, 2))]), generator.normal(size=15)
    residual, leverage, ms, df = fit(x, y)
    found = influence(residual, leverage, ms, df, 3)
    whole = x @ np.linalg.lstsq(x, y, rcond=None)[0]
    for i in range(15):
        rest = np.arange(15) != i
        coefficients = np.linalg.lstsq(x[rest], y[rest], rcond=None)[0]
        ms_without = fit(x[rest], y[rest])[2]
        error = np.sqrt(ms_without * (1 + x[i] @ np.linalg.solve(x[rest].T @ x[rest], x[i])))
        assert found.student_external[i] == pytest.approx((y[i] - x[i] @ coefficients) / error, rel=1e-9)
        assert found.cook[i] == pytest.approx(((whole - x @ coefficients) ** 2).sum() / (3 * ms), rel=1e-9)
        assert found.student_internal[i] == pytest.approx(residual[i] / np.sqrt(ms * (1 - leverage[i])), rel=1e-12)


def test_an_observation_that_fits_itself_has_no_standardised_residual() -> None:
    x = np.eye(2)[[0, 0, 0, 1]]
    residual, leverage, ms, df = fit(x, np.array([1.0, 2, 6, 9]))
    found = influence(residual, leverage, ms, df, 2)
    for form in (found.student_internal, found.student_external, found.cook):
        assert np.isnan(form).tolist() == [False, False, False, True]


def test_nothing_is_standardised_without_spread() -> None:
    found = influence(np.zeros(4), np.full(4, 0.5), 0.0, 2, 2)
    assert np.isnan(found.student_internal).all()
    assert np.isnan(found.cook).all()


def test_the_external_form_needs_a_degree_of_freedom_and_an_imperfect_rest() -> None:
    one_left = influence(np.array([1.0, -1.0]), np.array([0.5, 0.5]), 2.0, 1, 1)
    assert np.isnan(one_left.student_external).all()
    assert one_left.student_internal == pytest.approx([1, -1])
    # 0, 0, 0 and 4 about their mean: without the last the rest fits perfectly.
    residual = np.array([-1.0, -1, -1, 3])
    found = influence(residual, np.full(4, 0.25), 4.0, 3, 1)
    assert np.isnan(found.student_external).tolist() == [False, False, False, True]
