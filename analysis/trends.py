"""How the response follows a factor whose levels are amounts: straight, curved, and what is left over."""

import numpy as np
import pandas as pd
from scipy import linalg

from analysis import tails
from analysis.cells import Matrix, Vector
from analysis.estimates import Estimates
from analysis.families import Slice
from analysis.model import Model

COLUMNS = ("factor", "within", "part", "df", "residual_df", "estimate", "se", "lower", "upper", "ss", "f", "p")
CURVE_COLUMNS = ("factor", "within", "amount", "straight", "curved")
STEPS = 61  # of a drawn line
LINEAR, QUADRATIC, DEPARTURE, DIFFER = "linear", "quadratic", "departure", "slopes differ"


def polynomial(amounts: Vector) -> tuple[Vector, Vector, Matrix]:
    """Return the weights of slope and curvature at the true spacing, and those of everything beyond.

    amounts is (k,), all different; the slope is per unit of amount, the curvature per squared unit, and what lies beyond
    is (k - 3, k), orthonormal. With two levels the curvature is all zeros. Source: Fisher and Yates (1938), Statistical
    Tables, orthogonal polynomials, here for any spacing.
    """
    centred = amounts - amounts.mean()
    slope = centred / (centred @ centred)
    if amounts.size < 3:
        return slope, np.zeros_like(slope), np.zeros((0, amounts.size))
    bend = centred**2 - (centred**2).mean() - slope @ centred**2 * centred
    beyond = linalg.null_space(np.vstack([np.ones_like(centred), centred / np.abs(centred).max(), bend / np.abs(bend).max()])).T
    return slope, bend / (bend @ bend), np.asarray(beyond)


def curves(factor: str, amounts: tuple[float, ...], overall: Estimates, slices: tuple[Slice, ...], pivot: float) -> pd.DataFrame:
    """Return the straight line and the curve through the means along the amounts, on average and within each slice, on the scale analysed.

    Each has 61 steps from the lowest amount to the highest; NaN where a mean cannot be estimated. Weights are equal for every
    level, as in the tests of trend: ordinary least squares through the means.
    """
    x = np.array(amounts, dtype=float)
    at = np.linspace(x.min(), x.max(), STEPS)
    frames = []
    for within, means in ((None, overall), *((part.within, part.estimates) for part in slices)):
        value = np.where(means.estimable, means.value, np.nan)
        straight, curved = _lines_through(x, value, at)
        frames.append(
            pd.DataFrame({"factor": factor, "within": within, "amount": at, "straight": straight + pivot, "curved": curved + pivot})
        )
    return pd.concat(frames, ignore_index=True)


def _lines_through(x: Vector, value: Vector, at: Vector) -> tuple[Vector, Vector]:
    """Return the straight line and the parabola through values at x, at other places; the parabola needs three values."""
    slope, bend, _ = polynomial(x)
    centred, away = x - x.mean(), at - x.mean()
    straight = value.mean() + (slope @ value) * away
    if x.size < 3:
        return straight, np.full_like(at, np.nan)
    return straight, straight + (bend @ value) * (away**2 - (centred**2).mean() - slope @ centred**2 * away)


def trends(
    factor: str, amounts: tuple[float, ...], overall: Estimates, slices: tuple[Slice, ...], model: Model, confidence: float
) -> pd.DataFrame:
    """Return the tests of straight trend, curvature and departure: over the equal-weight means, within each slice, and of equal slopes.

    overall holds the factor's equal-weight means, slices its cells within each level of the other factor. Estimates are in
    response units per unit (linear) and per squared unit (quadratic) of the amount.
    """
    x = np.array(amounts, dtype=float)
    rows = _parts(factor, None, x, overall, model, confidence)
    for part in slices:
        rows += _parts(factor, part.within, x, part.estimates, model, confidence)
    if len(slices) > 1 and model.interaction:
        rows.append(_slopes_differ(factor, x, slices, model))
    return pd.DataFrame(rows, columns=list(COLUMNS))


def _parts(factor: str, within: str | None, x: Vector, means: Estimates, model: Model, confidence: float) -> list[dict[str, object]]:
    slope, bend, beyond = polynomial(x)
    rows = [_single(LINEAR, means.combined(slope[None, :]), model, confidence)]
    if x.size > 2:
        rows.append(_single(QUADRATIC, means.combined(bend[None, :]), model, confidence))
    if x.size > 3:
        rows.append(_tested(DEPARTURE, *means.combined(beyond).nought(), model))
    return [{"factor": factor, "within": within, **row} for row in rows]


def _single(part: str, one: Estimates, model: Model, confidence: float) -> dict[str, object]:
    row = _tested(part, *one.nought(), model)
    if not one.estimable[0]:
        return row
    se = float(np.sqrt(one.unit_variance[0] * model.residual_ms))
    reach = model.quantile(confidence) * se
    value = float(one.value[0])
    return row | {"estimate": value, "se": se, "lower": value - reach, "upper": value + reach}


def _tested(part: str, ss: float, df: int, model: Model) -> dict[str, object]:
    f = ss / df / model.residual_ms if model.residual_ms > 0 else float("nan")
    return {"part": part, "df": df, "residual_df": model.residual_df, "ss": ss, "f": f, "p": float(tails.f_upper(f, df, model.residual_df))}


def _slopes_differ(factor: str, x: Vector, slices: tuple[Slice, ...], model: Model) -> dict[str, object]:
    """Test that the straight trend is the same within every level of the other factor; slices share one fit of the cells."""
    slope, _, _ = polynomial(x)
    whole = slices[0].whole
    weights = np.zeros((len(slices), whole.value.size))
    for i, part in enumerate(slices):
        weights[i, part.where] = slope
    slopes = whole.combined(weights)
    estimable = np.flatnonzero(slopes.estimable)
    ss, df = slopes.at(estimable).equality()
    return {"factor": factor, **_tested(DIFFER, ss, max(df, 1), model)} if df else {"factor": factor, "part": DIFFER, "df": 0}
