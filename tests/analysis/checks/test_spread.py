"""Tests of equal spread: worked by hand, by scipy as a second route, and what must hold."""

from collections.abc import Callable

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy import stats

from analysis.checks import spread

Floats = NDArray[np.float64]
Coded = tuple[Floats, NDArray[np.intp], int]
BY_SCIPY: dict[Callable[..., object], Callable[..., tuple[float, float]]] = {
    spread.levene: lambda groups: tuple(stats.levene(*groups, center="mean")),
    spread.brown_forsythe: lambda groups: tuple(stats.levene(*groups, center="median")),
    spread.bartlett: lambda groups: tuple(stats.bartlett(*groups)),
}
EACH = pytest.mark.parametrize("check", list(BY_SCIPY), ids=lambda check: check.__name__)


def coded(groups: list[list[float]]) -> Coded:
    """Return values, codes and the number of groups."""
    codes = np.repeat(np.arange(len(groups)), [len(group) for group in groups])
    return np.concatenate([np.array(group, dtype=float) for group in groups]), codes.astype(np.intp), len(groups)


def drawn(sizes: tuple[int, ...] = (5, 3, 9, 2, 4)) -> list[list[float]]:
    """Return groups that spread the more, the later they come."""
    generator = np.random.default_rng(3)
    return [[float(value) for value in generator.normal(0, 1 + i, size)] for i, size in enumerate(sizes)]


def told(found: spread.FTest | spread.ChiSquare | None) -> tuple[float, float]:
    """Return the statistic and p."""
    assert found is not None
    return (found.f if isinstance(found, spread.FTest) else found.chi2), found.p


def test_levene_by_hand() -> None:
    # 1 2 6 and 0 4 8: deviations from the means 2 1 3 and 4 0 4, their means 2 and 8/3; between 2/3, within 2 + 32/3,
    # so F = 4 (2/3) / (38/3) = 4/19.
    found = spread.levene(*coded([[1, 2, 6], [0, 4, 8]]))
    assert found is not None
    assert (found.f, found.df1, found.df2) == (pytest.approx(4 / 19), 1, 4)


def test_brown_forsythe_by_hand() -> None:
    # Deviations from the medians 2 and 4: 1 0 4 and 4 0 4, their means 5/3 and 8/3; between 3/2, within 26/3 + 32/3,
    # so F = 4 (3/2) / (58/3) = 9/29.
    found = spread.brown_forsythe(*coded([[1, 2, 6], [0, 4, 8]]))
    assert found is not None
    assert (found.f, found.df1, found.df2) == (pytest.approx(9 / 29), 1, 4)


@EACH
def test_agrees_with_scipy(check: Callable[..., spread.FTest | spread.ChiSquare | None]) -> None:
    groups = drawn()
    assert told(check(*coded(groups))) == pytest.approx(BY_SCIPY[check](groups), rel=1e-10)


@EACH
def test_single_values_and_empty_cells_are_passed_over(check: Callable[..., spread.FTest | spread.ChiSquare | None]) -> None:
    groups = drawn()
    assert check(*coded([[7.0], *groups[:2], [], *groups[2:], [-3.0]])) == check(*coded(groups))


@EACH
def test_neither_order_nor_unit_nor_place_matters(check: Callable[..., spread.FTest | spread.ChiSquare | None]) -> None:
    values, codes, count = coded(drawn())
    order = np.random.default_rng(4).permutation(values.size)
    plain = told(check(values, codes, count))
    assert told(check(values[order], codes[order], count)) == pytest.approx(plain, rel=1e-10)
    assert told(check(values * -1e6, codes, count)) == pytest.approx(plain, rel=1e-10)
    # A shift by 2^20 costs twenty bits of each value.
    assert told(check(values + 2.0**20, codes, count)) == pytest.approx(plain, rel=1e-8)
    assert told(check(values + codes * 100.0, codes, count)) == pytest.approx(plain, rel=1e-10)


@EACH
def test_one_cell_with_repeats_cannot_be_compared(check: Callable[..., object]) -> None:
    assert check(*coded([[1.0, 2.0, 4.0], [3.0], [5.0]])) is None


@EACH
def test_cells_without_any_spread_cannot_be_compared(check: Callable[..., object]) -> None:
    assert check(*coded([[0.1, 0.1, 0.1], [0.7, 0.7, 0.7]])) is None


def test_pairs_have_no_spread_of_their_deviations() -> None:
    # Both deviations of a pair from its middle are the same, up to rounding: F would be a quotient by nothing.
    pairs = coded([[1234.1, 1234.7], [1000.3, 1003.9], [1111.1, 1112.2]])
    assert spread.levene(*pairs) is None
    assert spread.brown_forsythe(*pairs) is None
    assert spread.bartlett(*pairs) is not None
    # Residuals carry the rounding of the values that they were left from.
    residuals, codes, count = coded([[value - (a + b) / 2 for value in (a, b)] for a, b in ((3001.1, 3001.7), (2990.3, 2993.9))])
    assert spread.levene(residuals, codes, count) is None


def test_one_still_cell_is_enough_to_leave_bartlett_undefined() -> None:
    groups = coded([[2.0, 2.0, 2.0], [1.0, 4.0, 9.0]])
    assert spread.bartlett(*groups) is None
    assert spread.brown_forsythe(*groups) is not None


def test_more_cells_than_sixteen_bits_are_told_apart() -> None:
    generator = np.random.default_rng(6)
    count = (1 << 16) + 10
    values, codes = generator.normal(size=3 * count), np.tile(np.arange(count), 3)
    medians = np.median(values.reshape(3, count), axis=0)
    groups = spread.repeated(values, codes, count)
    assert groups is not None
    assert np.array_equal(groups.medians(), medians)
