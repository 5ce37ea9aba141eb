"""How p-values and intervals are adjusted for the number of comparisons in a family."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from types import MappingProxyType

import numpy as np
from numpy.typing import NDArray
from scipy import stats

from analysis.distributions import dunnett, studentized_range

Vector = NDArray[np.float64]
ROOT_TWO = float(np.sqrt(2.0))


@dataclass(frozen=True, eq=False)
class Family:
    """The comparisons that are adjusted together."""

    t: Vector  # (m,) t statistics, signed
    df: float  # residual degrees of freedom
    means: int  # how many means the family compares
    dimension: int  # of the contrasts that the family spans
    correlation: NDArray[np.float64] | None  # (m, m) of the estimates, where the method needs it
    confidence: float

    @property
    def alpha(self) -> float:
        """The error rate that the family as a whole may have."""
        return 1.0 - self.confidence

    def p(self) -> Vector:
        """Two-sided p-values of the comparisons one by one."""
        return np.asarray(2.0 * stats.t.sf(np.abs(self.t), self.df))

    def single(self, alpha: float) -> float:
        """The two-sided t quantile at this error rate."""
        return float(stats.t.isf(alpha / 2.0, self.df))


@dataclass(frozen=True, eq=False)
class Adjusted:
    """Adjusted p-values, and the multiple of the standard error that reaches to the ends of the adjusted intervals."""

    p: Vector
    critical: float


@dataclass(frozen=True)
class Adjustment:
    """One method: how it is called in a sentence, its source, and the function."""

    word: str
    source: str
    adjust: Callable[[Family], Adjusted]


def holm_steps(p: Vector) -> Vector:
    """Return Holm's step-down p-values; NaN stays NaN and does not count. Source: Holm (1979), Scand. J. Statist. 6, 65-70."""
    adjusted = np.full(p.size, np.nan)
    known = np.flatnonzero(np.isfinite(p))
    order = known[np.argsort(p[known], kind="stable")]
    if order.size:
        steps = p[order] * np.arange(order.size, 0, -1)
        adjusted[order] = np.minimum(np.maximum.accumulate(steps), 1.0)
    return adjusted


def _tukey(family: Family) -> Adjusted:
    p = studentized_range.sf(np.abs(family.t) * ROOT_TWO, family.means, family.df)
    return Adjusted(p, studentized_range.ppf_upper(family.alpha, family.means, family.df) / ROOT_TWO)


def _holm(family: Family) -> Adjusted:
    return Adjusted(holm_steps(family.p()), family.single(family.alpha / family.t.size))


def _bonferroni(family: Family) -> Adjusted:
    return Adjusted(np.minimum(family.p() * family.t.size, 1.0), family.single(family.alpha / family.t.size))


def _sidak(family: Family) -> Adjusted:
    m = family.t.size
    p = -np.expm1(m * np.log1p(-family.p()))  # 1 - (1 - p)^m without losing small p
    return Adjusted(np.asarray(p), family.single(float(-np.expm1(np.log1p(-family.alpha) / m))))


def _scheffe(family: Family) -> Adjusted:
    d = family.dimension
    p = stats.f.sf(family.t**2 / d, d, family.df)
    return Adjusted(np.asarray(p), float(np.sqrt(d * stats.f.isf(family.alpha, d, family.df))))


def _dunnett(family: Family) -> Adjusted:
    correlation = family.correlation if family.correlation is not None else np.eye(family.t.size)
    return Adjusted(dunnett.sf(np.abs(family.t), correlation, family.df), dunnett.ppf_upper(family.alpha, correlation, family.df))


def _none(family: Family) -> Adjusted:
    return Adjusted(family.p(), family.single(family.alpha))


ADJUSTMENTS: Mapping[str, Adjustment] = MappingProxyType(
    {
        "tukey": Adjustment("Tukey (Tukey-Kramer where counts differ)", "Tukey (1953); Kramer (1956), Biometrics 12, 307-310", _tukey),
        "holm": Adjustment("Holm, step by step", "Holm (1979), Scand. J. Statist. 6, 65-70", _holm),
        "bonferroni": Adjustment("Bonferroni", "Dunn (1961), JASA 56, 52-64", _bonferroni),
        "sidak": Adjustment("Šidák", "Šidák (1967), JASA 62, 626-633", _sidak),
        "scheffe": Adjustment("Scheffé, for any contrast", "Scheffé (1953), Biometrika 40, 87-104", _scheffe),
        "dunnett": Adjustment("Dunnett, against the control", "Dunnett (1955), JASA 50, 1096-1121", _dunnett),
        "none": Adjustment("none: each comparison on its own", "Student (1908), Biometrika 6, 1-25", _none),
    }
)
