"""The largest of several correlated normals without any structure, by sums over a fixed lattice of points."""

import numpy as np
from scipy import special

from analysis.distributions.pieces import Floats

WORK = 400_000  # points times pairs, which holds the time of one matrix under a second or two
FEWEST, MOST = 500, 8000
SMALLEST = 1e-13  # conditional variance, so that a singular matrix gives a very steep step instead of none


def log_ratio(d: Floats, matrix: Floats, simple: Floats) -> Floats:
    """Return log of P(max |Z| > d) under one correlation (m, m) over that under another, d (points,).

    Both sums run over the same points, so that most of their error cancels: the nearer the two matrices, the better the ratio.
    """
    m = len(matrix)
    count = int(np.clip(WORK // (m * (m - 1) // 2), FEWEST, MOST))
    points = lattice(count, m - 1)
    first, bound = -special.ndtri(special.ndtr(-d[:, None]) * points[0]), np.broadcast_to(d[:, None], (d.size, count))
    return np.asarray(np.log(overcount(matrix, first, bound, points[1:]) / overcount(simple, first, bound, points[1:])), dtype=np.float64)


def lattice(count: int, dimensions: int) -> Floats:
    """Return points (dimensions, count) of the unit cube by Richtmyer's rule: multiples of √2, √3, √5 … folded at 1/2.

    Source: Richtmyer (1951); the folding as in Genz and Bretz (2002), J. Comput. Graph. Stat. 11, 950-971.
    """
    primes = [n for n in range(2, 20 * dimensions + 20) if all(n % k for k in range(2, int(n**0.5) + 1))][:dimensions]
    steps = np.sqrt(np.array(primes, dtype=np.float64))[:, None] * (np.arange(count) + 1)
    return np.asarray(np.abs(2 * (steps % 1.0) - 1), dtype=np.float64)


def overcount(correlation: Floats, first: Floats, bound: Floats, points: Floats) -> Floats:
    """Return P(max |Z| > d) over P(|Z| > d) of a single one, (points of d,).

    P(max |Z| > d) is the sum over i of P(|Z[i]| > d and all earlier |Z| <= d); by symmetry Z[i] > d stands for both signs.
    """
    shares = [earlier_within(correlation, i, first, bound, points).mean(axis=-1) for i in range(1, len(correlation))]
    return np.asarray(1 + sum(shares), dtype=np.float64)


def earlier_within(correlation: Floats, i: int, first: Floats, bound: Floats, points: Floats) -> Floats:
    """Return for each point the chance that normals 0 … i - 1 lie within the bound, given normal i.

    The variables are taken one at a time, each given those before. Source: Genz (1992), J. Comput. Graph. Stat. 1, 141-149.
    """
    order = [i, *range(i)]
    root = root_of(correlation[np.ix_(order, order)])
    drawn, chance = [first], np.ones_like(first)
    for j in range(1, i + 1):
        mean = sum((root[j, k] * drawn[k] for k in range(j)), np.zeros_like(first))
        low, high = special.ndtr((-bound - mean) / root[j, j]), special.ndtr((bound - mean) / root[j, j])
        chance = chance * (high - low)
        if j < i:
            drawn.append(special.ndtri(np.clip(low + points[j - 1] * (high - low), 1e-300, 1 - 1e-16)))
    return chance


def root_of(matrix: Floats) -> Floats:
    """Return the lower triangular root of a correlation matrix that may be singular."""
    root = np.zeros_like(matrix)
    for j in range(len(matrix)):
        root[j, j] = np.sqrt(max(matrix[j, j] - root[j, :j] @ root[j, :j], SMALLEST))
        root[j + 1 :, j] = (matrix[j + 1 :, j] - root[j + 1 :, :j] @ root[j, :j]) / root[j, j]
    return root
