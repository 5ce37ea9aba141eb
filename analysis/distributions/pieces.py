"""How a smooth function is remembered: Chebyshev polynomials on adjoining pieces of its range."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

DEGREE = 13  # fourteen nodes a piece leave less than 1e-11 on pieces as long as the edges below make them
GROWTH = 1.25  # beyond the bend a piece may be a quarter longer than the way behind it


@dataclass(frozen=True, eq=False)
class Pieces:
    """A logarithm of an upper tail on [0, top]; it falls like a Gaussian tail beyond."""

    edges: Floats  # (pieces + 1,), rising from 0
    coefficients: Floats  # (DEGREE + 1, pieces)
    at_top: float

    def __call__(self, x: Floats) -> Floats:
        """Return the function at x (any shape, none negative); interpolation inside, scaling by (x / top)² beyond."""
        top = self.edges[-1]
        inside = np.minimum(x, top)
        piece = np.minimum(np.searchsorted(self.edges, inside, side="right") - 1, self.edges.size - 2)
        left, right = self.edges[piece], self.edges[piece + 1]
        value = clenshaw(self.coefficients, piece, (2 * inside - left - right) / (right - left))
        return np.asarray(np.where(x > top, self.at_top * (x / top) ** 2, value), dtype=np.float64)


def clenshaw(coefficients: Floats, piece: NDArray[np.intp], t: Floats) -> Floats:
    """Return the Chebyshev sum of each point's own piece at t in [-1, 1]; source: Clenshaw (1955), MTAC 9, 118-120."""
    later = np.zeros_like(t)
    last = coefficients[-1][piece]
    for row in coefficients[-2:0:-1]:
        last, later = row[piece] + 2 * t * last - later, last
    return np.asarray(coefficients[0][piece] + t * last - later, dtype=np.float64)


def tabulate(function: Callable[[Floats], Floats], edges: Floats) -> Pieces:
    """Return the pieces that interpolate a function of one array at the Chebyshev nodes between the edges."""
    angles = (np.arange(DEGREE + 1) + 0.5) * np.pi / (DEGREE + 1)
    centre, half = (edges[1:] + edges[:-1]) / 2, (edges[1:] - edges[:-1]) / 2
    values = function((centre + half * np.cos(angles)[:, None]).ravel()).reshape(DEGREE + 1, -1)
    transform = 2 / (DEGREE + 1) * np.cos(np.arange(DEGREE + 1)[:, None] * angles)
    transform[0] /= 2
    return Pieces(edges, transform @ values, float(function(edges[-1:])[0]))


def edges(step: float, bend: float, top: float) -> Floats:
    """Return edges from 0 to top: pieces of one step up to the bend, then growing with the distance from 0."""
    fine = step * np.arange(np.ceil(min(bend, top) / step) + 1)
    start = max(float(fine[-1]), step)
    count = int(np.ceil(np.log(max(top / start, 1.0)) / np.log(GROWTH)))
    grown = np.minimum(start * GROWTH ** np.arange(1, count + 1), top)
    return np.concatenate([fine, grown])
