"""How p-values and intervals of one family of comparisons are adjusted for its size."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from types import MappingProxyType

import numpy as np
from numpy.typing import NDArray
from scipy import stats

from analysis import tails
from analysis.distributions import dunnett, studentized_range

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Family:
    """The comparisons that are adjusted together."""

    t: Floats  # (m,) differences over their standard errors, signed; NaN for one that cannot be estimated
    df: float  # residual degrees of freedom, infinity allowed
    means: int  # how many means are compared
    dimension: int  # of the space that the contrasts span
    correlation: Floats | None  # (m, m) of the differences, needed for comparisons with a control
    confidence: float

    @property
    def size(self) -> int:
        """How many comparisons there are; those that cannot be estimated do not count."""
        return int(np.count_nonzero(~np.isnan(self.t)))

    @property
    def alpha(self) -> float:
        return 1 - self.confidence


@dataclass(frozen=True, eq=False)
class Adjusted:
    """What the adjustment makes of a family."""

    p: Floats  # (m,) adjusted p-values, NaN where t is
    critical: float  # the adjusted interval is difference ± critical × standard error


@dataclass(frozen=True)
class Adjustment:
    """A method of adjustment: its word, where it comes from, and its function."""

    word: str
    source: str
    adjust: Callable[[Family], Adjusted]


def single_step(family: Family, p: Floats, critical: float) -> Adjusted:
    """Return p and critical value, with p on that side of alpha on which |t| lies of the critical value.

    Both come from one distribution; where |t| meets the critical value to the last digits, rounding must not let the p-value
    decide what the interval does not.
    """
    outside = np.abs(family.t) > critical
    p = np.where(outside, np.minimum(p, np.nextafter(family.alpha, 0.0)), np.maximum(p, family.alpha))
    return Adjusted(np.where(np.isnan(family.t), np.nan, np.minimum(p, 1.0)), float(critical))


def unadjusted(family: Family) -> Adjusted:
    """Leave every comparison at its own p-value and t quantile."""
    return single_step(family, _p(family), tails.t_quantile(family.alpha / 2, family.df))


def bonferroni(family: Family) -> Adjusted:
    """Multiply every p-value by the number of comparisons."""
    return single_step(family, family.size * _p(family), _bonferroni_critical(family))


def sidak(family: Family) -> Adjusted:
    """Treat the comparisons as independent, which is on the safe side; expm1 and log1p keep small p-values exact."""
    m = max(family.size, 1)
    with np.errstate(divide="ignore"):  # p = 1 (t = 0) stays 1
        p = -np.expm1(m * np.log1p(-_p(family)))
    return single_step(family, p, tails.t_quantile(-np.expm1(np.log1p(-family.alpha) / m) / 2, family.df))


def holm(family: Family) -> Adjusted:
    """Multiply the smallest p by m, the next by m - 1 …, never falling; the interval is Bonferroni's, as Holm has none."""
    return Adjusted(stepped_down(_p(family)), _bonferroni_critical(family))


def stepped_down(p: Floats) -> Floats:
    """Return Holm's adjustment of p-values; NaN stays NaN and does not count. Source: Holm (1979), Scand. J. Statist. 6, 65-70."""
    order = np.argsort(p, kind="stable")[: int(np.count_nonzero(~np.isnan(p)))]
    stepped = np.full_like(p, np.nan)
    stepped[order] = np.minimum(np.maximum.accumulate(p[order] * np.arange(order.size, 0, -1)), 1.0)
    return stepped


def tukey(family: Family) -> Adjusted:
    """Refer √2 |t| to the studentised range of all means, which is Tukey-Kramer's method where sizes differ."""
    p = studentized_range.sf(np.sqrt(2) * np.abs(family.t), family.means, family.df)
    return single_step(family, p, studentized_range.ppf_upper(family.alpha, family.means, family.df) / np.sqrt(2))


def scheffe(family: Family) -> Adjusted:
    """Refer t² / d to F with d and df degrees of freedom, d the dimension of all contrasts that could be asked for."""
    d = family.dimension
    if np.isinf(family.df):
        return single_step(family, stats.chi2.sf(family.t**2, d), np.sqrt(stats.chi2.isf(family.alpha, d)))
    return single_step(family, stats.f.sf(family.t**2 / d, d, family.df), np.sqrt(d * stats.f.isf(family.alpha, d, family.df)))


def against_control(family: Family) -> Adjusted:
    """Refer |t| to the largest of the correlated comparisons with the control; raises ValueError without their correlation."""
    if family.correlation is None:
        raise ValueError("comparisons with a control need the correlation of the differences")
    known = ~np.isnan(family.t)
    if not known.any():
        return Adjusted(np.full_like(family.t, np.nan), float("nan"))
    correlation = family.correlation[np.ix_(known, known)]
    p = np.full_like(family.t, np.nan)
    p[known] = dunnett.sf(np.abs(family.t[known]), correlation, family.df)
    return single_step(family, p, dunnett.ppf_upper(family.alpha, correlation, family.df))


def _p(family: Family) -> Floats:
    return np.asarray(tails.t_two_sided(family.t, family.df), dtype=np.float64)


def _bonferroni_critical(family: Family) -> float:
    return float(tails.t_quantile(family.alpha / (2 * max(family.size, 1)), family.df))


ADJUSTMENTS: Mapping[str, Adjustment] = MappingProxyType(
    {
        "tukey": Adjustment("Tukey-Kramer, all pairs", "Tukey 1953; Kramer 1956; Hayter 1984", tukey),
        "holm": Adjustment("Holm, step by step", "Holm 1979", holm),
        "bonferroni": Adjustment("Bonferroni", "Dunn 1961", bonferroni),
        "sidak": Adjustment("Šidák", "Šidák 1967", sidak),
        "scheffe": Adjustment("Scheffé, any contrast", "Scheffé 1953", scheffe),
        "dunnett": Adjustment("Dunnett, against a control", "Dunnett 1955", against_control),
        "none": Adjustment("Not adjusted", "Student 1908", unadjusted),
    }
)
