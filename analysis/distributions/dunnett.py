"""How large the largest of several comparisons with one control is by chance."""

from functools import lru_cache

import numpy as np
from numpy.typing import ArrayLike
from scipy import stats

from analysis.distributions import departure, lattice, nested, one_factor
from analysis.distributions.pieces import Floats, Pieces, edges, tabulate
from analysis.distributions.studentizing import log_tail, probability, step_for, upper_point

STEP = 0.35  # length of a tabulated piece before the bend
RATIO_EDGES = np.array([0.0, 1.0, 2.0, 3.0, 4.5, 12.0])  # of the pieces in which the ratio of two tails is tabulated
TOP = 37.0  # of the tabulated largest normal, where its tail is 1e-299
LARGEST = 1e150  # d beyond it would overflow when squared


def sf(d: ArrayLike, correlation: ArrayLike, df: float) -> Floats:
    """Return P(max |T| > d), two-sided, of a multivariate t with this correlation (m, m) and df degrees of freedom.

    d has any shape, NaN stays NaN; df from 1 to infinity. Where the correlations are products of loadings (comparisons of
    independent means with one control, and always for m = 2) the relative accuracy is better than 1e-9 however small
    the tail. Any other matrix is answered by the nearest one of that form times a ratio: by nested quadrature for m = 3, else by a series
    in what the two differ by (see departure; within 1e-6 for what unbalanced designs give); where that does not settle, by nested
    quadrature for m = 4, by a sum over a lattice beyond (within about 1e-5). All are deterministic.
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
    known = tail_of_known(correlation.tobytes(), len(correlation))
    return log_tail(known, d, df, step_for(2 * len(correlation)))


@lru_cache(maxsize=64)
def tail_of_known(correlation: bytes, m: int) -> Pieces:
    """Return the tabulated log tail of the largest |Z| for this matrix (its bytes, so that it is remembered)."""
    matrix = np.frombuffer(correlation).reshape(m, m)
    exact = one_factor.exact_loadings(matrix)
    if exact is not None:
        return tail_of_loadings(np.sort(np.abs(exact)).round(12).tobytes())
    loadings = one_factor.nearest_loadings(matrix)
    beside = tabulate(lambda s: log_ratio(2 * s / (1 - s), matrix, loadings), squeezed(RATIO_EDGES))
    return tabulate(lambda x: one_factor.log_tail(x, loadings) + beside(squeezed(x)), edges_for(m))


@lru_cache(maxsize=64)
def tail_of_loadings(loadings: bytes) -> Pieces:
    """Return the tabulated log tail for products of these loadings, whose order and signs make no difference."""
    sizes = np.frombuffer(loadings)
    return tabulate(lambda x: one_factor.log_tail(x, sizes), edges_for(sizes.size))


def edges_for(m: int) -> Floats:
    """Return the edges of the pieces for the largest of m normals."""
    return edges(STEP, np.sqrt(2 * np.log(2 * m)) + 3, TOP)


def log_ratio(x: Floats, matrix: Floats, loadings: Floats) -> Floats:
    """Return the log of the tail for a matrix over that for products of loadings."""
    m = len(matrix)
    simple = np.outer(loadings, loadings)
    np.fill_diagonal(simple, 1.0)
    settled = None if m <= nested.QUICK else departure.log_ratio(x, loadings, matrix - simple)
    if settled is None and m <= nested.MOST:
        return nested.log_tail(x, matrix) - one_factor.log_tail(x, loadings)
    return lattice.log_ratio(x, matrix, simple) if settled is None else settled


def squeezed(x: Floats) -> Floats:
    """Return x / (x + 2), in which the ratio is smooth; it has settled at the last edge, where a tail is 1e-32."""
    x = np.minimum(x, RATIO_EDGES[-1])
    return np.asarray(x / (x + 2), dtype=np.float64)
