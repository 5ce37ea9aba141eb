"""The analysis that the others are held against, and what one analysis says of one question."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
import pandas as pd

from analysis.anova import INTERACTION, Names
from analysis.cells import Vector
from analysis.design import Design
from analysis.holding.bases import Bases, bases_of
from analysis.holding.hypotheses import largest_contrasts
from analysis.holding.leave_one_out import Without, without_each
from analysis.scales import Scale

MOST_ENTRIES = 2_000_000  # entries of the questions' directions beyond which analyses that need them take no part


@dataclass(frozen=True)
class Entry:
    """What one analysis says of one question: effects in response units, or a ratio where a log scale is analysed."""

    p: float | None
    effect: float | None = None
    lower: float | None = None
    upper: float | None = None
    note: str = ""


@dataclass(frozen=True, eq=False)
class Analysed:
    """The analysis that the others are held against."""

    layout: Design
    names: Names
    used: str  # the type of table that the answers read
    checks: Mapping[str, Any]
    confidence: float
    whole: Design | None = None  # with the rows set aside put back, where some are

    @property
    def terms(self) -> tuple[str, ...]:
        """The questions, the interaction first where it is analysed."""
        factors = (self.names.row, self.names.column)
        return (INTERACTION, *factors) if self.layout.analysed.interaction else factors

    @property
    def scale(self) -> Scale:
        """The scale analysed."""
        return self.layout.observed.scale

    @cached_property
    def contrasts(self) -> Mapping[str, Vector]:
        """The weights over cells of the difference that every analysis tells."""
        return largest_contrasts(self.layout, self.names)

    @cached_property
    def bases(self) -> Bases | None:
        """The questions' hypotheses, None where the layout leaves an effect open or is too large."""
        strata = self.layout.strata
        return bases_of(self.layout, self.names) if strata.n.size * self.layout.analysed.parameters <= MOST_ENTRIES else None

    @cached_property
    def without(self) -> Mapping[str, Without] | None:
        """Every answer without each observation in turn, None where the layout leaves an effect open or is too large."""
        return None if self.bases is None else without_each(self.bases, self.contrasts)

    @cached_property
    def most_influential(self) -> int | None:
        """Index of the observation that moves the fit most, None where that is not defined or it cannot be spared."""
        cook: pd.Series[float] = self.checks["influence"]["cook"]
        values = cook.to_numpy(float)
        return int(np.nanargmax(values)) if np.isfinite(values).any() and self.layout.analysed.residual_df > 2 else None


def ends(scale: Scale, value: float, half: float) -> tuple[float, float, float]:
    """Return a difference with its interval as it is told: a ratio where the scale tells ratios."""
    told = (value, value - half, value + half)
    return tuple(float(np.exp(end)) for end in told) if scale.tells_ratios else told  # type: ignore[return-value]
