"""Shapiro and Wilk's test: the worked example of 1965, and what must hold."""

import numpy as np
import pytest

from analysis.checks import shape


def test_the_weights_of_eleven_men() -> None:
    # Shapiro and Wilk (1965), Biometrika 52, 606: W = 0.79 for these eleven weights in pounds (from memory); it is significant at 1%.
    found = shape.shapiro(np.array([148, 154, 158, 160, 161, 162, 166, 170, 182, 195, 236], dtype=float))
    assert found is not None
    assert found.w == pytest.approx(0.79, abs=0.005)
    assert found.p < 0.01
    assert found.n == 11


def test_neither_order_nor_unit_matters() -> None:
    residuals = np.random.default_rng(2).gamma(2, size=40)
    plain = shape.shapiro(residuals)
    assert plain is not None
    assert shape.shapiro(residuals[::-1]) == plain
    tiny = shape.shapiro(residuals * 1e-200)
    assert tiny is not None
    assert (tiny.w, tiny.p) == pytest.approx((plain.w, plain.p), rel=1e-9)


def test_a_large_sample_is_drawn_from_the_same_way_every_time() -> None:
    residuals = np.random.default_rng(5).normal(size=20_000)
    found = shape.shapiro(residuals)
    assert found is not None
    assert found.n == 5000
    assert found.p > 0.01
    assert shape.shapiro(np.random.default_rng(6).permutation(residuals)) == found
    skew = shape.shapiro(np.exp(residuals))
    assert skew is not None
    assert skew.p < 1e-10


@pytest.mark.parametrize("residuals", [[], [1.0, 2.0], [3.0, 3.0, 3.0, 3.0]])
def test_too_few_or_all_alike(residuals: list[float]) -> None:
    assert shape.shapiro(np.array(residuals)) is None
