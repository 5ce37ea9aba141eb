"""Doubts about the scale: an interaction that another scale would take away, or that none can."""

import numpy as np

from analysis import tails
from analysis.anova import INTERACTION
from analysis.cells import Matrix
from analysis.doubting.signs import AMBER, NOTE, Doubt, Signs
from analysis.doubting.spreads import STRICT, Spread
from analysis.holding.table import AS_ANALYSED, LOG, MEASURED
from analysis.rounding import p_value

CLEARLY = 1.5  # half-widths of its interval by which the best power lies below 1
GONE = 0.1  # p from which nothing is left of an interaction


def removable(signs: Signs, _: Spread | None) -> Doubt | None:
    """Say whether another scale would take a decided interaction away, or none can because the lines cross."""
    p = {
        analysis: value
        for analysis, term, value in zip(signs.holds["analysis"], signs.holds["term"], signs.holds["p"], strict=True)
        if term == INTERACTION
    }
    alpha, here = 1 - signs.analysed.confidence, p.get(AS_ANALYSED)
    other = LOG if LOG in p else MEASURED
    if here is None or not here < alpha:
        return None
    if other in p and p[other] >= max(alpha, GONE):
        return _gone(signs, here, p[other], other)
    crossing = crosses(signs)
    return None if crossing is None else Doubt("scale", NOTE, crossing)


def _gone(signs: Signs, here: float, there: float, other: str) -> Doubt:
    best = signs.checks["box_cox"]
    suits = best is not None and 1 - best["lambda"] > CLEARLY * (best["upper"] - best["lambda"])
    return Doubt(
        "scale",
        AMBER if suits and here < STRICT and other == LOG else NOTE,
        f"The interaction depends on the scale: {p_value(here)} as analysed, {p_value(there)} on the {other}. What the factors do adds up "
        f"on one scale and not on the other. Say which is meant, differences or ratios, before speaking of an interaction.",
    )


def crosses(signs: Signs) -> str | None:
    """Return the sentence for an interaction that no scale can take away, None where the order of levels is not shown to change."""
    layout = signs.layout
    observed, cells, model = layout.observed, layout.full.cells, layout.analysed
    if layout.empty_cells or model.residual_ms == 0:
        return None
    a, b = observed.shape
    place = np.arange(a * b).reshape(a, b)
    for factor, other, grid in ((observed.row, observed.column, place), (observed.column, observed.row, place.T)):
        upper, lower = np.triu_indices(factor.size, 1)
        t = np.column_stack([_t(cells.differences(grid[lower, k], grid[upper, k]), model.residual_ms) for k in range(other.size)])
        limit = tails.t_quantile((1 - signs.analysed.confidence) / 2 / max(t.shape[1], 1), model.residual_df)
        turned = np.flatnonzero((t.max(axis=1) > limit) & (t.min(axis=1) < -limit))
        if turned.size:
            i = int(turned[0])
            high, low = int(t[i].argmax()), int(t[i].argmin())
            one, two = factor.levels[lower[i]], factor.levels[upper[i]]
            return (
                f"No change of scale takes this interaction away, because it crosses: {factor.told(one)} lies above {factor.told(two)} "
                f"with {other.told(other.levels[high])} and below with {other.told(other.levels[low])}."
            )
    return None


def _t(found: tuple[np.ndarray, np.ndarray], ms: float) -> Matrix:
    return np.asarray(found[0] / np.sqrt(found[1] * ms))
