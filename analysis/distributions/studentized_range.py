"""How large the range of k means in units of an estimated standard error is by chance."""

from functools import lru_cache

import numpy as np
from numpy.typing import ArrayLike
from scipy import special, stats

from analysis.distributions.pieces import Floats, Pieces, edges, tabulate
from analysis.distributions.studentizing import log_tail, probability, step_for, upper_point

NODES = 96  # of the trapezoidal rule over the largest of k normals; 1e-14 up to k = 100,000
MANY = 2000  # so many q are read from a table in q instead
STEP = 0.5  # length of a tabulated piece before the bend
TOP = 52.0  # of the tabulated range of k normals, where its tail is 1e-294
LARGEST = 1e150  # q beyond it would overflow when squared


def sf(q: ArrayLike, k: int, df: float) -> Floats:
    """Return the upper tail P(Q > q) of the studentised range of k means with df degrees of freedom.

    q has any shape, NaN stays NaN; k from 2 to 100,000; df from 1 to infinity. Relative accuracy is better than 1e-9 as far
    down as 1e-290 and the result is the same at every call. Source: Tukey (1953); the form of the integral as in
    Copenhaver and Holland (1988), J. Stat. Comput. Simul. 30, 1-15, turned into a tail (see log_range_tail).
    """
    q = np.asarray(q, dtype=np.float64)
    finite = np.clip(q, 0.0, LARGEST)
    known, step = range_tail(k), step_for(k)
    if finite.size <= MANY:
        value = log_tail(known, finite, df, step)
    else:
        table = tabulate(lambda x: log_tail(known, x, df, step), edges(STEP, bend(k), float(np.nanmax(finite, initial=1.0))))
        value = table(finite)
    return probability(q, value)


@lru_cache(maxsize=4096)
def ppf_upper(alpha: float, k: int, df: float) -> float:
    """Return the q that the studentised range of k means exceeds with probability alpha; accurate to 1e-10 relative.

    The root is bracketed by the q of two means and by Bonferroni's for all pairs.
    """
    known, step = range_tail(k), step_for(k)
    low = np.sqrt(2) * stats.t.isf(alpha / 2, df)
    high = np.sqrt(2) * stats.t.isf(alpha / (k * (k - 1)), df)
    return upper_point(lambda q: log_tail(known, q, df, step), alpha, float(low), float(high))


def bend(k: int) -> float:
    """Return the q beyond which the tail of k means is smooth on the scale of q itself."""
    return float(2 * np.sqrt(2 * np.log(k)) + 4)


@lru_cache(maxsize=64)
def range_tail(k: int) -> Pieces:
    """Return the tabulated log tail of the range of k standard normals."""
    return tabulate(lambda r: log_range_tail(r, k), edges(STEP, bend(k), TOP))


def log_range_tail(r: Floats, k: int) -> Floats:
    """Return log P(range > r) of k standard normals, r (m,).

    With z the largest, P = k ∫ φ(z) Φ(z)^(k-1) (1 - (1 - Φ(z - r) / Φ(z))^(k-1)) dz: a sum of positive terms. The limits
    leave out less than 1e-17 of it: on the left because the integrand falls from r / 2 like exp(-(z - r / 2)²) and Φ^(k-1)
    has vanished, on the right likewise and because k Φ(-z) has.
    """
    low = np.maximum(lowest_maximum(k), r / 2 - 6.5)
    high = np.maximum(-special.ndtri(1e-19 / k), r / 2 + 6.5)
    z = np.linspace(low, high, NODES)
    log_below = special.log_ndtr(z)
    with np.errstate(divide="ignore"):  # r = 0: the whole ratio, log1p(-1) = -inf, and the tail is 1
        tail = -np.expm1((k - 1) * np.log1p(-np.exp(special.log_ndtr(z - r) - log_below)))
    density = k / np.sqrt(2 * np.pi) * np.exp((k - 1) * log_below - z * z / 2)
    return np.asarray(np.log((density * tail).sum(axis=0) * (high - low) / (NODES - 1)), dtype=np.float64)


def lowest_maximum(k: int) -> float:
    """Return the z below which the density of the largest of k normals is under exp(-44) of its peak."""
    z = np.linspace(-10, 8, 1801)
    log_density = (k - 1) * special.log_ndtr(z) - z * z / 2
    return float(z[np.argmax(log_density > log_density.max() - 44)])
