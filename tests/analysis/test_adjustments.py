"""Adjustments of a family: printed p-values, step-by-step hand values, and the agreement of p-value and interval."""

import csv
import math
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray
from scipy import stats

from analysis.adjustments import ADJUSTMENTS, Family

REFERENCE = Path(__file__).parents[1] / "reference"
SINGLE_STEP = sorted(set(ADJUSTMENTS) - {"holm"})


def family(t: list[float], df: float = 20, means: int = 4, confidence: float = 0.95) -> Family:
    """Return a family whose comparisons with a control have equal sizes."""
    correlation = np.full((len(t), len(t)), 0.5)
    np.fill_diagonal(correlation, 1.0)
    return Family(np.array(t, dtype=float), df, means, means - 1, correlation, confidence)


def poisons() -> tuple[NDArray[np.float64], float]:
    """Return the t of B − A, C − A, D − A, C − B, D − B, D − C in the additive model of the poisons, and its df."""
    with (REFERENCE / "poisons" / "data.csv").open(encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    y = np.array([float(row["time"]) for row in rows])
    poison = np.array([["I", "II", "III"].index(row["poison"]) for row in rows])
    treatment = np.array(["ABCD".index(row["treatment"]) for row in rows])
    a, b = (np.array([y[codes == i].mean() for i in range(codes.max() + 1)]) for codes in (poison, treatment))
    residual = y - a[poison] - b[treatment] + y.mean()
    pairs = [(1, 0), (2, 0), (3, 0), (2, 1), (3, 1), (3, 2)]
    return np.array([b[i] - b[j] for i, j in pairs]) / math.sqrt((residual @ residual) / 42 * 2 / 12), 42


def test_tukey_on_the_poisons() -> None:
    # Box and Cox (1964), Table 1; additive model, Tukey p as printed in a public statistics text (read here), seven decimals.
    t, df = poisons()
    printed = [0.0000083, 0.6221729, 0.0076661, 0.0004090, 0.1380432, 0.1416151]
    found = ADJUSTMENTS["tukey"].adjust(Family(t, df, 4, 3, None, 0.95))
    assert found.p == pytest.approx(printed, abs=5.1e-8)
    # The half width of every interval there is 0.17273865 and the standard error of a difference the same: critical value from both.
    se = 0.36250000 / t[0]
    assert found.critical * se == pytest.approx(0.53523865 - 0.36250000, abs=1e-8)


def test_holm_step_by_step() -> None:
    # Holm (1979), Scand. J. Statist. 6, 65-70, by hand: p 0.01, 0.04, 0.03, 0.005 give 0.03, 0.06, 0.06, 0.02.
    p = np.array([0.01, 0.04, 0.03, 0.005])
    found = ADJUSTMENTS["holm"].adjust(family(list(stats.t.isf(p / 2, 20))))
    assert found.p == pytest.approx([0.03, 0.06, 0.06, 0.02], rel=1e-10)
    assert found.critical == pytest.approx(stats.t.isf(0.05 / 8, 20), rel=1e-12)


def test_bonferroni_and_sidak_by_their_formulas() -> None:
    t = [2.5, -0.3, 9.0]
    p = 2 * stats.t.sf(np.abs(t), 20)
    assert ADJUSTMENTS["bonferroni"].adjust(family(t)).p == pytest.approx(np.minimum(3 * p, 1), rel=1e-12)
    assert ADJUSTMENTS["sidak"].adjust(family(t)).p == pytest.approx(-np.expm1(3 * np.log1p(-p)), rel=1e-12)
    assert ADJUSTMENTS["sidak"].adjust(family(t)).critical == pytest.approx(stats.t.isf((1 - 0.95 ** (1 / 3)) / 2, 20), rel=1e-10)


def test_scheffe_by_its_formula() -> None:
    # Scheffé (1953), Biometrika 40, 87-104: t² / d against F(d, df).
    found = ADJUSTMENTS["scheffe"].adjust(family([2.5, -0.3, 9.0]))
    assert found.p == pytest.approx(stats.f.sf(np.array([6.25, 0.09, 81]) / 3, 3, 20), rel=1e-12)
    assert found.critical == pytest.approx(math.sqrt(3 * stats.f.isf(0.05, 3, 20)), rel=1e-12)
    # With a known variance the F becomes a chi-square.
    known = ADJUSTMENTS["scheffe"].adjust(family([2.5, -0.3, 9.0], df=math.inf))
    assert known.p == pytest.approx(stats.chi2.sf([6.25, 0.09, 81], 3), rel=1e-12)


def test_tukey_of_two_means_is_not_adjusted() -> None:
    for df in (1, 7, math.inf):
        one = family([1.7], df=df, means=2)
        for name in ("tukey", "dunnett", "bonferroni", "holm", "sidak", "scheffe"):
            found = ADJUSTMENTS[name].adjust(one)
            assert found.p == pytest.approx(ADJUSTMENTS["none"].adjust(one).p, rel=1e-9)
            assert found.critical == pytest.approx(ADJUSTMENTS["none"].adjust(one).critical, rel=1e-9)


@pytest.mark.parametrize("name", SINGLE_STEP)
@given(
    t=st.lists(st.floats(-60, 60), min_size=1, max_size=6),
    df=st.sampled_from([1.0, 3.0, 24.0, 5000.0]),
    confidence=st.sampled_from([0.5, 0.9, 0.95, 0.999]),
)
def test_the_interval_leaves_zero_out_exactly_when_p_is_small(name: str, t: list[float], df: float, confidence: float) -> None:
    found = ADJUSTMENTS[name].adjust(family(t, df=df, confidence=confidence))
    assert np.array_equal(found.p < 1 - confidence, np.abs(t) > found.critical)
    assert np.all((found.p >= 0) & (found.p <= 1))


@pytest.mark.parametrize("name", SINGLE_STEP)
def test_a_tie_with_the_critical_value_is_decided_once(name: str) -> None:
    critical = ADJUSTMENTS[name].adjust(family([1.0] * 3)).critical
    t = [critical, np.nextafter(critical, 0), np.nextafter(critical, 9)]
    found = ADJUSTMENTS[name].adjust(family(t))
    assert (found.p < 1 - 0.95).tolist() == [False, False, True]
    assert found.p == pytest.approx([0.05] * 3, rel=1e-8)


@pytest.mark.parametrize("name", sorted(ADJUSTMENTS))
def test_what_cannot_be_estimated_takes_no_part(name: str) -> None:
    with_gap = ADJUSTMENTS[name].adjust(family([2.2, math.nan, -1.0]))
    without = ADJUSTMENTS[name].adjust(family([2.2, -1.0]))
    assert np.isnan(with_gap.p[1])
    assert with_gap.p[[0, 2]] == pytest.approx(without.p, rel=1e-12)
    assert with_gap.critical == pytest.approx(without.critical, rel=1e-12)
    assert np.isnan(ADJUSTMENTS[name].adjust(family([math.nan])).p).all()


def test_adjusted_p_is_never_below_the_plain_one() -> None:
    t = [0.2, -1.4, 2.4, 3.3, -5.0, 12.0]
    plain = ADJUSTMENTS["none"].adjust(family(t)).p
    for name, adjustment in ADJUSTMENTS.items():
        assert np.all(adjustment.adjust(family(t)).p >= plain * (1 - 1e-9)), name


def test_comparisons_with_a_control_need_their_correlation() -> None:
    with pytest.raises(ValueError, match="correlation"):
        ADJUSTMENTS["dunnett"].adjust(Family(np.array([1.0]), 9, 2, 1, None, 0.95))
