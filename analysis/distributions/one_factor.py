"""The largest of several normals that share one factor: when a correlation matrix has that form, and the tail it gives."""

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray
from scipy import optimize, special

from analysis.distributions.pieces import Floats

EXACT = 1e-9  # correlations this close to products of loadings are taken as products
NARROWEST = 1e-10  # standard deviation left beside the factor; a smaller one changes a tail by less than that
NODES, WEIGHTS = special.roots_legendre(20)
REACH = 8.6  # standard deviations that leave out exp(-37)


def exact_loadings(correlation: Floats) -> Floats | None:
    """Return l (m,) with correlation[i, j] = l[i] l[j] for all i ≠ j and |l| <= 1, or None where there is none.

    Comparisons of independent means with one control are of this form, l[i]² being n[i] / (n[i] + n[control]) for equal
    variances (Dunnett 1955).
    """
    off = correlation - np.diag(np.diag(correlation))
    i, j = np.unravel_index(np.abs(off).argmax(), off.shape)
    if off[i, j] == 0:
        return np.zeros(len(off))
    third = off[i] * off[j]
    k = np.abs(third).argmax()
    square = off[i, j] * off[i, k] / off[j, k] if abs(third[k]) > EXACT else abs(off[i, j])
    if square <= 0:
        return None
    loadings = off[i] / np.sqrt(square)
    loadings[i] = np.sqrt(square)
    return loadings if fits(loadings, off) else None


def fits(loadings: Floats, off: Floats) -> bool:
    """Say whether products of loadings give the correlations off the diagonal."""
    products = np.outer(loadings, loadings)
    np.fill_diagonal(products, 0.0)
    return bool(np.abs(products - off).max() < EXACT and np.abs(loadings).max() <= 1 + EXACT)


def nearest_loadings(correlation: Floats) -> Floats:
    """Return the loadings (m,) within ±0.995 whose products come nearest to the correlations by least squares."""
    m = len(correlation)
    above = np.triu_indices(m, 1)
    value, vector = np.linalg.eigh(correlation)
    start = np.clip(vector[:, -1] * np.sqrt(value[-1]), -0.9, 0.9)

    def misfit(loadings: Floats) -> Floats:
        return np.asarray(np.outer(loadings, loadings)[above] - correlation[above], dtype=np.float64)

    return np.asarray(optimize.least_squares(misfit, start, bounds=(-0.995, 0.995)).x, dtype=np.float64)


def log_tail(d: Floats, loadings: Floats) -> Floats:
    """Return log P(max |Z| > d), d (points,), for Z[i] = l[i] U + √(1 - l[i]²) E[i] with independent standard normals.

    P = 2 ∫ φ(u) (1 - Π P(|Z[i]| <= d given u)) du over u > 0 is a sum of positive terms, taken by 20-point Gauss-Legendre rules on
    panels that narrow towards the step at d / l[i], as much as that step is steep. Source of the form: Dunnett (1955), JASA 50, 1096-1121.
    """
    size, count = np.unique(np.minimum(np.abs(loadings), 1.0).round(12), return_counts=True)  # rounding errors apart is the same
    rest = np.maximum(np.sqrt((1 - size) * (1 + size)), NARROWEST)
    total = np.zeros_like(d)
    for start, length in panels(d, size, rest):
        u = start + length / 2 * (NODES[:, None] + 1)
        total += length / 2 * (WEIGHTS[:, None] * np.exp(-u * u / 2) * any_beyond(u, d, size, rest, count)).sum(axis=0)
    return np.asarray(np.log(np.sqrt(2 / np.pi) * total), dtype=np.float64)


def any_beyond(u: Floats, d: Floats, size: Floats, rest: Floats, count: NDArray[np.intp]) -> Floats:
    """Return P(some |Z[i]| > d) given the factor u; u (nodes, points), d (points,)."""
    log_within = np.zeros_like(u)
    for loading, c, times in zip(size, rest, count, strict=True):
        beyond = special.ndtr((loading * u - d) / c) + special.ndtr((-loading * u - d) / c)
        with np.errstate(divide="ignore"):  # certainly beyond: log(0) = -inf, and the answer is 1
            log_within += times * np.log1p(-np.minimum(beyond, 1.0))
    return np.asarray(-np.expm1(log_within), dtype=np.float64)


def panels(d: Floats, size: Floats, rest: Floats) -> Iterator[tuple[Floats, Floats]]:
    """Yield starts and lengths (points,) of panels that cover the factor from where the integrand begins to where it ends.

    Below l d - 8.6 c every term is under exp(-37) of its peak at l d, likewise above l d + 8.6 c unless the step at d / l comes
    earlier; then the normal density alone ends it, relative to the tail itself, at √(d² + 8.6²).
    """
    step = d[:, None] / np.maximum(size, 1e-12)
    width = 2 * rest / np.maximum(size, 1e-12)
    u = np.maximum((size * d[:, None] - REACH * rest).min(axis=1), 0.0)
    above = size * d[:, None] + REACH * rest
    end = np.where(above < step, above, np.sqrt(d[:, None] ** 2 + REACH**2)).max(axis=1)
    while np.any(u < end):
        length = np.maximum(width, 0.7 * np.abs(u[:, None] - step)).min(axis=1)
        length = np.minimum(np.minimum(length, 2.0), end - u)
        yield u, length
        u = u + length
