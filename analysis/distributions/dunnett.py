"""How large the largest of several comparisons with one control is by chance."""

from functools import lru_cache

import numpy as np
from numpy.typing import ArrayLike
from scipy import stats

from analysis.distributions import lattice, one_factor
from analysis.distributions.pieces import Floats, Pieces, edges, tabulate
from analysis.distributions.studentizing import log_tail, probability, step_for, upper_point

STEP = 0.35  # length of a tabulated piece before the bend
TOP = 37.0  # of the tabulated largest normal, where its tail is 1e-299
LARGEST = 1e150  # d beyond it would overflow when squared


def sf(d: ArrayLike, correlation: ArrayLike, df: float) -> Floats:
    """Return P(max |T| > d), two-sided, of a multivariate t with this correlation (m, m) and df degrees of freedom.

    d has any shape, NaN stays NaN; df from 1 to infinity. Where the correlations are products of loadings (comparisons of
    independent means with one control, and always for m = 2) the relative accuracy is better than 1e-9 however small
    the tail. Any other matrix is answered by the nearest one of that form times a ratio of two lattice sums over the same
    points (see lattice.log_ratio): deterministic, within about 1e-6 for the mild departures that unbalanced designs give.
    Source: Dunnett (1955), JASA 50, 1096-1121.
    """
    d = np.asarray(d, dtype=np.float64)
    value = log_sf(np.clip(d, 0.0, LARGEST), np.asarray(correlation, dtype=np.float64), df)
    return probability(d, value)


def ppf_upper(alpha: float, correlation: ArrayLike, df: float) -> float:
    """Return the d that the largest |T| exceeds with probability alpha; bracketed by one comparison and by Bonferroni's m."""
    matrix = np.asarray(correlation, dtype=np.float64)
    low, high = stats.t.isf(alpha / 2, df), stats.t.isf(alpha / (2 * len(matrix)), df)
    return upper_point(lambda d: log_sf(d, matrix, df), alpha, float(low), float(high))


def log_sf(d: Floats, correlation: Floats, df: float) -> Floats:
    """Return the logarithm of the upper tail at d, none negative."""
    loadings = one_factor.exact_loadings(correlation)
    exact = loadings if loadings is not None else nearest(correlation.tobytes(), len(correlation))
    known = tail_of_known(np.sort(np.abs(exact)).tobytes())
    value = log_tail(known, d, df, step_for(2 * len(exact)))
    return value if loadings is not None else value + ratio(correlation.tobytes(), len(exact), df)(squeezed(d, df))


@lru_cache(maxsize=64)
def tail_of_known(loadings: bytes) -> Pieces:
    """Return the tabulated log tail of the largest |Z| for these loadings (the bytes of an array, so that it is remembered)."""
    sizes = np.frombuffer(loadings)
    return tabulate(lambda x: one_factor.log_tail(x, sizes), edges(STEP, np.sqrt(2 * np.log(2 * sizes.size)) + 3, TOP))


@lru_cache(maxsize=64)
def nearest(correlation: bytes, m: int) -> Floats:
    """Return the nearest loadings, remembered."""
    return one_factor.nearest_loadings(np.frombuffer(correlation).reshape(m, m))


@lru_cache(maxsize=64)
def ratio(correlation: bytes, m: int, df: float) -> Pieces:
    """Return the log of the tail over that of the nearest loadings, tabulated in the squeezed d."""
    matrix = np.frombuffer(correlation).reshape(m, m)
    loadings = nearest(correlation, m)
    simple = np.outer(loadings, loadings)
    np.fill_diagonal(simple, 1.0)
    end = squeezed(np.array([np.inf]), df)
    return tabulate(lambda x: lattice.log_ratio(2 * x / (1 - x), matrix, simple, df), np.concatenate([np.zeros(1), end]))


def squeezed(d: Floats, df: float) -> Floats:
    """Return d / (d + 2), in which the ratio is a smooth function of a short range; it has settled where a tail is 1e-30."""
    d = np.minimum(d, stats.t.isf(1e-30, df))
    return np.asarray(d / (d + 2), dtype=np.float64)
