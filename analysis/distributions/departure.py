"""How far correlations that are nearly products of loadings move the tail of the largest of several normals."""

from dataclasses import dataclass

import numpy as np
from scipy import special

from analysis.distributions import one_factor
from analysis.distributions.one_factor import NODES, WEIGHTS
from analysis.distributions.pieces import Floats

UNSETTLED = 1e-4  # a fourth term of the series above this, relative to the tail, says that the fifth may matter
FAR = -40.0  # log chance of none beyond, under which the series is not needed
LEAST = 1e-30  # chance of one within, under which its slope is not needed


@dataclass(frozen=True, eq=False)
class Slopes:
    """Derivatives of log P(|Z[i]| <= d given the factor, shifted by s) with respect to s at 0; each (m, nodes, points)."""

    within: Floats  # the log chance itself
    first: Floats
    second: Floats
    third: Floats
    fourth: Floats


def log_ratio(d: Floats, loadings: Floats, excess: Floats) -> Floats | None:
    """Return log of P(max |Z| > d) over that for products of the loadings alone, d (points,); None where the series does not settle.

    excess (m, m) is what the correlations have beyond the products, 0 on the diagonal. It stands for shifts s that are normal with
    covariance `excess` (some of the variances imaginary, which the entire functions here allow), and the average over s of
    Π P(|Z[i]| <= d given u and s) is the product at s = 0 times the exponential of its cumulants, taken here through the fourth order.
    Source: cumulant expansion as in Barndorff-Nielsen and Cox (1989), Asymptotic Techniques, chapter 5; derived here, and checked
    against nested quadrature.
    """
    without, third, fourth = sums(d, loadings, excess)
    if np.any(np.abs(fourth / third - 1) > UNSETTLED):
        return None
    return np.asarray(np.log(fourth / without), dtype=np.float64)


def sums(d: Floats, loadings: Floats, excess: Floats) -> Floats:
    """Return the integral over the factor without the series, and with its terms through the third and the fourth order, (3, points)."""
    size, rest = np.abs(loadings), np.maximum(np.sqrt((1 - loadings) * (1 + loadings)), one_factor.NARROWEST)
    total = np.zeros((3, d.size))
    for start, length in one_factor.panels(d, size, rest):
        u = start + length / 2 * (NODES[:, None] + 1)
        slopes = slopes_at(u, d, loadings[:, None, None], rest[:, None, None])
        none = slopes.within.sum(axis=0)
        to_third = low_orders(slopes, excess) + third_order(slopes, excess)
        terms = np.cumsum([np.zeros_like(none), to_third, fourth_order(slopes, excess)], axis=0)
        terms = np.where(none > FAR, np.minimum(terms, -none), 0.0)
        total += length / 2 * (WEIGHTS[:, None] * np.exp(-u * u / 2) * -np.expm1(none + terms)).sum(axis=1)
    return total


def slopes_at(u: Floats, d: Floats, loading: Floats, rest: Floats) -> Slopes:
    """Return the slopes at nodes u (nodes, points) of the factor."""
    high, low = (d - loading * u) / rest, (-d - loading * u) / rest
    beyond = special.ndtr(-high) + special.ndtr(low)
    chance = np.maximum(np.where(beyond < 0.5, 1 - beyond, special.ndtr(high) - special.ndtr(low)), LEAST)
    at_high, at_low = np.exp(-high * high / 2) / np.sqrt(2 * np.pi), np.exp(-low * low / 2) / np.sqrt(2 * np.pi)
    first = (at_low - at_high) / (rest * chance)
    second = (low * at_low - high * at_high) / (rest**2 * chance)
    third = ((low * low - 1) * at_low - (high * high - 1) * at_high) / (rest**3 * chance)
    fourth = ((low**3 - 3 * low) * at_low - (high**3 - 3 * high) * at_high) / (rest**4 * chance)
    with np.errstate(divide="ignore"):  # certainly beyond: log(0) = -inf, and no term is needed
        within = np.log1p(-np.minimum(beyond, 1.0))
    cumulants = second - first**2, third - 3 * first * second + 2 * first**3
    return Slopes(within, first, *cumulants, fourth - 4 * first * third - 3 * second**2 + 12 * first**2 * second - 6 * first**4)


def low_orders(slopes: Slopes, excess: Floats) -> Floats:
    """Return the terms of first and second order in the excess, (nodes, points)."""
    shift = over(excess, slopes.first)
    pairs = (slopes.second * over(excess**2, slopes.second)).sum(axis=0)
    return np.asarray((slopes.first * shift).sum(axis=0) / 2 + (slopes.second * shift**2).sum(axis=0) / 2 + pairs / 4, dtype=np.float64)


def third_order(slopes: Slopes, excess: Floats) -> Floats:
    """Return the terms of third order in the excess, (nodes, points)."""
    shift, second, third = over(excess, slopes.first), slopes.second, slopes.third
    chain = shift * second * over(excess, second * shift) / 2
    bent = third * (shift**3 / 6 + shift * over(excess**2, second) / 2 + over(excess**3, third) / 12)
    bond = excess * np.moveaxis(second, 0, -1)[..., None, :]  # (nodes, points, m, m)
    ring = ((bond @ bond) * np.swapaxes(bond, -1, -2)).sum(axis=(-1, -2)) / 6  # a third of the trace of the cube, halved
    return np.asarray((chain + bent).sum(axis=0) + ring, dtype=np.float64)


def fourth_order(slopes: Slopes, excess: Floats) -> Floats:
    """Return the terms of fourth order in the excess, (nodes, points)."""
    shift, second, third, fourth = over(excess, slopes.first), slopes.second, slopes.third, slopes.fourth
    bond = excess * np.moveaxis(second, 0, -1)[..., None, :]  # (nodes, points, m, m)
    twice = bond @ bond
    one_between, two_between = bond @ excess, twice @ excess  # the excess passed on by one other, and by two
    passed, passed_twice = np.einsum("...ii->i...", one_between), np.einsum("...ii->i...", two_between)
    again = over(excess, second * shift)
    chain = shift * second * over(excess, second * again) / 2
    ring = (twice * np.swapaxes(twice, -1, -2)).sum(axis=(-1, -2)) / 8
    side = np.moveaxis(third, 0, -1)
    pair = np.einsum("...i,ij,...ij,...j->...", side, excess**2, one_between, side, optimize=True) / 4
    bent = third * (shift**2 * again + again * passed + shift * passed_twice) / 2
    both = third * shift * over(excess**2, third * shift) / 4 + third * over(excess**3, fourth * shift) / 6
    arched = fourth * (shift**4 / 24 + shift**2 * passed / 4 + passed**2 / 8 + over(excess**4, fourth) / 48)
    return np.asarray((chain + bent + both + arched).sum(axis=0) + ring + pair, dtype=np.float64)


def over(matrix: Floats, values: Floats) -> Floats:
    """Return the product of a matrix (m, m) with values (m, nodes, points) along their first axis."""
    return np.tensordot(matrix, values, axes=1)
