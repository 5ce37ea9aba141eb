"""What a check finds: a statistic, its degrees of freedom and its p-value."""

from dataclasses import dataclass
from typing import SupportsFloat

from scipy import stats

from analysis import tails


@dataclass(frozen=True)
class FTest:
    """An F statistic with its degrees of freedom and upper tail."""

    f: float
    df1: int
    df2: int
    p: float


@dataclass(frozen=True)
class ChiSquare:
    """A chi-square statistic with its degrees of freedom and upper tail."""

    chi2: float
    df: int
    p: float


def f_test(f: SupportsFloat, df1: int, df2: int) -> FTest:
    """Return the test of an F statistic."""
    return FTest(float(f), df1, df2, float(tails.f_upper(float(f), df1, df2)))


def chi_square(chi2: SupportsFloat, df: int) -> ChiSquare:
    """Return the test of a chi-square statistic."""
    return ChiSquare(float(chi2), df, float(stats.chi2.sf(float(chi2), df)))
