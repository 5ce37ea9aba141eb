"""The means that a model tells: cells, equal-weight margins, additive fitted means and sum-to-zero effects."""

from typing import Any

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from analysis.cells import Cells, Strata, Vector
from analysis.estimates import Estimates
from analysis.model import Model
from analysis.observations import Factor, Observations
from analysis.scales import Scale


def interval_columns(estimates: Estimates, pivot: float, model: Model, confidence: float) -> dict[str, Vector]:
    """Return mean, standard error and interval of estimates, NaN where one is not estimable."""
    ok = estimates.estimable
    mean = np.where(ok, estimates.value + pivot, np.nan)
    se = np.where(ok, np.sqrt(estimates.unit_variance * model.residual_ms), np.nan)
    reach = model.quantile(confidence) * se
    return {"mean": mean, "se": se, "lower": mean - reach, "upper": mean + reach}


def told(scale: Scale, frame: pd.DataFrame, centre: str) -> pd.DataFrame:
    """Add a column `told` with the estimate and its interval in original units; a standard error is never back-transformed."""
    if scale.is_identity:
        return frame
    ends = {
        name: scale.back(frame[column].to_numpy(float)) for name, column in (("estimate", centre), ("lower", "lower"), ("upper", "upper"))
    }
    if scale.reverses:
        ends["lower"], ends["upper"] = ends["upper"], ends["lower"]
    rows = [dict(zip(ends, values, strict=True)) for values in zip(*ends.values(), strict=True)]
    return frame.assign(told=pd.Series(rows, index=frame.index, dtype=object))


def cell_frame(observed: Observations, cells: Cells, full: Model, analysed: Model, confidence: float) -> pd.DataFrame:
    """Return one row a cell, empty cells included: the cell's own count, mean and sd, and the full model's estimate.

    The standard error and the interval use the residual mean square of the model analysed.
    """
    a, b = observed.shape
    columns = interval_columns(full.cells, observed.pivot, analysed, confidence)
    frame = pd.DataFrame(
        {
            "row": np.repeat(np.array(observed.row.levels, dtype=object), b),
            "column": np.tile(np.array(observed.column.levels, dtype=object), a),
            "n": cells.n.ravel(),
            "mean": cells.mean.ravel(),
            "sd": cells.sd.ravel(),
            "estimate": columns["mean"],
            "se": columns["se"],
            "lower": columns["lower"],
            "upper": columns["upper"],
        }
    )
    return told(observed.scale, frame, "estimate")


def additive_frame(observed: Observations, additive: Model, confidence: float) -> pd.DataFrame:
    """Return the cell means fitted without interaction, with that model's own residual mean square."""
    a, b = observed.shape
    columns = interval_columns(additive.cells, observed.pivot, additive, confidence)
    frame = pd.DataFrame(
        {
            "row": np.repeat(np.array(observed.row.levels, dtype=object), b),
            "column": np.tile(np.array(observed.column.levels, dtype=object), a),
            **columns,
        }
    )
    return told(observed.scale, frame, "mean")


def margin_frame(factor: Factor, axis: int, observed: Observations, cells: Cells, model: Model, confidence: float) -> pd.DataFrame:
    """Return the means of one factor: equal-weight estimate with interval beside the plain mean of its observations.

    axis is 1 for the row factor (averaged over columns) and 0 for the column factor.
    """
    estimates = model.row_means if axis == 1 else model.column_means
    n = cells.n.sum(axis=axis)
    raw = np.nansum(np.where(cells.n > 0, cells.n * (cells.mean - observed.pivot), 0.0), axis=axis) / n + observed.pivot
    columns = interval_columns(estimates, observed.pivot, model, confidence)
    frame = pd.DataFrame(
        {
            "level": np.array(factor.levels, dtype=object),
            "mean": columns["mean"],
            "se": columns["se"],
            "df": model.residual_df,
            "lower": columns["lower"],
            "upper": columns["upper"],
            "raw_mean": raw,
            "n": n,
            "estimable": estimates.estimable,
        }
    )
    return told(observed.scale, frame, "mean")


def effects(observed: Observations, model: Model) -> dict[str, Any]:
    """Return the sum-to-zero effects: grand mean, α by row, β by column and αβ by cell (None without interaction).

    Source: Scheffé (1959), The Analysis of Variance, section 4.1: equal weights over cells.
    """
    a, b = observed.shape
    rows, columns = observed.row.levels, observed.column.levels
    estimates = model.cells
    ok = estimates.estimable
    value = np.where(ok, estimates.value, np.nan).reshape(a, b)
    grand = value.mean()
    alpha, beta = value.mean(axis=1) - grand, value.mean(axis=0) - grand
    left = value - grand - alpha[:, None] - beta[None, :]
    interaction = {r: dict(zip(columns, left[i].tolist(), strict=True)) for i, r in enumerate(rows)} if model.interaction else None
    return {
        "grand_mean": float(grand + observed.pivot),
        "row": dict(zip(rows, alpha.tolist(), strict=True)),
        "column": dict(zip(columns, beta.tolist(), strict=True)),
        "interaction": interaction,
    }


def fitted_values(observed: Observations, strata: Strata, model: Model) -> Vector:
    """Return the fitted value of each observation, as an offset from the pivot."""
    return model.surface.fitted[stratum_of(observed, strata)]


def stratum_of(observed: Observations, strata: Strata) -> NDArray[np.intp]:
    """Return the index of each observation's stratum."""
    b, blocks = strata.levels[1], strata.levels[2]
    place = np.zeros(strata.cells * blocks, dtype=np.intp)
    place[strata.cell * blocks + strata.block] = np.arange(strata.n.size)
    key = observed.row.codes.astype(np.intp) * b + observed.column.codes
    return np.asarray(place[key if observed.block is None else key * blocks + observed.block.codes])
