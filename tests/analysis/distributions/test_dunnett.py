"""Comparisons with a control against printed tables, against 20- and 40-digit arithmetic, against scipy, and against what must hold."""

import csv
import json
import math
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy import integrate, stats

from analysis.distributions import departure, dunnett, lattice, nested, one_factor

HERE = Path(__file__).parent
REFERENCE = HERE.parents[1] / "reference"
Matrix = NDArray[np.float64]
UNEQUAL = [[2.0, 7, 1], [5, 1, 8], [3, 3, 3], [1, 6, 2], [8, 2, 4]]  # observations by cell


def products(loadings: list[float]) -> Matrix:
    """Return the correlation matrix of one factor."""
    matrix = np.outer(loadings, loadings)
    np.fill_diagonal(matrix, 1.0)
    return matrix


def additive(cells: list[list[float]]) -> Matrix:
    """Return the correlation of row differences from row 0 in the additive model with these cell counts (a, b)."""
    counts = np.array(cells, dtype=float)
    information = np.diag(counts.sum(axis=1)) - counts @ np.diag(1 / counts.sum(axis=0)) @ counts.T
    contrasts = np.hstack([-np.ones((len(counts) - 1, 1)), np.eye(len(counts) - 1)])
    covariance = contrasts @ np.linalg.pinv(information) @ contrasts.T
    sd = np.sqrt(np.diag(covariance))
    return covariance / np.outer(sd, sd)


def printed() -> list[dict[str, str]]:
    with (REFERENCE / "dunnett-table" / "data.csv").open(encoding="utf-8") as file:
        return list(csv.DictReader(file))


@pytest.mark.parametrize("row", printed(), ids=lambda row: "-".join(row.values()))
def test_points_of_dunnetts_tables(row: dict[str, str]) -> None:
    # Dunnett (1955), JASA 50, Tables 2a and 2b, read here: approximations for three and more treatments, too great by up to 0.13 as Dunnett
    # (1964) says. Dunnett (1964), Biometrics 20, 482-491, from memory: two decimals.
    m = int(row["treatments"])
    found = dunnett.ppf_upper(float(row["alpha"]), products([math.sqrt(0.5)] * m), float(row["df"]))
    off = float(row["d"]) - found
    assert -0.0101 <= off <= (0.13 if row["edition"] == "1955" and m >= 3 else 0.0101)


def test_feeds_against_casein() -> None:
    # Chick weights, McNeil (1977), 10, 12, 11, 14 and 12 chicks against 12 on casein; t and p from a public fixture that evaluated the
    # integral with 20-digit arithmetic, read here; its tolerance is 1e-9 of each p.
    n = np.array([10, 12, 11, 14, 12])
    t = [6.9567775595644843, 4.6816193833021842, 2.0385501855198229, 3.575623513609643, 0.23817459501696497]
    p = [0.0000000102895425118044, 0.0000724239839187274, 0.167044879055166, 0.00306411940688524, 0.999452490392491]
    found = dunnett.sf(t, products(list(np.sqrt(n / (n + 12)))), 65)
    assert found == pytest.approx(p, rel=1e-9, abs=0)


@pytest.mark.parametrize("case", json.loads((HERE / "high_precision.json").read_text(encoding="utf-8"))["dunnett"], ids=str)
def test_tails_at_many_digits(case: dict[str, str]) -> None:
    # high_precision.json by mpmath (make_high_precision.py), among them loadings of 0.999 and of both signs.
    found = dunnett.sf(float(case["d"]), products([float(text) for text in case["loadings"]]), float(case["df"]))
    assert float(found) == pytest.approx(float(case["sf"]), rel=1e-9)


def test_independent_comparisons_multiply() -> None:
    # With a known variance and no correlation, P(max > d) = 1 - (1 - p)^m.
    d = np.array([0.5, 2.0, 6.0, 12.0])
    p = 2 * stats.norm.sf(d)
    assert dunnett.sf(d, np.eye(4), math.inf) == pytest.approx(-np.expm1(4 * np.log1p(-p)), rel=1e-9)


@pytest.mark.parametrize("matrix", [np.eye(1), np.ones((3, 3)), np.array([[1, -1], [-1, 1.0]])], ids=["one", "alike", "opposite"])
def test_one_comparison_or_several_alike_are_a_t_test(matrix: Matrix) -> None:
    d = np.array([0.0, 1.0, 4.0, 20.0])
    assert dunnett.sf(d, matrix, 9) == pytest.approx(2 * stats.t.sf(d, 9), rel=1e-8)


def test_a_small_departure_from_products_changes_little() -> None:
    # The two ways of computing meet: a matrix that is a product but for 1e-7 goes by the series.
    loadings = [0.5, 0.7, 0.6, 0.8]
    nudged = products(loadings)
    nudged[0, 1] = nudged[1, 0] = nudged[0, 1] + 1e-7
    assert one_factor.exact_loadings(nudged) is None
    d = np.array([0.5, 2.3, 6.0, 25.0])
    assert dunnett.sf(d, nudged, 14) == pytest.approx(dunnett.sf(d, products(loadings), 14), rel=1e-6)


@pytest.mark.parametrize("counts", [UNEQUAL, [[4, 1], [1, 4], [3, 9], [9, 2], [1, 1], [2, 5]]], ids=["5 × 3", "6 × 2"])
def test_any_matrix_agrees_with_randomised_integration(counts: list[list[float]]) -> None:
    # scipy's multivariate t integrates by randomised lattices; this many points leave about 1e-5.
    matrix = additive(counts)
    assert one_factor.exact_loadings(matrix) is None
    for d in (1.5, 2.5, 3.5):
        box, generator = np.full(len(matrix), d), np.random.default_rng(7)
        inside = stats.multivariate_t.cdf(box, shape=matrix, df=20, lower_limit=-box, maxpts=300_000, random_state=generator)
        assert float(dunnett.sf(d, matrix, 20)) == pytest.approx(1 - inside, abs=5e-5)


def test_any_matrix_keeps_between_its_bounds() -> None:
    # One comparison alone, and Šidák's inequality for correlated t: P <= 1 - (1 - p)^m (Šidák 1967), here down to 1e-25.
    matrix = additive(UNEQUAL)
    for df in (3, 40, math.inf):
        d = np.array([1.0, 3.0, 6.0, 10.0])
        single = 2 * stats.t.sf(d, df)
        tail = dunnett.sf(d, matrix, df)
        assert np.all(tail > single)
        assert np.all(tail < -np.expm1(4 * np.log1p(-single)) * (1 + 1e-6))


@pytest.mark.parametrize("matrix", [products([0.3, 0.9, 0.6]), additive(UNEQUAL)])
def test_the_point_is_where_the_tail_is_alpha(matrix: Matrix) -> None:
    for alpha in (0.2, 0.05, 1e-6):
        assert float(dunnett.sf(dunnett.ppf_upper(alpha, matrix, 11), matrix, 11)) == pytest.approx(alpha, rel=1e-9)


def test_the_order_of_comparisons_does_not_matter() -> None:
    matrix = additive(UNEQUAL)
    turned = matrix[::-1, ::-1]
    assert dunnett.sf([1.0, 2.5, 5.0], turned, 11) == pytest.approx(dunnett.sf([1.0, 2.5, 5.0], matrix, 11), abs=2e-6)


def test_what_is_no_number_stays_none() -> None:
    found = dunnett.sf([np.nan, np.inf, 0.0], products([0.5, 0.7]), 5)
    assert np.isnan(found[0])
    assert found[1:].tolist() == [0, 1]


EXTREME = np.array([[1, 0.25, 0.44], [0.25, 1, 0.9], [0.44, 0.9, 1]])  # no loadings within ±1 have these products


def by_integration(d: float, matrix: Matrix) -> float:
    """Return P(max |Z| > d) of three normals by adaptive integration over the first of the box's integral of their density."""

    def others_within(z: float) -> float:
        mean, rest = matrix[1:, 0] * z, matrix[1:, 1:] - np.outer(matrix[1:, 0], matrix[1:, 0])
        c, slope = math.sqrt(rest[0, 0]), rest[0, 1] / rest[0, 0]
        last = math.sqrt(rest[1, 1] - rest[0, 1] * slope)

        def inner(y: float) -> float:
            centre = mean[1] + slope * (y - mean[0])
            chance = stats.norm.cdf((d - centre) / last) - stats.norm.cdf((-d - centre) / last)
            return float(stats.norm.pdf((y - mean[0]) / c) / c * chance)

        return float(integrate.quad(inner, -d, d, epsabs=1e-11, limit=200)[0])

    return 1 - float(integrate.quad(lambda z: stats.norm.pdf(z) * others_within(z), -d, d, epsabs=1e-10, limit=200)[0])


@pytest.mark.parametrize("d", [0.9, 2.2])
def test_three_of_any_correlation_agree_with_adaptive_integration(d: float) -> None:
    # scipy's QUADPACK, one integral inside another; its tolerance here is 1e-10 absolute.
    assert one_factor.exact_loadings(EXTREME) is None
    assert float(dunnett.sf(d, EXTREME, math.inf)) == pytest.approx(by_integration(d, EXTREME), abs=1e-8)


@pytest.mark.parametrize("loadings", [[0.5, 0.7, 0.6], [0.3, 0.9, 0.6, -0.4]])
def test_nested_quadrature_gives_what_one_factor_gives(loadings: list[float]) -> None:
    d = np.array([0.2, 1.0, 2.5, 6.0, 15.0])
    assert nested.log_tail(d, products(loadings)) == pytest.approx(one_factor.log_tail(d, np.array(loadings)), abs=1e-9)


def test_the_series_gives_what_the_right_loadings_give() -> None:
    # A matrix of products, told as the products of slightly wrong loadings and the rest: both ways must give one tail.
    right = np.array([0.55, 0.62, 0.7, 0.66, 0.75, 0.58, 0.71])
    wrong = right + 0.015 * np.array([1, -1, 1, -1, -1, 1, 0])
    excess = products(list(right)) - products(list(wrong))
    d = np.array([0.5, 2.0, 2.8, 5.0])
    found = departure.log_ratio(d, wrong, excess)
    assert found is not None
    moved = one_factor.log_tail(d, right) - one_factor.log_tail(d, wrong)
    assert np.abs(moved).max() > 1e-5  # there is something to find
    assert found == pytest.approx(moved, abs=5e-9)


def test_series_nested_quadrature_and_lattice_meet() -> None:
    matrix = additive(UNEQUAL)
    loadings = one_factor.nearest_loadings(matrix)
    simple = products(list(loadings))
    d = np.array([0.7, 2.0, 2.8, 4.0])
    exact = nested.log_tail(d, matrix) - one_factor.log_tail(d, loadings)
    assert departure.log_ratio(d, loadings, matrix - simple) == pytest.approx(exact, abs=1e-6)
    assert lattice.log_ratio(d, matrix, simple) == pytest.approx(exact, abs=2e-5)  # what its points leave


def test_a_far_departure_is_left_to_the_lattice() -> None:
    # Two families of three that have nothing in common: no loadings come near, and the series says so.
    matrix = np.kron(np.eye(2), np.full((3, 3), 0.8)) + 0.2 * np.eye(6)
    loadings = one_factor.nearest_loadings(matrix)
    assert departure.log_ratio(np.array([1.0, 2.0]), loadings, matrix - products(list(loadings))) is None
    one = dunnett.sf(2.0, products([math.sqrt(0.8)] * 3), math.inf)
    assert float(dunnett.sf(2.0, matrix, math.inf)) == pytest.approx(float(1 - (1 - one) ** 2), rel=1e-4)  # independent families multiply
