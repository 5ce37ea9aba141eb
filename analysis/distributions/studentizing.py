"""What dividing by an estimated standard deviation does to a tail: an average over the chi distribution."""

from collections.abc import Callable

import numpy as np
from scipy import optimize, special

from analysis.distributions.pieces import Floats

KNOWN = 1e12  # so many degrees of freedom that the standard deviation counts as known (relative change of a tail < 1e-8)
DEPTH = 28.0  # the integrand is followed down to exp(-28) = 7e-13 of its peak
FEWEST = 32  # nodes where only the chi density bends
COARSE = 64  # steps of the first look at the integrand


def log_tail(known: Callable[[Floats], Floats], q: Floats, df: float, step: float) -> Floats:
    """Return log P(X / s > q) for a statistic X and an independent s² that is chi-square(df) / df.

    known gives log P(X > x) for an array x, decreasing and concave; q has any shape, none negative; df > 0; step is the
    step of log s that resolves the bend of known (see step_for). With
    v = log s the integrand exp(df (v - (e^2v - 1) / 2)) P(X > q e^v) is log-concave and analytic, so the trapezoidal
    rule between the points where it has vanished converges geometrically; nothing is subtracted from 1, so a tail keeps
    its relative accuracy. Source: Trefethen and Weideman (2014), SIAM Review 56, 385-458, section 5.
    """
    if df >= KNOWN:
        return known(q)
    flat = np.asarray(q, dtype=np.float64).ravel()
    low, high = support(known, flat, df)
    v = np.linspace(low, high, FEWEST + int(np.nanmax(high - low, initial=0.0) / step))
    g = integrand(known, flat, v, df)
    peak = g.max(axis=0)
    value = peak + np.log(np.exp(g - peak).sum(axis=0) * (high - low) / (v.shape[0] - 1)) + log_constant(df)
    return np.asarray(value.reshape(np.shape(q)), dtype=np.float64)


def probability(q: Floats, log_tail_at_q: Floats) -> Floats:
    """Return the tail itself: 1 at q = 0 and below, 0 at infinity, never above 1 by rounding; NaN stays NaN."""
    tail = np.minimum(np.exp(log_tail_at_q), 1.0)
    return np.asarray(np.select([q <= 0, q == np.inf], [1.0, 0.0], tail), dtype=np.float64)


def step_for(count: float) -> float:
    """Return the step of log s for the extreme of so many normals, whose tail bends the sooner the more there are.

    The singularity nearest to the real axis lies at about 1.25 / log(count) in log s (measured), so the error is near
    exp(-2π · 1.25 / log(count) / step) = 1e-11.
    """
    return float(min(0.18, 0.3 / np.log(count)))


def integrand(known: Callable[[Floats], Floats], q: Floats, v: Floats, df: float) -> Floats:
    """Return the logarithm of the integrand at v = log s, (nodes, q), without its constant."""
    return df * (v - np.expm1(2 * v) / 2) + known(q * np.exp(v))


def support(known: Callable[[Floats], Floats], q: Floats, df: float) -> tuple[Floats, Floats]:
    """Return the ends (q,) of the stretch of log s outside which the integrand is below exp(-DEPTH) of its peak.

    A Gaussian tail moves the peak left by at most log(1 + q² / df) / 2; c below is the depth in units of df, and the two
    reaches bound where df (v - (e^2v - 1) / 2) has fallen by it (twice as deep to the left, where the tail bends).
    """
    c = DEPTH / df
    left = -np.log1p(q * q / df) / 2 - np.sqrt(2 * c) - 2 * c
    right = np.log1p(2 * np.sqrt(c) + 2 * c) / 2
    v = np.linspace(left, np.full_like(left, right), COARSE + 1)
    g = integrand(known, q, v, df)
    seen = g > g.max(axis=0) - DEPTH
    first, last = seen.argmax(axis=0), COARSE - seen[::-1].argmax(axis=0)
    column = np.arange(q.size)
    return v[np.maximum(first - 1, 0), column], v[np.minimum(last + 1, COARSE), column]


def log_constant(df: float) -> float:
    """Return log of 2 a^a e^-a / Γ(a) with a = df / 2, by Stirling's series where Γ would cancel."""
    a = df / 2
    if a < 50:
        return float(np.log(2) + special.xlogy(a, a) - a - special.gammaln(a))
    return float(np.log(2) + np.log(a / (2 * np.pi)) / 2 - 1 / (12 * a) + 1 / (360 * a**3) - 1 / (1260 * a**5))


def upper_point(log_sf: Callable[[Floats], Floats], alpha: float, low: float, high: float) -> float:
    """Return the x between low and high (both > 0, low may equal high) where log_sf falls to log(alpha)."""

    def excess(u: float) -> float:
        return float(log_sf(np.array([np.exp(u)]))[0] - np.log(alpha))

    root = optimize.toms748(excess, np.log(low) - 1e-9, np.log(high) + 1e-9, xtol=1e-13, rtol=1e-13)
    return float(np.exp(root))
