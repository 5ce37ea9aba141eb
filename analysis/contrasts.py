"""Questions asked of the cells themselves: simple effects inside slices and differences of differences."""

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
import pandas as pd

from analysis import tails
from analysis.adjustments import ADJUSTMENTS, Family, stepped_down
from analysis.cells import Matrix, Vector
from analysis.estimates import FREE_TOLERANCE, Estimates
from analysis.families import Choices, Slice
from analysis.model import Model
from analysis.observations import Observations
from analysis.refusals import NotEstimable, UnknownLevel

SIMPLE_COLUMNS = ("factor", "within", "df", "residual_df", "ss", "f", "p", "p_adjusted")
HOLM_INSTEAD = ("tukey", "dunnett")  # these two are made for other families than differences of differences


def simple_effects(factor: str, slices: tuple[Slice, ...], model: Model) -> pd.DataFrame:
    """Return the F test of one factor inside each level of the other, with the pooled error and Holm across the slices.

    Source: Winer (1971), Statistical Principles in Experimental Design, section 5.2; Holm (1979), Scand. J. Statist. 6, 65-70.
    """
    tested = [part.estimates.equality() for part in slices]
    dfs = np.array([df for _, df in tested])
    ss = np.array([model.strata.without_rounding(ss) if df else np.nan for ss, df in tested])
    ms = model.residual_ms if model.residual_ms > 0 else np.nan
    with np.errstate(divide="ignore", invalid="ignore"):
        f = np.where(dfs > 0, ss / dfs / ms, np.nan)
    p = np.asarray(tails.f_upper(f, dfs, model.residual_df), dtype=float)
    columns = (factor, [part.within for part in slices], dfs, model.residual_df, ss, f, p, stepped_down(p))
    return pd.DataFrame(dict(zip(SIMPLE_COLUMNS, columns, strict=True)))


@dataclass(frozen=True)
class Contrast:
    """A weighted combination of cell means; the estimate is on the analysed scale, from the pivot where weights sum to 0."""

    estimate: float
    se: float
    df: int
    t: float
    p: float
    lower: float
    upper: float


def contrast(
    weights: Mapping[tuple[str, str], float], observed: Observations, cells: Estimates, model: Model, confidence: float
) -> Contrast:
    """Return a contrast of cells given by the weight of each (row, column); cells that are not named weigh nothing."""
    vector = np.zeros(cells.value.size)
    for (row, column), weight in weights.items():
        for level, factor in ((row, observed.row), (column, observed.column)):
            if level not in factor.levels:
                raise UnknownLevel(factor.name, level, factor.levels)
        vector[observed.row.levels.index(row) * observed.column.size + observed.column.levels.index(column)] = weight
    one = cells.combined(vector[None, :])
    if not one.estimable[0]:
        raise NotEstimable([f"{row} × {column}" for (row, column), weight in weights.items() if weight])
    value = float(one.value[0]) + float(vector.sum()) * observed.pivot
    se = float(np.sqrt(one.unit_variance[0] * model.residual_ms))
    t = value / se if se > 0 else float("nan")
    reach = model.quantile(confidence) * se
    return Contrast(value, se, model.residual_df, t, float(tails.t_two_sided(t, model.residual_df)), value - reach, value + reach)


def count(shape: tuple[int, int]) -> int:
    """Return how many differences of differences a layout of this shape has."""
    a, b = shape
    return a * (a - 1) * b * (b - 1) // 4


def interaction_contrasts(
    cells: Estimates, rows: tuple[str, ...], columns: tuple[str, ...], model: Model, choices: Choices, dimension: int
) -> pd.DataFrame:
    """Return every difference of differences (r2c2 − r2c1) − (r1c2 − r1c1), with test and interval.

    dimension is the number of degrees of freedom of the interaction, for Scheffé's method.
    """
    a, b = len(rows), len(columns)
    (r1, r2), (c1, c2) = np.triu_indices(a, 1), np.triu_indices(b, 1)
    row_pair, column_pair = (pick.ravel() for pick in np.meshgrid(np.arange(r1.size), np.arange(c1.size), indexing="ij"))
    corners = [r[row_pair] * b + c[column_pair] for r, c in ((r2, c2), (r2, c1), (r1, c2), (r1, c1))]
    difference, variance = _four_corners(cells, corners)
    se = np.sqrt(variance * model.residual_ms)
    with np.errstate(divide="ignore", invalid="ignore"):
        t = np.where(se > 0, difference / se, np.nan)
    reach = model.quantile(choices.confidence) * se
    return pd.DataFrame(
        {
            "rows": [[rows[r1[i]], rows[r2[i]]] for i in row_pair],
            "columns": [[columns[c1[j]], columns[c2[j]]] for j in column_pair],
            "difference": difference,
            "se": se,
            "t": t,
            "df": model.residual_df,
            "p": tails.t_two_sided(t, model.residual_df),
            "p_adjusted": _adjusted_contrasts(t, dimension, model, choices),
            "lower": difference - reach,
            "upper": difference + reach,
        }
    )


def _four_corners(cells: Estimates, corners: list[np.ndarray]) -> tuple[Vector, Vector]:
    """Return (first − second) − (third − fourth) and its unit variance, NaN where it is not estimable."""
    signs = (1.0, -1.0, -1.0, 1.0)
    value = sum(sign * cells.value[at] for sign, at in zip(signs, corners, strict=True))
    free = sum(
        (sign * cells.free[at] for sign, at in zip(signs, corners, strict=True)), start=np.zeros((corners[0].size, cells.free.shape[1]))
    )
    variance: Matrix = np.zeros(corners[0].size)
    for i, sign in enumerate(signs):
        variance = variance + cells.unit_variance[corners[i]]
        if cells.covariance.ndim == 2:
            for j in range(i):
                variance = variance + 2 * sign * signs[j] * cells.covariance[corners[i], corners[j]]
    open_ = np.abs(free).max(axis=1, initial=0.0) >= FREE_TOLERANCE
    return np.where(open_, np.nan, value), np.where(open_, np.nan, variance)


def _adjusted_contrasts(t: Vector, dimension: int, model: Model, choices: Choices) -> Vector:
    adjusted = np.full(t.size, np.nan)
    known = np.flatnonzero(np.isfinite(t))
    if known.size:
        name = "holm" if choices.adjust in HOLM_INSTEAD else choices.adjust
        family = Family(t[known], float(model.residual_df), known.size + 1, dimension, None, choices.confidence)
        adjusted[known] = ADJUSTMENTS[name].adjust(family).p
    return adjusted
