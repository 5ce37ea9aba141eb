"""Families of comparisons from the fitted model: which means are compared, adjusted together, and what each comparison says."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from analysis import tails
from analysis.adjustments import ADJUSTMENTS, Adjusted, Family
from analysis.cells import Vector
from analysis.estimates import Estimates
from analysis.frames import frame_of
from analysis.model import Model
from analysis.scales import Scale
from analysis.verdicts import verdicts

Indices = NDArray[np.intp]
CELLS = "cells"
MOST_COMPARISONS = 250_000  # a family larger than this is not written out
COLUMNS = (
    "left", "right", "within", "difference", "se", "df", "t", "p", "p_adjusted",
    "lower", "upper", "lower_adjusted", "upper_adjusted", "verdict", "family_size",
)  # fmt: skip


@dataclass(frozen=True)
class Choices:
    """What a study decides about comparisons."""

    adjust: str
    confidence: float
    matters: float | None  # on the analysed scale; None where none was given or the scale has no such difference


@dataclass(frozen=True, eq=False)
class Slice:
    """Means that are compared with each other and adjusted together."""

    labels: Sequence[object]  # a level, or [row, column] for cells
    whole: Estimates  # the fit that the means come from
    where: Indices  # which of its estimates they are
    control: int | None  # index of the level that the others are compared with, None for all pairs
    within: str | None = None  # the level of the other factor, in a family of slices

    @cached_property
    def estimates(self) -> Estimates:
        """The means compared."""
        return self.whole.at(self.where)

    def pairs(self) -> tuple[Indices, Indices]:
        """Return the indices compared, left being the later level, or every other level against the control."""
        k = len(self.labels)
        if self.control is not None:
            left = np.array([i for i in range(k) if i != self.control], dtype=np.intp)
            return left, np.full(left.size, self.control, dtype=np.intp)
        right, left = np.triu_indices(k, 1)
        return left, right


def within_name(factor: str, other: str) -> str:
    """Return how the family of one factor's comparisons inside the levels of the other is called."""
    return f"{factor} within {other}"


def size_of(slices: Sequence[Slice]) -> int:
    """Return how many comparisons a family writes out."""
    return sum(len(s.labels) - 1 if s.control is not None else len(s.labels) * (len(s.labels) - 1) // 2 for s in slices)


def family_frame(slices: Sequence[Slice], model: Model, choices: Choices) -> pd.DataFrame:
    """Return the comparisons of a family, each slice adjusted on its own."""
    parts = [_slice_columns(part, model, choices) for part in slices]
    columns = {name: np.concatenate([part[name] for part in parts]) for name in COLUMNS}
    return frame_of(columns)


def _slice_columns(part: Slice, model: Model, choices: Choices) -> dict[str, NDArray[Any]]:
    """Return the columns of one slice's comparisons."""
    left, right = part.pairs()
    difference, unit_variance = part.estimates.differences(left, right)
    se = np.sqrt(unit_variance * model.residual_ms)
    with np.errstate(divide="ignore", invalid="ignore"):
        t = np.where(se > 0, difference / se, np.nan)
    p = tails.t_two_sided(t, model.residual_df)
    known = np.flatnonzero(np.isfinite(t))
    adjusted = _adjusted(part, t[known], left[known], right[known], model, choices)
    p_adjusted = np.full(t.size, np.nan)
    p_adjusted[known] = adjusted.p
    reach, wide = model.quantile(choices.confidence) * se, adjusted.critical * se
    labels = np.empty(len(part.labels), dtype=object)
    labels[:] = part.labels
    return {
        "left": labels[left],
        "right": labels[right],
        "within": np.full(t.size, part.within, dtype=object),
        "difference": difference,
        "se": se,
        "df": np.full(t.size, model.residual_df),
        "t": t,
        "p": p,
        "p_adjusted": p_adjusted,
        "lower": difference - reach,
        "upper": difference + reach,
        "lower_adjusted": difference - wide,
        "upper_adjusted": difference + wide,
        "verdict": verdicts(difference - wide, difference + wide, choices.matters),
        "family_size": np.full(t.size, known.size),
    }


def _adjusted(part: Slice, t: Vector, left: Indices, right: Indices, model: Model, choices: Choices) -> Adjusted:
    """Return the adjusted p-values and the critical value of the comparisons that can be estimated."""
    if t.size == 0:
        return Adjusted(np.zeros(0), float("nan"))
    groups = [g for g in part.estimates.comparable_groups() if g.size > 1]
    correlation = None
    if part.control is not None:
        covariance = part.estimates.difference_covariance(left, right)
        size = np.sqrt(np.diag(covariance))
        correlation = covariance / np.outer(size, size)
    family = Family(
        t=t,
        df=float(model.residual_df),
        means=sum(g.size for g in groups),
        dimension=sum(g.size - 1 for g in groups),
        correlation=correlation,
        confidence=choices.confidence,
    )
    return ADJUSTMENTS[choices.adjust].adjust(family)


@dataclass(frozen=True)
class Price:
    """What adjusting a family costs: how much wider its intervals are, and how many differences are decided alone but not together."""

    wider: float  # adjusted width over plain width, the largest of the slices
    lost: int


def price(frame: pd.DataFrame) -> Price | None:
    """Return what the adjustment of some comparisons costs beside taking each on its own; None where none has an interval."""
    known = frame.dropna(subset=["lower", "lower_adjusted"])
    plain, wide = (known[f"upper{end}"] - known[f"lower{end}"] for end in ("", "_adjusted"))
    if not (plain > 0).any():
        return None
    alone = (known["lower"] > 0) | (known["upper"] < 0)
    together = (known["lower_adjusted"] > 0) | (known["upper_adjusted"] < 0)
    return Price(float((wide[plain > 0] / plain[plain > 0]).max()), int((alone & ~together).sum()))


def told(scale: Scale, frame: pd.DataFrame) -> pd.DataFrame:
    """Add a column `told` in original units: ratios with both intervals where differences are ratios, nothing where they are neither."""
    if not scale.tells_ratios:
        return frame
    names = {"estimate": "difference", **{end: end for end in ("lower", "upper", "lower_adjusted", "upper_adjusted")}}
    ratios = {name: scale.back(frame[column].to_numpy(float)) for name, column in names.items()}
    rows = [dict(zip(ratios, row, strict=True)) for row in zip(*ratios.values(), strict=True)]
    return frame.assign(told=pd.Series(rows, index=frame.index, dtype=object))


def slices_within(
    estimates: Estimates, shape: tuple[int, int], axis: int, names: tuple[Sequence[str], Sequence[str]], control: int | None
) -> tuple[Slice, ...]:
    """Return the slices of one factor inside each level of the other; axis 0 compares rows inside columns, 1 columns inside rows."""
    a, b = shape
    index = np.arange(a * b).reshape(a, b)
    lines = index.T if axis == 0 else index
    compared, outer = names[axis], names[1 - axis]
    return tuple(Slice(compared, estimates, line, control, level) for line, level in zip(lines, outer, strict=True))


def _all_of(labels: Sequence[object], estimates: Estimates, control: int | None) -> Slice:
    return Slice(labels, estimates, np.arange(len(labels)), control)


def families(
    model: Model, full: Model, factors: tuple[str, str], levels: tuple[Sequence[str], Sequence[str]], control: Mapping[str, int] | None
) -> dict[str, tuple[Slice, ...]]:
    """Return the slices of every family by name; with a control, each other level against it and no family of cells."""
    (row, column), (rows, columns) = factors, levels
    pick = (lambda name: None) if control is None else control.__getitem__
    shape = (len(rows), len(columns))
    found: dict[str, tuple[Slice, ...]] = {
        row: (_all_of(rows, model.row_means, pick(row)),),
        column: (_all_of(columns, model.column_means, pick(column)),),
    }
    if control is None:
        found[CELLS] = (_all_of([[r, c] for r in rows for c in columns], full.cells, None),)
    found[within_name(row, column)] = slices_within(full.cells, shape, 0, levels, pick(row))
    found[within_name(column, row)] = slices_within(full.cells, shape, 1, levels, pick(column))
    return found
