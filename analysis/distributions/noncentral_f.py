"""Which noncentralities are compatible with an observed F."""

from collections.abc import Callable

import numpy as np
from scipy import optimize, special

from analysis.distributions.pieces import Floats

SPAN = 10  # Poisson standard deviations summed on either side; they leave out less than 1e-20
FINENESS = 4  # terms per Poisson standard deviation: a sum over every nth term of a smooth series is exact to exp(-2π² 4²)


def noncentrality_interval(f: float, df1: float, df2: float, confidence: float) -> tuple[float, float]:
    """Return the lower and upper noncentrality λ that put f at the two tails of (1 - confidence) / 2 each.

    A bound is 0 when even λ = 0 leaves f at or above (below) its tail; (inf, inf) for infinite f, (nan, nan) when f or a df is not a
    number or df2 is not positive. Accurate to 1e-9 relative for f up to 1e300, df1 and df2 from 1 (df2 may be infinite).
    Source: Steiger (2004), Psychological Methods 9, 164-182.
    """
    if not (f >= 0 and df1 > 0 and df2 > 0):
        return float("nan"), float("nan")
    if f == np.inf:
        return float("inf"), float("inf")
    tail = (1 - confidence) / 2
    return _solve(f, df1, df2, lambda lower, upper: tail - upper), _solve(f, df1, df2, lambda lower, upper: lower - tail)


def _solve(f: float, df1: float, df2: float, excess: Callable[[float, float], float]) -> float:
    """Return the λ at which excess(P(F <= f), P(F > f)), falling in λ, passes 0; 0 where it is not above 0 at λ = 0."""

    def at(noncentrality: float) -> float:
        return excess(*tails(f, df1, df2, noncentrality))

    if at(0.0) <= 0:
        return 0.0
    low, high = 0.0, max(f * df1, 1.0)
    while at(high) > 0:
        low, high = high, 2 * high
    return float(optimize.brentq(at, low, high, xtol=1e-13, rtol=1e-13, maxiter=500))


def tails(f: float, df1: float, df2: float, noncentrality: float) -> tuple[float, float]:
    """Return P(F <= f) and P(F > f) of a noncentral F, as Poisson mixtures of incomplete beta (or gamma) functions.

    With a great noncentrality only every nth Poisson term is taken, which changes a sum of so smooth a series by less than
    rounding does. Source: Johnson, Kotz and Balakrishnan (1995), Continuous Univariate Distributions 2, chapter 30.
    """
    rate = noncentrality / 2
    sd = np.sqrt(rate)
    stride = max(1.0, np.floor(sd / FINENESS))
    first = max(0.0, np.floor(rate - SPAN * sd))
    terms = first + stride * np.arange(np.ceil((2 * SPAN * sd + 30) / stride))
    weight = _poisson_weights(terms, rate)
    a = df1 / 2 + terms
    if np.isinf(df2):
        below, above = special.gammainc(a, f * df1 / 2), special.gammaincc(a, f * df1 / 2)
    else:
        y = 1 / (1 + df1 * f / df2)  # the small side of the beta variable: 1 - y would round for great f
        below, above = special.betaincc(df2 / 2, a, y), special.betainc(df2 / 2, a, y)
    return float(weight @ below), float(weight @ above)


def _poisson_weights(terms: Floats, rate: float) -> Floats:
    """Return Poisson probabilities of the terms, scaled to sum to 1.

    For great rates the exponent is expanded about the rate, where its parts would cancel: with j = rate (1 + x) it is
    -rate ((1 + x) log(1 + x) - x) - log(1 + x) / 2. Source: Loader (2000), Fast and accurate computation of binomial probabilities.
    """
    if rate < 1000:
        exponent = special.xlogy(terms, rate) - special.gammaln(terms + 1)
    else:
        x = terms / rate - 1
        deviance = (1 + x) * np.log1p(x) - x if rate < 1e10 else x**2 / 2 - x**3 / 6 + x**4 / 12
        exponent = -rate * deviance - np.log1p(x) / 2 - 1 / (12 * terms)
    weight = np.exp(exponent - exponent.max())
    return np.asarray(weight / weight.sum(), dtype=np.float64)
