"""The largest of three or four normals with any correlations, by one quadrature inside another."""

import numpy as np
from scipy import special, stats

from analysis.distributions.lattice import root_of
from analysis.distributions.one_factor import REACH
from analysis.distributions.pieces import Floats

QUICK, MOST = 3, 4  # normals that take milliseconds, and seconds; each further one takes another 48 times as long
NODES, WEIGHTS = special.roots_legendre(48)


def log_tail(d: Floats, correlation: Floats) -> Floats:
    """Return log P(max |Z| > d), d (points,), for normals with this correlation (m, m), m at most 4.

    P(max |Z| > d) is the sum over i of P(|Z[i]| > d and all earlier |Z| <= d). Given Z[i] the others are taken one at a time,
    each given those before, by 48-point Gauss-Legendre rules; the last in closed form. Source of the order in which they are
    taken: Genz (1992), J. Comput. Graph. Stat. 1, 141-149.
    """
    with_none_before = 2 * stats.norm.sf(d)
    beyond, weight = tail_nodes(d)
    terms = [(weight * earlier_within(correlation, i, beyond, d[:, None])).sum(axis=-1) for i in range(1, len(correlation))]
    return np.asarray(np.log(with_none_before) + np.log1p(sum(terms)), dtype=np.float64)


def tail_nodes(d: Floats) -> tuple[Floats, Floats]:
    """Return nodes of a normal beyond d and their weights, (points, nodes), which sum to 1; by symmetry they stand for both signs."""
    reach = np.sqrt(d * d + REACH**2) - d
    nodes = d[:, None] + reach[:, None] / 2 * (NODES + 1)
    weights = reach[:, None] / 2 * WEIGHTS * np.exp(stats.norm.logpdf(nodes) - stats.norm.logsf(d)[:, None])
    return nodes, weights


def earlier_within(correlation: Floats, i: int, value: Floats, d: Floats) -> Floats:
    """Return the chance that normals 0 … i - 1 lie within d, given normal i; value and d broadcast together."""
    order = [i, *range(i)]
    return chance(root_of(correlation[np.ix_(order, order)]), [value], d)


def chance(root: Floats, drawn: list[Floats], d: Floats) -> Floats:
    """Return the chance that the normals not drawn yet lie within d, given those drawn."""
    j = len(drawn)
    mean = sum(root[j, k] * drawn[k] for k in range(j))
    low, high = (-d - mean) / root[j, j], (d - mean) / root[j, j]
    if j == len(root) - 1:
        return np.asarray(special.ndtr(high) - special.ndtr(low), dtype=np.float64)
    low, high = np.clip(low, -REACH, REACH), np.clip(high, -REACH, REACH)
    half = ((high - low) / 2)[..., None]
    z = low[..., None] + half * (NODES + 1)
    later = chance(root, [*(known[..., None] for known in drawn), z], d[..., None])
    return np.asarray((half * WEIGHTS * np.exp(-z * z / 2) * later).sum(axis=-1) / np.sqrt(2 * np.pi), dtype=np.float64)
