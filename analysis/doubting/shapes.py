"""Doubts about the shape of the residuals: skew, heavy tails, two humps, flat, or values in coarse steps."""

import math

import numpy as np
from scipy import stats

from analysis.cells import Vector
from analysis.checks import shape
from analysis.doubting.signs import AMBER, Doubt, Left, Signs
from analysis.doubting.spreads import STRICT, Spread
from analysis.rounding import p_value, shortest, significant

ENOUGH = 12  # residuals from which a shape can be seen at all
OWN_SPREAD = 10  # observations in a cell from which residuals brought to the cell's own spread keep their shape
COARSE = 1.5  # steps between values, in residual standard deviations, from which they hide the spread
SUSPECTED = 0.05  # p that is enough where more than one observation stands far out
FLAT, HUMPS = -0.6, -1.3  # excess kurtosis


def odd_shape(signs: Signs, spread: Spread | None) -> Doubt | None:
    """Doubt normal residuals; unequal spread is taken out first, since a mixture of spreads has heavy tails of its own."""
    uneven = spread is not None and min(spread.between, spread.along) < STRICT
    residual = _comparable(signs.rest, uneven)
    if residual.size < ENOUGH or np.ptp(residual) == 0 or signs.rest.counts.max() < 3:
        return None
    test = shape.shapiro(residual)
    flat = float(stats.kurtosistest(residual).pvalue) if residual.size >= 20 and not uneven else 1.0
    p = 1.0 if test is None else min(1.0, 2 * min(test.p, flat))
    # Two far values leave a heavy tail open; what else is odd then decides.
    if test is None or p >= (STRICT if len(signs.outlying) < 2 else SUSPECTED):
        return None
    return Doubt(
        "shape",
        AMBER,
        f"The residuals are {_word(residual)} ({_figures(residual)}; Shapiro-Wilk {p_value(test.p)}). Means and tests can lean on a few "
        "values: compare the permutation row, which needs no bell shape, and the log scale if values are positive and skewed.",
    )


def _comparable(left: Left, uneven: bool) -> Vector:
    known = np.isfinite(left.even)
    if not uneven:
        return left.even[known]
    own = np.bincount(left.cell, left.residual**2) / np.maximum(left.counts - 1, 1)
    usable = known & (left.counts >= OWN_SPREAD)[left.cell] & (own > 0)[left.cell]
    return np.asarray(left.residual[usable] / np.sqrt(own[left.cell[usable]]))


def _word(residual: Vector) -> str:
    skew, tails, n = float(stats.skew(residual)), float(stats.kurtosis(residual)), residual.size
    if abs(skew) > max(0.5, 2.5 * math.sqrt(6 / n)):
        return f"skewed, with a long tail {'above' if skew > 0 else 'below'}"
    if tails < HUMPS:
        return "in two humps, as if two kinds of units were mixed: look for something that was not noted"
    return "heavy-tailed" if tails > 0 else "flat, without the few far values of a bell curve" if tails < FLAT else "not shaped like a bell"


def _figures(residual: Vector) -> str:
    return f"skewness {significant(float(stats.skew(residual)), 2)}, excess kurtosis {significant(float(stats.kurtosis(residual)), 2)}"


def coarse(signs: Signs, _: Spread | None) -> Doubt | None:
    """Doubt a residual spread that rounding hides: values in steps as wide as it, or a cell whose values are all the same."""
    left, observed = signs.rest, signs.rest.layout.observed
    sigma = math.sqrt(left.layout.analysed.residual_ms)
    if not observed.scale.is_identity or left.n < ENOUGH:
        return None
    step = float(np.diff(np.unique(observed.offsets)).min(initial=np.inf))
    if not math.isfinite(step) or sigma == 0:
        return None
    if step > COARSE * sigma:
        return Doubt(
            "shape",
            AMBER,
            f"Values stand in steps of {shortest(step)}, wider than the residual standard deviation ({significant(sigma)}): what varies is "
            "mostly rounding, and tests that take values as continuous can mislead. Is there a finer record?",
        )
    return _all_the_same(left, step, sigma)


def _all_the_same(left: Left, step: float, sigma: float) -> Doubt | None:
    """Doubt a cell whose values are all the same where rounding makes that unlikely."""
    same = (np.bincount(left.cell, left.residual**2) <= 1e-18 * sigma**2 * left.counts) & (left.counts > 2)
    # Values rounded to a step h agree with probability about (h / (σ √(2π)))^(n - 1) / √n.
    chance = left.counts.size * (step / (sigma * math.sqrt(2 * math.pi))) ** (left.counts - 1) / np.sqrt(left.counts)
    odd = np.flatnonzero(same & (chance < STRICT))
    if not odd.size:
        return None
    rows = tuple(int(row) for row in left.layout.observed.file_rows[left.cell == odd[0]][:20])
    return Doubt(
        "spread_by_cell",
        AMBER,
        f"All {len(rows)} values of one cell are the same (rows {rows[0]} to {rows[-1]}), while elsewhere they spread by "
        f"{significant(sigma)}: one value copied, or a device at its limit? Check the original record.",
        rows,
    )
